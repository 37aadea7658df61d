/**
 * Exponents of the SI base units kg, m, s, A, K, mol, cd, in this order; whole numbers but for the halves
 * that a square root in a law may bring in. Angle has no dimension (SI Brochure, 9th edition, 2.3.3).
 */
export type Dimension = readonly [
  kg: number,
  m: number,
  s: number,
  A: number,
  K: number,
  mol: number,
  cd: number,
];

/** A unit with its conversion to SI: value in SI = value * factor + offset. */
export interface Unit {
  /** As written, or in canonical form where it was computed: `N*m*s/rad`. */
  readonly text: string;
  readonly dimension: Dimension;
  readonly factor: number;
  /** Not zero for an absolute `degC` alone. */
  readonly offset: number;
  /** `Hz` counts cycles: refused where an angular speed is wanted. */
  readonly cycles: boolean;
  /** An angle stands above the stroke (`rad/s`, `rpm`, `deg`): what `Hz` must not be taken for. */
  readonly angular: boolean;
}
