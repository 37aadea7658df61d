import * as exact from "./exact.ts";
import { collects, type Node } from "./node.ts";
import { compareFactors } from "./order.ts";
import type { Pool } from "./pool.ts";
import { canonicalPower } from "./power.ts";
import { canonicalSum, contentOf, FLATTEN_UP_TO, scaleSum } from "./sum.ts";

interface Collected {
  coefficient: number;
  readonly bases: Node[];
  readonly exponents: Node[];
}

/**
 * Flat, the coefficient first, equal bases collected, then factors by `compareFactors`. A number times a sum is
 * multiplied out, so that sums stay flat; any other factor is not.
 */
export function canonicalProduct(pool: Pool, args: readonly Node[]): Node {
  if (args.length === 1) return args[0];
  if (args.length === 2) {
    const quick = numberTimes(pool, args[0], args[1]) ?? numberTimes(pool, args[1], args[0]);
    if (quick !== null) return quick;
  }
  const into: Collected = { coefficient: 1, bases: [], exponents: [] };
  for (const arg of args) {
    if (arg.op === "product" && arg.args.length <= FLATTEN_UP_TO)
      for (const factor of arg.args) collect(pool, into, factor);
    else collect(pool, into, arg);
  }
  if (into.coefficient === 0) return pool.zero;
  joinSigns(pool, into);
  return assemble(pool, into);
}

function numberTimes(pool: Pool, number: Node, other: Node): Node | null {
  if (number.op !== "number") return null;
  if (number.value === 0) return pool.zero;
  if (number.value === 1) return other;
  if (other.op === "number") return pool.number(exact.multiply(number.value, other.value)) as Node;
  if (other.op === "sum") return scaleSum(pool, number.value, other);
  if (other.op !== "product") return pool.intern("product", [number, other], 0, "");
  const own = other.args[0].op === "number" ? other.args[0].value : 1;
  const coefficient = exact.multiply(number.value, own);
  const factors = own === 1 ? other.args : other.args.slice(1);
  if (coefficient !== 1) return pool.intern("product", [pool.number(coefficient) as Node, ...factors], 0, "");
  return factors.length === 1 ? factors[0] : pool.intern("product", factors, 0, "");
}

function collect(pool: Pool, into: Collected, factor: Node): void {
  if (factor.op === "number") {
    into.coefficient = exact.multiply(into.coefficient, factor.value);
    return;
  }
  let base = factor;
  let exponent = pool.one;
  if (factor.op === "power") {
    if (collects(factor)) [base, exponent] = factor.args;
  } else if (factor.op === "sum") {
    const content = contentOf(factor);
    if (content !== 1) {
      into.coefficient = exact.multiply(into.coefficient, content);
      base = scaleSum(pool, exact.divide(1, content), factor);
    }
  }
  for (let i = 0; i < into.bases.length; i += 1) {
    if (into.bases[i] === base) {
      into.exponents[i] = canonicalSum(pool, [into.exponents[i], exponent]);
      return;
    }
  }
  into.bases.push(base);
  into.exponents.push(exponent);
}

function isWhole(exponent: Node): boolean {
  return exponent.op === "number" && Number.isInteger(exponent.value);
}

/** sign(x)*|x| = x and sign(x)*x = |x|: both hold for every real x, and laws of flow are full of them. */
function joinSigns(pool: Pool, into: Collected): void {
  const { bases, exponents } = into;
  for (let s = 0; s < bases.length; s += 1) {
    if (bases[s].op !== "call" || bases[s].name !== "sign" || exponents[s] !== pool.one) continue;
    const inner = bases[s].args[0];
    const modulus = pool.call("abs", inner) as Node;
    const m = bases.findIndex((base, i) => base === modulus && numberAtLeastOne(exponents[i]));
    const x = bases.findIndex(
      (base, i) => base === inner && isWhole(exponents[i]) && exponents[i].value % 2 === 1,
    );
    const found = m !== -1 ? m : x !== -1 && exponents[x].value > 0 ? x : -1;
    if (found === -1) continue;
    exponents[found] = canonicalSum(pool, [exponents[found], pool.minusOne]);
    exponents[s] = pool.zero;
    collect(pool, into, m !== -1 ? inner : modulus);
    s = -1;
  }
}

function numberAtLeastOne(exponent: Node): boolean {
  return exponent.op === "number" && exponent.value >= 1;
}

function assemble(pool: Pool, into: Collected): Node {
  let coefficient = into.coefficient;
  const factors: Node[] = [];
  let again = false;
  for (let i = 0; i < into.bases.length; i += 1) {
    const factor = canonicalPower(pool, into.bases[i], into.exponents[i]);
    if (factor.op === "number") coefficient = exact.multiply(coefficient, factor.value);
    else {
      // A collected power may fall apart again: |x|*|x| is x^2, which has to meet another x.
      again ||= factor !== into.bases[i] && (factor.op !== "power" || factor.args[0] !== into.bases[i]);
      factors.push(factor);
    }
  }
  if (coefficient === 0 || factors.length === 0) return pool.number(coefficient) as Node;
  if (again) return canonicalProduct(pool, [pool.number(coefficient) as Node, ...factors]);
  if (factors.length === 1) return canonicalProduct(pool, [pool.number(coefficient) as Node, factors[0]]);
  factors.sort(compareFactors);
  if (coefficient !== 1) factors.unshift(pool.number(coefficient) as Node);
  return pool.intern("product", factors, 0, "");
}
