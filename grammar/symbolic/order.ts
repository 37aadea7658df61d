import { type Curve, compareCurves } from "./curve.ts";
import type { Operator } from "./expression.ts";
import { compareNames } from "./names.ts";
import { baseOf, type Node } from "./node.ts";

/**
 * The canonical order of factors and terms. It looks at names and structure only, never at identities, so that
 * equal models give equal text in whatever order they were built. Different nodes are different in structure
 * (the pool sees to that), and equal arguments are one node: a comparison walks down one path only.
 */
const OPERATOR_RANK: Record<Operator, number> = {
  number: 0,
  symbol: 1,
  power: 2,
  product: 3,
  sum: 4,
  call: 5,
  curve: 6,
  where: 7,
  compare: 8,
  and: 9,
  or: 10,
  not: 11,
};

/** Factors of a product: by the highest role in them, then by base, then by exponent. */
export function compareFactors(first: Node, second: Node): number {
  let a = first;
  let b = second;
  for (;;) {
    if (a === b) return 0;
    if (a.rank !== b.rank) return a.rank - b.rank;
    const baseA = baseOf(a);
    const baseB = baseOf(b);
    if (baseA === baseB) {
      if (a.op !== "power") return exponentOrder(b, -1);
      if (b.op !== "power") return exponentOrder(a, 1);
      a = a.args[1];
      b = b.args[1];
      continue;
    }
    if (a.op === "power" || b.op === "power") {
      a = baseA;
      b = baseB;
      continue;
    }
    if (a.op !== b.op) return OPERATOR_RANK[a.op] - OPERATOR_RANK[b.op];
    if (a.op === "number") return a.value - b.value;
    if (a.name !== b.name) return compareNames(a.name, b.name);
    if (a.op === "curve") {
      if (a.value !== b.value) return a.value - b.value;
      if (a.curve !== b.curve) return compareCurves(a.curve as Curve, b.curve as Curve);
    }
    if (a.args.length !== b.args.length) return a.args.length - b.args.length;
    let i = 0;
    while (a.args[i] === b.args[i]) i += 1;
    [a, b] = [a.args[i], b.args[i]];
  }
}

/** The order of x^n beside x, with `sign` for which of the two stands first. */
function exponentOrder(power: Node, sign: 1 | -1): number {
  const exponent = power.args[1];
  return exponent.op === "number" && exponent.value < 1 ? -sign : sign;
}

/**
 * Terms of a sum, coefficients apart: by their last factors first, so that what hangs on the same state stands
 * together, and inputs stand before states.
 */
export function compareTerms(a: Node, b: Node): number {
  const factorsA = a.op === "product" ? a.args : null;
  const factorsB = b.op === "product" ? b.args : null;
  let i = factorsA === null ? 0 : factorsA.length - 1;
  let j = factorsB === null ? 0 : factorsB.length - 1;
  for (;;) {
    const order = compareFactors(factorsA === null ? a : factorsA[i], factorsB === null ? b : factorsB[j]);
    if (order !== 0) return order;
    i -= 1;
    j -= 1;
    if (i < 0 || j < 0) return i - j;
  }
}
