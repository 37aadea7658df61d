import { compareNames, type FlatTrack } from "../resolve/graph.ts";
import type { Expr } from "../symbolic/expression.ts";
import type { Assignments, Store } from "./assignments.ts";
import { coEnergyOf } from "./coenergy-value.ts";
import type { Dependence, Tied } from "./dependence.ts";
import type { RateVariable } from "./implicit-rates.ts";
import { variableName } from "./loops.ts";
import type { AlgebraicLoop, DependentStore, State } from "./model.ts";
import type { Values } from "./paths.ts";
import type { RateRow } from "./rates.ts";
import { settledBy } from "./settled-by.ts";

/** A state with what it came from. */
export interface StateRow extends RateRow {
  readonly store: Store | null;
  readonly track: FlatTrack | null;
}

/** Stores that integrate, those that a demanded stroke forced, and tracks: all states, by name. */
export function stateRows(
  assignments: Assignments,
  dependence: Dependence,
  values: Values,
  settle: (expr: Expr) => Expr,
): StateRow[] {
  const { graph } = assignments.causal;
  const { pool } = graph;
  const rows: StateRow[] = dependence.independent.map((store) => {
    const carried = values.get(store.rateVariable) ?? pool.zero;
    const rate = store.sign === 1 ? carried : pool.negate(carried);
    return rowOf(assignments, {
      name: store.name,
      symbol: store.symbol,
      rate,
      constraint: null,
      store,
      track: null,
    });
  });
  for (const { store, value } of dependence.forced) {
    const { name, symbol } = store;
    rows.push(rowOf(assignments, { name, symbol, rate: null, constraint: value, store, track: null }));
  }
  for (const track of graph.tracks) {
    const { name, symbol, rate } = track;
    rows.push(rowOf(assignments, { name, symbol, rate: settle(rate), constraint: null, store: null, track }));
  }
  return rows.sort((a, b) => compareNames(a.name, b.name));
}

function rowOf(assignments: Assignments, row: Omit<StateRow, "rateSymbol" | "rateVariable">): StateRow {
  const { pool } = assignments.causal.graph;
  return {
    ...row,
    get rateSymbol() {
      return pool.symbol("rate", row.name);
    },
    // Only a rate without closed form asks for it.
    get rateVariable() {
      return rateVariableOf(assignments, row.store, row.name);
    },
  };
}

function rateVariableOf(assignments: Assignments, store: Store | null, name: string): RateVariable {
  const { pool } = assignments.causal.graph;
  const own = store === null ? name : variableName(assignments, store.rateVariable);
  return {
    name: own,
    symbol: pool.symbol("unknown", own),
    sign: store?.sign ?? 1,
    bond: store?.bond ?? null,
  };
}

export function stateOf(assignments: Assignments, row: StateRow, start: number): State {
  const { name, symbol, store, track } = row;
  if (store === null) {
    const { unit, span } = track as FlatTrack;
    return { name, symbol, kind: "tracked", unit, start, node: null, bond: null, span, coEnergy: null };
  }
  return {
    name,
    symbol,
    kind: store.variable,
    unit: unitOf(assignments, store),
    start,
    node: store.node,
    bond: store.bond,
    span: assignments.causal.graph.nodes[store.node].span,
    // Only the view in co-energy variables asks for it.
    get coEnergy() {
      return coEnergyOf(assignments, store);
    },
  };
}

function unitOf({ causal }: Assignments, store: Store) {
  const { domain } = causal.graph.bonds[store.bond];
  return store.variable === "p" ? domain.momentum : domain.displacement;
}

export function dependentStore(
  assignments: Assignments,
  { store, value }: Tied,
  loops: readonly AlgebraicLoop[],
  finish: (expr: Expr) => Expr,
): DependentStore {
  const of = [...settledBy(value, loops)].filter(({ role }) => role === "state").map(({ name }) => name);
  return {
    name: store.name,
    symbol: store.symbol,
    kind: store.variable,
    unit: unitOf(assignments, store),
    node: store.node,
    bond: store.bond,
    of: of.sort(compareNames),
    value,
    rate: finish(store.rateSymbol),
    span: assignments.causal.graph.nodes[store.node].span,
  };
}
