import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { turnRound } from "../../grammar/symbolic/turn.ts";
import { shown } from "./random.ts";

const pool = new Pool();
const [a, b, c] = ["a", "b", "c"].map((name) => pool.symbol("parameter", name));
const x = pool.symbol("flow", "x");
const y = pool.symbol("effort", "y");
const n = (value: number) => pool.number(value);
const abs = (z: Expr) => pool.call("abs", z);
const sign = (z: Expr) => pool.call("sign", z);
const root = (z: Expr) => pool.call("sqrt", z);
const times = (...factors: Expr[]) => pool.product(...factors);
const plus = (...terms: Expr[]) => pool.sum(...terms);
const shifted = plus(times(n(2), x), times(n(-2), c));

const laws: [string, Expr][] = [
  ["a*x", times(a, x)],
  ["a*(x - c) + b", plus(times(a, pool.subtract(x, c)), b)],
  ["a*x*|x| + c", plus(times(a, x, abs(x)), c)],
  ["a*sign(x)*sqrt|x|", times(a, sign(x), root(abs(x)))],
  ["a*sign(x)*x^2", times(a, sign(x), x, x)],
  ["a*x^3", times(a, pool.power(x, n(3)))],
  ["sign(x)*|x|^(1/3)", times(sign(x), pool.power(abs(x), pool.rational(1, 3)))],
  ["a*(2x - 2c)*|2x - 2c|", times(a, shifted, abs(shifted))],
  ["a*x + b*x*|x|", plus(times(a, x), times(b, x, abs(x)))],
  ["-a*x - b*x*|x| + c", plus(times(n(-1), a, x), times(n(-1), b, x, abs(x)), c)],
  ["a*x + b*sign(x)*sqrt|x|", plus(times(a, x), times(b, sign(x), root(abs(x))))],
  ["a*x + b*x^3", plus(times(a, x), times(b, pool.power(x, n(3))))],
  [
    "a*x*(|x| where c > 0 else 2) is affine in no branch of x",
    times(a, pool.where(pool.compare(">", c, n(0)), x, times(n(2), x))),
  ],
];

describe("turning a law round", () => {
  test.each(laws)("%s: the law of the solution is the identity", (_, law) => {
    const positive = fc.double({ min: 0.1, max: 5, noNaN: true });
    const any = fc.double({ min: -5, max: 5, noNaN: true });
    fc.assert(
      fc.property(positive, positive, any, any, (va, vb, vc, vx) => {
        const values: Record<string, number> = { a: va, b: vb, c: vc };
        const solved = turnRound(pool, law, x, y, (symbol) => values[symbol.name]);
        expect(solved).not.toBeNull();
        const left = evaluate(law, (symbol) => (symbol === x ? vx : values[symbol.name]));
        const back = evaluate(solved as Expr, (symbol) => (symbol === y ? left : values[symbol.name]));
        expect(Math.abs(back - vx)).toBeLessThan(1e-5 * (1 + Math.abs(vx)));
      }),
      { numRuns: 200 },
    );
  });

  test("holds for a negative coefficient where no value is known", () => {
    const solved = turnRound(pool, times(a, x, abs(x)), x, y) as Expr;
    expect(evaluate(solved, ({ name }) => (name === "a" ? -2 : 8))).toBeCloseTo(-2, 12);
  });

  test.each<[string, Expr]>([
    ["an exponential", times(a, pool.call("exp", x))],
    ["an even power", times(a, x, x)],
    ["a sum of unknown signs", plus(times(a, x), times(b, x, abs(x)))],
    ["a law with a dead zone", pool.where(pool.compare(">", abs(x), a), x, n(0))],
    ["a sign alone", sign(x)],
    ["no own variable at all", times(a, b)],
    ["x*|x - c|", times(x, abs(pool.subtract(x, c)))],
  ])("%s is not turned round", (_, law) => expect(turnRound(pool, law, x, y)).toBeNull());

  test("reads as an engineer writes it where the coefficient is known to be positive", () => {
    const solved = turnRound(pool, times(a, x, abs(x)), x, y, () => 3) as Expr;
    expect(shown(solved)).toBe(shown(times(sign(y), root(pool.divide(abs(y), a)))));
  });
});
