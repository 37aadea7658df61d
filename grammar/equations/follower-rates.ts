import { differentiation } from "../symbolic/derivative.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { solveLinearSystem } from "../symbolic/solve-linear.ts";
import { substitution } from "../symbolic/substitute.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { AlgebraicLoop } from "./model.ts";

export interface FollowerRates {
  /** ġ of a value g(x, u, t), as an expression in the rates of states and inputs. */
  readonly of: (value: Expr) => Expr;
  /** Unknowns of loops that are too large for their rates to be written down. */
  readonly stuck: ReadonlySet<Symbol>;
}

/** A loop of this size with nothing but different slopes in it can still be solved for its rates in closed form. */
const ANY_SLOPES_UP_TO = 4;

/**
 * ġ = ∂g/∂x·ẋ + ∂g/∂u·u̇ + ∂g/∂t. What a loop leaves unknown moves so that its residuals stay zero:
 * ∂r/∂z·ż = -(∂r/∂x·ẋ + ∂r/∂u·u̇ + ∂r/∂t).
 */
export function followerRates(
  pool: Pool,
  rateOf: ReadonlyMap<Symbol, Symbol>,
  loops: readonly AlgebraicLoop[],
): FollowerRates {
  const stuck = new Set<Symbol>();
  const loopOf = new Map<Symbol, AlgebraicLoop>();
  for (const loop of loops) {
    if (!loop.solved) for (const { symbol } of loop.variables) loopOf.set(symbol, loop);
  }
  const slopes = new Map<Symbol, (expr: Expr) => Expr>();
  const slope = (expr: Expr, symbol: Symbol): Expr => {
    let of = slopes.get(symbol);
    if (of === undefined) {
      of = differentiation(pool, symbol);
      slopes.set(symbol, of);
    }
    return of(expr);
  };
  const moved = (value: Expr, held: AlgebraicLoop | null): Expr => {
    const terms: Expr[] = [];
    for (const symbol of symbolsOf(value)) {
      const rate = held !== null && loopOf.get(symbol) === held ? undefined : symbolRate(symbol);
      if (rate !== undefined) terms.push(pool.product(slope(value, symbol), rate));
    }
    return pool.sum(terms);
  };
  const loopRates = new Map<AlgebraicLoop, readonly Expr[] | null>();
  const ratesIn = (loop: AlgebraicLoop): readonly Expr[] | null => {
    const known = loopRates.get(loop);
    if (known !== undefined) return known;
    const matrix = loop.residuals.map((residual) =>
      loop.variables.map(({ symbol }) => slope(residual, symbol)),
    );
    const right = loop.residuals.map((residual) => pool.negate(moved(residual, loop)));
    const rates = solved(pool, matrix, right);
    if (rates === null) for (const { symbol } of loop.variables) stuck.add(symbol);
    loopRates.set(loop, rates);
    return rates;
  };
  const symbolRate = (symbol: Symbol): Expr | undefined => {
    if (symbol.role === "state") return rateOf.get(symbol);
    if (symbol.role === "input") return pool.symbol("inputRate", symbol.name);
    if (symbol.role === "time") return pool.one;
    const loop = loopOf.get(symbol);
    if (loop === undefined) return undefined;
    return ratesIn(loop)?.[loop.variables.findIndex((variable) => variable.symbol === symbol)];
  };
  return { of: (value) => moved(value, null), stuck };
}

function solved(
  pool: Pool,
  matrix: readonly (readonly Expr[])[],
  right: readonly Expr[],
): readonly Expr[] | null {
  if (matrix.length === 1) return [pool.divide(right[0], matrix[0][0])];
  const direct = solveLinearSystem(pool, matrix, right);
  if (direct.kind !== "large") return direct.kind === "solved" ? direct.values : null;
  if (matrix.length > ANY_SLOPES_UP_TO) return null;
  // Slopes that are long sums stand as one symbol each while the system is solved.
  const meant = new Map<Expr, Expr>();
  const named = matrix.map((row, i) =>
    row.map((entry, j) => {
      if (entry.op === "number") return entry;
      const symbol = pool.symbol("unknown", `slope ${i} ${j}`);
      meant.set(symbol, entry);
      return symbol;
    }),
  );
  const general = solveLinearSystem(pool, named, right);
  if (general.kind !== "solved") return null;
  const put = substitution(pool, meant);
  return general.values.map(put);
}
