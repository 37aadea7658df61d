import { balance } from "./balance.ts";
import { reached } from "./channel.ts";
import { dot, norm, type Rows, transpose } from "./dense.ts";
import type { LinearModel } from "./linearise.ts";

/** How much of the states the inputs can move, or the outputs can tell. */
export interface Reach {
  readonly rank: number;
  readonly full: boolean;
  /** Directions that are left out, each by the states that it is made of, the greatest weight 1. */
  readonly missing: readonly (readonly { readonly state: string; readonly weight: number }[])[];
}

/** Which combinations of states the inputs move. */
export function controllability(linear: LinearModel): Reach {
  const { scaled, scale } = balance(linear.A);
  // With x + E·u for x, as in every channel.
  const through = linear.B.map((row, i) =>
    row.map(
      (value, j) =>
        value +
        dot(
          linear.A[i],
          linear.E.map((e) => e[j]),
        ),
    ),
  );
  const from = transpose(through.map((row, i) => row.map((value) => value / scale[i])));
  return reachOf(linear, scaled, from);
}

/** Which combinations of states the outputs tell apart. */
export function observability(linear: LinearModel): Reach {
  const { scaled, scale } = balance(linear.A);
  const from = linear.C.map((row) => row.map((value, i) => value * scale[i]));
  return reachOf(linear, transpose(scaled), from);
}

function reachOf({ states }: LinearModel, A: Rows, from: Rows): Reach {
  const unit = from.filter((vector) => norm(vector) > 0).map((vector) => vector.map((x) => x / norm(vector)));
  const basis = reached(A, unit);
  const missing = across(basis, states.length).map((direction) => {
    const most = direction.reduce((best, x) => (Math.abs(x) > Math.abs(best) ? x : best), 0);
    return direction.flatMap((x, i) =>
      Math.abs(x / most) > 1e-6 ? [{ state: states[i].name, weight: x / most }] : [],
    );
  });
  return { rank: basis.length, full: basis.length === states.length, missing };
}

/** Unit vectors made orthogonal to a basis and to each other: those that are left longest come first. */
function across(basis: Rows, n: number): number[][] {
  const found: number[][] = [];
  const rest = Array.from({ length: n }, (_, i) => {
    const vector = new Array<number>(n).fill(0);
    vector[i] = 1;
    return vector;
  });
  const take = (direction: readonly number[]) => {
    for (const vector of rest) {
      const along = dot(direction, vector);
      for (let i = 0; i < n; i += 1) vector[i] -= along * direction[i];
    }
  };
  basis.forEach(take);
  while (found.length < n - basis.length) {
    const longest = rest.reduce((best, vector) => (norm(vector) > norm(best) ? vector : best));
    const length = norm(longest);
    const direction = longest.map((x) => x / length);
    found.push(direction);
    take(direction);
  }
  return found;
}
