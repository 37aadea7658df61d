import type { Method, Problem } from "./ode.ts";

/**
 * Explicit Runge–Kutta pair of order 5(4): J. R. Dormand, P. J. Prince, A family of embedded Runge–Kutta formulae,
 * Journal of Computational and Applied Mathematics 6 (1980) 19–26; dense output of order 4 and the estimate of
 * stiffness after E. Hairer, S. P. Nørsett, G. Wanner, Solving Ordinary Differential Equations I, II.6 and IV.2 of
 * volume II. From memory; the tests hold the order conditions against them.
 */
export const NODES = [0, 1 / 5, 3 / 10, 4 / 5, 8 / 9, 1, 1];

export const STAGES: readonly (readonly number[])[] = [
  [],
  [1 / 5],
  [3 / 40, 9 / 40],
  [44 / 45, -56 / 15, 32 / 9],
  [19372 / 6561, -25360 / 2187, 64448 / 6561, -212 / 729],
  [9017 / 3168, -355 / 33, 46732 / 5247, 49 / 176, -5103 / 18656],
  [35 / 384, 0, 500 / 1113, 125 / 192, -2187 / 6784, 11 / 84],
];

/** Weights of order 5 less those of order 4. */
export const ERROR = [71 / 57600, 0, -71 / 16695, 71 / 1920, -17253 / 339200, 22 / 525, -1 / 40];

export const DENSE = [
  -12715105075 / 11282082432,
  0,
  87487479700 / 32700410799,
  -10690763975 / 1880347072,
  701980252875 / 199316789632,
  -1453857185 / 822651844,
  69997945 / 29380423,
];

/** Where h times an eigenvalue leaves the region of stability on the real axis. */
export const STABLE = 3.25;

export function dormandPrince(problem: Problem): Method {
  const n = problem.size;
  const array = () => new Float64Array(n);
  const k = NODES.map(array);
  const [end, error, stage, start] = [array(), array(), array(), array()];
  let size = 0;

  function combine(weights: readonly number[], x: Float64Array | null, h: number, out: Float64Array): void {
    for (let i = 0; i < n; i += 1) {
      let sum = 0;
      for (let j = 0; j < weights.length; j += 1) sum += weights[j] * k[j][i];
      out[i] = (x === null ? 0 : x[i]) + h * sum;
    }
  }

  return {
    name: "dormand-prince",
    order: 5,
    end,
    error,
    attempt(t, x, rates, h) {
      size = h;
      start.set(x);
      k[0].set(rates);
      for (let s = 1; s < NODES.length; s += 1) {
        if (s === 6) stage.set(end);
        combine(STAGES[s], x, h, end);
        if (!problem.rates(t + NODES[s] * h, end, k[s])) return false;
      }
      combine(ERROR, null, h, error);
      return true;
    },
    within(s, out) {
      const [first, last] = [k[0], k[6]];
      for (let i = 0; i < n; i += 1) {
        const change = end[i] - start[i];
        const bend = size * first[i] - change;
        const twist = change - size * last[i] - bend;
        let wave = 0;
        for (let j = 0; j < DENSE.length; j += 1) wave += DENSE[j] * k[j][i];
        out[i] = start[i] + s * (change + (1 - s) * (bend + s * (twist + (1 - s) * size * wave)));
      }
    },
    stiffness(h, sizes) {
      let above = 0;
      let below = 0;
      for (let i = 0; i < n; i += 1) {
        if (sizes[i] === 0) continue;
        above += ((k[6][i] - k[5][i]) / sizes[i]) ** 2;
        below += ((end[i] - stage[i]) / sizes[i]) ** 2;
      }
      return below > 0 ? h * Math.sqrt(above / below) : 0;
    },
  };
}
