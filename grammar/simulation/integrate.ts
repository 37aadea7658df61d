import { dormandPrince, STABLE } from "./dormand-prince.ts";
import { linearSolver } from "./linear-solver.ts";
import type { Counters, Events, Method, Outcome, Problem, Step } from "./ode.ts";
import { rodas } from "./rodas.ts";
import { Scale } from "./scale.ts";

export interface Span {
  readonly from: number;
  readonly to: number;
  readonly start: Float64Array;
  /** Relative, of each step. */
  readonly tolerance: number;
  /** Times at which the equations have a corner or a jump, ascending. */
  readonly corners?: readonly number[];
  readonly events?: Events;
  /** Every accepted step; a reason to stop ends the run. */
  accepted?(step: Step): string | null;
  readonly mostSteps?: number;
  /** Both methods, as stiffness asks for, unless one is named. */
  readonly method?: "dormand-prince" | "rodas";
}

export const MOST_STEPS = 200_000;

export function integrate(problem: Problem, span: Span): Outcome {
  return new Integration(problem, span).run();
}

/** So many steps at the border of stability are no accident. */
const STIFF_STEPS = 15;
const EASY_STEPS = 40;
/** Fractions of a step at which events are looked for, so that two crossings in one step are seldom missed. */
const LOOKS = [0.25, 0.5, 0.75, 1];

const NO_STEP =
  "The step became too small to move on: the equations jump, swing or grow without bound at this point.";

class Integration {
  readonly #problem: Problem;
  readonly #span: Span;
  readonly #counters: Counters = {
    steps: 0,
    rejected: 0,
    evaluations: 0,
    jacobians: 0,
    factorizations: 0,
    events: 0,
    spared: 0,
    by: { "dormand-prince": 0, rodas: 0 },
  };
  readonly #explicit: Method;
  #stiff: Method | null = null;
  #method: Method;
  readonly #x: Float64Array;
  readonly #rates: Float64Array;
  readonly #scratch: Float64Array;
  readonly #scale: Scale;
  #t: number;
  #h = 0;
  #signs = 0;
  #fresh = true;
  /** Events in a row that left no room for a step between them. */
  #crowded = 0;

  constructor(problem: Problem, span: Span) {
    const counters = this.#counters;
    this.#problem = {
      ...problem,
      rates: (t, x, out) => {
        counters.evaluations += 1;
        return problem.rates(t, x, out);
      },
      slopes: (t, x, entries, slope) => problem.slopes(t, x, entries, slope),
      magnitudes: (t, x) => problem.magnitudes(t, x),
    };
    this.#span = span;
    this.#t = span.from;
    this.#x = Float64Array.from(span.start);
    this.#rates = new Float64Array(problem.size);
    this.#scratch = new Float64Array(problem.size);
    this.#scale = new Scale(problem, span.tolerance);
    this.#explicit = dormandPrince(this.#problem);
    this.#method = span.method === "rodas" ? this.#stiffMethod() : this.#explicit;
  }

  run(): Outcome {
    const { corners = [], to, from } = this.#span;
    for (const corner of [...corners.filter((time) => time > from && time < to), to]) {
      const reason = this.#until(corner);
      const done = { time: this.#t, state: this.#x, counters: this.#counters };
      if (reason !== null) return { ...done, status: "stopped", reason };
    }
    return { time: this.#t, state: this.#x, counters: this.#counters, status: "reached" };
  }

  #until(end: number): string | null {
    const { events, mostSteps = MOST_STEPS } = this.#span;
    const begun = this.#restart(end);
    if (begun !== null) return begun;
    while (this.#t < end) {
      if (this.#counters.steps + this.#counters.rejected >= mostSteps)
        return `${mostSteps.toLocaleString("en")} steps did not reach the end.`;
      const least = Math.max(16 * Number.EPSILON * Math.abs(this.#t), 1e-26 * (end - this.#span.from));
      if (this.#h < least) return NO_STEP;
      const left = end - this.#t;
      // Not a crumb of a step at the end.
      const h = this.#h >= left ? left : Math.min(this.#h, left / 2);
      const error = this.#tried(h);
      if (!(error <= 1)) {
        this.#counters.rejected += 1;
        const shrink = Number.isFinite(error)
          ? Math.max(0.1, 0.9 * error ** (-1 / this.#method.order))
          : 0.25;
        this.#h = h * shrink;
        continue;
      }
      const crossing = events === undefined ? null : this.#crossing(h, events);
      if (crossing !== null) {
        const stopped = this.#toEvent(crossing, end);
        if (stopped !== null) return stopped;
        continue;
      }
      const stopped = this.#accept(h === left ? end : this.#t + h);
      if (stopped !== null) return stopped;
      this.#crowded = 0;
      const grow = Math.min(5, Math.max(0.2, 0.9 * Math.max(error, 1e-10) ** (-1 / this.#method.order)));
      this.#h = h * grow;
      this.#watchStiffness(h);
    }
    return null;
  }

  #tried(h: number): number {
    const { end, error } = this.#method;
    if (!this.#method.attempt(this.#t, this.#x, this.#rates, h)) return Number.POSITIVE_INFINITY;
    return this.#scale.size(error, this.#x, end, h);
  }

  #accept(to: number): string | null {
    const method = this.#method;
    this.#counters.steps += 1;
    this.#counters.by[method.name] += 1;
    if (method.name === "rodas") {
      this.#counters.spared += method.stiffness(to - this.#t, this.#scale.largest) / STABLE;
    }
    const stopped = this.#span.accepted?.({
      from: this.#t,
      to,
      start: this.#x,
      end: method.end,
      fresh: this.#fresh,
      within: (s, out) => method.within(s, out),
    });
    this.#fresh = false;
    this.#t = to;
    this.#x.set(method.end);
    this.#scale.seen(this.#x);
    if (stopped !== null && stopped !== undefined) return stopped;
    return this.#problem.rates(to, this.#x, this.#rates) ? null : NOT_FINITE;
  }

  /** Within the step just tried: the fractions just before and just after the equations change, if they do. */
  #crossing(h: number, events: Events): number | null {
    const differs = (s: number) => {
      this.#method.within(s, this.#scratch);
      return events.crossed(this.#t + s * h, this.#scratch);
    };
    let before = 0;
    for (const look of LOOKS) {
      if (!differs(look)) {
        before = look;
        continue;
      }
      let after = look;
      for (
        let i = 0;
        i < 60 && (after - before) * h > 4 * Number.EPSILON * Math.abs(this.#t) + 1e-14 * h;
        i += 1
      ) {
        const middle = (before + after) / 2;
        if (differs(middle)) after = middle;
        else before = middle;
      }
      return after * h;
    }
    return null;
  }

  #toEvent(distance: number, end: number): string | null {
    this.#counters.events += 1;
    const { events } = this.#span;
    const room = 64 * Number.EPSILON * Math.abs(this.#t) + 1e-13 * this.#h;
    if (distance > room) {
      // Once more up to the event alone: the step that led past it may have bent there.
      if (!Number.isFinite(this.#tried(distance))) return NOT_FINITE;
      const stopped = this.#accept(this.#t + distance);
      if (stopped !== null) return stopped;
      this.#crowded = 0;
    } else {
      this.#crowded += 1;
      // What is just ahead decides, since nothing is left to step over.
      this.#method.within(1, this.#scratch);
      if (this.#crowded > MOST_CROWDED) return CHATTER;
      const settled = events?.settle(this.#t + this.#h, this.#scratch, this.#h);
      if (settled?.kind === "stop") return settled.reason;
      if (settled?.kind === "go" && settled.stick) this.#method = this.#stiffMethod();
      return this.#restart(end, false);
    }
    return this.#restart(end);
  }

  /** Begins anew with the equations that hold from here on. */
  #restart(end: number, settle = true): string | null {
    const guess = this.#h > 0 ? this.#h : (end - this.#t) * 1e-3;
    if (settle) {
      const settled = this.#span.events?.settle(this.#t, this.#x, guess);
      if (settled?.kind === "stop") return settled.reason;
      if (settled?.kind === "go" && settled.stick) this.#method = this.#stiffMethod();
    }
    this.#fresh = true;
    this.#signs = 0;
    if (!this.#problem.rates(this.#t, this.#x, this.#rates)) return NOT_FINITE;
    this.#scale.begin(this.#t, this.#x);
    this.#h = this.#scale.firstStep(this.#t, this.#x, this.#rates, end - this.#t, this.#scratch);
    return null;
  }

  #watchStiffness(h: number): void {
    if (this.#span.method !== undefined) return;
    const stiffness = this.#method.stiffness(h, this.#scale.largest);
    const explicit = this.#method === this.#explicit;
    const sign = explicit ? stiffness > STABLE : stiffness < 1;
    this.#signs = sign ? this.#signs + 1 : Math.max(0, this.#signs - (explicit ? 1 : EASY_STEPS));
    if (this.#signs < (explicit ? STIFF_STEPS : EASY_STEPS)) return;
    this.#signs = 0;
    this.#method = explicit ? this.#stiffMethod() : this.#explicit;
  }

  #stiffMethod(): Method {
    const { size, pattern } = this.#problem;
    this.#stiff ??= rodas(this.#problem, linearSolver(size, pattern), this.#counters);
    return this.#stiff;
  }
}

const MOST_CROWDED = 40;
const NOT_FINITE = "A rate has no finite value here.";
const CHATTER = "The equations switch to and fro at this point without moving on.";
