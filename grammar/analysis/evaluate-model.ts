import { listed } from "../equations/listed.ts";
import type { StateModel } from "../equations/model.ts";
import { evaluator } from "../symbolic/evaluate.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { newton } from "./newton.ts";
import { lookupAt, type Point } from "./point.ts";
import { slopesAt, slopesOf } from "./slopes.ts";
import { unknownsOf } from "./unknowns.ts";

/** All that a model says at one point; `unknowns` are the first guess for the next point. */
export interface Evaluated {
  readonly kind: "values";
  readonly valueOf: (expr: Expr) => number;
  readonly rates: readonly number[];
  readonly unknowns: readonly number[];
}

export type Evaluation = Evaluated | { readonly kind: "none"; readonly reason: string };

/** Where Newton's method begins on what is unknown: a root's slope is infinite at 0, so other places are tried too. */
const GUESSES = [0, 1, -1, 1e-3, -1e-3, 1e3, -1e3, 1e6, -1e6];

/**
 * Rates, and by `valueOf` outputs and bond variables, at a point. Unsolved loops and M(x)·ẋ = h are solved by
 * Newton's method with the symbolic Jacobian, beginning at `guess`.
 */
export function evaluateModel(model: StateModel, point: Point, guess?: readonly number[]): Evaluation {
  const lookup = lookupAt(model, point);
  const { symbols } = unknownsOf(model);
  if (symbols.length === 0) return evaluated(model, lookup, []);
  const guesses = GUESSES.map((value) => symbols.map(() => value));
  for (const start of guess === undefined ? guesses : [guess, ...guesses]) {
    const found = solveUnknowns(model, lookup, start);
    if (found !== null) return evaluated(model, lookup, found);
  }
  const names = symbols.map(({ name, role }) => (role === "rate" ? `rate of ${name}` : name));
  return { kind: "none", reason: `No solution was found for ${listed(names)} at this point.` };
}

function evaluated(
  model: StateModel,
  lookup: (symbol: Symbol) => number | undefined,
  unknowns: readonly number[],
): Evaluated {
  const valueOf = evaluator(withUnknowns(model, lookup, unknowns));
  return { kind: "values", valueOf, rates: model.equations.map(({ rate }) => valueOf(rate)), unknowns };
}

function withUnknowns(
  model: StateModel,
  lookup: (symbol: Symbol) => number | undefined,
  unknowns: readonly number[],
): (symbol: Symbol) => number {
  if (unknowns.length === 0) return (symbol) => lookup(symbol) ?? Number.NaN;
  const { symbols } = unknownsOf(model);
  const values = new Map(symbols.map((symbol, i) => [symbol, unknowns[i]]));
  return (symbol) => values.get(symbol) ?? lookup(symbol) ?? Number.NaN;
}

function solveUnknowns(
  model: StateModel,
  lookup: (symbol: Symbol) => number | undefined,
  start: readonly number[],
): number[] | null {
  const { symbols, residuals } = unknownsOf(model);
  const { residualsByUnknown } = slopesOf(model);
  const n = symbols.length;
  const at = (x: readonly number[]) => evaluator(withUnknowns(model, lookup, x));
  return newton(
    {
      residual: (x) => residuals.map(at(x)),
      jacobian: (x) => slopesAt(residualsByUnknown, n, n, at(x)),
    },
    start,
  );
}
