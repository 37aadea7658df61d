import type { Expr } from "../symbolic/expression.ts";
import { equal, isDimensionless } from "../units/dimension.ts";
import type { Dimension, Unit } from "../units/unit.ts";
import { unitText } from "../units/unit-text.ts";

/**
 * What an expression measures. `any`: a bare 0, which fits every unit. `truth`: a condition. `unknown`: it
 * depends on something that a finding was made of already, so that nothing more is said about it.
 */
export type Measure = Dimension | "any" | "truth" | "unknown";

export interface Typed {
  readonly expr: Expr;
  readonly measure: Measure;
  /** The unit in which the text speaks of it, as far as that is clear: of its literal, or of its domain. */
  readonly shown: Unit | null;
}

export function isDimension(measure: Measure): measure is Dimension {
  return typeof measure !== "string";
}

/** Whether both can be added, compared, or set equal; what is unknown fits all. */
export function fits(a: Measure, b: Measure): boolean {
  if (a === b || a === "unknown" || b === "unknown") return true;
  if (a === "truth" || b === "truth") return false;
  if (a === "any" || b === "any") return true;
  return equal(a, b);
}

/** `Hz` counts cycles; what turns by so many radians a second is not measured in it. */
export function cyclesForAngle(wanted: Unit | null, given: Unit | null): boolean {
  return wanted?.angular === true && given?.cycles === true;
}

/** What a quantity is measured in, in the unit of its domain where that is known: `N*s/m`, `a plain number`. */
export function measureText(measure: Measure, shown: Unit | null): string {
  if (measure === "truth") return "a condition";
  if (measure === "any" || measure === "unknown") return "any unit";
  if (isDimensionless(measure)) return shown?.angular === true ? "rad" : "a plain number";
  if (shown !== null && equal(shown.dimension, measure)) {
    if (shown.factor === 1) return shown.text;
    if (shown.angular) return "rad/s";
  }
  return unitText(measure);
}

/** As a predicate: `in N*s/m`, `a plain number`. */
export function isIn(measure: Measure, shown: Unit | null): string {
  const text = measureText(measure, shown);
  return text.startsWith("a ") ? text : `in ${text}`;
}
