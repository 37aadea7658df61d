import type { StateModel } from "../equations/model.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { auditedExprs, EnergyAudit, type EnergyReport } from "./energy-audit.ts";
import { energyBook } from "./energy-book.ts";
import { integrate } from "./integrate.ts";
import type { Counters } from "./ode.ts";
import { RunEvents } from "./run-events.ts";
import { RunSystem } from "./run-system.ts";
import type { Trace } from "./trace.ts";

export interface RunPlan {
  /** By input name, in terms of time and parameters; inputs that are not named rest at their nominal values. */
  readonly drives: ReadonlyMap<string, Expr>;
  /** SI, of parameters that differ from the text. */
  readonly parameters: ReadonlyMap<string, number>;
  /** Other symbols with one value throughout. */
  readonly constants?: ReadonlyMap<Symbol, number>;
  /** SI, in the order of the model's states. */
  readonly start: readonly number[];
  /** s. */
  readonly duration: number;
  /** Relative, of each step. */
  readonly tolerance: number;
  /** s between samples. */
  readonly every: number;
  readonly signals: readonly Expr[];
  readonly method?: "dormand-prince" | "rodas";
  /** Told now and then how far the run is; false cancels it. */
  progress?(share: number): boolean;
}

export interface RunResult {
  readonly status: "reached" | "stopped";
  /** Why it stopped, in words. */
  readonly reason: string | null;
  /** s, and SI by state: where the run ended. */
  readonly time: number;
  readonly state: readonly number[];
  /** Samples at exact multiples of `every`, and the end. */
  readonly times: readonly number[];
  /** By signal, at `times`. */
  readonly samples: readonly (readonly number[])[];
  readonly traces: readonly Trace[];
  /** Null where some store's energy does not follow from its law. */
  readonly energy: EnergyReport | null;
  readonly counters: Counters;
}

const QUARTERS = [0, 0.25, 0.5, 0.75, 1];
const STEPS_A_REPORT = 64;

/** Runs a model in time. Nothing is thrown for what a model does: a run that cannot go on says why it stopped. */
export function simulate(model: StateModel, plan: RunPlan): RunResult {
  const book = energyBook(model);
  const watchedByAudit = "missing" in book ? [] : auditedExprs(book);
  const watched = [...plan.signals, ...watchedByAudit];
  const system = new RunSystem(model, { ...plan, watched });
  const audit = "missing" in book ? null : new EnergyAudit(book, (expr) => system.fixedValue(expr));
  const recorder = new Recorder(system, plan, audit);
  const start = Float64Array.from(plan.start);
  const events = new RunEvents(system, plan.tolerance, start);
  const outcome = integrate(system, {
    from: 0,
    to: plan.duration,
    start,
    tolerance: plan.tolerance,
    corners: events.corners,
    events: system.switches.length === 0 ? undefined : events,
    method: plan.method,
    accepted: (step) => recorder.accepted(step),
  });
  recorder.finish(outcome.time, outcome.state);
  const reason = outcome.status === "reached" ? null : stopReason(outcome.reason, system.failure);
  return {
    status: outcome.status,
    reason,
    time: outcome.time,
    state: [...outcome.state],
    times: recorder.times,
    samples: recorder.samples,
    traces: recorder.traces,
    energy: audit?.report() ?? null,
    counters: outcome.counters,
  };
}

function stopReason(reason: string, failure: string | null): string {
  return failure !== null && !reason.startsWith("Cancelled") ? `${reason} ${failure}` : reason;
}

class Recorder {
  readonly times: number[] = [];
  readonly samples: number[][];
  readonly traces: { readonly times: number[]; readonly values: number[] }[];
  readonly #system: RunSystem;
  readonly #plan: RunPlan;
  readonly #audit: EnergyAudit | null;
  readonly #points: number[] = [];
  readonly #x: Float64Array;
  readonly #rounding: number;
  #steps = 0;
  #next = 0;

  constructor(system: RunSystem, plan: RunPlan, audit: EnergyAudit | null) {
    this.#system = system;
    this.#plan = plan;
    this.#audit = audit;
    this.#x = new Float64Array(system.size);
    // A sample a rounding before the end is the end.
    this.#rounding = 1e-12 * plan.duration;
    this.samples = plan.signals.map(() => []);
    this.traces = plan.signals.map(() => ({ times: this.#points, values: [] }));
  }

  accepted(step: Parameters<NonNullable<Parameters<typeof integrate>[1]["accepted"]>>[0]): string | null {
    const { from, to, fresh } = step;
    const length = to - from;
    const quarters = QUARTERS.map((s) => {
      this.#state(step, s);
      return Float64Array.from(this.#system.watch(from + s * length, this.#x));
    });
    const signals = this.#plan.signals.length;
    // The end of the step before is the start of this one, but after a jump.
    const first = fresh || this.#points.length === 0 ? 0 : 1;
    for (let k = first; k < QUARTERS.length; k += 1) {
      this.#points.push(k === 4 ? to : from + QUARTERS[k] * length);
      for (let i = 0; i < signals; i += 1) this.traces[i].values.push(quarters[k][i]);
    }
    this.#audit?.step(
      length,
      quarters.map((values) => values.subarray(signals)),
      fresh,
    );
    for (
      let time = this.#next * this.#plan.every;
      time < to - this.#rounding;
      time = this.#next * this.#plan.every
    ) {
      this.#state(step, (time - from) / length);
      this.#sample(time, this.#x);
      this.#next += 1;
    }
    this.#steps += 1;
    const report = this.#plan.progress !== undefined && this.#steps % STEPS_A_REPORT === 0;
    return report && this.#plan.progress?.(to / this.#plan.duration) === false ? "Cancelled." : null;
  }

  finish(time: number, state: Float64Array): void {
    if (this.times.at(-1) !== time) this.#sample(time, state);
  }

  #state(
    step: { start: Float64Array; end: Float64Array; within(s: number, out: Float64Array): void },
    s: number,
  ) {
    if (s === 0) this.#x.set(step.start);
    else if (s === 1) this.#x.set(step.end);
    else step.within(s, this.#x);
  }

  #sample(time: number, x: Float64Array): void {
    const values = this.#system.watch(time, x);
    this.times.push(time);
    for (let i = 0; i < this.samples.length; i += 1) this.samples[i].push(values[i]);
  }
}
