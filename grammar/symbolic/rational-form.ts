import { evaluate } from "./evaluate.ts";
import type { Expr, Symbol } from "./expression.ts";
import { clearingMonomial, polynomialExpr, sharedMonomial, shiftPolynomial } from "./polynomial.ts";
import type { Pool } from "./pool.ts";
import { type Quotient, quotientOf } from "./quotient.ts";
import { symbolsOf } from "./symbols.ts";

/**
 * One fraction, its numerator multiplied out, common factors cancelled as far as exact division finds them. Atoms
 * (symbols, calls, roots, conditions) count as independent. Null where it would pass `limit` terms.
 */
export function rationalForm(pool: Pool, expr: Expr, limit?: number): Expr | null {
  const quotient = quotientOf(pool, expr, limit);
  return quotient === null ? null : withFront(pool, quotient, clearingMonomial(pool, quotient.numerator));
}

/**
 * As `rationalForm`, but only sums stand under the common fraction bar: (u - R*p/L)/(1 + a) stays, where one fraction
 * would be (L*u - R*p)/(L*(1 + a)).
 */
export function collectedForm(pool: Pool, expr: Expr, limit?: number): Expr | null {
  const quotient = quotientOf(pool, expr, limit);
  return quotient === null ? null : withFront(pool, quotient, sharedMonomial(pool, quotient.numerator));
}

/** What has to be zero where the expression is: its numerator as one polynomial. */
export function numeratorOf(pool: Pool, expr: Expr): Expr | null {
  const quotient = quotientOf(pool, expr);
  if (quotient === null) return null;
  const front = clearingMonomial(pool, quotient.numerator);
  return polynomialExpr(pool, shiftPolynomial(pool, quotient.numerator, pool.power(front, pool.number(-1))));
}

function withFront(pool: Pool, { numerator, denominator }: Quotient, front: Expr): Expr {
  const rest = shiftPolynomial(pool, numerator, pool.power(front, pool.number(-1)));
  const below = [...denominator].map(([base, exponent]) => pool.power(base, pool.number(-exponent)));
  return pool.product(front, polynomialExpr(pool, rest), ...below);
}

/**
 * Whether two expressions agree wherever both are defined: true by algebra, false by a point at which they differ,
 * null where neither settles it.
 */
export function equivalent(pool: Pool, a: Expr, b: Expr): boolean | null {
  if (a === b) return true;
  const difference = quotientOf(pool, pool.subtract(a, b));
  if (difference !== null && difference.numerator.size === 0) return true;
  return differAtSomePoint(a, b) ? false : null;
}

const POINTS = 24;

function differAtSomePoint(a: Expr, b: Expr): boolean {
  const symbols = [...symbolsOf(a, b)].sort((x, y) => (x.name < y.name ? -1 : 1));
  let seed = 1;
  // A generator with a fixed start (Park and Miller's constants, from memory), so that the answer never changes.
  const random = () => {
    seed = (seed * 48271) % 2147483647;
    return seed / 2147483647;
  };
  for (let point = 0; point < POINTS; point += 1) {
    const values = new Map<Symbol, number>();
    for (const symbol of symbols) {
      const sign = point % 3 === 2 && random() < 0.5 ? -1 : 1;
      values.set(symbol, sign * (0.2 + 1.6 * random()));
    }
    const lookup = (symbol: Symbol) => values.get(symbol) as number;
    const [x, y] = [evaluate(a, lookup), evaluate(b, lookup)];
    const differ = Math.abs(x - y) > 1e-7 * (Math.abs(x) + Math.abs(y));
    if (Number.isFinite(x) && Number.isFinite(y) && differ) return true;
  }
  return false;
}
