/** Gauss–Jordan elimination in place, with partial pivoting. Returns the pivot column of each row that is left. */
export function reduceRows(rows: number[][]): number[] {
  const pivots: number[] = [];
  const columns = rows[0]?.length ?? 0;
  for (let column = 0; column < columns && pivots.length < rows.length; column += 1) {
    const at = pivots.length;
    let best = at;
    for (let i = at; i < rows.length; i += 1) {
      if (Math.abs(rows[i][column]) > Math.abs(rows[best][column])) best = i;
    }
    if (Math.abs(rows[best][column]) < SMALL) continue;
    [rows[at], rows[best]] = [rows[best], rows[at]];
    const scale = rows[at][column];
    rows[at] = rows[at].map((entry) => entry / scale);
    for (let i = 0; i < rows.length; i += 1) {
      const factor = rows[i][column];
      if (i === at || factor === 0) continue;
      for (let j = column; j < columns; j += 1) rows[i][j] -= factor * rows[at][j];
    }
    pivots.push(column);
  }
  return pivots;
}

/** Vectors y with yᵀA = 0 that span them all. */
export function leftNullSpace(matrix: readonly (readonly number[])[]): number[][] {
  const rows = matrix.map((_, j) => matrix.map((row) => row[j]));
  const pivots = reduceRows(rows);
  const bound = new Set(pivots);
  const free = [...rows.keys()].filter((column) => !bound.has(column));
  return free.map((column) => {
    const vector = new Array<number>(matrix.length).fill(0);
    vector[column] = 1;
    pivots.forEach((pivot, i) => {
      vector[pivot] = -rows[i][column];
    });
    return vector;
  });
}

/** Entries are sums of ratios of two-ports near 1: what is left of them below this is rounding. */
export const SMALL = 1e-10;
