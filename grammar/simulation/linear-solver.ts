import type { Place } from "./ode.ts";

/** Solves (d·I − J)·x = b for a J whose pattern stays the same. */
export interface LinearSolver {
  readonly kind: "dense" | "sparse";
  /** False where the matrix is singular to rounding. */
  factor(entries: Float64Array, diagonal: number): boolean;
  /** In place. */
  solve(b: Float64Array): void;
}

/** Below this, or where most places would fill up, a dense matrix is the shorter way. */
const SMALL = 12;
const MOST_FILL = 0.3;

export function linearSolver(size: number, pattern: readonly Place[]): LinearSolver {
  if (size <= SMALL) return denseSolver(size, pattern);
  const order = fillOrder(size, pattern);
  const places = order.rows.reduce((sum, row) => sum + row.length, 0);
  return places > MOST_FILL * size * size ? denseSolver(size, pattern) : sparseSolver(size, pattern, order);
}

/** Gauss with partial pivoting. */
export function denseSolver(n: number, pattern: readonly Place[]): LinearSolver {
  const a = new Float64Array(n * n);
  const pivots = new Int32Array(n);
  return {
    kind: "dense",
    factor(entries, diagonal) {
      a.fill(0);
      for (let i = 0; i < n; i += 1) a[i * n + i] = diagonal;
      for (let e = 0; e < pattern.length; e += 1) a[pattern[e].row * n + pattern[e].column] -= entries[e];
      for (let k = 0; k < n; k += 1) {
        let best = k;
        for (let i = k + 1; i < n; i += 1) if (Math.abs(a[i * n + k]) > Math.abs(a[best * n + k])) best = i;
        pivots[k] = best;
        if (best !== k)
          for (let j = 0; j < n; j += 1) {
            const held = a[k * n + j];
            a[k * n + j] = a[best * n + j];
            a[best * n + j] = held;
          }
        const pivot = a[k * n + k];
        if (!(Math.abs(pivot) > 0) || !Number.isFinite(pivot)) return false;
        for (let i = k + 1; i < n; i += 1) {
          const factor = a[i * n + k] / pivot;
          a[i * n + k] = factor;
          if (factor !== 0) for (let j = k + 1; j < n; j += 1) a[i * n + j] -= factor * a[k * n + j];
        }
      }
      return true;
    },
    solve(b) {
      for (let k = 0; k < n; k += 1) {
        const held = b[pivots[k]];
        b[pivots[k]] = b[k];
        b[k] = held;
      }
      for (let i = 1; i < n; i += 1) for (let j = 0; j < i; j += 1) b[i] -= a[i * n + j] * b[j];
      for (let i = n - 1; i >= 0; i -= 1) {
        for (let j = i + 1; j < n; j += 1) b[i] -= a[i * n + j] * b[j];
        b[i] /= a[i * n + i];
      }
    },
  };
}

interface FillOrder {
  /** By new place: the old one. */
  readonly from: Int32Array;
  readonly to: Int32Array;
  /** By new row: the new columns that are filled, ascending. */
  readonly rows: readonly Int32Array[];
}

/**
 * Least degree first on the symmetric pattern (W. F. Tinney, J. W. Walker, Proceedings of the IEEE 55 (1967), scheme 2;
 * from memory), with what fills up.
 */
function fillOrder(n: number, pattern: readonly Place[]): FillOrder {
  const near = Array.from({ length: n }, () => new Set<number>());
  for (const { row, column } of pattern) {
    if (row === column) continue;
    near[row].add(column);
    near[column].add(row);
  }
  const byDegree: Set<number>[] = Array.from({ length: n + 1 }, () => new Set<number>());
  for (let i = 0; i < n; i += 1) byDegree[near[i].size].add(i);
  const from = new Int32Array(n);
  const to = new Int32Array(n);
  const upper: number[][] = [];
  let least = 0;
  for (let place = 0; place < n; place += 1) {
    least = Math.max(0, least - 1);
    while (byDegree[least].size === 0) least += 1;
    const [chosen] = byDegree[least];
    byDegree[least].delete(chosen);
    from[place] = chosen;
    to[chosen] = place;
    const others = [...near[chosen]];
    upper.push(others);
    for (const one of others) {
      byDegree[near[one].size].delete(one);
      near[one].delete(chosen);
      for (const other of others) if (other !== one) near[one].add(other);
      byDegree[near[one].size].add(one);
      least = Math.min(least, near[one].size);
    }
  }
  const rows: number[][] = Array.from({ length: n }, (_, i) => [i]);
  upper.forEach((others, row) => {
    for (const other of others) {
      rows[row].push(to[other]);
      rows[to[other]].push(row);
    }
  });
  return { from, to, rows: rows.map((row) => Int32Array.from(row).sort()) };
}

/**
 * Row by row in the given order, pivots on the diagonal: a shorter step makes d greater and the diagonal dominant, so a
 * pivot that is too small is answered by a shorter step.
 */
function sparseSolver(n: number, pattern: readonly Place[], { to, from, rows }: FillOrder): LinearSolver {
  const start = new Int32Array(n + 1);
  for (let i = 0; i < n; i += 1) start[i + 1] = start[i] + rows[i].length;
  const columns = new Int32Array(start[n]);
  rows.forEach((row, i) => {
    columns.set(row, start[i]);
  });
  const diagonalAt = Int32Array.from(rows, (row, i) => start[i] + row.indexOf(i));
  const given: { column: number; entry: number }[][] = Array.from({ length: n }, () => []);
  pattern.forEach(({ row, column }, entry) => {
    given[to[row]].push({ column: to[column], entry });
  });
  const values = new Float64Array(start[n]);
  const work = new Float64Array(n);
  return {
    kind: "sparse",
    factor(entries, diagonal) {
      for (let i = 0; i < n; i += 1) {
        for (let at = start[i]; at < start[i + 1]; at += 1) work[columns[at]] = 0;
        work[i] = diagonal;
        for (const { column, entry } of given[i]) work[column] -= entries[entry];
        let most = 0;
        for (let at = start[i]; at < start[i + 1]; at += 1)
          most = Math.max(most, Math.abs(work[columns[at]]));
        for (let at = start[i]; at < diagonalAt[i]; at += 1) {
          const k = columns[at];
          if (work[k] === 0) continue;
          const factor = work[k] / values[diagonalAt[k]];
          work[k] = factor;
          for (let u = diagonalAt[k] + 1; u < start[k + 1]; u += 1) work[columns[u]] -= factor * values[u];
        }
        for (let at = start[i]; at < start[i + 1]; at += 1) values[at] = work[columns[at]];
        if (!(Math.abs(values[diagonalAt[i]]) > 1e-13 * most)) return false;
      }
      return true;
    },
    solve(b) {
      for (let i = 0; i < n; i += 1) {
        let sum = b[from[i]];
        for (let at = start[i]; at < diagonalAt[i]; at += 1) sum -= values[at] * work[columns[at]];
        work[i] = sum;
      }
      for (let i = n - 1; i >= 0; i -= 1) {
        let sum = work[i];
        for (let at = diagonalAt[i] + 1; at < start[i + 1]; at += 1) sum -= values[at] * work[columns[at]];
        work[i] = sum / values[diagonalAt[i]];
      }
      for (let i = 0; i < n; i += 1) b[from[i]] = work[i];
    },
  };
}
