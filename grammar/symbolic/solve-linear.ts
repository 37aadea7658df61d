import type { Expr } from "./expression.ts";
import {
  addPolynomials,
  divideExactly,
  multiplyPolynomials,
  type Polynomial,
  TooManyTerms,
} from "./polynomial.ts";
import type { Pool } from "./pool.ts";
import { type Quotient, quotientExpr, quotientOf } from "./rational-form.ts";

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
  const scaled = matrix.map((row) => clearRow(pool, row));
  const rows = scaled.map(({ entries }, i) => [
    ...entries,
    ...entries.map((_, j): Polynomial => (i === j ? new Map([[pool.one, 1]]) : new Map())),
  ]);
  const order = rows.map((_, i) => i);
  const columns = rows.map((_, i) => i);
  let previous: Polynomial = new Map([[pool.one, 1]]);
  for (let k = 0; k < n; k += 1) {
    const pivot = simplestPivot(rows, k, n);
    if (pivot === null) return { kind: "singular", rows: order.slice(k), columns: columns.slice(k) };
    swap(rows, k, pivot.row);
    swap(order, k, pivot.row);
    swap(columns, k, pivot.column);
    for (const row of rows) swap(row, k, pivot.column);
    const lead = rows[k][k];
    for (let i = 0; i < n; i += 1) {
      if (i === k) continue;
      const factor = rows[i][k];
      for (let j = 0; j < 2 * n; j += 1) {
        if (j === k) continue;
        const cross = addPolynomials(
          multiplyPolynomials(pool, lead, rows[i][j], TERM_LIMIT),
          multiplyPolynomials(pool, factor, rows[k][j], TERM_LIMIT),
          -1,
        );
        const divided = divideExactly(pool, cross, previous, TERM_LIMIT);
        if (divided === null) return { kind: "large" };
        rows[i][j] = divided;
      }
      rows[i][k] = new Map();
    }
    // All diagonal entries so far are the same minor now.
    for (let i = 0; i < k; i += 1) rows[i][i] = lead;
    previous = lead;
  }
  const values = new Array<Expr>(n);
  const sides = right.map((side, i) => pool.product(scaled[i].factor, side));
  for (let k = 0; k < n; k += 1) {
    const weights = rows[k].slice(n);
    values[columns[k]] = combine(pool, weights, sides, previous);
  }
  return { kind: "solved", values };
}

/** Σ weight·side / determinant. */
function combine(
  pool: Pool,
  weights: readonly Polynomial[],
  sides: readonly Expr[],
  determinant: Polynomial,
): Expr {
  const terms = weights.flatMap((weight, j) => {
    if (weight.size === 0 || sides[j] === pool.zero) return [];
    const quotient = fraction(pool, weight, determinant);
    return [{ quotient, side: sides[j] }];
  });
  // One fraction bar over what shares its denominator.
  const tops = new Map<Expr, Expr[]>();
  for (const { quotient, side } of terms) {
    const bottom = quotientExpr(pool, {
      numerator: new Map([[pool.one, 1]]),
      denominator: quotient.denominator,
    });
    const top = pool.product(
      quotientExpr(pool, { numerator: quotient.numerator, denominator: new Map() }),
      side,
    );
    const list = tops.get(bottom);
    if (list === undefined) tops.set(bottom, [top]);
    else list.push(top);
  }
  return pool.sum([...tops].map(([bottom, list]) => pool.product(bottom, pool.sum(list))));
}

function fraction(pool: Pool, numerator: Polynomial, determinant: Polynomial): Quotient {
  const expr = pool.divide(
    quotientExpr(pool, { numerator, denominator: new Map() }),
    quotientExpr(pool, { numerator: determinant, denominator: new Map() }),
  );
  const quotient = quotientOf(pool, expr, 4 * TERM_LIMIT);
  if (quotient === null) throw new TooManyTerms();
  return quotient;
}

/** The row as polynomials, and the factor it was multiplied with for that. */
function clearRow(pool: Pool, row: readonly Expr[]): { entries: Polynomial[]; factor: Expr } {
  const quotients = row.map((entry) => {
    const quotient = quotientOf(pool, entry, TERM_LIMIT);
    if (quotient === null) throw new TooManyTerms();
    return quotient;
  });
  const common = new Map<Expr, number>();
  for (const { denominator } of quotients) {
    for (const [base, exponent] of denominator) common.set(base, Math.max(exponent, common.get(base) ?? 0));
  }
  const factor = pool.product([...common].map(([base, exponent]) => pool.power(base, pool.number(exponent))));
  const entries = row.map((entry) => {
    const cleared = quotientOf(pool, pool.product(factor, entry), TERM_LIMIT);
    if (cleared === null || cleared.denominator.size > 0) throw new TooManyTerms();
    return cleared.numerator;
  });
  return { entries, factor };
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
