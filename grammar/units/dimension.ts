import type { Dimension } from "./unit.ts";

export const DIMENSIONLESS: Dimension = [0, 0, 0, 0, 0, 0, 0];

export function multiply(a: Dimension, b: Dimension): Dimension {
  return [a[0] + b[0], a[1] + b[1], a[2] + b[2], a[3] + b[3], a[4] + b[4], a[5] + b[5], a[6] + b[6]];
}

export function divide(a: Dimension, b: Dimension): Dimension {
  return [a[0] - b[0], a[1] - b[1], a[2] - b[2], a[3] - b[3], a[4] - b[4], a[5] - b[5], a[6] - b[6]];
}

/** `exponent` may be a half, as a square root brings in. */
export function power(a: Dimension, exponent: number): Dimension {
  // Adding 0 turns -0 into 0, so that dimensions compare and print alike however they came about.
  const raise = (x: number) => x * exponent + 0;
  return [raise(a[0]), raise(a[1]), raise(a[2]), raise(a[3]), raise(a[4]), raise(a[5]), raise(a[6])];
}

export function equal(a: Dimension, b: Dimension): boolean {
  return (
    a === b ||
    (a[0] === b[0] &&
      a[1] === b[1] &&
      a[2] === b[2] &&
      a[3] === b[3] &&
      a[4] === b[4] &&
      a[5] === b[5] &&
      a[6] === b[6])
  );
}

export function isDimensionless(a: Dimension): boolean {
  return equal(a, DIMENSIONLESS);
}
