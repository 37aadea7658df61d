import * as exact from "./exact.ts";
import type { Expr } from "./expression.ts";
import { collects, type Node } from "./node.ts";
import { compareFactors } from "./order.ts";
import type { Pool } from "./pool.ts";
import { restOf } from "./sum.ts";

/** Monomials (products of atoms, without a coefficient; `one` for the constant) with their coefficients, none zero. */
export type Polynomial = ReadonlyMap<Expr, number>;

/** Thrown through the polynomial routines when a result passes the limit; never leaves this folder. */
export class TooManyTerms extends Error {}

export function addPolynomials(a: Polynomial, b: Polynomial, scale = 1): Polynomial {
  const total = new Map(a);
  for (const [monomial, coefficient] of b) accumulate(total, monomial, exact.multiply(scale, coefficient));
  return total;
}

export function multiplyPolynomials(pool: Pool, a: Polynomial, b: Polynomial, limit: number): Polynomial {
  const total = new Map<Expr, number>();
  if (a.size * b.size > 16 * limit) throw new TooManyTerms();
  for (const [x, p] of a) {
    for (const [y, q] of b) {
      const product = pool.product(x, y) as Node;
      // Atoms may meet: |x|*|x| is x^2, and sums under roots come out.
      const [rest, factor] = product.op === "sum" ? [product, 1] : split(pool, product);
      accumulate(total, rest, exact.multiply(exact.multiply(p, q), factor));
    }
  }
  if (total.size > limit) throw new TooManyTerms();
  return total;
}

function split(pool: Pool, product: Node): [Expr, number] {
  if (product.op === "number") return [pool.one, product.value];
  const rest = restOf(pool, product);
  return [rest, rest === product ? 1 : product.args[0].value];
}

function accumulate(into: Map<Expr, number>, monomial: Expr, coefficient: number): void {
  const total = exact.add(into.get(monomial) ?? 0, coefficient);
  if (total === 0) into.delete(monomial);
  else into.set(monomial, total);
}

export function polynomialExpr(pool: Pool, polynomial: Polynomial): Expr {
  const terms: Expr[] = [];
  for (const [monomial, coefficient] of polynomial)
    terms.push(pool.product(pool.number(coefficient), monomial));
  return pool.sum(terms);
}

/** a/b where the division leaves no rest, null otherwise: by leading terms in lexicographic order of the atoms. */
export function divideExactly(pool: Pool, a: Polynomial, b: Polynomial, limit: number): Polynomial | null {
  if (b.size === 1) {
    const [[monomial, coefficient]] = b;
    return divideByMonomial(pool, a, monomial, coefficient);
  }
  const lead = leadOf(b);
  const quotient = new Map<Expr, number>();
  let rest = a;
  while (rest.size > 0) {
    if (quotient.size > limit || rest.size > 4 * limit) return null;
    const top = leadOf(rest);
    const monomial = dividedMonomial(pool, top, lead);
    if (monomial === null) return null;
    const coefficient = exact.divide(rest.get(top) as number, b.get(lead) as number);
    accumulate(quotient, monomial, coefficient);
    const step = new Map(rest);
    for (const [each, factor] of b) {
      const product = pool.product(each, monomial) as Node;
      accumulate(step, product, exact.multiply(-coefficient, factor));
    }
    // Rounded coefficients may leave the leading term behind.
    step.delete(top);
    rest = step;
  }
  return quotient;
}

function divideByMonomial(pool: Pool, a: Polynomial, monomial: Expr, coefficient: number): Polynomial | null {
  const quotient = new Map<Expr, number>();
  for (const [each, factor] of a) {
    const divided = dividedMonomial(pool, each, monomial);
    if (divided === null) return null;
    quotient.set(divided, exact.divide(factor, coefficient));
  }
  return quotient;
}

function dividedMonomial(pool: Pool, a: Expr, b: Expr): Expr | null {
  if (b === pool.one) return a;
  const quotient = pool.divide(a, b) as Node;
  return factorsOf(quotient).every((factor) => exponentOf(factor) > 0) ? quotient : null;
}

/** The largest monomial that divides every term, as the factor to take out. */
export function commonMonomial(pool: Pool, polynomial: Polynomial): Expr {
  let common: Map<Expr, number> | null = null;
  for (const monomial of polynomial.keys()) {
    const powers = new Map<Expr, number>();
    for (const factor of factorsOf(monomial as Node)) powers.set(atomOf(factor), exponentOf(factor));
    if (common === null) common = powers;
    else {
      for (const [base, exponent] of common) {
        const least = Math.min(exponent, powers.get(base) ?? 0);
        if (least > 0) common.set(base, least);
        else common.delete(base);
      }
    }
    if (common.size === 0) return pool.one;
  }
  return pool.product([...(common ?? [])].map(([base, exponent]) => pool.power(base, pool.number(exponent))));
}

/** The greatest number that leaves whole coefficients; 1 where they aren't fractions. */
export function numericContent(polynomial: Polynomial): number {
  let numerator = 0;
  let denominator = 1;
  for (const coefficient of polynomial.values()) {
    const fraction = exact.fractionOf(coefficient);
    if (fraction === null) return 1;
    numerator = exact.gcd(numerator, fraction.numerator);
    denominator = (denominator / exact.gcd(denominator, fraction.denominator)) * fraction.denominator;
    if (denominator > 1e6) return 1;
  }
  return numerator === 0 ? 1 : numerator / denominator;
}

function leadOf(polynomial: Polynomial): Expr {
  let lead: Expr | null = null;
  for (const monomial of polynomial.keys()) {
    if (lead === null || compareMonomials(monomial as Node, lead as Node) > 0) lead = monomial;
  }
  return lead as Expr;
}

/** Lexicographic, the last atom in canonical order counting most. */
function compareMonomials(a: Node, b: Node): number {
  const x = factorsOf(a);
  const y = factorsOf(b);
  let i = x.length - 1;
  let j = y.length - 1;
  while (i >= 0 && j >= 0) {
    const baseX = atomOf(x[i]);
    const baseY = atomOf(y[j]);
    if (baseX !== baseY) return compareFactors(baseX, baseY);
    const difference = exponentOf(x[i]) - exponentOf(y[j]);
    if (difference !== 0) return difference;
    i -= 1;
    j -= 1;
  }
  return i - j;
}

function factorsOf(monomial: Node): readonly Node[] {
  if (monomial.op === "product") return monomial.args;
  return monomial.op === "number" ? [] : [monomial];
}

/** The exponent of a factor; a power that does not collect with others is an atom by itself. */
function exponentOf(factor: Node): number {
  return isPowerOfAtom(factor) ? factor.args[1].value : 1;
}

function atomOf(factor: Node): Node {
  return isPowerOfAtom(factor) ? factor.args[0] : factor;
}

function isPowerOfAtom(factor: Node): boolean {
  return factor.op === "power" && factor.args[1].op === "number" && collects(factor);
}
