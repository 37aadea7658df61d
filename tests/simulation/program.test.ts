import fc from "fast-check";
import { expect, test } from "vitest";
import { interpreter } from "../../grammar/simulation/interpreter.ts";
import { compileProgram, type Machine } from "../../grammar/simulation/program.ts";
import { wasmMachine } from "../../grammar/simulation/wasm.ts";
import { smoothCurve } from "../../grammar/symbolic/curve.ts";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import type { Expr, FunctionName, Symbol } from "../../grammar/symbolic/expression.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { expressionText } from "../../grammar/writing/text.ts";

const NAMES = ["x", "y", "k"] as const;

/** A random expression as a function of a pool and its symbols. */
type Make = (pool: Pool, of: (name: string) => Symbol) => Expr;

const make = fc.letrec<{ e: Make }>((tie) => {
  const leaf: fc.Arbitrary<Make> = fc.oneof(
    fc.constantFrom(...NAMES).map(
      (name): Make =>
        (_, of) =>
          of(name),
    ),
    fc.constantFrom(0, 1, -2, 0.5, 3, 1e-3).map(
      (value): Make =>
        (pool) =>
          pool.number(value),
    ),
  );
  const two = fc.tuple(tie("e"), tie("e"));
  const unary: FunctionName[] = ["sin", "cos", "exp", "abs", "sign", "sqrt", "tanh", "ln", "atan"];
  return {
    e: fc.oneof(
      { maxDepth: 6 },
      leaf,
      two.map(
        ([a, b]): Make =>
          (pool, of) =>
            pool.sum(a(pool, of), b(pool, of)),
      ),
      two.map(
        ([a, b]): Make =>
          (pool, of) =>
            pool.product(a(pool, of), b(pool, of)),
      ),
      two.map(
        ([a, b]): Make =>
          (pool, of) =>
            pool.divide(a(pool, of), b(pool, of)),
      ),
      two.map(
        ([a, b]): Make =>
          (pool, of) =>
            pool.call("min", a(pool, of), b(pool, of)),
      ),
      two.map(
        ([a, b]): Make =>
          (pool, of) =>
            pool.call("atan2", a(pool, of), b(pool, of)),
      ),
      fc.tuple(tie("e"), fc.constantFrom(2, 3, -1, -2, 0.5, 1.7)).map(
        ([a, n]): Make =>
          (pool, of) =>
            pool.power(a(pool, of), pool.number(n)),
      ),
      fc.tuple(fc.constantFrom(...unary), tie("e")).map(
        ([fn, a]): Make =>
          (pool, of) =>
            pool.call(fn, a(pool, of)),
      ),
      fc.tuple(fc.constantFrom("<", "<=", ">", ">="), tie("e"), tie("e"), tie("e")).map(
        ([op, a, b, c]): Make =>
          (pool, of) => {
            const condition = pool.or(
              pool.compare(op, a(pool, of), b(pool, of)),
              pool.not(pool.compare("<", c(pool, of), pool.one)),
            );
            return pool.where(condition, b(pool, of), c(pool, of));
          },
      ),
    ),
  };
}).e;

function run(machine: Machine, program: ReturnType<typeof compileProgram>, values: Record<string, number>) {
  program.variables.forEach(({ name }, i) => {
    machine.variables[i] = values[name];
  });
  program.fixed.forEach((expr, i) => {
    machine.fixed[i] = evaluate(expr, ({ name }) => values[name]);
  });
  machine.run();
  return [...machine.results];
}

/** No whole numbers: at a jump the last bit would decide. */
const number = fc
  .tuple(fc.integer({ min: 1, max: 1e6 }), fc.constantFrom(1, -1))
  .map(([n, sign]) => sign * Math.sqrt(n + 0.123) * 1e-2);

test("compiled code and the interpreter give what evaluate gives", () => {
  fc.assert(
    fc.property(fc.array(make, { minLength: 1, maxLength: 4 }), number, number, number, (makers, x, y, k) => {
      const pool = new Pool();
      const of = (name: string) => pool.symbol(name === "k" ? "parameter" : "state", name);
      const roots = makers.map((one) => one(pool, of));
      const values: Record<string, number> = { x, y, k };
      const wanted = roots.map((root) => evaluate(root, ({ name }) => values[name]));
      const program = compileProgram(roots, [of("x"), of("y")]);
      const interpreted = run(interpreter(program), program, values);
      const compiled = run(wasmMachine(program), program, values);
      expect(compiled).toEqual(interpreted);
      compiled.forEach((value, i) => {
        if (Number.isFinite(wanted[i]) && Math.abs(wanted[i]) > 1e-300 && Math.abs(wanted[i]) < 1e300)
          expect(Math.abs(value - wanted[i]), expressionText(roots[i])).toBeLessThanOrEqual(
            1e-9 * Math.abs(wanted[i]) + 1e-9,
          );
        else if (!Number.isNaN(wanted[i])) expect(value).toEqual(wanted[i]);
      });
    }),
    { numRuns: 300 },
  );
});

test("a chain of 20,000 sums and products neither recurses nor outgrows the code", () => {
  const pool = new Pool();
  const x = pool.symbol("state", "x");
  let expr: Expr = x;
  for (let i = 1; i <= 20_000; i += 1) expr = pool.call("min", expr, pool.number(i));
  const program = compileProgram([expr], [x]);
  expect(run(wasmMachine(program), program, { x: 5 })).toEqual([1]);
});

test("curves are called as curves", () => {
  const pool = new Pool();
  const x = pool.symbol("state", "x");
  const curve = smoothCurve("c", [0, 1, 3], [0, 2, 5]);
  const program = compileProgram([pool.curve(curve, x), pool.curve(curve, x, 1)], [x]);
  for (const value of [-1, 0.3, 1, 2.2, 7]) {
    const wanted = [0, 1].map((order) => evaluate(pool.curve(curve, x, order), () => value));
    expect(run(wasmMachine(program), program, { x: value })).toEqual(wanted);
  }
});
