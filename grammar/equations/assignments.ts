import type { CausalGraph, StorePort } from "../causality/strokes.ts";
import { compareNames, type FlatBond, type FlatGraph, type FlatNode } from "../resolve/graph.ts";
import type { Span } from "../source/span.ts";
import { ById } from "../symbolic/by-id.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { assignElement } from "./elements.ts";
import { assignJunction, assignTwoPort } from "./junctions.ts";
import type { DerivationStep, ModelInput } from "./model.ts";

/**
 * What settles one variable: either `right`, or a `residual` that is zero where the law has no closed form for it.
 * Variables are the effort and the flow of every bond, and the states of dependent stores.
 */
export interface Assignment {
  readonly variable: Symbol;
  readonly right: Expr | null;
  readonly residual: Expr | null;
  readonly node: number;
  readonly rule: DerivationStep["rule"];
  readonly span: Span;
}

/** A store's port with its state and the bond variable that is the state's rate. */
export interface Store extends StorePort {
  readonly symbol: Symbol;
  readonly rateSymbol: Symbol;
  readonly bond: number;
  /** -1 where the port counts power out: its state falls by what the bond carries. */
  readonly sign: 1 | -1;
  /** The bond variable that is the rate: f of a q, e of a p. */
  readonly rateVariable: Symbol;
  readonly coVariable: Symbol;
}

/** Each variable's assignment as the strokes give it, before anything is substituted. */
export interface Assignments {
  readonly causal: CausalGraph;
  readonly of: { get(variable: Symbol): Assignment | undefined; has(variable: Symbol): boolean };
  readonly list: readonly Assignment[];
  /** By name in natural order. */
  readonly stores: readonly Store[];
  /** Open ports of the system: what the world outside sets stands as an input. */
  readonly outside: readonly ModelInput[];
  readonly bondOf: (variable: Symbol) => FlatBond | undefined;
  readonly valueOf: (symbol: Symbol) => number | undefined;
}

export class AssignmentsBuilder {
  readonly causal: CausalGraph;
  readonly graph: FlatGraph;
  readonly valueOf: (symbol: Symbol) => number | undefined;
  readonly outside: ModelInput[] = [];
  readonly stores = new Map<FlatNode, Store[]>();
  readonly #of = new ById<Assignment>();
  readonly #list: Assignment[] = [];

  constructor(causal: CausalGraph) {
    this.causal = causal;
    this.graph = causal.graph;
    this.valueOf = parameterValues(causal.graph);
  }

  set(assignment: Assignment): void {
    this.#of.set(assignment.variable, assignment);
    this.#list.push(assignment);
  }

  /** Does the node at `end` of the bond give its effort (and is told the flow)? */
  givesEffort(bond: number, end: "from" | "to"): boolean {
    return this.causal.strokes[bond] !== end;
  }

  build(): Assignments {
    const { graph } = this;
    for (const port of this.causal.stores) {
      const store = storeOf(graph, port);
      const list = this.stores.get(graph.nodes[port.node]);
      if (list === undefined) this.stores.set(graph.nodes[port.node], [store]);
      else list.push(store);
    }
    for (const node of graph.nodes) {
      if (node.kind === "0" || node.kind === "1") assignJunction(this, node);
      else if (node.kind === "TF" || node.kind === "GY") assignTwoPort(this, node);
      else if (node.kind === "port") this.#openPort(node);
      else assignElement(this, node);
    }
    const stores = [...this.stores.values()].flat().sort((a, b) => compareNames(a.name, b.name));
    return {
      causal: this.causal,
      of: this.#of,
      list: this.#list,
      stores,
      outside: this.outside,
      bondOf: bondFinder(graph),
      valueOf: this.valueOf,
    };
  }

  #openPort(node: FlatNode): void {
    const [port] = node.ports;
    if (port === undefined) return;
    const bond = this.graph.bonds[port.bond];
    const effort = this.givesEffort(port.bond, port.end);
    const name = `${node.name}.${effort ? "e" : "f"}`;
    const symbol = this.graph.pool.symbol("input", name);
    const unit = effort ? port.domain.effort : port.domain.flow;
    this.outside.push({ name, symbol, unit, nominal: 0, differentiated: false });
    this.set({
      variable: effort ? bond.effort : bond.flow,
      right: symbol,
      residual: null,
      node: node.index,
      rule: "law",
      span: node.span,
    });
  }
}

const known = new WeakMap<CausalGraph, Assignments>();

/** The assignments of a causal graph, worked out once. */
export function assignmentsOf(causal: CausalGraph): Assignments {
  let assignments = known.get(causal);
  if (assignments === undefined) {
    assignments = new AssignmentsBuilder(causal).build();
    known.set(causal, assignments);
  }
  return assignments;
}

function storeOf(graph: FlatGraph, port: StorePort): Store {
  const { bond, end } = graph.nodes[port.node].ports[port.port];
  const { effort, flow } = graph.bonds[bond];
  const [rateVariable, coVariable] = port.variable === "q" ? [flow, effort] : [effort, flow];
  return {
    node: port.node,
    port: port.port,
    variable: port.variable,
    name: port.name,
    integral: port.integral,
    symbol: graph.pool.symbol("state", port.name),
    // Only a model with dependent stores asks for it.
    get rateSymbol() {
      return graph.pool.symbol("rate", port.name);
    },
    bond,
    sign: end === "to" ? 1 : -1,
    rateVariable,
    coVariable,
  };
}

const CONSTANTS: Readonly<Record<string, number>> = { pi: Math.PI, g0: 9.80665 };

/** Parameters and constants have one value at all times; nothing else has. */
export function parameterValues(graph: FlatGraph): (symbol: Symbol) => number | undefined {
  const values = new Map(graph.parameters.map(({ symbol, value }) => [symbol, value]));
  return (symbol) => values.get(symbol) ?? (symbol.role === "constant" ? CONSTANTS[symbol.name] : undefined);
}

function bondFinder(graph: FlatGraph): (variable: Symbol) => FlatBond | undefined {
  let found: Map<Symbol, FlatBond> | null = null;
  return (variable) => {
    if (found === null) {
      found = new Map();
      for (const bond of graph.bonds) found.set(bond.effort, bond).set(bond.flow, bond);
    }
    return found.get(variable);
  };
}
