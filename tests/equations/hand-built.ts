import { assignCausality } from "../../grammar/causality/assign.ts";
import { deriveEquations } from "../../grammar/equations/derive.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import type {
  Domain,
  FlatGraph,
  FlatLaw,
  FlatNode,
  FlatPort,
  NodeKind,
} from "../../grammar/resolve/graph.ts";
import type { Expr, Symbol } from "../../grammar/symbolic/expression.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import type { Unit } from "../../grammar/units/unit.ts";

const one: Unit = { text: "1", dimension: [0, 0, 0, 0, 0, 0, 0], factor: 1, offset: 0, cycles: false };
const domain: Domain = {
  name: "translation",
  effort: one,
  flow: one,
  momentum: one,
  displacement: one,
  pseudo: false,
};
const span = { file: "hand.wright", start: 0, end: 0 };

/** Graphs without a text: domains and units stand for themselves, parameters have the value 2. */
export class HandBuilt {
  readonly pool = new Pool();
  readonly #nodes: { name: string; kind: NodeKind; ports: FlatPort[]; laws: FlatLaw[] }[] = [];
  readonly #places = new Map<string, number>();
  readonly #bonds: FlatGraph["bonds"][number][] = [];
  readonly #symbols = new Set<Symbol>();
  readonly outputs: FlatGraph["outputs"][number][] = [];
  readonly tracks: FlatGraph["tracks"][number][] = [];

  node(kind: NodeKind, name: string, ...laws: FlatLaw[]): this {
    this.#places.set(name, this.#nodes.length);
    this.#nodes.push({ name, kind, ports: [], laws });
    return this;
  }

  wireAll(chains: readonly string[][]): this {
    for (const chain of chains) this.wire(...chain);
    return this;
  }

  wire(...names: string[]): this {
    for (let i = 1; i < names.length; i += 1) {
      const [from, to] = [names[i - 1], names[i]].map((name) => this.#places.get(name) as number);
      const index = this.#bonds.length;
      const id = `${names[i - 1]}->${names[i]}`;
      const effort = this.pool.symbol("effort", id);
      const flow = this.pool.symbol("flow", id);
      this.#bonds.push({ index, id, from, to, domain, demanded: null, effort, flow, span });
      this.#nodes[from].ports.push({ name: "", bond: index, end: "from", domain });
      this.#nodes[to].ports.push({ name: "", bond: index, end: "to", domain });
    }
    return this;
  }

  parameter(name: string): Symbol {
    const symbol = this.pool.symbol("parameter", name);
    this.#symbols.add(symbol);
    return symbol;
  }

  input(name: string): Symbol {
    const symbol = this.pool.symbol("input", name);
    this.#symbols.add(symbol);
    return symbol;
  }

  effort(id: string): Symbol {
    return this.pool.symbol("effort", id);
  }

  flow(id: string): Symbol {
    return this.pool.symbol("flow", id);
  }

  state(name: string): Symbol {
    return this.pool.symbol("state", name);
  }

  output(name: string, value: Expr): this {
    this.outputs.push({ name, value, unit: one, description: null, span });
    return this;
  }

  graph(): FlatGraph {
    const symbols = [...this.#symbols];
    return {
      system: "Hand",
      description: null,
      span,
      pool: this.pool,
      nodes: this.#nodes.map(
        (node, index): FlatNode => ({
          ...node,
          index,
          modulated: false,
          domain,
          description: null,
          span: { ...span, start: index },
        }),
      ),
      bonds: this.#bonds,
      parameters: symbols
        .filter(({ role }) => role === "parameter")
        .map((symbol) => ({
          name: symbol.name,
          symbol,
          definition: this.pool.number(2),
          value: 2,
          unit: one,
          constant: false,
          range: null,
          description: null,
          span,
        })),
      inputs: symbols
        .filter(({ role }) => role === "input")
        .map((symbol) => ({ name: symbol.name, symbol, unit: one, nominal: 0, description: null, span })),
      outputs: this.outputs,
      tracks: this.tracks,
      starts: [],
      expectations: [],
    };
  }

  derive(): { model: StateModel | null; findings: string[] } {
    const { causal, findings } = assignCausality(this.graph());
    const derived = deriveEquations(causal);
    return {
      model: derived.model,
      findings: [...findings, ...derived.findings].map(({ name, message }) => `${name}: ${message}`),
    };
  }
}

export function relation(variable: "e" | "f" | "p" | "q", right: Expr, port = 0, oneWay = false): FlatLaw {
  return { kind: "relation", port, variable, right, oneWay, span };
}

export function ratio(expr: Expr): FlatLaw {
  return { kind: "ratio", ratio: expr, span };
}
