import { parameterValues } from "../equations/assignments.ts";
import type { StateModel } from "../equations/model.ts";
import type { FlatGraph, FlatParameter } from "../resolve/graph.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Symbol } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";

/** Where a model is looked at, in SI: states and inputs in the model's own order. */
export interface Point {
  readonly states: readonly number[];
  readonly inputs: readonly number[];
  readonly inputRates: readonly number[];
  /** Those that differ from the text; what is defined by them follows. */
  readonly parameters: ReadonlyMap<string, number>;
  readonly time: number;
}

/** The start values under the nominal inputs, which rest, at time 0. */
export function startPoint(model: StateModel): Point {
  return {
    states: model.states.map(({ start }) => start),
    inputs: model.inputs.map(({ nominal }) => nominal),
    inputRates: model.inputs.map(() => 0),
    parameters: new Map(),
    time: 0,
  };
}

/** Values of parameters and constants where some parameters are other than the text says. */
export function parametersAt(
  graph: FlatGraph,
  other: ReadonlyMap<string, number>,
): (symbol: Symbol) => number | undefined {
  const asWritten = parameterValues(graph);
  if (other.size === 0) return asWritten;
  const values = new Map<Symbol, number>();
  const bySymbol = new Map(graph.parameters.map((parameter) => [parameter.symbol, parameter]));
  const valueOf = (symbol: Symbol) => values.get(symbol) ?? asWritten(symbol) ?? Number.NaN;
  const open: FlatParameter[] = [...graph.parameters].reverse();
  // A parameter waits on the stack until those that define it have values.
  for (let top = open.at(-1); top !== undefined; top = open.at(-1)) {
    const given = other.get(top.name);
    const needed =
      given !== undefined || values.has(top.symbol)
        ? []
        : [...symbolsOf(top.definition)].filter((symbol) => bySymbol.has(symbol) && !values.has(symbol));
    if (needed.length > 0) {
      for (const symbol of needed) open.push(bySymbol.get(symbol) as FlatParameter);
      continue;
    }
    if (!values.has(top.symbol)) values.set(top.symbol, given ?? evaluate(top.definition, valueOf));
    open.pop();
  }
  return valueOf;
}

/** What every symbol but those still to be found stands for at a point. */
export function lookupAt(model: StateModel, point: Point): (symbol: Symbol) => number | undefined {
  const { graph } = model.causal;
  const { pool } = graph;
  const values = new Map<Symbol, number>();
  for (const [i, { symbol }] of model.states.entries()) values.set(symbol, point.states[i]);
  for (const [i, { symbol }] of model.inputs.entries()) {
    values.set(symbol, point.inputs[i]);
    values.set(pool.symbol("inputRate", symbol.name), point.inputRates[i]);
  }
  const parameter = parametersAt(graph, point.parameters);
  return (symbol) => {
    if (symbol.role === "parameter" || symbol.role === "constant") return parameter(symbol);
    return symbol.role === "time" ? point.time : values.get(symbol);
  };
}
