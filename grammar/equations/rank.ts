import { leftNullSpace } from "../causality/row-reduction.ts";
import { evaluator } from "../symbolic/evaluate.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { ValueOf } from "../symbolic/turn.ts";

/** The rank of a larger system would cost more than all the rest of the derivation. */
const LARGEST = 120;

/**
 * Why matrix·x = right has no one solution: `open` leaves something undetermined, `contradicting` asks for something
 * that its right side does not give.
 */
export type Deficiency = "open" | "contradicting";

/**
 * By numbers: parameters have their values, what changes with time stands for any number. Null where the rank is full,
 * or the system too large to ask.
 */
export function deficiencyOf(
  matrix: readonly (readonly Expr[])[],
  right: readonly Expr[],
  valueOf: ValueOf,
): Deficiency | null {
  if (matrix.length > LARGEST) return null;
  const at = evaluator((symbol) => valueOf(symbol) ?? generalValue(symbol));
  const rows = matrix.map((row) => row.map(at));
  if (!rows.every((row) => row.every(Number.isFinite))) return null;
  // Rows of different units are brought to one size, so that what counts as zero is the same for all.
  const sizes = rows.map((row) => Math.max(...row.map(Math.abs)) || 1);
  const open = leftNullSpace(rows.map((row, i) => row.map((entry) => entry / sizes[i])));
  if (open.length === 0) return null;
  const sides = right.map((side, i) => at(side) / sizes[i]);
  const contradicts = open.some((weights) => {
    const parts = weights.map((weight, i) => weight * sides[i]);
    const total = parts.reduce((sum, part) => sum + part, 0);
    return Math.abs(total) > 1e-8 * Math.max(...parts.map(Math.abs));
  });
  return contradicts ? "contradicting" : "open";
}

/** A number between 0.5 and 1.5 that hangs on the name alone, so that the same model has the same findings. */
function generalValue(symbol: Symbol): number {
  let hash = 17;
  for (const letter of symbol.name) hash = (Math.imul(hash, 31) + (letter.codePointAt(0) ?? 0)) >>> 0;
  return 0.5 + ((Math.imul(hash, 2654435761) >>> 0) % 1_000_003) / 1_000_003;
}
