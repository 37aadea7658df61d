import type { Unit } from "../units/unit.ts";
import { quantityText, readableQuantity } from "../units/unit-text.ts";
import { splitNumber } from "./shape.ts";

/** A parameter as its text would give it: in its unit, a ratio as a fraction: `2.1 mH`, `1/28`. */
export function parameterText(value: number, unit: Unit): string {
  if (unit.text === "1" && Number.isFinite(value)) {
    const { coefficient, divisor } = splitNumber(Math.abs(value), false);
    if (divisor !== 1) return `${value < 0 ? "-" : ""}${coefficient}/${divisor}`;
  }
  return quantityText(value, unit, 8);
}

/** A start or nominal value, whose unit is that of a variable: far from one it takes a prefix: `62 kN` of a force in N. */
export function pointText(value: number, unit: Unit): string {
  const size = Math.abs(value);
  const far = size > 0 && (size < 1e-2 || size >= 1e4);
  const takesPrefix = unit.factor === 1 && /^\p{L}+$/u.test(unit.text);
  return far && takesPrefix
    ? readableQuantity(value, unit.dimension, [unit], 6)
    : quantityText(value, unit, 6);
}
