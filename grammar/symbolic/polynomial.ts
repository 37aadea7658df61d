import * as exact from "./exact.ts";
import type { Expr } from "./expression.ts";
import { coefficientOf, collects, type Node } from "./node.ts";
import { compareFactors } from "./order.ts";
import type { Pool } from "./pool.ts";
import { restOf } from "./sum.ts";

/**
 * Monomials (products of atoms to whole powers, also negative ones, without a coefficient; `one` for the constant) with
 * their coefficients, none zero.
 */
export type Polynomial = ReadonlyMap<Expr, number>;

/** Thrown through the polynomial routines when a result passes the limit; never leaves this folder. */
export class TooManyTerms extends Error {}

export function addPolynomials(a: Polynomial, b: Polynomial, scale = 1): Polynomial {
  const total = new Map(a);
  for (const [monomial, coefficient] of b) accumulate(total, monomial, exact.multiply(scale, coefficient));
  return total;
}

export function multiplyPolynomials(pool: Pool, a: Polynomial, b: Polynomial, limit: number): Polynomial {
  if (a.size * b.size > 16 * limit) throw new TooManyTerms();
  const total = new Map<Expr, number>();
  for (const [x, p] of a) {
    for (const [y, q] of b) accumulateProduct(pool, total, x, y, exact.multiply(p, q));
  }
  if (total.size > limit) throw new TooManyTerms();
  return total;
}

/** Atoms may meet and leave a coefficient: sqrt(2)*sqrt(2) is 2. */
function accumulateProduct(pool: Pool, into: Map<Expr, number>, x: Expr, y: Expr, coefficient: number): void {
  if (x === pool.one) accumulate(into, y, coefficient);
  else if (y === pool.one) accumulate(into, x, coefficient);
  else {
    const product = pool.product(x, y) as Node;
    const factor = coefficientOf(product);
    const rest = product.op === "number" ? pool.one : restOf(pool, product);
    accumulate(into, rest, factor === 1 ? coefficient : exact.multiply(coefficient, factor));
  }
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

/**
 * a/b where the division leaves no rest, null otherwise: by leading terms in lexicographic order of the atoms. Since
 * exponents may be negative, monomials divide everything, and are taken out of both first.
 */
export function divideExactly(pool: Pool, a: Polynomial, b: Polynomial, limit: number): Polynomial | null {
  const [frontA, rest] = cleared(pool, a);
  const [frontB, divisor] = cleared(pool, b);
  const lead = leadOf(divisor);
  const top = divisor.get(lead) as number;
  const quotient = new Map<Expr, number>();
  while (rest.size > 0) {
    if (quotient.size > limit || rest.size > 4 * limit) return null;
    const first = leadOf(rest);
    const monomial = pool.divide(first, lead);
    if (!factorsOf(monomial as Node).every((factor) => exponentOf(factor) > 0)) return null;
    const coefficient = exact.divide(rest.get(first) as number, top);
    accumulate(quotient, monomial, coefficient);
    for (const [each, factor] of divisor) {
      accumulateProduct(pool, rest, each, monomial, exact.multiply(-coefficient, factor));
    }
    // Rounded coefficients may leave the leading term behind.
    rest.delete(first);
  }
  return shiftPolynomial(pool, quotient, pool.divide(frontA, frontB));
}

function cleared(pool: Pool, polynomial: Polynomial): [front: Expr, rest: Map<Expr, number>] {
  const front = clearingMonomial(pool, polynomial);
  return [front, new Map(shiftPolynomial(pool, polynomial, pool.power(front, pool.number(-1))))];
}

export function shiftPolynomial(pool: Pool, polynomial: Polynomial, monomial: Expr): Polynomial {
  if (monomial === pool.one) return polynomial;
  const shifted = new Map<Expr, number>();
  for (const [each, coefficient] of polynomial) accumulateProduct(pool, shifted, each, monomial, coefficient);
  return shifted;
}

/** The monomial that, divided out, leaves no negative exponent and no factor common to all terms. */
export function clearingMonomial(pool: Pool, ...polynomials: readonly Polynomial[]): Expr {
  return monomialOf(pool, exponentRanges(polynomials), ([least]) => least);
}

/** The monomial that all terms share: what may stand in front of them, or below them, without making them longer. */
export function sharedMonomial(pool: Pool, polynomial: Polynomial): Expr {
  return monomialOf(pool, exponentRanges([polynomial]), ([least, most]) =>
    least > 0 ? least : Math.min(most, 0),
  );
}

type Ranges = ReadonlyMap<Expr, readonly [least: number, most: number]>;

function monomialOf(pool: Pool, ranges: Ranges, choose: (range: readonly [number, number]) => number): Expr {
  const factors: Expr[] = [];
  for (const [atom, range] of ranges) {
    const exponent = choose(range);
    if (exponent !== 0) factors.push(pool.power(atom, pool.number(exponent)));
  }
  return pool.product(factors);
}

/** Of each atom the least and the greatest exponent; 0 where a term lacks it. */
function exponentRanges(polynomials: readonly Polynomial[]): Ranges {
  const ranges = new Map<Expr, readonly [number, number]>();
  const counts = new Map<Expr, number>();
  let terms = 0;
  for (const polynomial of polynomials) {
    for (const monomial of polynomial.keys()) {
      terms += 1;
      for (const factor of factorsOf(monomial as Node)) {
        const atom = atomOf(factor);
        const exponent = exponentOf(factor);
        const [least, most] = ranges.get(atom) ?? [exponent, exponent];
        ranges.set(atom, [Math.min(least, exponent), Math.max(most, exponent)]);
        counts.set(atom, (counts.get(atom) ?? 0) + 1);
      }
    }
  }
  for (const [atom, [least, most]] of ranges) {
    if (counts.get(atom) !== terms) ranges.set(atom, [Math.min(least, 0), Math.max(most, 0)]);
  }
  return ranges;
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
