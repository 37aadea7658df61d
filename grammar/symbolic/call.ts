import { applyFunction } from "./evaluate.ts";
import { divide, fractionOf } from "./exact.ts";
import type { FunctionName } from "./expression.ts";
import { coefficientOf, type Node } from "./node.ts";
import { compareFactors } from "./order.ts";
import type { Pool } from "./pool.ts";
import { contentOf, scaleSum } from "./sum.ts";

/** f(-x) = -f(x). */
const ODD: ReadonlySet<FunctionName> = new Set(["sin", "tan", "asin", "atan", "sinh", "tanh", "sign"]);
/** f(-x) = f(x). */
const EVEN: ReadonlySet<FunctionName> = new Set(["cos", "cosh", "abs"]);

/** A function's value, with constants folded where that is exact, and odd and even functions of an argument of one sign only. */
export function canonicalCall(pool: Pool, fn: FunctionName, args: readonly Node[]): Node {
  if (fn === "sqrt") return pool.power(args[0], pool.number(0.5)) as Node;
  if (fn === "min" || fn === "max") return extremum(pool, fn, args);
  if (args.every((arg) => arg.op === "number")) {
    const values = args.map((arg) => arg.value);
    const value = applyFunction(fn, values);
    // sin(1) stays: rounded constants would make sums depend on the order in which they are added.
    if (fractionOf(value) !== null) return pool.number(value) as Node;
  }
  if (args.length > 1) return pool.intern("call", args, 0, fn);
  const x = args[0];
  if (fn === "abs") return modulus(pool, x);
  if (fn === "sign") return signum(pool, x);
  if ((ODD.has(fn) || EVEN.has(fn)) && startsNegative(x)) {
    const turned = pool.intern("call", [pool.negate(x) as Node], 0, fn);
    return ODD.has(fn) ? (pool.negate(turned) as Node) : turned;
  }
  return pool.intern("call", [x], 0, fn);
}

function startsNegative(x: Node): boolean {
  return coefficientOf(x.op === "sum" ? x.args[0] : x) < 0;
}

/** |a*b| = |a|*|b|; what can't be negative is its own modulus. */
function modulus(pool: Pool, x: Node): Node {
  if (x.nonNegative) return x;
  if (x.op === "product") return pool.product(x.args.map((factor) => pool.call("abs", factor))) as Node;
  if (x.op === "power" && x.args[1].op === "number")
    return pool.power(modulus(pool, x.args[0]), x.args[1]) as Node;
  if (x.op === "number") return pool.number(Math.abs(x.value)) as Node;
  const content = x.op === "sum" ? contentOf(x) : 1;
  const inner = content === 1 ? x : scaleSum(pool, divide(1, content), x);
  const value = inner.nonNegative ? inner : pool.intern("call", [inner], 0, "abs");
  return pool.product(pool.number(Math.abs(content)), value) as Node;
}

/** A positive number may leave a sign; what is merely not negative may not, since it may be 0. */
function signum(pool: Pool, x: Node): Node {
  if (x.op === "call" && x.name === "sign") return x;
  if (x.op === "product" && x.args[0].op === "number") {
    const rest = pool.product(x.args.slice(1));
    return pool.product(pool.number(Math.sign(x.args[0].value)), pool.call("sign", rest)) as Node;
  }
  if (startsNegative(x)) return pool.negate(pool.intern("call", [pool.negate(x) as Node], 0, "sign")) as Node;
  return pool.intern("call", [x], 0, "sign");
}

function extremum(pool: Pool, fn: "min" | "max", args: readonly Node[]): Node {
  const others = new Set<Node>();
  let number: number | null = null;
  for (const arg of args.flatMap((each) => (each.op === "call" && each.name === fn ? each.args : [each]))) {
    if (arg.op !== "number") others.add(arg);
    else number = number === null ? arg.value : Math[fn](number, arg.value);
  }
  const sorted = [...others].sort(compareFactors);
  if (number !== null) sorted.unshift(pool.number(number) as Node);
  return sorted.length === 1 ? sorted[0] : pool.intern("call", sorted, 0, fn);
}
