import { norm, type Rows, solve } from "./dense.ts";

export interface Equations {
  residual(x: readonly number[]): number[];
  jacobian(x: readonly number[]): Rows;
}

const MOST_STEPS = 80;
const LEAST_DAMPING = 2 ** -16;

/**
 * Newton's method with damping by the natural monotonicity test (Deuflhard 2004, Newton Methods for Nonlinear
 * Problems, 3.3; from memory): it does not depend on the units of the residuals. Null where it does not converge.
 */
export function newton(equations: Equations, start: readonly number[]): number[] | null {
  let x = [...start];
  const seen = x.map(Math.abs);
  let residual = equations.residual(x);
  for (let step = 0; step < MOST_STEPS; step += 1) {
    if (!residual.every(Number.isFinite)) return null;
    if (residual.every((r) => r === 0)) return x;
    const jacobian = equations.jacobian(x);
    const change = stepOf(jacobian, residual);
    if (change === null) return null;
    const weights = x.map((value, i) => 1 / Math.max(seen[i], Math.abs(value), Math.abs(change[i]), TINY));
    const length = weighted(change, weights);
    let damping = 1;
    let next = x;
    let after = residual;
    for (; damping >= LEAST_DAMPING; damping /= 2) {
      next = x.map((value, i) => value + damping * change[i]);
      after = equations.residual(next);
      if (!after.every(Number.isFinite)) continue;
      const simplified = stepOf(jacobian, after);
      if (simplified !== null && weighted(simplified, weights) <= (1 - damping / 2) * length) break;
      // At the limit of rounding a full step no longer shortens anything.
      if (damping === 1 && small(change, seen, 1e-9)) return next;
    }
    if (damping < LEAST_DAMPING) return null;
    next.forEach((value, i) => {
      seen[i] = Math.max(seen[i], Math.abs(value));
    });
    x = next;
    residual = after;
    if (damping === 1 && small(change, seen, 1e-13)) return x;
  }
  return null;
}

const TINY = 1e-300;

function stepOf(jacobian: Rows, residual: readonly number[]): number[] | null {
  const solved = solve(
    jacobian,
    residual.map((r) => [-r]),
  );
  return solved === null ? null : solved.x.map(([value]) => value);
}

function weighted(x: readonly number[], weights: readonly number[]): number {
  return norm(x.map((value, i) => value * weights[i]));
}

export function small(change: readonly number[], scale: readonly number[], tolerance: number): boolean {
  return change.every((value, i) => Math.abs(value) <= tolerance * scale[i]);
}
