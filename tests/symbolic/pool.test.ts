import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { build, isExact, lookup, plainValue, points, recipes, shown } from "./random.ts";

const pool = new Pool();
const [a, b] = ["a", "b"].map((name) => pool.symbol("parameter", name));
const [x, y] = ["x", "y"].map((name) => pool.symbol("state", name));
const n = (value: number) => pool.number(value);

describe("canonical form", () => {
  test("does not depend on the order of construction, nor on what the pool held before", () => {
    fc.assert(
      fc.property(recipes, recipes, (recipe, before) => {
        const first = new Pool();
        const second = new Pool();
        build(second, before, true);
        fc.pre(isExact(build(first, recipe)) && isExact(build(first, recipe, true)));
        expect(shown(build(second, recipe, true))).toBe(shown(build(first, recipe)));
        expect(build(first, recipe, true)).toBe(build(first, recipe));
      }),
      { numRuns: 2000 },
    );
  });

  test("keeps the value wherever the expression as written has one", () => {
    fc.assert(
      fc.property(recipes, points, (recipe, values) => {
        const plain = plainValue(recipe, values);
        fc.pre(Number.isFinite(plain) && Math.abs(plain) < 1e6 && Math.abs(plain) > 1e-3);
        const value = evaluate(build(new Pool(), recipe), lookup(values));
        // Cancelling terms may differ by rounding only.
        expect(value).toSatisfy((v: number) => Math.abs(v - plain) <= 1e-6 * Math.max(1, Math.abs(plain)));
      }),
      { numRuns: 3000 },
    );
  });

  test.each([
    ["1/3 * 3 is 1", pool.product(pool.rational(1, 3), n(3)), n(1)],
    ["0.1 + 0.2 is 0.3", pool.sum(n(0.1), n(0.2)), n(0.3)],
    ["like terms", pool.sum(x, pool.product(n(2), x), y, pool.negate(y)), pool.product(n(3), x)],
    ["nested sums with a factor", pool.product(n(2), pool.sum(x, n(1))), pool.sum(n(2), x, x)],
    [
      "content of a sum",
      pool.divide(n(1), pool.sum(a, a, b, b)),
      pool.product(n(0.5), pool.power(pool.sum(a, b), n(-1))),
    ],
    [
      "sign of a sum",
      pool.product(a, pool.subtract(x, y)),
      pool.negate(pool.product(a, pool.subtract(y, x))),
    ],
    ["quotient of like", pool.divide(pool.product(a, x), x), a],
    ["x*|x|*sign(x)", pool.product(x, pool.call("abs", x), pool.call("sign", x)), pool.power(x, n(2))],
    [
      "sign(x)*sqrt|x| squared",
      pool.power(pool.product(pool.call("sign", x), pool.call("sqrt", pool.call("abs", x))), n(2)),
      pool.product(pool.power(pool.call("sign", x), n(2)), pool.call("abs", x)),
    ],
    [
      "sin^2 + cos^2 beside a factor",
      pool.sum(
        x,
        pool.product(a, pool.power(pool.call("sin", x), n(2))),
        pool.product(a, pool.power(pool.call("cos", x), n(2))),
      ),
      pool.sum(a, x),
    ],
    [
      "odd halves",
      pool.product(pool.call("sqrt", x), pool.power(x, n(-1.5))),
      pool.power(pool.call("sqrt", x), n(-2)),
    ],
    ["one over a root", pool.divide(n(1), pool.call("sqrt", x)), pool.power(x, n(-0.5))],
    [
      "odd halves of what can't be negative",
      pool.product(...[0.5, 1.5].map((half) => pool.power(pool.call("abs", x), n(half)))),
      pool.power(x, n(2)),
    ],
    ["cube of a third", pool.power(pool.rational(1, 3), n(3)), pool.rational(1, 27)],
    ["root of a square", pool.call("sqrt", pool.power(x, n(2))), pool.call("abs", x)],
    [
      "|a*b|",
      pool.call("abs", pool.product(n(-2), a, b)),
      pool.product(n(2), pool.call("abs", a), pool.call("abs", b)),
    ],
    [
      "odd function",
      pool.call("sin", pool.subtract(y, x)),
      pool.negate(pool.call("sin", pool.subtract(x, y))),
    ],
    ["double condition", pool.where(pool.compare("<", n(1), n(2)), x, y), x],
  ])("%s", (_, left, right) => expect(shown(left)).toBe(shown(right)));

  test("does not take a root of a square back where the sign is not known", () => {
    expect(pool.power(pool.call("sqrt", x), n(2))).not.toBe(x);
    expect(pool.product(pool.call("sqrt", x), pool.call("sqrt", x))).not.toBe(x);
  });

  test("orders by names in natural order, inputs before states", () => {
    const u = pool.symbol("input", "u");
    const cells = [10, 2, 1].map((i) => pool.symbol("state", `cell[${i}].q`));
    expect(shown(pool.sum(...cells, u))).toBe("sum(u, cell[1].q, cell[2].q, cell[10].q)");
  });

  test("is not troubled by depth", () => {
    let deep = pool.sum(x, n(1));
    for (let i = 0; i < 100_000; i += 1) deep = pool.sum(pool.call("sin", deep), x);
    expect(evaluate(deep, () => 0.1)).toBeTypeOf("number");
  });
});
