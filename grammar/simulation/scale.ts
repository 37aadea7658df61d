import type { Problem } from "./ode.ts";

/** A value counts as no smaller than this share of the largest it had: an error there would not be seen. */
const SHARE = 0.01;
/** What lies under this share of what a rate is added up from is rounding. */
const ROUNDING = 1e-6;
/** SI: where a state has been nothing so far, this much of it is still nothing. */
const NOTHING = 1e-12;

/** What an error is measured by, state by state: its own size, and what it is made of. */
export class Scale {
  readonly #problem: Problem;
  readonly #tolerance: number;
  /** The largest size each state had. */
  readonly largest: Float64Array;
  #made: Float64Array;
  readonly #entries: Float64Array;
  readonly #slope: Float64Array;
  #pull: Float64Array;

  constructor(problem: Problem, tolerance: number) {
    this.#problem = problem;
    this.#tolerance = tolerance;
    this.largest = new Float64Array(problem.size);
    this.#made = new Float64Array(problem.size);
    this.#pull = new Float64Array(problem.size);
    this.#entries = new Float64Array(problem.pattern.length);
    this.#slope = new Float64Array(problem.size);
  }

  begin(t: number, x: Float64Array): void {
    this.#made = this.#problem.magnitudes(t, x);
    this.#pull.fill(0);
    if (this.#problem.slopes(t, x, this.#entries, this.#slope)) {
      this.#problem.pattern.forEach(({ row, column }, i) => {
        if (row === column) this.#pull[row] = Math.abs(this.#entries[i]);
      });
    }
    this.seen(x);
  }

  seen(x: Float64Array): void {
    for (let i = 0; i < x.length; i += 1) {
      const size = Math.abs(x[i]);
      if (size > this.largest[i]) this.largest[i] = size;
    }
  }

  /** Root mean square of the error over what is allowed: at most 1 where the step is good. */
  size(error: Float64Array, x: Float64Array, end: Float64Array, h: number): number {
    const n = error.length;
    if (n === 0) return 0;
    let sum = 0;
    for (let i = 0; i < n; i += 1) {
      const allowed = this.#allowed(i, Math.max(Math.abs(x[i]), Math.abs(end[i])), h);
      if (error[i] !== 0) sum += (error[i] / allowed) ** 2;
    }
    return Math.sqrt(sum / n);
  }

  #allowed(i: number, size: number, h: number): number {
    const floor = ROUNDING * this.#made[i] * Math.min(h, 1 / this.#pull[i]);
    return this.#tolerance * Math.max(size, SHARE * this.largest[i], floor, NOTHING);
  }

  /** Hairer, Nørsett, Wanner: Solving Ordinary Differential Equations I, II.4, starting step size. */
  firstStep(t: number, x: Float64Array, rates: Float64Array, room: number, scratch: Float64Array): number {
    const n = x.length;
    if (n === 0) return room;
    let h = room;
    for (let i = 0; i < n; i += 1) {
      const size = Math.max(Math.abs(x[i]), SHARE * this.largest[i]);
      if (rates[i] !== 0 && size > 0) h = Math.min(h, (0.01 * size) / Math.abs(rates[i]));
      if (size === 0 && this.#pull[i] > 0) h = Math.min(h, 0.01 / this.#pull[i]);
    }
    h = Math.min(h, 1e-2 * room);
    for (let i = 0; i < n; i += 1) scratch[i] = x[i] + h * rates[i];
    const after = new Float64Array(n);
    if (!this.#problem.rates(t + h, scratch, after)) return h * 1e-3;
    let worst = 0;
    for (let i = 0; i < n; i += 1) {
      const size = this.#allowed(i, Math.max(Math.abs(x[i]), Math.abs(scratch[i])), h) / this.#tolerance;
      const bend = Math.abs(after[i] - rates[i]) / h;
      const speed = Math.max(Math.abs(rates[i]), Math.abs(after[i]));
      if (size > 0) worst = Math.max(worst, bend / size, (speed / size) ** 2 * 1e-2);
    }
    const second = worst > 0 ? (0.01 * this.#tolerance ** 0.2) / Math.sqrt(worst) : room;
    const least = Math.max(1e-24 * room, 64 * Number.EPSILON * Math.abs(t));
    return Math.min(Math.max(Math.min(100 * h, second), least), room);
  }
}
