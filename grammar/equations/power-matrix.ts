/** Rounding in what was worked out from parameters must not make a lossless field a source. */
const TOLERANCE = 1e-9;

/**
 * A direction x in which xᵀ·A·x < 0, and that value; null where the symmetric part of A is positive semidefinite. Rows
 * and columns are scaled to each other, since ports count in different units. Cholesky's decomposition of the shifted
 * symmetric part S = L·D·Lᵀ stops at a negative pivot d_k, and x = L⁻ᵀ·e_k then has xᵀ·S·x = d_k.
 */
export function powerGained(
  a: readonly (readonly number[])[],
): { direction: number[]; power: number } | null {
  const n = a.length;
  const size = a.map(
    (row, i) => Math.sqrt(Math.max(...row.map((entry, j) => Math.abs(entry + a[j][i]) / 2))) || 1,
  );
  const s = a.map((row, i) =>
    row.map((entry, j) => (entry + a[j][i]) / (2 * size[i] * size[j]) + (i === j ? TOLERANCE : 0)),
  );
  const lower = a.map(() => new Array<number>(n).fill(0));
  const pivots: number[] = [];
  for (let k = 0; k < n; k += 1) {
    let pivot = s[k][k];
    for (let j = 0; j < k; j += 1) pivot -= lower[k][j] ** 2 * pivots[j];
    lower[k][k] = 1;
    pivots.push(pivot);
    if (pivot < 0) return along(a, lower, size, k);
    for (let i = k + 1; i < n; i += 1) {
      let entry = s[i][k];
      for (let j = 0; j < k; j += 1) entry -= lower[i][j] * lower[k][j] * pivots[j];
      lower[i][k] = pivot === 0 ? 0 : entry / pivot;
    }
  }
  return null;
}

/** x = L⁻ᵀ·e_k by back substitution, its largest part made 1 and scaled back. */
function along(
  a: readonly (readonly number[])[],
  lower: readonly (readonly number[])[],
  size: readonly number[],
  k: number,
): { direction: number[]; power: number } {
  const x = new Array<number>(a.length).fill(0);
  x[k] = 1;
  for (let i = k - 1; i >= 0; i -= 1) {
    for (let j = i + 1; j <= k; j += 1) x[i] -= lower[j][i] * x[j];
  }
  const direction = x.map((value, i) => value / size[i]);
  const first = Math.sign(direction.find((value) => value !== 0) ?? 1);
  const largest = first * Math.max(...direction.map(Math.abs));
  const scaled = direction.map((value) => value / largest);
  const power = scaled.reduce(
    (sum, xi, i) => sum + xi * a[i].reduce((row, entry, j) => row + entry * scaled[j], 0),
    0,
  );
  return { direction: scaled, power };
}
