import * as exact from "./exact.ts";
import { coefficientOf, type Node } from "./node.ts";
import { compareTerms } from "./order.ts";
import type { Pool } from "./pool.ts";

/**
 * A nested sum (or product) longer than this stays one term (or factor): a chain of ten thousand sums, each longer
 * by one than the next, would otherwise take time and memory with the square of its length.
 */
export const FLATTEN_UP_TO = 128;
/** Up to this many terms, looking through a list is cheaper than a map. */
const SHORT = 10;

interface Collected {
  constant: number;
  readonly rests: Node[];
  readonly coefficients: number[];
  places: Map<Node, number> | null;
}

/** Flat, like terms collected, the constant first, then terms by `compareTerms`. */
export function canonicalSum(pool: Pool, args: readonly Node[]): Node {
  if (args.length === 1) return args[0];
  const into: Collected = { constant: 0, rests: [], coefficients: [], places: null };
  for (const arg of args) {
    if (arg.op === "sum" && arg.args.length <= FLATTEN_UP_TO)
      for (const term of arg.args) collect(pool, into, term);
    else collect(pool, into, arg);
  }
  joinSquares(pool, into);
  const order: number[] = [];
  for (let i = 0; i < into.rests.length; i += 1) if (into.coefficients[i] !== 0) order.push(i);
  order.sort((i, j) => compareTerms(into.rests[i], into.rests[j]));
  const terms = order.map((i) => scaleTerm(pool, into.coefficients[i], into.rests[i]));
  if (into.constant !== 0) terms.unshift(pool.number(into.constant) as Node);
  if (terms.length === 0) return pool.zero;
  return terms.length === 1 ? terms[0] : pool.intern("sum", terms, 0, "");
}

function collect(pool: Pool, into: Collected, term: Node): void {
  if (term.op === "number") {
    into.constant = exact.add(into.constant, term.value);
    return;
  }
  const coefficient = coefficientOf(term);
  const rest = coefficient === 1 ? term : restOf(pool, term);
  const at = placeOf(into, rest);
  if (at === -1) {
    into.places?.set(rest, into.rests.length);
    into.rests.push(rest);
    into.coefficients.push(coefficient);
  } else {
    into.coefficients[at] = exact.add(into.coefficients[at], coefficient);
  }
}

function placeOf(into: Collected, rest: Node): number {
  if (into.places === null) {
    if (into.rests.length <= SHORT) return into.rests.indexOf(rest);
    into.places = new Map(into.rests.map((known, i) => [known, i]));
  }
  return into.places.get(rest) ?? -1;
}

/** a*sin(x)^2 + a*cos(x)^2 = a, term by term: what a rotation into two directions leaves. */
function joinSquares(pool: Pool, into: Collected): void {
  for (let i = 0; i < into.rests.length; i += 1) {
    const rest = into.rests[i];
    const coefficient = into.coefficients[i];
    if (!rest.sineSquared || coefficient === 0) continue;
    const factors = rest.op === "product" ? rest.args : [rest];
    const sine = factors.find((factor) => factor.op === "power" && factor.sineSquared) as Node;
    const cosine = pool.power(pool.call("cos", sine.args[0].args[0]), sine.args[1]) as Node;
    const partner = placeOf(into, pool.product(cosine, ...factors.filter((each) => each !== sine)) as Node);
    if (partner === -1 || into.coefficients[partner] !== coefficient) continue;
    into.coefficients[i] = 0;
    into.coefficients[partner] = 0;
    const joined = pool.product(pool.number(coefficient), ...factors.filter((each) => each !== sine)) as Node;
    collect(pool, into, joined);
  }
}

/** A term without its numeric coefficient. */
export function restOf(pool: Pool, term: Node): Node {
  if (term.op !== "product" || term.args[0].op !== "number") return term;
  return term.args.length === 2 ? term.args[1] : pool.intern("product", term.args.slice(1), 0, "");
}

/** coefficient * rest, where `rest` is canonical and has no coefficient of its own. */
function scaleTerm(pool: Pool, coefficient: number, rest: Node): Node {
  if (coefficient === 1) return rest;
  const factor = pool.number(coefficient) as Node;
  const factors = rest.op === "product" ? [factor, ...rest.args] : [factor, rest];
  return pool.intern("product", factors, 0, "");
}

/** factor * sum, term by term; the order of terms does not depend on coefficients, so it stays. */
export function scaleSum(pool: Pool, factor: number, sum: Node): Node {
  if (factor === 1) return sum;
  if (factor === 0) return pool.zero;
  const terms = sum.args.map((term) =>
    term.op === "number"
      ? (pool.number(exact.multiply(factor, term.value)) as Node)
      : scaleTerm(pool, exact.multiply(factor, coefficientOf(term)), restOf(pool, term)),
  );
  return pool.intern("sum", terms, 0, "");
}

/**
 * The numeric factor to take out of a sum that stands as a factor or under a power, so that 1/(2a + 2b) and
 * 1/2/(a + b) are one: the greatest common factor of the coefficients, with the sign of the first term.
 */
export function contentOf(sum: Node): number {
  let numerator = 0;
  let denominator = 1;
  const sign = coefficientOf(sum.args[0]) < 0 ? -1 : 1;
  for (const term of sum.args) {
    const fraction = exact.fractionOf(coefficientOf(term));
    if (fraction === null) return sign;
    numerator = exact.gcd(numerator, fraction.numerator);
    denominator = (denominator / exact.gcd(denominator, fraction.denominator)) * fraction.denominator;
    if (denominator > 1e6) return sign;
  }
  return (sign * numerator) / denominator;
}
