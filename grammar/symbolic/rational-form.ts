import { evaluate } from "./evaluate.ts";
import type { Expr, Symbol } from "./expression.ts";
import {
  addPolynomials,
  commonMonomial,
  divideExactly,
  multiplyPolynomials,
  numericContent,
  type Polynomial,
  polynomialExpr,
  TooManyTerms,
} from "./polynomial.ts";
import type { Pool } from "./pool.ts";
import { postorder } from "./postorder.ts";
import { symbolsOf } from "./symbols.ts";

/** numerator / Π base^exponent; a base is a polynomial without a factor that is a number or a monomial, or an atom. */
export interface Quotient {
  readonly numerator: Polynomial;
  readonly denominator: ReadonlyMap<Expr, number>;
}

const LIMIT = 300;

/**
 * One fraction, its numerator multiplied out, common factors cancelled as far as exact division finds them. Atoms
 * (symbols, calls, roots, conditions) count as independent. Null where it would pass `limit` terms.
 */
export function rationalForm(pool: Pool, expr: Expr, limit = LIMIT): Expr | null {
  const quotient = quotientOf(pool, expr, limit);
  return quotient === null ? null : quotientExpr(pool, quotient);
}

export function quotientOf(pool: Pool, expr: Expr, limit = LIMIT): Quotient | null {
  try {
    return new Quotients(pool, limit).of(expr);
  } catch (error) {
    if (error instanceof TooManyTerms) return null;
    throw error;
  }
}

export function quotientExpr(pool: Pool, { numerator, denominator }: Quotient): Expr {
  const factors = [...denominator].map(([base, exponent]) => pool.power(base, pool.number(-exponent)));
  const common = commonMonomial(pool, numerator);
  if (common === pool.one) return pool.product(polynomialExpr(pool, numerator), ...factors);
  const rest = divideExactly(pool, numerator, new Map([[common, 1]]), numerator.size);
  const top = rest === null ? [polynomialExpr(pool, numerator)] : [common, polynomialExpr(pool, rest)];
  return pool.product(...top, ...factors);
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

function differAtSomePoint(a: Expr, b: Expr): boolean {
  const symbols = [...symbolsOf(a, b)].sort((x, y) => (x.name < y.name ? -1 : 1));
  let seed = 1;
  // A generator with a fixed start (Park and Miller's constants, from memory), so that the answer never changes.
  const random = () => {
    seed = (seed * 48271) % 2147483647;
    return seed / 2147483647;
  };
  for (let trial = 0; trial < 24; trial += 1) {
    const values = new Map<Symbol, number>();
    for (const symbol of symbols)
      values.set(symbol, (0.2 + 1.6 * random()) * (trial % 3 === 2 && random() < 0.5 ? -1 : 1));
    const lookup = (symbol: Symbol) => values.get(symbol) as number;
    const [x, y] = [evaluate(a, lookup), evaluate(b, lookup)];
    if (Number.isFinite(x) && Number.isFinite(y) && Math.abs(x - y) > 1e-7 * (Math.abs(x) + Math.abs(y)))
      return true;
  }
  return false;
}

class Quotients {
  readonly #pool: Pool;
  readonly #limit: number;
  readonly #known = new Map<Expr, Quotient>();
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

  #from(expr: Expr): Quotient {
    const parts = () => expr.args.map((arg) => this.#known.get(arg) as Quotient);
    switch (expr.op) {
      case "number":
        return {
          numerator: new Map(expr.value === 0 ? [] : [[this.#pool.one, expr.value]]),
          denominator: new Map(),
        };
      case "sum":
        return this.#add(parts());
      case "product":
        return parts().reduce((a, b) => this.#multiply(a, b));
      case "power": {
        const exponent = expr.args[1];
        if (exponent.op !== "number" || !Number.isInteger(exponent.value)) return this.#atom(expr);
        if (Math.abs(exponent.value) > 64) throw new TooManyTerms();
        const base = this.#known.get(expr.args[0]) as Quotient;
        let result = exponent.value < 0 ? this.#invert(base) : base;
        const one = result;
        if (result === null) return this.#atom(expr);
        for (let i = 1; i < Math.abs(exponent.value); i += 1)
          result = this.#multiply(result, one as Quotient);
        return result;
      }
      default:
        return this.#atom(expr);
    }
  }

  #atom(expr: Expr): Quotient {
    return { numerator: new Map([[expr, 1]]), denominator: new Map() };
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

  /** Null for 1/0. */
  #invert({ numerator, denominator }: Quotient): Quotient | null {
    if (numerator.size === 0) return null;
    const pool = this.#pool;
    const monomial = commonMonomial(pool, numerator);
    const content = numericContent(numerator);
    const rest = divideExactly(pool, numerator, new Map([[monomial, content]]), this.#limit);
    if (rest === null) return null;
    const bases = new Map<Expr, number>();
    const factors = monomial.op === "product" ? monomial.args : [monomial];
    for (const factor of factors) {
      if (factor === pool.one) continue;
      const raised =
        factor.op === "power" && factor.args[1].op === "number" && Number.isInteger(factor.args[1].value);
      const base = raised ? factor.args[0] : factor;
      bases.set(base, (bases.get(base) ?? 0) + (raised ? factor.args[1].value : 1));
    }
    let sign = 1;
    if (rest.size > 1) {
      let base = polynomialExpr(pool, rest);
      // The sign under which the sum stands as a factor: one base for a - b and b - a.
      const positive = pool.power(pool.negate(base), pool.number(2)).args[0];
      if (positive !== base) {
        sign = -1;
        base = positive;
      }
      this.#bases.set(base, sign === 1 ? rest : addPolynomials(new Map(), rest, -1));
      bases.set(base, 1);
    } else sign = [...rest.values()][0];
    let top: Polynomial = new Map([[pool.one, sign / content]]);
    for (const [base, exponent] of denominator) {
      for (let i = 0; i < exponent; i += 1) top = this.#times(top, this.#base(base));
    }
    return this.#reduce(top, bases);
  }

  /** Takes out of the numerator what it shares with the denominator. */
  #reduce(numerator: Polynomial, denominator: ReadonlyMap<Expr, number>): Quotient {
    if (numerator.size === 0) return { numerator, denominator: new Map() };
    let top = numerator;
    const left = new Map(denominator);
    for (const [base, exponent] of denominator) {
      for (let remaining = exponent; remaining > 0; remaining -= 1) {
        const divided = divideExactly(this.#pool, top, this.#base(base), this.#limit);
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
    return this.#bases.get(base) ?? new Map([[base, 1]]);
  }
}
