import { balance } from "./balance.ts";
import { type Complex, eigen, identity, type Rows, singular, size, solve } from "./dense.ts";
import type { LinearModel } from "./linearise.ts";

/** One way in which a linear model moves by itself: an eigenvalue, or a conjugate pair of them as one. */
export interface Mode {
  /** Of a pair the one with im > 0. */
  readonly eigenvalue: Complex;
  readonly pair: boolean;
  /** Undamped natural frequency |λ|/2π, Hz. */
  readonly frequency: number;
  /** -re/|λ|; null for an eigenvalue of zero. */
  readonly damping: number | null;
  /** Until it has fallen to 1/e, s; null for what does not fall. */
  readonly timeConstant: number | null;
  /**
   * How much of the mode each state is, in the order of `moving`, sums to 1 (Pérez-Arriaga, Verghese, Schweppe 1982;
   * from memory): it does not depend on the units of the states. null where modes coincide.
   */
  readonly participation: readonly number[] | null;
}

export interface Modes {
  /** By ascending natural frequency. */
  readonly modes: readonly Mode[];
  /** All eigenvalues in the order of `modes`, both of a pair. */
  readonly eigenvalues: readonly Complex[];
  /** Real parts nearer to 0 than this can't be told from 0. */
  readonly rounding: number;
  /** Every eigenvalue's real part is less than 0, by more than rounding. */
  readonly stable: boolean;
}

/** Eigenvalues of the states that settle the motion, with what they mean; errors of a few eps·‖A‖ for simple ones. */
export function modesOf(linear: LinearModel): Modes {
  const { scaled, scale } = balance(movingPart(linear));
  const n = scale.length;
  const { values, vectors } = eigen(scaled);
  const rounding = 8 * n * Number.EPSILON * size(scaled);
  const left = vectors.length === 0 ? null : solve(vectors, identity(n));
  const inverse = left !== null && left.pivots > 1e-12 ? left.x : null;
  const modes: Mode[] = [];
  for (let k = 0; k < n; k += values[k].im === 0 ? 1 : 2) {
    const value = settled(values[k], rounding);
    const mode = modeOf(value, participation(vectors, inverse, k, values[k].im !== 0));
    modes.push(mode);
    // A pair that can't be told from a double real eigenvalue is one.
    if (values[k].im !== 0 && value.im === 0) modes.push(mode);
  }
  modes.sort((a, b) => a.frequency - b.frequency || a.eigenvalue.re - b.eigenvalue.re);
  const eigenvalues = modes.flatMap(({ eigenvalue: { re, im }, pair }) =>
    pair
      ? [
          { re, im },
          { re, im: -im },
        ]
      : [{ re, im: 0 }],
  );
  const damped = eigenvalues.every(({ re }) => re < -rounding);
  return { modes, eigenvalues, rounding, stable: damped && regular(scaled) };
}

/** A over the states that settle the motion. */
export function movingPart({ A, moving }: LinearModel): number[][] {
  return moving.map((i) => moving.map((j) => A[i][j]));
}

function settled({ re, im }: Complex, rounding: number): Complex {
  const real = Math.abs(re) <= rounding ? 0 : re;
  return { re: real, im: Math.abs(im) <= rounding ? 0 : Math.abs(im) };
}

function modeOf(eigenvalue: Complex, shares: number[] | null): Mode {
  const { re, im } = eigenvalue;
  const speed = Math.hypot(re, im);
  return {
    eigenvalue,
    pair: im !== 0,
    frequency: speed / (2 * Math.PI),
    damping: speed === 0 ? null : re === 0 ? 0 : -re / speed,
    timeConstant: re < 0 ? -1 / re : null,
    participation: shares,
  };
}

/** |v_i·w_i| of the right and the left vector, which the inverse of the right ones holds in its rows. */
function participation(vectors: Rows, inverse: Rows | null, k: number, pair: boolean): number[] | null {
  if (inverse === null) return null;
  const shares = vectors.map((row, i) => {
    const v = pair ? Math.hypot(row[k], row[k + 1]) : Math.abs(row[k]);
    const w = pair ? Math.hypot(inverse[k][i], inverse[k + 1][i]) : Math.abs(inverse[k][i]);
    return v * w;
  });
  const total = shares.reduce((sum, share) => sum + share, 0);
  return total > 0 && Number.isFinite(total) ? shares.map((share) => share / total) : null;
}

/**
 * A double eigenvalue of zero comes out of the iteration as a pair of tiny ones, perhaps on the safe side: the rank
 * tells that it is there.
 */
function regular(scaled: Rows): boolean {
  const { s } = scaled.length === 0 ? { s: [1] } : singularValues(scaled);
  return s[s.length - 1] > 4 * s.length * Number.EPSILON * s[0];
}

function singularValues(scaled: Rows): { s: number[] } {
  const solved = solve(
    scaled,
    scaled.map(() => []),
  );
  if (solved === null) return { s: [1, 0] };
  // The dear singular values are asked for only where the pivots leave a doubt.
  return solved.pivots > 1e-9 ? { s: [1, 1] } : singular(scaled);
}
