import { evaluateModel } from "../../grammar/analysis/evaluate-model.ts";
import type { Point } from "../../grammar/analysis/point.ts";
import { startPoint } from "../../grammar/analysis/point.ts";
import type { FindingName } from "../../grammar/diagnostics/finding.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { seeded } from "../published/derived.ts";
import { textOf } from "./graph-text.ts";
import { type GraphWishes, type RandomGraph, randomGraph } from "./random-graph.ts";

export interface Drawn {
  readonly seed: number;
  readonly graph: RandomGraph;
  /** Null where the core refuses the graph, for these findings. */
  readonly model: StateModel | null;
  readonly refusedFor: readonly FindingName[];
}

/** The graphs of a seeded series until so many have equations, and what was refused on the way. */
export function drawnModels(series: string, accepted: number, wishes: GraphWishes): Drawn[] {
  const drawn: Drawn[] = [];
  for (let seed = 1, found = 0; found < accepted; seed += 1) {
    const graph = randomGraph(seeded(`${series} ${seed}`), wishes);
    const { model, refusedFor } = throughTheCore(textOf(graph));
    drawn.push({ seed, graph, model, refusedFor });
    if (model !== null) found += 1;
  }
  return drawn;
}

export function throughTheCore(text: string): Pick<Drawn, "model" | "refusedFor"> {
  const { systems, findings } = checkFile(fileSet([["random.wright", text]]), "random.wright");
  const errors = findings.filter(({ severity }) => severity === "error");
  return { model: systems[0]?.model ?? null, refusedFor: errors.map(({ name }) => name) };
}

/** Where both sides are asked: independent states and time at random, inputs as drawn. */
export interface AskedPoint {
  readonly stored: Readonly<Record<string, number>>;
  /** Value and rate of inputs and of `time`. */
  readonly signals: Readonly<Record<string, readonly [number, number]>>;
}

export function randomPoint(graph: RandomGraph, model: StateModel | null, seed: string): AskedPoint {
  const draw = seeded(seed);
  // Of what is refused, the tracks: relations that hold at some places alone are no machine.
  const stored = (model?.states ?? graph.tracks).map(({ name }) => [name, 4 * draw() - 2]);
  const inputs = graph.inputs.map(({ name, value, rate }) => [name, [value, rate]]);
  return {
    stored: Object.fromEntries(stored),
    signals: Object.fromEntries([...inputs, ["time", [draw(), 1]]]),
  };
}

/** Efforts and flows by bond, and the values and rates of all stores and tracks. */
export interface Answered {
  readonly efforts: readonly (number | null)[];
  readonly flows: readonly (number | null)[];
  readonly stored: Readonly<Record<string, number | null>>;
  readonly rates: Readonly<Record<string, number | null>>;
}

/** What the core's equations say at a point; a text where they give no numbers. */
export function asked(model: StateModel, at: AskedPoint): Answered | string {
  const evaluation = evaluateModel(model, pointIn(model, at));
  if (evaluation.kind === "none") return evaluation.reason;
  const { valueOf, rates } = evaluation;
  const follows = model.dependent.map(({ name, value, rate }) => ({
    name,
    value: valueOf(value),
    rate: valueOf(rate),
  }));
  const own = model.states.map(({ name }, i) => ({ name, value: at.stored[name], rate: rates[i] }));
  const all = [...own, ...follows];
  return {
    efforts: model.efforts.map((effort) => (effort === null ? null : valueOf(effort))),
    flows: model.flows.map((flow) => (flow === null ? null : valueOf(flow))),
    stored: Object.fromEntries(all.map(({ name, value }) => [name, value])),
    rates: Object.fromEntries(all.map(({ name, rate }) => [name, rate])),
  };
}

export function pointIn(model: StateModel, { stored, signals }: AskedPoint): Point {
  return {
    ...startPoint(model),
    states: model.states.map(({ name }) => stored[name]),
    inputs: model.inputs.map(({ name }) => signals[name][0]),
    inputRates: model.inputs.map(({ name }) => signals[name][1]),
    time: signals.time[0],
  };
}
