import type { StateModel } from "../equations/model.ts";
import type { FlatNode, FlatPort } from "../resolve/graph.ts";
import { derivative } from "../symbolic/derivative.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { symbolsOf } from "../symbolic/symbols.ts";

/** What takes part in a model's energy, each with expressions in what the model is watched by. */
export interface EnergyBook {
  /** Power that sources and open ports give. */
  readonly supplies: readonly Powered[];
  /** Power that resistors take; a source of heat and what it heats are no loss. */
  readonly losses: readonly Powered[];
  readonly stores: readonly StoreBook[];
}

export interface Powered {
  readonly name: string;
  readonly power: Expr;
}

/**
 * A store's energy comes from its states: dE = Σ sign·co·ds, where the law gives co by s. Where the law gives s by co
 * it is E = Σ sign·s·co − ∫ Σ sign·s dco (Legendre). `own` are the variables the law is in, `given` its right sides.
 */
export interface StoreBook {
  readonly name: string;
  readonly by: "state" | "co-energy" | "displacement";
  readonly own: readonly Symbol[];
  readonly given: readonly Expr[];
  readonly signs: readonly number[];
  /** Values of `own`, in terms of the model's states, inputs, time and unknowns. */
  readonly values: readonly Expr[];
}

/** kg·m²/s³. */
const POWER = [1, 2, -3, 0, 0, 0, 0];

/** Null where some store's law cannot be followed, with its name. */
export function energyBook(model: StateModel): EnergyBook | { readonly missing: string } {
  const { graph } = model.causal;
  const { pool, nodes } = graph;
  const powerOf = ({ bond, end, domain }: FlatPort): Expr => {
    const [effort, flow] = [model.efforts[bond] ?? pool.zero, model.flows[bond] ?? pool.zero];
    const isPower = domain.flow.dimension.every((exponent, i) => exponent === POWER[i]);
    const power = domain.pseudo ? (isPower ? flow : pool.zero) : pool.product(effort, flow);
    return end === "to" ? power : pool.negate(power);
  };
  // In a pseudo domain a 1-junction passes one flow on to all: what hangs on it takes none of it away.
  const passes = ({ bond, end, domain }: FlatPort) =>
    domain.pseudo && nodes[end === "to" ? graph.bonds[bond].from : graph.bonds[bond].to].kind === "1";
  const into = (node: FlatNode) => pool.sum(node.ports.map(powerOf));
  const supplies: Powered[] = [];
  const losses: Powered[] = [];
  const stores: StoreBook[] = [];
  for (const node of nodes) {
    if (["Se", "Sf", "port"].includes(node.kind)) {
      supplies.push({ name: node.name, power: pool.negate(into(node)) });
    } else if (node.kind === "R" && !node.ports.some(passes)) {
      losses.push({ name: node.name, power: into(node) });
    } else if (["C", "I", "IC"].includes(node.kind)) {
      const book = storeBook(model, pool, node);
      if (book === null) return { missing: node.name };
      stores.push(book);
    }
  }
  return { supplies, losses, stores };
}

function storeBook(model: StateModel, pool: Pool, node: FlatNode): StoreBook | null {
  const { causal } = model;
  const ports = causal.stores.filter((store) => store.node === node.index);
  const state = ports.map(({ name }) => pool.symbol("state", name));
  const signs = ports.map(({ port }) => (node.ports[port].end === "to" ? 1 : -1));
  const value = (symbol: Symbol): Expr =>
    model.dependent.find((dependent) => dependent.symbol === symbol)?.value ?? symbol;
  const base = { name: node.name, signs };
  const values = state.map(value);
  if (node.ports.some(({ domain }) => domain.pseudo)) {
    const counted = node.ports.every(({ domain }) =>
      domain.flow.dimension.every((exponent, i) => exponent === POWER[i]),
    );
    const given = state.map(() => (counted ? pool.one : pool.zero));
    return { ...base, by: "displacement", own: state, given, values };
  }
  const [energy] = node.laws.flatMap((law) => (law.kind === "energy" ? [law.energy] : []));
  if (energy !== undefined) {
    const given = state.map((symbol, i) =>
      pool.product(pool.number(signs[i]), derivative(pool, energy, symbol)),
    );
    return { ...base, by: "state", own: state, given, values };
  }
  const lawOf = (port: number, variables: readonly string[]): Expr | null => {
    for (const law of node.laws) {
      if (law.kind === "relation" && law.port === port && variables.includes(law.variable)) return law.right;
    }
    return null;
  };
  const byState = ports.map(({ port, variable }) => lawOf(port, [variable === "q" ? "e" : "f"]));
  if (within(byState, state)) return { ...base, by: "state", own: state, given: byState, values };
  const co = ports.map(({ port, variable }) => {
    const bond = causal.graph.bonds[node.ports[port].bond];
    return variable === "q" ? bond.effort : bond.flow;
  });
  const byCo = ports.map(({ port, variable }) => lawOf(port, [variable]));
  if (!within(byCo, co)) return null;
  const coValues = ports.map(({ port, variable }) => {
    const { bond } = node.ports[port];
    return (variable === "q" ? model.efforts[bond] : model.flows[bond]) ?? pool.zero;
  });
  return { ...base, by: "co-energy", own: co, given: byCo, values: coValues };
}

/** Are all laws there, in nothing but these variables and parameters? */
function within(laws: readonly (Expr | null)[], own: readonly Symbol[]): laws is Expr[] {
  return laws.every(
    (law) =>
      law !== null &&
      [...symbolsOf(law)].every(
        (symbol) => symbol.role === "parameter" || symbol.role === "constant" || own.includes(symbol),
      ),
  );
}
