import * as exact from "./exact.ts";
import type { Node } from "./node.ts";
import type { Pool } from "./pool.ts";
import { canonicalProduct } from "./product.ts";
import { contentOf, scaleSum } from "./sum.ts";

/** base^exponent; nothing is rewritten that holds only for one sign of the base. */
export function canonicalPower(pool: Pool, base: Node, exponent: Node): Node {
  if (exponent === pool.one) return base;
  if (exponent === pool.zero || base === pool.one) return pool.one;
  if (exponent.op !== "number") return keep(pool, base, exponent);
  const n = exponent.value;
  switch (base.op) {
    case "number": {
      const folded = exact.power(base.value, n);
      return folded === null ? keep(pool, base, exponent) : (pool.number(folded) as Node);
    }
    case "power":
      return powerOfPower(pool, base, exponent);
    case "product":
      return Number.isInteger(n)
        ? distribute(pool, base.args, exponent)
        : rootOfProduct(pool, base, exponent);
    case "sum":
      return powerOfSum(pool, base, exponent);
    case "call":
      if (base.name === "abs" && n % 2 === 0) return canonicalPower(pool, base.args[0], exponent);
      return keep(pool, base, exponent);
    default:
      return keep(pool, base, exponent);
  }
}

/**
 * Odd halves are whole powers of the root, which collect: sqrt(x)*x^(-3/2) = sqrt(x)^(-2); none of them is a number for
 * x < 0. Where x can't be negative its own powers collect.
 */
function keep(pool: Pool, base: Node, exponent: Node): Node {
  const twice = exponent.op === "number" && !base.nonNegative ? 2 * exponent.value : 0;
  if (Number.isInteger(twice) && twice % 2 !== 0 && twice !== 1) {
    const root = pool.intern("power", [base, pool.number(0.5) as Node], 0, "");
    return pool.intern("power", [root, pool.number(twice) as Node], 0, "");
  }
  return pool.intern("power", [base, exponent], 0, "");
}

/**
 * (x^a)^b = x^(a*b) where a and b are whole, or where x is known not to be negative. Of the rest,
 * (x^2)^(1/2) = |x| holds for every x; (x^(1/2))^2 stays, since it isn't a number for x < 0 and x is.
 */
function powerOfPower(pool: Pool, base: Node, exponent: Node): Node {
  const [inner, first] = base.args;
  if (first.op !== "number") return keep(pool, base, exponent);
  const whole = Number.isInteger(first.value) && Number.isInteger(exponent.value);
  const joined = pool.number(exact.multiply(first.value, exponent.value)) as Node;
  if (whole || inner.nonNegative) return canonicalPower(pool, inner, joined);
  if (first.value % 2 === 0) return canonicalPower(pool, pool.call("abs", inner) as Node, joined);
  return keep(pool, base, exponent);
}

function distribute(pool: Pool, factors: readonly Node[], exponent: Node): Node {
  return canonicalProduct(
    pool,
    factors.map((factor) => canonicalPower(pool, factor, exponent)),
  );
}

/** Only factors that can't be negative may leave a root on their own. */
function rootOfProduct(pool: Pool, base: Node, exponent: Node): Node {
  const outside: Node[] = [];
  const inside: Node[] = [];
  for (const factor of base.args) {
    if (factor.nonNegative) outside.push(factor);
    else if (factor.op === "number" && factor.value !== -1) {
      outside.push(pool.number(-factor.value) as Node);
      inside.push(pool.minusOne);
    } else inside.push(factor);
  }
  if (outside.length === 0) return keep(pool, base, exponent);
  const rest = canonicalProduct(pool, inside);
  return canonicalProduct(pool, [
    ...outside.map((factor) => canonicalPower(pool, factor, exponent)),
    rest.op === "product" ? keep(pool, rest, exponent) : canonicalPower(pool, rest, exponent),
  ]);
}

function powerOfSum(pool: Pool, base: Node, exponent: Node): Node {
  const content = Number.isInteger(exponent.value) ? contentOf(base) : Math.abs(contentOf(base));
  if (content === 1) return keep(pool, base, exponent);
  const factor = exact.power(content, exponent.value);
  if (factor === null) return keep(pool, base, exponent);
  const primitive = scaleSum(pool, exact.divide(1, content), base);
  return canonicalProduct(pool, [pool.number(factor) as Node, keep(pool, primitive, exponent)]);
}
