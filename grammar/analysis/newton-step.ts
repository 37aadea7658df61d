import { balance } from "./balance.ts";
import { apply, identity, multiply, type Rows, singular, solve, transpose } from "./dense.ts";

/** Below this part of the greatest singular value a direction counts as one that the equations do not see. */
function rankTolerance(n: number): number {
  return 16 * n * Number.EPSILON;
}

/**
 * Left null directions of A in balanced coordinates: wᵀ·D⁻¹·x does not change in time. Empty where A is regular.
 */
export function conserved(slopes: Rows): { totals: number[][]; scale: number[]; free: number[][] } {
  const { scaled, scale } = balance(slopes);
  const { u, s, v } = singular(scaled);
  const floor = rankTolerance(s.length) * (s[0] ?? 0);
  const null_ = s.flatMap((value, i) => (value <= floor ? [i] : []));
  return {
    scale,
    totals: null_.map((i) => u.map((row) => row[i])),
    free: null_.map((i) => v.map((row) => row[i])),
  };
}

/**
 * The Newton step for given slopes, reusable for the rates at other places. Where A is singular: the shortest step
 * that does what can be done, and then along the free directions back to the totals of the start.
 */
export function newtonSteps(
  slopes: Rows,
  start: readonly number[],
): (x: readonly number[], rates: readonly number[]) => number[] {
  const { scaled, scale } = balance(slopes);
  const n = scale.length;
  const regular = solve(scaled, identity(n));
  if (regular !== null && regular.pivots > 1e-10) {
    return (_, rates) =>
      apply(
        regular.x,
        rates.map((rate, i) => -rate / scale[i]),
      ).map((c, i) => c * scale[i]);
  }
  const { u, s, v } = singular(scaled);
  const floor = rankTolerance(n) * (s[0] ?? 0);
  const { totals, free } = conserved(slopes);
  const back = pseudoInverse(multiply(totals, transpose(free)));
  return (x, rates) => {
    const right = rates.map((rate, i) => -rate / scale[i]);
    const change = new Array<number>(n).fill(0);
    s.forEach((value, k) => {
      if (value <= floor) return;
      const amount = u.reduce((sum, row, i) => sum + row[k] * right[i], 0) / value;
      for (let i = 0; i < n; i += 1) change[i] += amount * v[i][k];
    });
    const away = totals.map(
      (w) => -w.reduce((sum, wi, i) => sum + wi * ((x[i] - start[i]) / scale[i] + change[i]), 0),
    );
    apply(back, away).forEach((amount, k) => {
      for (let i = 0; i < n; i += 1) change[i] += amount * free[k][i];
    });
    return change.map((c, i) => c * scale[i]);
  };
}

function pseudoInverse(a: Rows): number[][] {
  if (a.length === 0) return [];
  const { u, s, v } = singular(a);
  const floor = 1e-8;
  const inverse = s.map((value) => (value <= floor ? 0 : 1 / value));
  return v.map((row) =>
    u.map((left) => inverse.reduce((sum, value, k) => sum + row[k] * value * left[k], 0)),
  );
}
