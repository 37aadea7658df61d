import { equilibrium } from "../analysis/equilibrium.ts";
import { parametersAt } from "../analysis/point.ts";
import type { StateModel } from "../equations/model.ts";
import type { FlatTrial } from "../resolve/flat-trial.ts";
import type { FlatGraph, FlatStart } from "../resolve/graph.ts";
import { derivative } from "../symbolic/derivative.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { substitution } from "../symbolic/substitute.ts";
import { type RunResult, simulate } from "./simulate.ts";

/** SI, by full name: what differs from the text in one run of a trial. */
export type Parameters = ReadonlyMap<string, number>;

export const MOST_RUNS = 1000;
export const MOST_SAMPLES = 1_000_000;
export const DEFAULT_TOLERANCE = 1e-6;
const DEFAULT_SAMPLES = 200;
const SEED = 20_260_101;

/** Every run of a trial: the values of each `vary` against each other, and as many draws as `scatter` asks for. */
export function variantsOf(
  trial: FlatTrial,
  graph: FlatGraph,
): readonly Parameters[] | { readonly tooMany: number } {
  const count = trial.varies.reduce((product, { steps }) => product * (steps + 1), trial.scatter ?? 1);
  if (count > MOST_RUNS) return { tooMany: count };
  let variants: ReadonlyMap<string, number>[] = [trial.sets];
  for (const { parameter, low, high, steps } of trial.varies) {
    const values = Array.from({ length: steps + 1 }, (_, i) => low + ((high - low) * i) / steps);
    variants = variants.flatMap((one) => values.map((value) => new Map([...one, [parameter, value]])));
  }
  if (trial.scatter === null) return variants;
  const ranged = graph.parameters.filter(({ range, constant }) => range !== null && !constant);
  const random = uniform(SEED);
  const draws = Array.from({ length: trial.scatter }, () =>
    ranged.flatMap(({ name, range }): [string, number][] => {
      if (range === null) return [];
      const value = range.low + (range.high - range.low) * random();
      return trial.sets.has(name) || trial.varies.some(({ parameter }) => parameter === name)
        ? []
        : [[name, value]];
    }),
  );
  return variants.flatMap((one) => draws.map((draw) => new Map([...one, ...draw])));
}

/** mulberry32 (T. Ettinger, public domain; from memory): the same draws at every run and on every machine. */
function uniform(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
}

/** A run that could not even begin says why. */
export type TrialRun =
  | { readonly kind: "run"; readonly result: RunResult; readonly valueOf: (expr: Expr) => number }
  | { readonly kind: "none"; readonly reason: string };

export function runTrial(
  trial: FlatTrial,
  model: StateModel,
  parameters: Parameters,
  signals: readonly Expr[],
  progress?: (share: number) => boolean,
): TrialRun {
  const duration = trial.duration ?? 0;
  const every = trial.every ?? duration / DEFAULT_SAMPLES;
  if (duration / every > MOST_SAMPLES) {
    const most = MOST_SAMPLES.toLocaleString("en");
    return { kind: "none", reason: `The run asks for more than ${most} samples.` };
  }
  const known = parametersAt(model.causal.graph, parameters);
  const lookup = (symbol: Symbol) => known(symbol) ?? trial.constants.get(symbol) ?? Number.NaN;
  const valueOf = (expr: Expr) => evaluate(expr, lookup);
  const drives = new Map(trial.drives.map(({ input, value }) => [input, value]));
  const start = startOf(trial, model, parameters, lookup);
  if (start.kind === "none") return start;
  const inStates = stateTerms(model);
  const result = simulate(model, {
    drives,
    parameters,
    constants: trial.constants,
    start: start.states,
    duration,
    tolerance: trial.tolerance ?? DEFAULT_TOLERANCE,
    every,
    signals: signals.map(inStates),
    progress,
  });
  return { kind: "run", result, valueOf };
}

/** From efforts, flows and dependent stores to states, inputs, time and what loops leave unknown. */
function stateTerms(model: StateModel): (expr: Expr) => Expr {
  const { graph } = model.causal;
  const map = new Map<Expr, Expr>(model.dependent.map(({ symbol, value }) => [symbol, value]));
  graph.bonds.forEach(({ effort, flow }, i) => {
    map.set(effort, model.efforts[i] ?? effort);
    map.set(flow, model.flows[i] ?? flow);
  });
  return substitution(graph.pool, map);
}

type Start =
  | { readonly kind: "start"; readonly states: readonly number[] }
  | { readonly kind: "none"; readonly reason: string };

function startOf(
  trial: FlatTrial,
  model: StateModel,
  parameters: Parameters,
  lookup: (symbol: Symbol) => number,
): Start {
  const { graph } = model.causal;
  const time = graph.pool.symbol("time", "time");
  const atStart = (symbol: Symbol): number => (symbol === time ? 0 : lookup(symbol));
  const inputs = model.inputs.map(({ name, nominal }) => {
    const drive = trial.drives.find(({ input }) => input === name);
    return drive === undefined ? nominal : evaluate(drive.value, atStart);
  });
  const states = model.states.map(({ start }) => start);
  const values = new Map<Symbol, number>(model.inputs.map(({ symbol }, i) => [symbol, inputs[i]]));
  const at = (symbol: Symbol): number => values.get(symbol) ?? atStart(symbol);
  const again = parameters.size === 0 ? [] : graph.starts;
  for (const given of [...again, ...trial.starts]) {
    const slip = setStart(model, given, states, at);
    if (slip !== null) return { kind: "none", reason: slip };
  }
  if (trial.steady === null) return { kind: "start", states };
  const found = equilibrium(model, { inputs, parameters, start: states });
  return found.kind === "found"
    ? { kind: "start", states: found.point.states }
    : { kind: "none", reason: `No steady start was found. ${found.reason}` };
}

/** Sets one state so that what is named has its value; an effort or flow is solved back through the law. */
function setStart(
  model: StateModel,
  { target, value }: FlatStart,
  states: number[],
  lookup: (symbol: Symbol) => number,
): string | null {
  const own = model.states.findIndex(({ symbol }) => symbol === target);
  if (own !== -1) {
    states[own] = value;
    return null;
  }
  const { graph } = model.causal;
  const i = model.states.findIndex(({ bond }) => {
    return bond !== null && (graph.bonds[bond].effort === target || graph.bonds[bond].flow === target);
  });
  const refusal = `\`${target.name}\` cannot be given a start: it is no state, and settles none.`;
  if (i === -1) return refusal;
  const { symbol, bond } = model.states[i];
  const law =
    model.causal.graph.bonds[bond as number].effort === target
      ? model.efforts[bond as number]
      : model.flows[bond as number];
  if (law === null || law === undefined) return refusal;
  const slope = derivative(graph.pool, law, symbol);
  const at = (x: number) => (one: Symbol) => {
    if (one === symbol) return x;
    const state = model.states.findIndex((other) => other.symbol === one);
    return state === -1 ? lookup(one) : states[state];
  };
  let x = states[i];
  for (let round = 0; round < 60; round += 1) {
    const missing = evaluate(law, at(x)) - value;
    if (missing === 0) break;
    const step = missing / evaluate(slope, at(x));
    if (!Number.isFinite(step)) x = x === 0 ? 1e-3 : x / 2;
    else x -= step;
    if (Math.abs(step) <= 1e-14 * Math.abs(x)) break;
    if (round === 59) return `No state gives \`${target.name}\` its start through the store's law.`;
  }
  states[i] = x;
  return null;
}
