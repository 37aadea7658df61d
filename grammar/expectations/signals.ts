import type { Signal } from "../analysis/linearise.ts";
import { movingStates } from "../analysis/recording-tracks.ts";
import type { ModelInput, StateModel } from "../equations/model.ts";
import type { FlatNode } from "../resolve/graph.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { Expression } from "../syntax/tree.ts";

/** `rope.spring.q` as written; null for what is no name. */
export function nameIn(expr: Expression): string | null {
  if (expr.kind === "group") return nameIn(expr.inner);
  if (expr.kind !== "reference") return null;
  return expr.path
    .map(({ name, indices }) => name.text + indices.map((index) => `[${indexText(index)}]`).join(""))
    .join(".");
}

function indexText(index: Expression): string {
  return index.kind === "number" ? index.text : "?";
}

export function inputNamed(model: StateModel, name: string): number {
  return model.inputs.findIndex((input: ModelInput) => input.name === name);
}

/** An output, a state, a dependent store, or an effort or flow of a node, by its name; null where there is none. */
export function signalNamed(model: StateModel, name: string): Signal | null {
  const output = model.outputs.find((one) => one.name === name);
  if (output !== undefined) return output;
  const state = model.states.find((one) => one.name === name);
  if (state !== undefined) return { name, unit: state.unit, value: state.symbol, span: state.span };
  const store = model.dependent.find((one) => one.name === name);
  if (store !== undefined) return { name, unit: store.unit, value: store.value, span: store.span };
  return nodeSignal(model, name);
}

function nodeSignal(model: StateModel, name: string): Signal | null {
  const match = /^(.+)\.([ef])$/.exec(name);
  if (match === null) return null;
  const [, path, letter] = match;
  const { nodes, bonds } = model.causal.graph;
  const whole = nodes.find((node) => node.name === path);
  const port =
    whole === undefined ? portOf(nodes, path) : commonPort(whole, letter) ? whole.ports.at(0) : undefined;
  if (port === undefined) return null;
  const expr = (letter === "e" ? model.efforts : model.flows)[port.bond];
  if (expr === null) return null;
  const { domain, span } = bonds[port.bond];
  return { name, unit: letter === "e" ? domain.effort : domain.flow, value: expr, span };
}

/** A 1-junction has one flow, a 0-junction one effort, a one-port both. */
function commonPort({ kind, ports }: FlatNode, letter: string): boolean {
  return kind === "0" ? letter === "e" : kind === "1" ? letter === "f" : ports.length === 1;
}

function portOf(nodes: readonly FlatNode[], path: string) {
  const dot = path.lastIndexOf(".");
  const node = nodes.find(({ name }) => name === path.slice(0, dot));
  return node?.ports.find((port) => port.name !== "" && port.name === path.slice(dot + 1));
}

/** A track that only records and that the signal hangs on: at rest it has no value of its own. */
export function recordedIn(model: StateModel, signal: Signal): string | null {
  const moving = new Set(movingStates(model));
  const recording = new Set(model.states.filter((_, i) => !moving.has(i)).map(({ symbol }) => symbol));
  for (const symbol of symbolsOf(signal.value)) if (recording.has(symbol)) return symbol.name;
  return null;
}
