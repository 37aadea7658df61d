import type { TrialReport } from "../expectations/judge-trial.ts";
import { DEFAULT_TOLERANCE } from "../simulation/run-trial.ts";
import { finalOf, maximumOf, minimumOf } from "../simulation/trace.ts";
import { fromSI } from "../units/convert.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Unit } from "../units/unit.ts";
import { numberText, quantityText, readableQuantity } from "../units/unit-text.ts";
import { table } from "./linear-text.ts";
import { methodText } from "./run-json.ts";
import type { TextSection } from "./system-text.ts";
import { textPlot } from "./text-plot.ts";

const JOULE = parseUnit("J") as Unit;
/** More curves than a reader looks through; the table of figures still names them all. */
const MOST_PLOTS = 6;

/** A trial that was run: how, whether its requirements are met, its signals and its energy. */
export function runText(report: TrialReport): TextSection[] {
  const sections = [
    { title: "Run", lines: runLines(report) },
    { title: "Requirements", lines: requirementRows(report) },
    { title: "Signals", lines: signalRows(report) },
    ...plots(report),
    { title: "Energy", lines: energyRows(report) },
  ];
  return sections.filter(({ lines }) => lines.length > 0);
}

function runLines({ trial, result, runs, parameters }: TrialReport): string[] {
  if (result === null) return ["could not begin"];
  const { steps, events } = result.counters;
  const graph = trial.graph;
  const set = [...parameters].map(([name, value]) => {
    const unit = graph?.parameters.find((parameter) => parameter.name === name)?.unit;
    return `${name} = ${unit === undefined ? numberText(value, 5) : quantityText(value, unit, 5)}`;
  });
  return [
    `${numberText(result.time, 6)} s in ${steps.toLocaleString("en")} steps, ${methodText(result)}; tolerance ${(trial.tolerance ?? DEFAULT_TOLERANCE).toExponential()}`,
    ...(events === 0
      ? []
      : [`${events.toLocaleString("en")} ${events === 1 ? "switching" : "switchings"} located`]),
    ...(result.reason === null ? [] : [`stopped: ${result.reason}`]),
    ...(runs > 1 ? [`the worst of ${runs} runs is shown`] : []),
    ...(set.length === 0 ? [] : [`with ${set.join(", ")}`]),
  ];
}

function requirementRows({ expectations }: TrialReport): string[] {
  return table(
    expectations.map(({ text, passed, measured, margin, message }) => [
      passed ? "met" : measured === null ? "not measured" : "not met",
      text,
      measured === null ? "" : `measured ${measured}`,
      margin == null ? "" : `margin ${margin}`,
      message ?? "",
    ]),
  );
}

function signalRows({ signals, result }: TrialReport): string[] {
  if (result === null || signals.length === 0) return [];
  const rows = signals.map(({ name, unit }, i) => {
    const trace = result.traces[i];
    const shown = (value: number) => numberText(fromSI(value, unit), 5);
    const figures = [trace.values[0], finalOf(trace), minimumOf(trace), maximumOf(trace)];
    return [name, unit.text, ...figures.map(shown)];
  });
  return table([["", "unit", "start", "end", "least", "greatest"], ...rows]);
}

function plots({ signals, result }: TrialReport): TextSection[] {
  if (result === null) return [];
  const axis = `0 to ${numberText(result.time, 6)} s`;
  return signals.slice(0, MOST_PLOTS).map(({ name, unit }, i) => {
    const { times, values } = result.traces[i];
    const shown = values.map((value) => fromSI(value, unit));
    const title = unit.text === "1" ? `${name} over ${axis}` : `${name} in ${unit.text} over ${axis}`;
    return { title, lines: textPlot(times, shown) };
  });
}

function energyRows({ result }: TrialReport): string[] {
  const energy = result?.energy ?? null;
  if (energy === null) return [];
  const joules = (value: number) => readableQuantity(value, JOULE.dimension);
  const share = energy.closure === 0 ? "0" : energy.closure.toExponential(1);
  return [
    ...table([
      ["supplied", joules(energy.supplied)],
      ["dissipated", joules(energy.dissipated)],
      ["stored", joules(energy.stored)],
      ["closes to", share],
    ]),
    ...table(
      energy.elements.map(({ name, kind, energy: moved }) => [`  ${name}`, `${kind} ${joules(moved)}`]),
    ),
  ];
}
