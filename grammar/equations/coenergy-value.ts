import type { Expr } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { turnRound } from "../symbolic/turn.ts";
import type { Assignments, Store } from "./assignments.ts";
import type { State } from "./model.ts";

/**
 * f of an inertia or e of a compliance as a function of its own state, where that can be turned round; null for
 * what can't, and for a field's port, whose co-energy variable hangs on the other ports' states too.
 */
export function coEnergyOf(assignments: Assignments, store: Store): State["coEnergy"] {
  const { graph } = assignments.causal;
  const value = assignments.of.get(store.coVariable)?.right ?? null;
  if (!store.integral || value === null || hangsOnOthers(value, store)) return null;
  if (turnRound(graph.pool, value, store.symbol, graph.pool.zero, assignments.valueOf) === null) return null;
  const letter = store.variable === "p" ? "f" : "e";
  const { domain } = graph.bonds[store.bond];
  return {
    name: store.name.replace(/[pq]$/, letter),
    value,
    unit: letter === "f" ? domain.flow : domain.effort,
  };
}

function hangsOnOthers(value: Expr, store: Store): boolean {
  for (const symbol of symbolsOf(value)) {
    if (symbol !== store.symbol && symbol.role !== "parameter" && symbol.role !== "constant") return true;
  }
  return false;
}
