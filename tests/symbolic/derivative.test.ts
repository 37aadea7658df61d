import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { derivative } from "../../grammar/symbolic/derivative.ts";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { substitute } from "../../grammar/symbolic/substitute.ts";
import { build, lookup, points, recipes, shown } from "./random.ts";

describe("derivative", () => {
  test("agrees with the finite difference wherever that has settled", () => {
    fc.assert(
      fc.property(recipes, points, (recipe, values) => {
        const pool = new Pool();
        const expr = build(pool, recipe);
        const x = pool.symbol("state", "x");
        const slope = evaluate(derivative(pool, expr, x), lookup(values));
        const at = (h: number) => evaluate(expr, lookup({ ...values, x: values.x + h }));
        const settled = (a: number, b: number) => Math.abs(a - b) < 1e-3 * (1 + Math.abs(b));
        const [ahead, behind] = [(at(1e-5) - at(0)) / 1e-5, (at(0) - at(-1e-5)) / 1e-5];
        const [coarse, fine] = [1e-4, 5e-5].map((h) => (at(h) - at(-h)) / (2 * h));
        fc.pre(Number.isFinite(fine) && Math.abs(fine) < 1e3);
        // Not at a corner, nor where the value has too few digits left.
        fc.pre(settled(coarse, fine) && settled(ahead, fine) && settled(behind, fine));
        expect(Math.abs(slope - fine)).toBeLessThan(1e-2 * (1 + Math.abs(fine)));
      }),
      { numRuns: 2000 },
    );
  });

  const pool = new Pool();
  const x = pool.symbol("state", "x");
  const abs = pool.call("abs", x);
  const two = pool.number(2);
  test.each([
    ["|x|", abs, pool.call("sign", x)],
    ["x|x|", pool.product(x, abs), pool.product(two, abs)],
    ["tan x", pool.call("tan", x), pool.sum(pool.one, pool.power(pool.call("tan", x), two))],
    [
      "min(x, 1)",
      pool.call("min", x, pool.one),
      pool.where(pool.compare(">=", x, pool.one), pool.zero, pool.one),
    ],
    [
      "x where x > 0 else 2x",
      pool.where(pool.compare(">", x, pool.zero), x, pool.product(two, x)),
      pool.where(pool.compare(">", x, pool.zero), pool.one, two),
    ],
  ])("of %s", (_, expr, slope) => expect(shown(derivative(pool, expr, x))).toBe(shown(slope)));
});

describe("substitute", () => {
  test("commutes with evaluation", () => {
    fc.assert(
      fc.property(recipes, recipes, points, (recipe, inner, values) => {
        const pool = new Pool();
        const put = build(pool, inner);
        const at = evaluate(put, lookup(values));
        const direct = evaluate(build(pool, recipe), lookup({ ...values, x: at }));
        fc.pre(Number.isFinite(direct) && Math.abs(direct) < 1e6 && Number.isFinite(at));
        const x = pool.symbol("state", "x");
        const value = evaluate(substitute(pool, build(pool, recipe), new Map([[x, put]])), lookup(values));
        fc.pre(Number.isFinite(value));
        expect(Math.abs(value - direct)).toBeLessThanOrEqual(1e-5 * Math.max(1, Math.abs(direct)));
      }),
      { numRuns: 1000 },
    );
  });
});
