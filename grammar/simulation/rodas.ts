import type { LinearSolver } from "./linear-solver.ts";
import type { Counters, Method, Problem } from "./ode.ts";

/**
 * RODAS, a stiffly accurate Rosenbrock method of order 4(3) with six stages and dense output of order 3: E. Hairer,
 * G. Wanner, Solving Ordinary Differential Equations II, IV.7 and VI.4, with the coefficients of their code, in which
 * no product with the Jacobian is needed. From memory; the tests hold the orders against known solutions.
 */
export const GAMMA = 0.25;

const NODES = [0, 0.386, 0.21, 0.63, 1, 1];

/** Of h·∂f/∂t. */
const TIME = [0.25, -0.1043, 0.1035, -0.0362, 0, 0];

const STAGES: readonly (readonly number[])[] = [
  [],
  [1.544],
  [0.9466785280815826, 0.2557011698983284],
  [3.314825187068521, 2.896124015972201, 0.9986419139977817],
  [1.221224509226641, 6.019134481288629, 12.53708332932087, -0.687886036105895],
  [1.221224509226641, 6.019134481288629, 12.53708332932087, -0.687886036105895, 1],
];

const COUPLING: readonly (readonly number[])[] = [
  [],
  [-5.6688],
  [-2.430093356833875, -0.2063599157091915],
  [-0.1073529058151375, -9.594562251023355, -20.47028614809616],
  [7.496443313967647, -10.24680431464352, -33.99990352819905, 11.7089089320616],
  [8.083246795921522, -7.981132988064893, -31.52159432874371, 16.31930543123136, -6.058818238834054],
];

const DENSE: readonly (readonly number[])[] = [
  [10.12623508344586, -7.487995877610167, -34.80091861555747, -7.992771707568823, 1.025137723295662],
  [-0.6762803392801253, 6.087714651680015, 16.43084320892478, 24.76722511418386, -6.594389125716872],
];

export function rodas(problem: Problem, solver: LinearSolver, counters: Counters): Method {
  const n = problem.size;
  const array = () => new Float64Array(n);
  const u = NODES.map(array);
  const [start, end, error, rates, slope, last] = [array(), array(), array(), array(), array(), array()];
  const entries = new Float64Array(problem.pattern.length);
  let known = { t: Number.NaN, usable: false };

  /** A step that is tried again with another size keeps its Jacobian. */
  function slopesAt(t: number, x: Float64Array): boolean {
    if (known.t === t && x.every((value, i) => value === last[i])) return known.usable;
    last.set(x);
    counters.jacobians += 1;
    known = { t, usable: problem.slopes(t, x, entries, slope) };
    return known.usable;
  }

  return {
    name: "rodas",
    order: 4,
    end,
    error,
    attempt(t, x, first, h) {
      if (!slopesAt(t, x)) return false;
      counters.factorizations += 1;
      if (!solver.factor(entries, 1 / (h * GAMMA))) return false;
      start.set(x);
      for (let s = 0; s < NODES.length; s += 1) {
        for (let i = 0; i < n; i += 1) {
          let sum = x[i];
          for (let j = 0; j < s; j += 1) sum += STAGES[s][j] * u[j][i];
          end[i] = sum;
        }
        if (s === 0) rates.set(first);
        else if (!problem.rates(t + NODES[s] * h, end, rates)) return false;
        for (let i = 0; i < n; i += 1) {
          let sum = rates[i] + TIME[s] * h * slope[i];
          for (let j = 0; j < s; j += 1) sum += (COUPLING[s][j] / h) * u[j][i];
          u[s][i] = sum;
        }
        solver.solve(u[s]);
      }
      for (let i = 0; i < n; i += 1) {
        end[i] += u[5][i];
        error[i] = u[5][i];
      }
      return end.every(Number.isFinite);
    },
    within(s, out) {
      for (let i = 0; i < n; i += 1) {
        let [bend, twist] = [0, 0];
        for (let j = 0; j < 5; j += 1) {
          bend += DENSE[0][j] * u[j][i];
          twist += DENSE[1][j] * u[j][i];
        }
        out[i] = (1 - s) * start[i] + s * (end[i] + (1 - s) * (bend + s * twist));
      }
    },
    stiffness: (h, sizes) => h * largestRow(problem, entries, sizes),
  };
}

/** The norm of the Jacobian by its rows, with each state measured by its size. */
function largestRow({ size, pattern }: Problem, entries: Float64Array, sizes: Float64Array): number {
  const sums = new Float64Array(size);
  pattern.forEach(({ row, column }, i) => {
    if (sizes[row] > 0) sums[row] += (Math.abs(entries[i]) * sizes[column]) / sizes[row];
  });
  return sums.reduce((most, sum) => Math.max(most, sum), 0);
}
