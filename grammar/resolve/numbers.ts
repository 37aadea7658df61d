import { evaluate } from "../symbolic/evaluate.ts";
import type { Expr } from "../symbolic/expression.ts";
import type { Expression } from "../syntax/tree.ts";
import { DIMENSIONLESS, equal } from "../units/dimension.ts";
import type { Unit } from "../units/unit.ts";
import { unitOf } from "../units/unit-text.ts";
import type { Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import { isDimension, type Measure } from "./typed.ts";

export function numberOf(translator: Translator, expr: Expr): number {
  if (expr.op === "number") return expr.value;
  return evaluate(
    expr,
    (symbol) => translator.draft.numbers.get(symbol) ?? CONSTANTS.get(symbol.name) ?? Number.NaN,
  );
}

/** Standard gravity: 3rd General Conference on Weights and Measures, 1901. */
const CONSTANTS: ReadonlyMap<string, number> = new Map([
  ["pi", Math.PI],
  ["g0", 9.80665],
]);

/** The unit a value is shown in: as the text has it, else a coherent one. */
export function unitFor(measure: Measure, shown: Unit | null): Unit {
  const dimension = isDimension(measure) ? measure : DIMENSIONLESS;
  return shown !== null && equal(shown.dimension, dimension) ? shown : unitOf(dimension);
}

/** Translates an expression that must be a number when the model is built, and gives that number. */
export function fixedNumber(
  translator: Translator,
  tree: Expression,
  scope: Scope,
  measure: Measure,
  shown: Unit | null,
  what: string,
  by: string,
): number | null {
  const typed = translator.wanted(translator.whole(tree, scope), measure, shown, tree.range, scope, what, by);
  return typed.measure === "unknown" ? null : numberOf(translator, typed.expr);
}
