import * as exact from "./exact.ts";
import type { Expr } from "./expression.ts";
import type { Node } from "./node.ts";
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
import { postorder } from "./postorder.ts";
import { contentOf, scaleSum } from "./sum.ts";

/** numerator / Π base^exponent; a base is a sum without a factor that is a number or a monomial. */
export interface Quotient {
  readonly numerator: Polynomial;
  readonly denominator: ReadonlyMap<Expr, number>;
}

const LIMIT = 300;
/** A sum of up to this many terms that stands as a factor is tried as a divisor of what comes under a fraction bar. */
const DIVISOR_UP_TO = 8;

/** The quotient of polynomials that an expression is; null where that would pass `limit` terms. */
export function quotientOf(pool: Pool, expr: Expr, limit = LIMIT): Quotient | null {
  try {
    return new Quotients(pool, limit).of(expr);
  } catch (error) {
    if (error instanceof TooManyTerms) return null;
    throw error;
  }
}

/** Quotients of expressions that share parts and denominators. Methods throw TooManyTerms past the limit. */
export class Quotients {
  readonly #pool: Pool;
  readonly #limit: number;
  readonly #known = new Map<Expr, Quotient>();
  /** Sums that stood as factors, as polynomials: where to look for common factors. */
  readonly #bases = new Map<Expr, Polynomial>();

  constructor(pool: Pool, limit: number) {
    this.#pool = pool;
    this.#limit = limit;
  }

  of(root: Expr): Quotient {
    postorder(
      [root],
      (expr) => this.#known.has(expr),
      (expr) => this.#known.set(expr, this.#from(expr)),
    );
    return this.#known.get(root) as Quotient;
  }

  /** top/bottom; null where that is a division by zero. */
  over(top: Polynomial, bottom: Polynomial): Quotient | null {
    const inverse = this.#invert({ numerator: bottom, denominator: new Map() });
    return inverse && this.#multiply({ numerator: top, denominator: new Map() }, inverse);
  }

  #from(expr: Expr): Quotient {
    const parts = () => expr.args.map((arg) => this.#known.get(arg) as Quotient);
    switch (expr.op) {
      case "number":
        return integral(new Map(expr.value === 0 ? [] : [[this.#pool.one, expr.value]]));
      case "sum":
        return this.#add(parts());
      case "product": {
        const factors = parts();
        for (const { numerator } of factors) {
          if (numerator.size > 1 && numerator.size <= DIVISOR_UP_TO) this.#primitive(numerator);
        }
        return factors.reduce((a, b) => this.#multiply(a, b));
      }
      case "power":
        return this.#power(expr);
      default:
        return integral(new Map([[expr, 1]]));
    }
  }

  #power(expr: Expr): Quotient {
    const exponent = expr.args[1];
    const asAtom = integral(new Map([[expr, 1]]));
    if (exponent.op !== "number" || !Number.isInteger(exponent.value)) return asAtom;
    if (Math.abs(exponent.value) > 64) throw new TooManyTerms();
    const base = this.#known.get(expr.args[0]) as Quotient;
    const one = exponent.value < 0 ? this.#invert(base) : base;
    if (one === null) return asAtom;
    let result = one;
    for (let i = 1; i < Math.abs(exponent.value); i += 1) result = this.#multiply(result, one);
    return result;
  }

  #add(parts: readonly Quotient[]): Quotient {
    const common = new Map<Expr, number>();
    for (const { denominator } of parts) {
      for (const [base, exponent] of denominator) common.set(base, Math.max(exponent, common.get(base) ?? 0));
    }
    let total: Polynomial = new Map();
    for (const { numerator, denominator } of parts) {
      let scaled = numerator;
      for (const [base, exponent] of common) {
        for (let i = denominator.get(base) ?? 0; i < exponent; i += 1)
          scaled = this.#times(scaled, this.#base(base));
      }
      total = addPolynomials(total, scaled);
      if (total.size > this.#limit) throw new TooManyTerms();
    }
    return this.#reduce(total, common);
  }

  #multiply(a: Quotient, b: Quotient): Quotient {
    const left = this.#reduce(a.numerator, b.denominator);
    const right = this.#reduce(b.numerator, a.denominator);
    const denominator = new Map(left.denominator);
    for (const [base, exponent] of right.denominator) {
      denominator.set(base, exponent + (denominator.get(base) ?? 0));
    }
    return { numerator: this.#times(left.numerator, right.numerator), denominator };
  }

  /** Null for 1/0. Factors that stood somewhere as sums are found again in the denominator. */
  #invert({ numerator, denominator }: Quotient): Quotient | null {
    if (numerator.size === 0) return null;
    const { front, factor, rest } = this.#primitive(numerator);
    let top: Polynomial = new Map([
      [this.#pool.power(front, this.#pool.number(-1)), exact.divide(1, factor)],
    ]);
    const bases = new Map<Expr, number>();
    let remaining = rest;
    for (const [base, polynomial] of this.#bases) {
      if (polynomial.size > DIVISOR_UP_TO) continue;
      while (remaining.size >= polynomial.size) {
        const divided = divideExactly(this.#pool, remaining, polynomial, this.#limit);
        if (divided === null) break;
        bases.set(base, (bases.get(base) ?? 0) + 1);
        remaining = divided;
      }
    }
    const last = this.#primitive(remaining);
    top = shiftPolynomial(this.#pool, top, this.#pool.power(last.front, this.#pool.number(-1)));
    if (last.factor !== 1) top = addPolynomials(new Map(), top, exact.divide(1, last.factor));
    if (last.base !== null) bases.set(last.base, (bases.get(last.base) ?? 0) + 1);
    for (const [base, exponent] of denominator) {
      for (let i = 0; i < exponent; i += 1) top = this.#times(top, this.#base(base));
    }
    return this.#reduce(top, bases);
  }

  /** numerator = factor·front·rest with `rest` = 1, or the sum `base`, which is noted as a possible divisor. */
  #primitive(numerator: Polynomial): { front: Expr; factor: number; rest: Polynomial; base: Expr | null } {
    const pool = this.#pool;
    const front = clearingMonomial(pool, numerator);
    const cleared = shiftPolynomial(pool, numerator, pool.power(front, pool.number(-1)));
    const sum = polynomialExpr(pool, cleared) as Node;
    if (sum.op !== "sum") {
      const [factor] = cleared.values();
      return { front, factor, rest: new Map([[pool.one, 1]]), base: null };
    }
    const factor = contentOf(sum);
    const base = scaleSum(pool, exact.divide(1, factor), sum);
    const rest = factor === 1 ? cleared : addPolynomials(new Map(), cleared, exact.divide(1, factor));
    this.#bases.set(base, rest);
    return { front, factor, rest, base };
  }

  /** Takes out of the numerator what it shares with the denominator. */
  #reduce(numerator: Polynomial, denominator: ReadonlyMap<Expr, number>): Quotient {
    if (numerator.size === 0) return integral(numerator);
    let top = numerator;
    const left = new Map(denominator);
    for (const [base, exponent] of denominator) {
      const divisor = this.#base(base);
      for (let remaining = exponent; remaining > 0 && top.size >= divisor.size; remaining -= 1) {
        const divided = divideExactly(this.#pool, top, divisor, this.#limit);
        if (divided === null) break;
        top = divided;
        if (remaining === 1) left.delete(base);
        else left.set(base, remaining - 1);
      }
    }
    return { numerator: top, denominator: left };
  }

  #times(a: Polynomial, b: Polynomial): Polynomial {
    return multiplyPolynomials(this.#pool, a, b, this.#limit);
  }

  #base(base: Expr): Polynomial {
    return this.#bases.get(base) as Polynomial;
  }
}

function integral(numerator: Polynomial): Quotient {
  return { numerator, denominator: new Map() };
}
