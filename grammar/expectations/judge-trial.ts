import { type Finding, finding } from "../diagnostics/finding.ts";
import type { StateModel } from "../equations/model.ts";
import type {
  FlatComparison,
  FlatTrial,
  TrialExpectation,
  TrialSide,
  TrialSignal,
} from "../resolve/flat-trial.ts";
import { type Parameters, runTrial, type TrialRun, variantsOf } from "../simulation/run-trial.ts";
import type { RunResult } from "../simulation/simulate.ts";
import { maximumOf, type Trace, valueAt } from "../simulation/trace.ts";
import { evaluate, holds } from "../symbolic/evaluate.ts";
import type { Expr } from "../symbolic/expression.ts";
import type { Unit } from "../units/unit.ts";
import { numberText, quantityText } from "../units/unit-text.ts";
import type { ExpectationResult } from "./result.ts";
import {
  curveFindings,
  energyFindings,
  outOfRange,
  parametersText,
  readCurves,
  stiffFindings,
  stopFinding,
} from "./run-findings.ts";
import { readMeasure, signalsOf } from "./trial-measures.ts";

/** A trial that was run: its worst run is kept, with the samples of what it records. */
export interface TrialReport {
  readonly trial: FlatTrial;
  /** Sampled and plotted: what it records, or else all outputs of its system. */
  readonly signals: readonly TrialSignal[];
  /** Of the run that came nearest to failing or failed most; null where none could begin. */
  readonly result: RunResult | null;
  /** What differs from the text in that run, SI by parameter; and how many runs there were. */
  readonly parameters: Parameters;
  readonly runs: number;
  readonly expectations: readonly ExpectationResult[];
  readonly findings: readonly Finding[];
}

/** One requirement in one run: `slack` is relative and below zero where it fails; null where nothing is measured. */
interface Judged {
  readonly passed: boolean;
  readonly slack: number;
  readonly measured: string | null;
  readonly wanted: string;
  readonly margin: string | null;
  readonly message: string | null;
}

/** A requirement of either kind, made ready: which signals it needs, and how it is read off them. */
interface Requirement {
  readonly text: string;
  readonly span: Finding["span"];
  readonly signals: readonly Expr[];
  judge(run: TrialRun & { kind: "run" }, traces: readonly Trace[]): Judged;
}

/** Runs a trial in all its variants and holds its requirements against each. Nothing passes that was not measured. */
export function judgeTrial(
  trial: FlatTrial,
  model: StateModel | null,
  progress?: (share: number) => boolean,
): TrialReport {
  const { graph } = trial;
  if (graph === null || model === null) {
    const message = "The run could not begin: the trial or its system is refused, as other findings say.";
    return unrun(trial, message, []);
  }
  const variants = variantsOf(trial, graph);
  if ("tooMany" in variants) {
    const message = `The trial asks for ${variants.tooMany.toLocaleString("en")} runs; a thousand are the most.`;
    return unrun(trial, message, [finding("too-large", trial.span, message)]);
  }
  const requirements = [
    ...trial.expectations.map((one) => expectationOf(trial, model, one)),
    ...trial.comparisons.flatMap((one) => (one.limit === null ? [] : [comparisonOf(one)])),
  ];
  const signals: readonly TrialSignal[] = trial.records.length > 0 ? trial.records : graph.outputs;
  const curves = readCurves(model);
  const wanted = [
    ...signals.map(({ value }) => value),
    ...requirements.flatMap((one) => one.signals),
    ...curves.map(({ args }) => args[0]),
  ];
  const worst: (Judged & { readonly parameters: Parameters })[] = [];
  const findings = outOfRange(trial, model);
  let kept: { readonly result: RunResult; readonly slack: number; readonly parameters: Parameters } | null =
    null;
  let stopped = false;
  for (const [index, parameters] of variants.entries()) {
    const share = (of: number) => progress?.((index + of) / variants.length) ?? true;
    const run = runTrial(trial, model, parameters, wanted, share);
    const judged = requirementsOf(run, requirements, signals.length);
    judged.forEach((one, i) => {
      if (worst[i] === undefined || one.slack < worst[i].slack) worst[i] = { ...one, parameters };
    });
    if (run.kind === "none" || run.result.status === "stopped") {
      if (!stopped) findings.push(stopFinding(trial, model, run, variants.length > 1 ? parameters : null));
      stopped = true;
    }
    if (run.kind === "run") {
      const slack = Math.min(Number.POSITIVE_INFINITY, ...judged.map((one) => one.slack));
      if (kept === null || slack < kept.slack) kept = { result: run.result, slack, parameters };
      const read = run.result.traces.slice(wanted.length - curves.length);
      const found = [
        ...energyFindings(trial, run.result),
        ...curveFindings(trial, curves, read),
        ...stiffFindings(trial, run.result),
      ];
      // Of many runs the first to show it speaks for all.
      for (const one of found) {
        if (
          !findings.some(
            ({ name, span }) =>
              name === one.name && span.start === one.span.start && one.name !== "curve-left",
          )
        )
          findings.push(one);
      }
      if (run.result.reason === "Cancelled.") break;
    }
  }
  const expectations = worst.map(({ parameters, ...one }, i): ExpectationResult => {
    const where =
      variants.length > 1
        ? `Worst of ${variants.length} runs, at ${parametersText(model, parameters)}.`
        : null;
    const { passed, measured, wanted: asked, margin } = one;
    const message = [one.message, where].filter((part) => part !== null).join(" ") || null;
    const { text } = requirements[i];
    return {
      system: trial.system,
      trial: trial.name,
      text,
      judged: true,
      passed,
      measured,
      wanted: asked,
      margin,
      message,
    };
  });
  expectations.forEach((result, i) => {
    if (!result.passed) findings.push(failure(result, requirements[i].span));
  });
  return {
    trial,
    signals,
    result: kept?.result ?? null,
    parameters: kept?.parameters ?? trial.sets,
    runs: variants.length,
    expectations,
    findings,
  };
}

function unrun(trial: FlatTrial, message: string, findings: readonly Finding[]): TrialReport {
  const expectations = trial.texts.map(
    ({ text }): ExpectationResult => ({
      system: trial.system,
      trial: trial.name,
      text,
      judged: true,
      passed: false,
      measured: null,
      wanted: text,
      message,
    }),
  );
  return { trial, signals: [], result: null, parameters: trial.sets, runs: 0, expectations, findings };
}

function requirementsOf(run: TrialRun, requirements: readonly Requirement[], first: number): Judged[] {
  let at = first;
  return requirements.map((one) => {
    if (run.kind === "none") return unmeasured(one.text, run.reason);
    const traces = run.result.traces.slice(at, at + one.signals.length);
    at += one.signals.length;
    return one.judge(run, traces);
  });
}

function unmeasured(wanted: string, message: string): Judged {
  return { passed: false, slack: Number.NEGATIVE_INFINITY, measured: null, wanted, margin: null, message };
}

function expectationOf(trial: FlatTrial, model: StateModel, expectation: TrialExpectation): Requirement {
  const { pool } = model.causal.graph;
  const { measures, condition, text, span } = expectation;
  const signals = measures.map((measure) => signalsOf(pool, measure));
  return {
    text,
    span,
    signals: signals.flat(),
    judge({ result, valueOf }, traces) {
      const steps = trial.drives.flatMap(({ steps }) => steps.map(valueOf)).filter((at) => at < result.time);
      const lastStep = steps.length === 0 ? null : Math.max(...steps);
      const values = new Map<Expr, number>();
      let at = 0;
      for (const [i, measure] of measures.entries()) {
        const own = traces.slice(at, at + signals[i].length);
        at += signals[i].length;
        const read = readMeasure(pool, measure, own, result, lastStep, valueOf);
        if (typeof read !== "number")
          return unmeasured(text, `\`${measure.kind}\` has no value: ${read.reason}`);
        values.set(measure.symbol, read);
      }
      const sideValue = ({ value }: TrialSide) =>
        evaluate(value, (symbol) => values.get(symbol) ?? valueOf(symbol));
      return conditionJudged(condition, sideValue, text);
    },
  };
}

function conditionJudged(
  condition: TrialExpectation["condition"],
  valueOf: (side: TrialSide) => number,
  text: string,
): Judged {
  const { unit } = condition.left;
  const left = valueOf(condition.left);
  const shown = (value: number) => quantityText(value, unit, 6);
  const judged = (margin: number, scale: number, wanted: string, passed: boolean): Judged => {
    if (Number.isNaN(margin))
      return unmeasured(text, "The condition has no value: it comes out as not a number.");
    const slack = margin / (scale || 1);
    // Exactly at the limit of `<` there is no margin, and it fails.
    const away = passed ? Math.max(slack, 0) : Math.min(slack, -Number.MIN_VALUE);
    return {
      passed,
      slack: away,
      measured: shown(left),
      wanted,
      margin: differenceText(margin, unit),
      message: null,
    };
  };
  if (condition.kind === "between") {
    const [low, high] = [valueOf(condition.low), valueOf(condition.high)];
    const margin = Math.min(left - low, high - left);
    const wanted = `between ${shown(low)} and ${shown(high)}`;
    return judged(margin, Math.max(Math.abs(low), Math.abs(high)), wanted, margin >= 0);
  }
  const { operator, within } = condition;
  const right = valueOf(condition.right);
  if (operator === "=") {
    const allowed =
      within === null ? 1e-12 * Math.abs(right) : valueOf(within) * (within.relative ? Math.abs(right) : 1);
    const margin = allowed - Math.abs(left - right);
    const about =
      within === null
        ? ""
        : ` within ${within.relative ? `${numberText(valueOf(within) * 100)} %` : differenceText(valueOf(within), unit)}`;
    return judged(margin, Math.abs(right), `= ${shown(right)}${about}`, margin >= 0);
  }
  const margin = operator.startsWith("<") ? right - left : left - right;
  return judged(margin, Math.abs(right), `${operator} ${shown(right)}`, holds(operator, left, right));
}

/** A difference has no offset: 5 degC more are 5 K more. */
function differenceText(value: number, unit: Unit): string {
  return quantityText(value, { ...unit, offset: 0 }, 4);
}

function comparisonOf(comparison: FlatComparison): Requirement {
  const { signal, times, values, limit, text, span, path } = comparison;
  return {
    text,
    span,
    signals: [signal.value],
    judge({ result }, [trace]) {
      if (limit === null) return unmeasured(text, "There is no limit.");
      const apart: Trace = differences(trace, times, values, result.time);
      if (apart.times.length < 2) return unmeasured(text, `No time of \`${path}\` is within the run.`);
      const measured = limit.measure === "max" ? maximumOf(absolute(apart)) : rootMeanSquare(apart);
      const side = (value: number) => ({ value, unit: signal.unit });
      const shown = (value: number) => differenceText(value, side(value).unit);
      if (Number.isNaN(measured)) return unmeasured(text, "The difference comes out as not a number.");
      const margin = limit.value - measured;
      const passed = holds(limit.operator, measured, limit.value);
      const slack = passed
        ? margin / (limit.value || 1)
        : Math.min(margin / (limit.value || 1), -Number.MIN_VALUE);
      return {
        passed,
        slack,
        measured: shown(measured),
        wanted: `${limit.operator} ${shown(limit.value)}`,
        margin: shown(margin),
        message: null,
      };
    },
  };
}

/** Computed less measured, at the measured times that lie within the run. */
function differences(trace: Trace, times: readonly number[], values: readonly number[], end: number): Trace {
  const kept = times.flatMap((time, i) => (time >= 0 && time <= end ? [i] : []));
  return { times: kept.map((i) => times[i]), values: kept.map((i) => valueAt(trace, times[i]) - values[i]) };
}

function absolute({ times, values }: Trace): Trace {
  return { times, values: values.map(Math.abs) };
}

/** By trapezia, since measured times are seldom even. */
function rootMeanSquare({ times, values }: Trace): number {
  let sum = 0;
  for (let i = 1; i < times.length; i += 1)
    sum += ((times[i] - times[i - 1]) * (values[i] ** 2 + values[i - 1] ** 2)) / 2;
  return Math.sqrt(sum / (times[times.length - 1] - times[0]));
}

function failure({ text, measured, wanted, message }: ExpectationResult, span: Finding["span"]): Finding {
  if (measured === null)
    return finding("not-computable", span, `\`${text}\` could not be judged: ${message}`);
  const more = message === null ? "" : ` ${message}`;
  return finding(
    "expectation-failed",
    span,
    `\`${text}\` is not met: measured ${measured}, wanted ${wanted}.${more}`,
  );
}
