import type { MeasureKind, TrialMeasure } from "../resolve/flat-trial.ts";
import type { RunResult } from "../simulation/simulate.ts";
import {
  finalOf,
  firstAbove,
  integralOf,
  lastOutside,
  maximumOf,
  minimumOf,
  type Trace,
  valueAt,
} from "../simulation/trace.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Expr } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { postorder } from "../symbolic/postorder.ts";

/** SI, or why there is none. */
export type Read = number | { readonly reason: string };

/** Signals that a measure needs from the run: its own, or of a condition the difference of each comparison's sides. */
export function signalsOf(pool: Pool, { kind, signal }: TrialMeasure): Expr[] {
  if (signal === null) return [];
  return kind === "time_when"
    ? comparisonsIn(signal).map(({ args }) => pool.subtract(args[0], args[1]))
    : [signal];
}

/** Reads a measure off a run. `traces` are those of its signals; `lastStep` is when the last drive stepped. */
export function readMeasure(
  pool: Pool,
  measure: TrialMeasure,
  traces: readonly Trace[],
  { energy, status }: RunResult,
  lastStep: number | null,
  valueOf: (expr: Expr) => number,
): Read {
  if (status === "stopped") return { reason: "The run stopped before its end." };
  const { kind } = measure;
  if (kind === "energy_in" || kind === "energy_lost") {
    if (energy === null) return { reason: "The energy of a store does not follow from its law." };
    return kind === "energy_in" ? energy.supplied : energy.dissipated;
  }
  if (kind === "time_when") return whenTrue(pool, measure.signal as Expr, traces);
  const argument = measure.argument === null ? Number.NaN : valueOf(measure.argument);
  return numeric(READERS[kind](traces[0], lastStep, argument));
}

function numeric(value: Read): Read {
  return typeof value === "number" && Number.isNaN(value)
    ? { reason: "It comes out as not a number." }
    : value;
}

type Reader = (trace: Trace, lastStep: number | null, argument: number) => Read;

const READERS: Readonly<Record<Exclude<MeasureKind, "energy_in" | "energy_lost" | "time_when">, Reader>> = {
  final: finalOf,
  max: maximumOf,
  min: minimumOf,
  peak: (trace) => Math.max(Math.abs(maximumOf(trace)), Math.abs(minimumOf(trace))),
  mean: (trace) => integralOf(trace, (value) => value) / lengthOf(trace),
  rms: (trace) => Math.sqrt(integralOf(trace, (value) => value * value) / lengthOf(trace)),
  at: (trace, _, time) => {
    const value = valueAt(trace, time);
    return Number.isNaN(value) ? { reason: "That time is not within the run." } : value;
  },
  settling: (trace, lastStep, share) =>
    answered(
      trace,
      lastStep,
      ({ from, final, change }) => lastOutside(trace, final, share * change, from) - from,
    ),
  rise: (trace, lastStep) =>
    answered(trace, lastStep, ({ from, before, final }) => {
      const sign = Math.sign(final - before);
      const turned = { times: trace.times, values: trace.values.map((value) => sign * (value - before)) };
      const whole = Math.abs(final - before);
      const [low, high] = [0.1, 0.9].map((share) => firstAbove(turned, share * whole, from));
      return low === null || high === null ? { reason: "It does not rise from 10 to 90 %." } : high - low;
    }),
  overshoot: (trace, lastStep) =>
    answered(trace, lastStep, ({ from, before, final, change }) => {
      const sign = Math.sign(final - before);
      const first = trace.times.findIndex((time) => time >= from);
      const after = {
        times: trace.times.slice(first),
        values: trace.values.slice(first).map((value) => sign * value),
      };
      return Math.max(0, maximumOf(after) - sign * final) / change;
    }),
};

function lengthOf({ times }: Trace): number {
  return times[times.length - 1] - times[0];
}

interface Answer {
  readonly from: number;
  readonly before: number;
  readonly final: number;
  readonly change: number;
}

/** The answer to the last step of a drive; without one, to the start. */
function answered(trace: Trace, lastStep: number | null, read: (answer: Answer) => Read): Read {
  const { times, values } = trace;
  const from = lastStep ?? times[0];
  if (!(from < times[times.length - 1])) return { reason: "The last step of a drive comes after the run." };
  // At a jump its time stands twice; the first one is what was before.
  const at = Math.max(
    0,
    times.findIndex((time) => time >= from),
  );
  const [before, final] = [values[at], finalOf(trace)];
  const change = Math.abs(final - before);
  const largest = values.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  if (!(change > 1e-9 * largest)) return { reason: "It ends where it was before the last step." };
  return read({ from, before, final, change });
}

function comparisonsIn(condition: Expr): Expr[] {
  const found: Expr[] = [];
  const seen = new Set<Expr>();
  postorder(
    [condition],
    (expr) => seen.has(expr),
    (expr) => {
      seen.add(expr);
      if (expr.op === "compare") found.push(expr);
    },
  );
  return found;
}

/** The first time at which the condition holds, by the differences that its comparisons decide by. */
function whenTrue(pool: Pool, condition: Expr, traces: readonly Trace[]): Read {
  const comparisons = comparisonsIn(condition);
  const stand = new Map(comparisons.map((one, i) => [one, pool.symbol("unknown", `sense:${i}`)]));
  const holdsWith = (senses: readonly number[]): boolean => {
    const truth = (expr: Expr): boolean => {
      const i = comparisons.indexOf(expr);
      if (i !== -1) {
        const symbol = stand.get(expr) as Expr;
        return evaluate(pool.compare(expr.name, symbol, pool.zero), () => senses[i]) !== 0;
      }
      if (expr.op === "not") return !truth(expr.args[0]);
      if (expr.op === "and") return expr.args.every(truth);
      return expr.op === "or" ? expr.args.some(truth) : expr.value !== 0;
    };
    return truth(condition);
  };
  const times = traces[0]?.times ?? [];
  for (let i = 0; i < times.length; i += 1) {
    if (!holdsWith(traces.map(({ values }) => values[i]))) continue;
    if (i === 0 || times[i] === times[i - 1]) return times[i];
    let [low, high] = [times[i - 1], times[i]];
    for (let round = 0; round < 60; round += 1) {
      const middle = (low + high) / 2;
      if (holdsWith(traces.map((trace) => valueAt(trace, middle)))) high = middle;
      else low = middle;
    }
    return high;
  }
  return { reason: "The condition never holds in the run." };
}
