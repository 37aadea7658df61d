import { expect, test } from "vitest";
import { DENSE, dormandPrince, ERROR, NODES, STAGES } from "../../grammar/simulation/dormand-prince.ts";
import { integrate } from "../../grammar/simulation/integrate.ts";
import { denseSolver, linearSolver } from "../../grammar/simulation/linear-solver.ts";
import type { Counters, Method, Problem } from "../../grammar/simulation/ode.ts";
import { rodas } from "../../grammar/simulation/rodas.ts";

type Functions = (t: number, x: readonly number[]) => number[];

/** A problem from its rates alone; slopes by central differences where they are not given. */
function problemOf(
  size: number,
  f: Functions,
  slopes?: (t: number, x: readonly number[]) => number[][],
): Problem {
  const pattern = Array.from({ length: size * size }, (_, i) => ({
    row: Math.floor(i / size),
    column: i % size,
  }));
  const change = (t: number, x: readonly number[], j: number) => {
    const d = 1e-6 * Math.max(1e-3, Math.abs(x[j]));
    const [up, down] = [1, -1].map((s) =>
      f(
        t,
        x.map((v, i) => (i === j ? v + s * d : v)),
      ),
    );
    return up.map((v, i) => (v - down[i]) / (2 * d));
  };
  return {
    size,
    pattern,
    rates(t, x, out) {
      out.set(f(t, [...x]));
      return out.every(Number.isFinite);
    },
    slopes(t, x, entries, slope) {
      const columns = slopes === undefined ? [...x].map((_, j) => change(t, [...x], j)) : null;
      const rows = slopes?.(t, [...x]);
      pattern.forEach(({ row, column }, i) => {
        entries[i] = columns === null ? (rows as number[][])[row][column] : columns[column][row];
      });
      const [later, earlier] = [f(t + 1e-5, [...x]), f(t - 1e-5, [...x])];
      slope.set(later.map((v, i) => (v - earlier[i]) / 2e-5));
      return true;
    },
    magnitudes: (t, x) => Float64Array.from(f(t, [...x]), Math.abs),
  };
}

const counters = (): Counters => ({
  steps: 0,
  rejected: 0,
  evaluations: 0,
  jacobians: 0,
  factorizations: 0,
  events: 0,
  spared: 0,
  by: { "dormand-prince": 0, rodas: 0 },
});

/** x' = -2tx² + …: a nonlinear problem that depends on time, with a known solution. */
const PROBLEM = problemOf(2, (t, [x, y]) => [y * Math.cos(t), -x * y * y * Math.sin(t) - y / (1 + t)]);

function fixedSteps(method: Method, problem: Problem, steps: number): { end: number[]; middle: number[] } {
  const h = 1 / steps;
  const x = Float64Array.from([1, 0.5]);
  const f = new Float64Array(2);
  const within = new Float64Array(2);
  for (let i = 0; i < steps; i += 1) {
    problem.rates(i * h, x, f);
    method.attempt(i * h, x, f, h);
    if (i === steps / 2) method.within(0.37, within);
    x.set(method.end);
  }
  return { end: [...x], middle: [...within] };
}

const reference = fixedSteps(dormandPrince(PROBLEM), PROBLEM, 4096).end;
const apart = (a: readonly number[], b: readonly number[]) => Math.hypot(...a.map((v, i) => v - b[i]));

test("the pair of Dormand and Prince keeps its order conditions", () => {
  const weights = STAGES[6];
  STAGES.forEach((row, i) => {
    expect(row.reduce((sum, a) => sum + a, 0)).toBeCloseTo(NODES[i], 13);
  });
  for (const power of [0, 1, 2, 3, 4]) {
    const sum = weights.reduce((total, b, i) => total + b * NODES[i] ** power, 0);
    expect(sum).toBeCloseTo(1 / (power + 1), 13);
  }
  const inner = STAGES.map((row) => row.reduce((sum, a, j) => sum + a * NODES[j], 0));
  expect(weights.reduce((sum, b, i) => sum + b * inner[i], 0)).toBeCloseTo(1 / 6, 13);
  for (const power of [0, 1, 2, 3]) {
    expect(ERROR.reduce((sum, e, i) => sum + e * NODES[i] ** power, 0)).toBeCloseTo(0, 13);
  }
  expect(DENSE.reduce((sum, d) => sum + d, 0)).toBeCloseTo(0, 12);
});

test.each([
  { name: "dormand-prince", order: 5, dense: 4 },
  { name: "rodas", order: 4, dense: 3 },
])("$name converges with order $order", ({ name, order, dense }) => {
  const method =
    name === "rodas" ? rodas(PROBLEM, denseSolver(2, PROBLEM.pattern), counters()) : dormandPrince(PROBLEM);
  const errors = [16, 32, 64].map((steps) => apart(fixedSteps(method, PROBLEM, steps).end, reference));
  expect(Math.log2(errors[0] / errors[1])).toBeGreaterThan(order - 0.4);
  expect(Math.log2(errors[1] / errors[2])).toBeGreaterThan(order - 0.4);
  const middle = [32, 64].map((steps) => {
    const span = { from: 0, to: 0.5 + 0.37 / steps, start: Float64Array.from([1, 0.5]), tolerance: 1e-12 };
    const exact = integrate(PROBLEM, { ...span, method: "dormand-prince" });
    return apart(fixedSteps(method, PROBLEM, steps).middle, [...exact.state]);
  });
  expect(Math.log2(middle[0] / middle[1])).toBeGreaterThan(dense - 0.2);
});

test("a sparse matrix is solved as a dense one", () => {
  const n = 60;
  const pattern = [];
  for (let i = 0; i < n; i += 1)
    for (const j of [i, i + 1, i - 1, (i * 7) % n]) if (j >= 0 && j < n) pattern.push({ row: i, column: j });
  const unique = [...new Map(pattern.map((place) => [`${place.row} ${place.column}`, place])).values()];
  const entries = Float64Array.from(unique, (_, i) => Math.sin(3 * i));
  const [dense, sparse] = [denseSolver(n, unique), linearSolver(n, unique)];
  expect(sparse.kind).toBe("sparse");
  const b = Float64Array.from({ length: n }, (_, i) => Math.cos(i));
  const solved = [dense, sparse].map((solver) => {
    expect(solver.factor(entries, 5)).toBe(true);
    const x = Float64Array.from(b);
    solver.solve(x);
    return [...x];
  });
  expect(apart(solved[0], solved[1])).toBeLessThan(1e-12);
});

test("Robertson's kinetics: stiff from the first steps, to 4e10 s", () => {
  const problem = problemOf(
    3,
    (_, [a, b, c]) => [-0.04 * a + 1e4 * b * c, 0.04 * a - 1e4 * b * c - 3e7 * b * b, 3e7 * b * b],
    (_, [, b, c]) => [
      [-0.04, 1e4 * c, 1e4 * b],
      [0.04, -1e4 * c - 6e7 * b, -1e4 * b],
      [0, 6e7 * b, 0],
    ],
  );
  // Reference at t = 40: Hindmarsh, LSODE's demonstration; from memory.
  const at40 = integrate(problem, { from: 0, to: 40, start: Float64Array.of(1, 0, 0), tolerance: 1e-8 });
  expect(at40.status).toBe("reached");
  expect(at40.state[0]).toBeCloseTo(0.7158, 4);
  expect(at40.state[1]).toBeCloseTo(9.185e-6, 8);
  const far = integrate(problem, { from: 0, to: 4e10, start: Float64Array.of(1, 0, 0), tolerance: 1e-7 });
  expect(far.status).toBe("reached");
  expect(Math.abs(far.state[0] / 5.2e-8 - 1)).toBeLessThan(0.02);
  expect(far.counters.steps).toBeLessThan(1500);
});

test("van der Pol with mu = 1000: reference values at t = 2000", () => {
  const problem = problemOf(
    2,
    (_, [x, y]) => [y, 1000 * (1 - x * x) * y - x],
    (_, [x, y]) => [
      [0, 1],
      [-2000 * x * y - 1, 1000 * (1 - x * x)],
    ],
  );
  // Test set for IVP solvers (Bari, CWI), van der Pol in the form y'' = mu(1 - y²)y' - y; from memory.
  const run = integrate(problem, { from: 0, to: 2000, start: Float64Array.of(2, 0), tolerance: 1e-9 });
  expect(run.status).toBe("reached");
  expect(run.state[0]).toBeCloseTo(1.706167732170469, 5);
  expect(run.counters.by.rodas).toBeGreaterThan(50);
});

test("a solution that grows without bound ends the run near its pole", () => {
  const problem = problemOf(
    1,
    (_, [x]) => [x * x],
    (_, [x]) => [[2 * x]],
  );
  const run = integrate(problem, { from: 0, to: 2, start: Float64Array.of(1), tolerance: 1e-6 });
  expect(run.status).toBe("stopped");
  expect(run.time).toBeCloseTo(1, 3);
});
