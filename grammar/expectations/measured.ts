import { DIMENSIONLESS } from "../units/dimension.ts";
import type { Dimension, Unit } from "../units/unit.ts";

/** One side of a condition: an SI value, or why it has none. */
export type Measured = Value | { readonly kind: "none"; readonly message: string };

export interface Value {
  readonly kind: "value";
  readonly value: number;
  readonly dimension: Dimension;
  /** The unit it was written in, or is best shown in; null where the SI unit will do. */
  readonly unit: Unit | null;
  /** A percentage: as a width it counts of the wanted value. */
  readonly relative: boolean;
}

export function value(number: number, dimension: Dimension = DIMENSIONLESS, unit: Unit | null = null): Value {
  const relative = unit !== null && (unit.text === "%" || unit.text === "ppm");
  return { kind: "value", value: number, dimension, unit, relative };
}

export function none(message: string): Measured {
  return { kind: "none", message };
}
