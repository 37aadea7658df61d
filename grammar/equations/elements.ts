import type { FlatNode } from "../resolve/graph.ts";
import type { Span } from "../source/span.ts";
import { derivative } from "../symbolic/derivative.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { AssignmentsBuilder, Store } from "./assignments.ts";
import { type Relation, settleRelations } from "./relations.ts";

/** Sources, resistors, stores and fields: their laws, read for what the strokes ask of each port. */
export function assignElement(into: AssignmentsBuilder, node: FlatNode): void {
  const stores = into.stores.get(node) ?? [];
  const { pool, bonds } = into.graph;
  const relations = relationsOf(into, node, stores);
  const unknowns: Symbol[] = [];
  const ports = node.kind === "RS" ? node.ports.slice(0, 1) : node.ports;
  ports.forEach((port, index) => {
    const bond = bonds[port.bond];
    const store = stores.find((each) => each.port === index);
    if (store === undefined) {
      unknowns.push(into.givesEffort(port.bond, port.end) ? bond.effort : bond.flow);
    } else if (store.integral) {
      unknowns.push(store.coVariable);
    } else {
      unknowns.push(store.symbol);
      into.set({
        variable: store.rateVariable,
        right: pool.product(pool.number(store.sign), store.rateSymbol),
        residual: null,
        node: node.index,
        rule: "rate",
        span: node.span,
      });
    }
  });
  for (const settled of settleRelations(pool, relations, unknowns, into.valueOf)) {
    const { variable, right, residual, span } = settled;
    into.set({ variable, right, residual, node: node.index, rule: "law", span });
  }
  if (node.kind === "RS") assignHeat(into, node);
}

/** Each law as variable = right; an energy gives one for each port: e = ∂E/∂q, f = ∂E/∂p. */
function relationsOf(into: AssignmentsBuilder, node: FlatNode, stores: readonly Store[]): Relation[] {
  const { pool, bonds } = into.graph;
  const relations: Relation[] = [];
  for (const law of node.laws) {
    if (law.kind === "energy") {
      for (const store of stores) {
        relations.push({
          variable: store.coVariable,
          right: derivative(pool, law.energy, store.symbol),
          span: law.span,
        });
      }
    } else if (law.kind === "relation") {
      const bond = bonds[node.ports[law.port].bond];
      const store = stores.find((each) => each.port === law.port);
      const variable = law.variable === "e" ? bond.effort : law.variable === "f" ? bond.flow : store?.symbol;
      if (variable !== undefined) relations.push({ variable, right: law.right, span: law.span });
    }
  }
  return relations;
}

/** The bond that leaves an RS carries what it dissipates: as entropy, e·f/T, or as heat, e·f. */
function assignHeat(into: AssignmentsBuilder, node: FlatNode): void {
  const { pool, bonds } = into.graph;
  const [power, heat] = node.ports;
  if (heat === undefined) return;
  const { effort, flow } = bonds[power.bond];
  const out = bonds[heat.bond];
  const dissipated: Expr = pool.product(effort, flow);
  const right = heat.domain.pseudo ? dissipated : pool.divide(dissipated, out.effort);
  const span: Span = out.span;
  into.set({ variable: out.flow, right, residual: null, node: node.index, rule: "law", span });
}
