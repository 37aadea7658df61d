import { type Finding, finding } from "../diagnostics/finding.ts";
import type { StateModel } from "../equations/model.ts";
import type { FlatTrial } from "../resolve/flat-trial.ts";
import type { Parameters, TrialRun } from "../simulation/run-trial.ts";
import type { RunResult } from "../simulation/simulate.ts";
import { maximumOf, minimumOf, type Trace } from "../simulation/trace.ts";
import type { Expr } from "../symbolic/expression.ts";
import { postorder } from "../symbolic/postorder.ts";
import { numberText, quantityText } from "../units/unit-text.ts";

/** A `set` that leaves the range of its param. */
export function outOfRange(trial: FlatTrial, model: StateModel): Finding[] {
  return model.causal.graph.parameters.flatMap(({ name, range, unit }) => {
    const value = trial.sets.get(name);
    if (value === undefined || range === null || (value >= range.low && value <= range.high)) return [];
    const message = `\`${name}\` is set to ${quantityText(value, unit, 6)}, outside its range ${quantityText(range.low, unit, 6)} .. ${quantityText(range.high, unit, 6)}.`;
    return [finding("out-of-range", trial.span, message)];
  });
}

/** A run that could not begin, or ended before its time: when, where the states were, and why. */
export function stopFinding(
  trial: FlatTrial,
  model: StateModel,
  run: TrialRun,
  varied: Parameters | null,
): Finding {
  const at = varied === null ? "" : ` With ${parametersText(model, varied)}.`;
  if (run.kind === "none")
    return finding(
      "not-computable",
      trial.span,
      `The trial \`${trial.name}\` could not begin. ${run.reason}${at}`,
    );
  const { time, reason, state } = run.result;
  const facts = model.states.slice(0, 12).map(({ name, unit }, i) => ({
    message: `\`${name}\` is ${quantityText(state[i], unit, 6)} there`,
  }));
  const message = `The run of \`${trial.name}\` stopped at ${numberText(time, 6)} s. ${reason}${at}`;
  return finding("run-stopped", trial.span, message, { facts });
}

const CLOSED = 1e-4;

export function energyFindings(trial: FlatTrial, { energy }: RunResult): Finding[] {
  if (energy === null || !(energy.closure > CLOSED)) return [];
  const message = `The energy of \`${trial.name}\` does not close: ${numberText(energy.closure, 2)} of what was moved is missing.`;
  const facts = [
    { message: `supplied ${numberText(energy.supplied, 6)} J` },
    { message: `dissipated ${numberText(energy.dissipated, 6)} J` },
    { message: `stored ${numberText(energy.stored, 6)} J` },
  ];
  return [finding("energy-not-closed", trial.span, message, { facts })];
}

export function parametersText(model: StateModel, parameters: Parameters): string {
  const named = model.causal.graph.parameters.flatMap(({ name, unit }) => {
    const value = parameters.get(name);
    return value === undefined ? [] : [`${name} = ${quantityText(value, unit, 5)}`];
  });
  return named.join(", ") || "the values of the text";
}

/** The curves that a model reads, each with what it is read at: once for every place. */
export function readCurves(model: StateModel): Expr[] {
  const found: Expr[] = [];
  const seen = new Set<Expr>();
  const roots = [
    ...model.equations.map(({ rate }) => rate),
    ...model.outputs.map(({ value }) => value),
    ...model.loops.flatMap(({ residuals }) => [...residuals]),
    ...(model.implicit?.right ?? []),
  ];
  postorder(
    roots,
    (expr) => seen.has(expr),
    (expr) => {
      seen.add(expr);
      if (expr.op === "curve" && expr.value === 0) found.push(expr);
    },
  );
  return found;
}

/** Where a run left the points of a curve, at the first time it did. SI: a curve does not know its units any more. */
export function curveFindings(
  trial: FlatTrial,
  curves: readonly Expr[],
  traces: readonly Trace[],
): Finding[] {
  return curves.flatMap(({ name, curve }, i) => {
    if (curve === null) return [];
    const [low, high] = [curve.x[0], curve.x[curve.x.length - 1]];
    const { times, values } = traces[i];
    const slack = 1e-9 * (high - low);
    const first = values.findIndex((value) => value < low - slack || value > high + slack);
    if (first === -1) return [];
    const farthest = values[first] < low ? minimumOf(traces[i]) : maximumOf(traces[i]);
    const message = `The run of \`${trial.name}\` left the curve \`${name}\` at ${numberText(times[first], 4)} s: it was read at ${numberText(farthest, 5)}, its points go from ${numberText(low, 5)} to ${numberText(high, 5)} (in SI units).`;
    return [finding("curve-left", trial.span, message)];
  });
}

/** So many explicit steps would have been a wait. */
const A_WAIT = 10_000;

/** A run that an explicit method would hardly have come through, for stiffness and not for something that sticks. */
export function stiffFindings(trial: FlatTrial, { counters }: RunResult): Finding[] {
  const { by, events, spared, steps } = counters;
  if (spared < A_WAIT || events > 0) return [];
  const about = Number(spared.toPrecision(1)).toLocaleString("en");
  const message = `The run of \`${trial.name}\` is stiff: ${by.rodas} of its ${steps} steps were made by the implicit method; an explicit one would have taken about ${about}.`;
  return [finding("stiff", trial.span, message)];
}
