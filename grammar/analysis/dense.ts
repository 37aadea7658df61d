import { EigenvalueDecomposition, LuDecomposition, Matrix, SingularValueDecomposition } from "ml-matrix";

/** A dense matrix by rows. */
export type Rows = readonly (readonly number[])[];

/**
 * The one door to the library of linear algebra (ml-matrix, after JAMA and EISPACK). No function here throws for
 * what stands in a matrix; what can't be computed is null.
 */
export interface Complex {
  readonly re: number;
  readonly im: number;
}

export function zeros(rows: number, columns: number): number[][] {
  return Array.from({ length: rows }, () => new Array<number>(columns).fill(0));
}

export function identity(size: number): number[][] {
  const rows = zeros(size, size);
  for (let i = 0; i < size; i += 1) rows[i][i] = 1;
  return rows;
}

export function transpose(a: Rows, columns = a[0]?.length ?? 0): number[][] {
  return Array.from({ length: columns }, (_, j) => a.map((row) => row[j]));
}

export function multiply(a: Rows, b: Rows): number[][] {
  const columns = b[0]?.length ?? 0;
  return a.map((row) => {
    const out = new Array<number>(columns).fill(0);
    row.forEach((x, k) => {
      if (x !== 0) for (let j = 0; j < columns; j += 1) out[j] += x * b[k][j];
    });
    return out;
  });
}

export function apply(a: Rows, x: readonly number[]): number[] {
  return a.map((row) => dot(row, x));
}

export function dot(a: readonly number[], b: readonly number[]): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i] * b[i];
  return sum;
}

export function norm(x: readonly number[]): number {
  return Math.hypot(...x);
}

/** Frobenius. */
export function size(a: Rows): number {
  return Math.hypot(...a.map((row) => Math.hypot(...row)));
}

export function finite(a: Rows): boolean {
  return a.every((row) => row.every(Number.isFinite));
}

/** x with a·x = b, and how near `a` is to singular (least over greatest pivot); null where it is singular. */
export function solve(a: Rows, b: Rows): { readonly x: number[][]; readonly pivots: number } | null {
  const n = a.length;
  if (n === 0) return { x: [], pivots: 1 };
  if (!finite(a) || !finite(b)) return null;
  const lu = new LuDecomposition(matrix(a));
  if (lu.isSingular()) return null;
  const upper = lu.upperTriangularMatrix;
  let [least, most] = [Number.POSITIVE_INFINITY, 0];
  for (let i = 0; i < n; i += 1) {
    const pivot = Math.abs(upper.get(i, i));
    least = Math.min(least, pivot);
    most = Math.max(most, pivot);
  }
  if ((b[0]?.length ?? 0) === 0) return { x: a.map(() => []), pivots: least / most };
  const x = lu.solve(matrix(b)).to2DArray();
  return finite(x) ? { x, pivots: least / most } : null;
}

/** a = u·diag(s)·vᵀ, s falling; u and v by columns are left and right directions, `v` complete. */
export interface Singular {
  readonly u: number[][];
  readonly s: number[];
  readonly v: number[][];
}

export function singular(a: Rows): Singular {
  const columns = a[0]?.length ?? 0;
  if (columns === 0) return { u: identity(a.length), s: [], v: [] };
  const svd = new SingularValueDecomposition(matrix(a), { autoTranspose: true });
  return {
    u: svd.leftSingularVectors.to2DArray(),
    s: svd.diagonal,
    v: svd.rightSingularVectors.to2DArray(),
  };
}

export interface Eigen {
  readonly values: Complex[];
  /**
   * By columns, the real form: of a conjugate pair in columns j, j+1 (im > 0 first) the real and the imaginary part.
   */
  readonly vectors: number[][];
}

/** Eigenvalues and right vectors by reduction to Hessenberg form and the QR algorithm. The matrix must be finite. */
export function eigen(a: Rows): Eigen {
  if (a.length === 0) return { values: [], vectors: [] };
  const evd = new EigenvalueDecomposition(matrix(a), { assumeSymmetric: false });
  const im = evd.imaginaryEigenvalues;
  return {
    values: evd.realEigenvalues.map((re, i) => ({ re, im: im[i] })),
    vectors: evd.eigenvectorMatrix.to2DArray(),
  };
}

function matrix(a: Rows): Matrix {
  return new Matrix(a as number[][]);
}
