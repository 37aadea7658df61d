import type { Expr } from "./expression.ts";
import {
  addPolynomials,
  clearingMonomial,
  divideExactly,
  multiplyPolynomials,
  type Polynomial,
  polynomialExpr,
  shiftPolynomial,
  TooManyTerms,
} from "./polynomial.ts";
import type { Pool } from "./pool.ts";
import { Quotients } from "./quotient.ts";

/**
 * `singular` names rows of which one follows from (or contradicts) the others; `large` means that the solution
 * passes the limit on terms and is better found with numbers.
 */
export type LinearSolution =
  | { readonly kind: "solved"; readonly values: readonly Expr[] }
  | { readonly kind: "singular"; readonly rows: readonly number[]; readonly columns: readonly number[] }
  | { readonly kind: "large" };

/** The solution of matrix·x = right in closed form; null where it is singular or too large. */
export function solveLinear(
  pool: Pool,
  matrix: readonly (readonly Expr[])[],
  right: readonly Expr[],
): Expr[] | null {
  const solution = solveLinearSystem(pool, matrix, right);
  return solution.kind === "solved" ? [...solution.values] : null;
}

const TERM_LIMIT = 120;
const SIZE_LIMIT = 12;

/**
 * Fraction-free elimination (E. H. Bareiss, Sylvester's identity and multistep integer-preserving Gaussian
 * elimination, Mathematics of Computation 22, 1968; reference from memory), taken to the diagonal, on the matrix with
 * the unit matrix beside it: the right side stays out of it, so that its sums are not multiplied out.
 */
export function solveLinearSystem(
  pool: Pool,
  matrix: readonly (readonly Expr[])[],
  right: readonly Expr[],
): LinearSolution {
  const n = matrix.length;
  if (n > SIZE_LIMIT) return { kind: "large" };
  try {
    return solve(pool, matrix, right);
  } catch (error) {
    if (error instanceof TooManyTerms) return { kind: "large" };
    throw error;
  }
}

function solve(pool: Pool, matrix: readonly (readonly Expr[])[], right: readonly Expr[]): LinearSolution {
  const n = matrix.length;
  const quotients = new Quotients(pool, TERM_LIMIT);
  const cleared = matrix.map((row) => clearRow(pool, quotients, row));
  const rows = cleared.map(({ entries }, i) => [
    ...entries,
    ...entries.map((_, j): Polynomial => (i === j ? new Map([[pool.one, 1]]) : new Map())),
  ]);
  const order = rows.map((_, i) => i);
  const columns = rows.map((_, i) => i);
  let determinant: Polynomial = new Map([[pool.one, 1]]);
  for (let k = 0; k < n; k += 1) {
    const pivot = simplestPivot(rows, k, n);
    if (pivot === null) return { kind: "singular", rows: order.slice(k), columns: columns.slice(k) };
    swap(rows, k, pivot.row);
    swap(order, k, pivot.row);
    swap(columns, k, pivot.column);
    for (const row of rows) swap(row, k, pivot.column);
    if (!eliminate(pool, rows, k, determinant)) return { kind: "large" };
    determinant = rows[k][k];
    // All diagonal entries so far are the same minor now.
    for (let i = 0; i < k; i += 1) rows[i][i] = determinant;
  }
  const values = new Array<Expr>(n);
  const sides = right.map((side, i) => pool.product(cleared[i].factor, side));
  for (let k = 0; k < n; k += 1) {
    const value = combine(pool, quotients, rows[k].slice(n), sides, determinant);
    if (value === null) return { kind: "large" };
    values[columns[k]] = value;
  }
  return { kind: "solved", values };
}

/** One step of the elimination, above and below the pivot; false where a division that must be exact is not. */
function eliminate(pool: Pool, rows: readonly Polynomial[][], k: number, previous: Polynomial): boolean {
  const lead = rows[k][k];
  for (let i = 0; i < rows.length; i += 1) {
    if (i === k) continue;
    const factor = rows[i][k];
    for (let j = 0; j < rows[i].length; j += 1) {
      if (j === k) continue;
      const cross = addPolynomials(
        multiplyPolynomials(pool, lead, rows[i][j], TERM_LIMIT),
        multiplyPolynomials(pool, factor, rows[k][j], TERM_LIMIT),
        -1,
      );
      const divided = divideExactly(pool, cross, previous, TERM_LIMIT);
      if (divided === null) return false;
      rows[i][j] = divided;
    }
    rows[i][k] = new Map();
  }
  return true;
}

/** Σ weight·side / determinant, with one fraction bar over what shares its denominator. */
function combine(
  pool: Pool,
  quotients: Quotients,
  weights: readonly Polynomial[],
  sides: readonly Expr[],
  determinant: Polynomial,
): Expr | null {
  const tops = new Map<Expr, Expr[]>();
  for (const [j, weight] of weights.entries()) {
    if (weight.size === 0 || sides[j] === pool.zero) continue;
    const quotient = quotients.over(weight, determinant);
    if (quotient === null) return null;
    const { numerator, denominator } = quotient;
    const below = pool.product(
      [...denominator].map(([base, power]) => pool.power(base, pool.number(-power))),
    );
    const top = pool.product(polynomialExpr(pool, numerator), sides[j]);
    tops.set(below, [...(tops.get(below) ?? []), top]);
  }
  return pool.sum([...tops].map(([below, list]) => pool.product(below, pool.sum(list))));
}

/** The row as polynomials, and the factor it was multiplied with for that. */
function clearRow(
  pool: Pool,
  quotients: Quotients,
  row: readonly Expr[],
): { entries: Polynomial[]; factor: Expr } {
  const common = new Map<Expr, number>();
  for (const { denominator } of row.map((entry) => quotients.of(entry))) {
    for (const [base, exponent] of denominator) common.set(base, Math.max(exponent, common.get(base) ?? 0));
  }
  const sums = pool.product([...common].map(([base, exponent]) => pool.power(base, pool.number(exponent))));
  const scaled = row.map((entry) => quotients.of(pool.product(sums, entry)));
  if (scaled.some(({ denominator }) => denominator.size > 0)) throw new TooManyTerms();
  const numerators = scaled.map(({ numerator }) => numerator);
  const inverse = pool.power(clearingMonomial(pool, ...numerators), pool.number(-1));
  return {
    entries: numerators.map((numerator) => shiftPolynomial(pool, numerator, inverse)),
    factor: pool.product(sums, inverse),
  };
}

function simplestPivot(
  rows: readonly Polynomial[][],
  k: number,
  n: number,
): { row: number; column: number } | null {
  let best: { row: number; column: number } | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (let row = k; row < n; row += 1) {
    for (let column = k; column < n; column += 1) {
      const size = rows[row][column].size;
      if (size > 0 && size < least) {
        least = size;
        best = { row, column };
      }
    }
  }
  return best;
}

function swap<T>(list: T[], i: number, j: number): void {
  const kept = list[i];
  list[i] = list[j];
  list[j] = kept;
}
