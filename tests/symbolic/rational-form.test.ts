import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { equivalent, rationalForm } from "../../grammar/symbolic/rational-form.ts";
import { solveLinear, solveLinearSystem } from "../../grammar/symbolic/solve-linear.ts";
import { build, lookup, points, recipes, shown } from "./random.ts";

const pool = new Pool();
const [a, b, c, d] = ["a", "b", "c", "d"].map((name) => pool.symbol("parameter", name));
const n = (value: number) => pool.number(value);
const over = (top: Expr, bottom: Expr) => pool.divide(top, bottom);
const times = (...factors: Expr[]) => pool.product(...factors);
const plus = (...terms: Expr[]) => pool.sum(...terms);
const square = (z: Expr) => pool.power(z, n(2));

describe("rational form", () => {
  test("keeps the value", () => {
    fc.assert(
      fc.property(recipes, points, (recipe, values) => {
        const own = new Pool();
        const expr = build(own, recipe);
        const form = rationalForm(own, expr);
        fc.pre(form !== null);
        const value = evaluate(expr, lookup(values));
        fc.pre(Number.isFinite(value) && Math.abs(value) < 1e4 && Math.abs(value) > 1e-4);
        const again = evaluate(form as Expr, lookup(values));
        fc.pre(Number.isFinite(again));
        expect(Math.abs(again - value)).toBeLessThan(1e-5 * Math.max(1, Math.abs(value)));
      }),
      { numRuns: 1000 },
    );
  });

  test.each<[string, Expr, Expr]>([
    ["a/(1 + b/c)", over(a, plus(n(1), over(b, c))), over(times(a, c), plus(b, c))],
    ["1/a + 1/b", plus(over(n(1), a), over(n(1), b)), over(plus(a, b), times(a, b))],
    ["(a^2 - b^2)/(a - b)", over(pool.subtract(square(a), square(b)), pool.subtract(a, b)), plus(a, b)],
    ["a/(a + b) + b/(a + b)", plus(over(a, plus(a, b)), over(b, plus(a, b))), n(1)],
    ["1/(1/a + 1/b)", over(n(1), plus(over(n(1), a), over(n(1), b))), over(times(a, b), plus(a, b))],
    [
      "(a + b)^2 - (a - b)^2",
      pool.subtract(square(plus(a, b)), square(pool.subtract(a, b))),
      times(n(4), a, b),
    ],
    [
      "reflected inertia",
      over(n(1), plus(n(1), over(times(square(c), b), a))),
      over(a, plus(a, times(b, square(c)))),
    ],
  ])("%s", (_, expr, form) => expect(shown(rationalForm(pool, expr) as Expr)).toBe(shown(form)));

  test("gives up by size, not by time", () => {
    const many = Array.from({ length: 12 }, (_, i) =>
      plus(pool.symbol("state", `x${i}`), pool.symbol("state", `y${i}`)),
    );
    expect(rationalForm(pool, times(...many))).toBeNull();
  });
});

describe("equivalence", () => {
  test.each<[string, Expr, Expr, boolean | null]>([
    ["by algebra", over(a, plus(a, b)), pool.subtract(n(1), over(b, plus(a, b))), true],
    ["a wrong sign is seen", over(a, plus(a, b)), plus(n(1), over(b, plus(a, b))), false],
    [
      "what algebra does not know stays open",
      pool.subtract(square(pool.call("cosh", a)), square(pool.call("sinh", a))),
      n(1),
      null,
    ],
  ])("%s", (_, left, right, answer) => expect(equivalent(pool, left, right)).toBe(answer));
});

describe("linear systems", () => {
  test("two unknowns by Cramer's rule", () => {
    const u = pool.symbol("input", "u");
    const [x] = solveLinear(
      pool,
      [
        [a, b],
        [c, d],
      ],
      [u, n(0)],
    ) as Expr[];
    const determinant = pool.subtract(times(a, d), times(b, c));
    expect(equivalent(pool, x, over(times(d, u), determinant))).toBe(true);
  });

  test("solutions satisfy their equations", () => {
    const entries = [a, b, c, d, n(0), n(1), n(-1), n(2), over(a, b), plus(a, times(c, d))];
    const entry = fc.nat(entries.length - 1);
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 3 }).chain((size) =>
          fc.tuple(
            fc.array(fc.array(entry, { minLength: size, maxLength: size }), {
              minLength: size,
              maxLength: size,
            }),
            fc.array(entry, { minLength: size, maxLength: size }),
          ),
        ),
        ([rows, side]) => {
          const matrix = rows.map((row) => row.map((i) => entries[i]));
          const right = side.map((i) => entries[i]);
          const solution = solveLinearSystem(pool, matrix, right);
          // With no relation of small whole numbers between them: 3*b - c must not vanish here by chance.
          const values: Record<string, number> = { a: 1.3131, b: 0.7417, c: 2.1093, d: -0.4229 };
          const at = (expr: Expr) => evaluate(expr, lookup(values));
          if (solution.kind === "singular") {
            expect(Math.abs(determinant(matrix.map((row) => row.map(at))))).toBeLessThan(1e-9);
          } else if (solution.kind === "solved") {
            matrix.forEach((row, i) => {
              const left = row.reduce((total, each, j) => total + at(each) * at(solution.values[j]), 0);
              expect(Math.abs(left - at(right[i]))).toBeLessThan(1e-6);
            });
          } else expect.unreachable("small systems are solved");
        },
      ),
      { numRuns: 300 },
    );
  });

  test("names the rows of a singular system", () => {
    const solution = solveLinearSystem(
      pool,
      [
        [a, b],
        [times(n(2), a), times(n(2), b)],
      ],
      [n(0), n(1)],
    );
    expect(solution.kind).toBe("singular");
  });
});

function determinant(matrix: number[][]): number {
  if (matrix.length === 0) return 1;
  return matrix[0].reduce(
    (total, entry, j) =>
      total +
      (j % 2 === 0 ? 1 : -1) *
        entry *
        determinant(matrix.slice(1).map((row) => row.filter((_, k) => k !== j))),
    0,
  );
}
