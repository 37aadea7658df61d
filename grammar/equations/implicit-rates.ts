import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { substitution } from "../symbolic/substitute.ts";
import { turnRound, type ValueOf } from "../symbolic/turn.ts";
import type { AlgebraicLoop } from "./model.ts";

/** The bond variable that is a state's rate, but for its sign: what stands as unknown where no closed form gives it. */
export interface RateVariable {
  readonly name: string;
  readonly symbol: Symbol;
  readonly sign: 1 | -1;
  readonly bond: number | null;
}

export interface ImplicitRates {
  /** By rate symbol. */
  readonly rates: ReadonlyMap<Expr, Expr>;
  /** null where the law could be turned round. */
  readonly loop: AlgebraicLoop | null;
}

/**
 * Rates that enter their own equations in no linear way: a mass whose motion a law f = φ(e) fixes, with e holding the
 * force that moves it. One alone is turned round where the notation does that for laws; otherwise the rates are
 * unknowns that the residuals settle. Without `valueOf` nothing is turned round: other loops hold the rates too.
 */
export function implicitRates(
  pool: Pool,
  rateSymbols: readonly Symbol[],
  variables: readonly RateVariable[],
  residuals: readonly Expr[],
  valueOf: ValueOf | null,
): ImplicitRates {
  if (rateSymbols.length === 1 && valueOf !== null) {
    const [only] = rateSymbols;
    const closed = turnRound(pool, residuals[0], only, pool.zero, valueOf);
    if (closed !== null) return { rates: new Map([[only, closed]]), loop: null };
  }
  const rates = new Map<Expr, Expr>(
    rateSymbols.map((rate, i) => [rate, pool.product(pool.number(variables[i].sign), variables[i].symbol)]),
  );
  const put = substitution(pool, rates);
  const bonds = variables.flatMap(({ bond }) => (bond === null ? [] : [bond]));
  const loop: AlgebraicLoop = {
    variables: variables.map(({ name, symbol }) => ({ name, symbol })),
    residuals: residuals.map(put),
    linear: false,
    solved: false,
    circular: false,
    bonds,
  };
  return { rates, loop };
}
