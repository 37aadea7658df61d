import type { Expr } from "../symbolic/expression.ts";
import type { Factor, Power, Quotient } from "./shape.ts";

/**
 * `c_d*sqrt(2*abs(dp)/rho)` for `sqrt(2)*c_d*sqrt(1/rho)*sqrt(abs(dp))`. Of the radicands one at most may be of unknown
 * sign: two negative ones have no roots, though their product has.
 */
export function joinRoots(shape: Quotient, quotientOf: (radicand: Expr) => Quotient): Quotient {
  const isRoot = (factor: Factor): factor is Power => factor.kind === "power" && factor.exponent === 0.5;
  const roots = [...shape.above, ...shape.below].filter(isRoot);
  const unknown = roots.find(({ base }) => !base.nonNegative);
  const joined = new Set<Factor>(roots.filter((root) => root === unknown || root.base.nonNegative));
  if (joined.size < 2) return shape;
  const of = (factors: readonly Factor[]) =>
    factors.flatMap((factor) => (joined.has(factor) && isRoot(factor) ? [quotientOf(factor.base)] : []));
  const [above, below] = [of(shape.above), of(shape.below)];
  // Below a stroke alone the root stays below: x/sqrt(a*b).
  const radicand = above.length > 0 ? multiplied(above, below) : multiplied(below, []);
  const root: Factor = { kind: "root", of: joinModuli(radicand) };
  return above.length > 0
    ? { ...shape, above: inPlaceOfLast(shape.above, joined, root), below: without(shape.below, joined) }
    : { ...shape, below: inPlaceOfLast(shape.below, joined, root) };
}

/** `abs(g0*rho*q/A)` for `abs(g0)*abs(rho)*abs(q)/abs(A)`. */
export function joinModuli(shape: Quotient): Quotient {
  const isModulus = (factor: Factor): factor is Power =>
    factor.kind === "power" &&
    factor.exponent === 1 &&
    factor.base.op === "call" &&
    factor.base.name === "abs";
  const inside = (factors: readonly Factor[]): Factor[] =>
    factors
      .filter(isModulus)
      .map(({ base }) => ({ kind: "power", base: base.args[0], exponent: 1, turned: false }));
  const [above, below] = [inside(shape.above), inside(shape.below)];
  if (above.length + below.length < 2 || above.length === 0) return shape;
  const joined = new Set<Factor>([...shape.above, ...shape.below].filter(isModulus));
  const of = { negative: false, coefficient: 1, divisor: 1, above, below };
  return {
    ...shape,
    above: inPlaceOfLast(shape.above, joined, { kind: "modulus", of }),
    below: without(shape.below, joined),
  };
}

function multiplied(above: readonly Quotient[], below: readonly Quotient[]): Quotient {
  const product = (values: readonly number[]) => values.reduce((all, value) => all * value, 1);
  return {
    negative: [...above, ...below].filter(({ negative }) => negative).length % 2 === 1,
    coefficient: product([...above.map((q) => q.coefficient), ...below.map((q) => q.divisor)]),
    divisor: product([...above.map((q) => q.divisor), ...below.map((q) => q.coefficient)]),
    above: [...above.flatMap((q) => q.above), ...below.flatMap((q) => q.below)],
    below: [...above.flatMap((q) => q.below), ...below.flatMap((q) => q.above)],
  };
}

function inPlaceOfLast(factors: readonly Factor[], joined: ReadonlySet<Factor>, by: Factor): Factor[] {
  const last = factors.findLastIndex((factor) => joined.has(factor));
  return factors.flatMap((factor, i) => (i === last ? [by] : joined.has(factor) ? [] : [factor]));
}

function without(factors: readonly Factor[], joined: ReadonlySet<Factor>): Factor[] {
  return factors.filter((factor) => !joined.has(factor));
}
