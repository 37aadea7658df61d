import {
  compareNames,
  type FlatGraph,
  type FlatLaw,
  type FlatNode,
  type FlatPort,
} from "../resolve/graph.ts";
import type { Expr } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { turnRound } from "../symbolic/turn.ts";
import type { Step } from "./propagation.ts";
import { opposite } from "./propagation.ts";
import type { Reason, Stroke } from "./strokes.ts";

type Relation = FlatLaw & { readonly kind: "relation" };

/** A port of a store: what it stores, and the stroke with which it integrates. */
export interface StoreSite {
  readonly node: FlatNode;
  readonly port: number;
  readonly variable: "p" | "q";
  readonly name: string;
  /** An I is told its effort and answers with f = ∫; a C is told its flow and answers with e = ∫. */
  readonly integral: Stroke;
}

/** A port of a resistor with the stroke that computes its law as it is written. */
export interface ResistorSite {
  readonly node: FlatNode;
  readonly port: number;
  readonly name: string;
  readonly written: Stroke;
  readonly law: Relation | null;
}

/** The stroke stands where the effort arrives, so an element that gives the effort has it at the bond's far end. */
function giving(port: FlatPort, variable: "e" | "f"): Stroke {
  return variable === "e" ? opposite(port.end) : port.end;
}

/** Strokes that leave no choice, in an order that does not depend on the order of lines. */
export function fixedSteps(graph: FlatGraph, nodes: readonly FlatNode[]): Step[] {
  const sources: Step[] = [];
  const heat: Step[] = [];
  const oneWay: Step[] = [];
  const lone: Step[] = [];
  const step = (node: FlatNode, port: FlatPort, stroke: Stroke, rule: Reason["rule"]): Step => ({
    bond: port.bond,
    stroke,
    reason: { rule, node: node.index, premises: [] },
  });
  for (const node of nodes) {
    const [first] = node.ports;
    if (first === undefined) continue;
    if (node.kind === "Se") sources.push(step(node, first, giving(first, "e"), "source"));
    else if (node.kind === "Sf") sources.push(step(node, first, giving(first, "f"), "source"));
    else if ((node.kind === "0" || node.kind === "1") && node.ports.length === 1) {
      lone.push(step(node, first, node.kind === "0" ? first.end : opposite(first.end), "junction"));
    }
    const heatPort = node.kind === "RS" ? node.ports[1] : undefined;
    if (heatPort !== undefined) heat.push(step(node, heatPort, giving(heatPort, "f"), "heat-bond"));
    for (const law of node.laws) {
      if (law.kind !== "relation" || !law.oneWay || node.kind === "Se" || node.kind === "Sf") continue;
      const port = node.ports[law.port];
      if (port !== undefined) oneWay.push(step(node, port, oneWayStroke(port, law.variable), "one-way-law"));
    }
  }
  const demanded = graph.bonds
    .filter((bond) => bond.demanded !== null)
    .sort((a, b) => compareNames(a.id, b.id))
    .map(
      ({ index, from, to, demanded }): Step => ({
        bond: index,
        stroke: demanded?.end ?? "to",
        reason: { rule: "demanded", node: demanded?.end === "from" ? from : to, premises: [] },
      }),
    );
  return [...sources, ...heat, ...oneWay, ...lone, ...demanded];
}

/** `e <- φ(q)` gives the effort, `q <- φ(e)` is told it; `f <- φ(p)` gives the flow, `p <- φ(f)` is told it. */
function oneWayStroke(port: FlatPort, variable: Relation["variable"]): Stroke {
  return giving(port, variable === "e" || variable === "p" ? "e" : "f");
}

/** Every port that stores, port by port for fields. */
export function storeSites(nodes: readonly FlatNode[]): StoreSite[] {
  const sites: StoreSite[] = [];
  for (const node of nodes) {
    if (node.kind !== "C" && node.kind !== "I" && node.kind !== "IC") continue;
    node.ports.forEach((port, index) => {
      const prefix = port.name === "" ? node.name : `${node.name}.${port.name}`;
      const variable = node.kind === "C" ? "q" : node.kind === "I" ? "p" : mixedVariable(node, index, prefix);
      const integral = giving(port, variable === "q" ? "e" : "f");
      sites.push({ node, port: index, variable, name: `${prefix}.${variable}`, integral });
    });
  }
  return sites;
}

/** A port of an IC is p-type or q-type by the variable that its laws use. */
function mixedVariable(node: FlatNode, port: number, prefix: string): "p" | "q" {
  for (const law of node.laws) {
    const expression = law.kind === "energy" ? law.energy : law.kind === "relation" ? law.right : law.ratio;
    for (const symbol of symbolsOf(expression)) {
      if (symbol.name === `${prefix}.p`) return "p";
      if (symbol.name === `${prefix}.q`) return "q";
    }
  }
  const own = node.laws.find((law): law is Relation => law.kind === "relation" && law.port === port);
  return own?.variable === "p" || own?.variable === "f" ? "p" : "q";
}

export function resistorSites(nodes: readonly FlatNode[]): ResistorSite[] {
  const sites: ResistorSite[] = [];
  for (const node of nodes) {
    if (node.kind !== "R" && node.kind !== "RS") continue;
    const ports = node.kind === "RS" ? node.ports.slice(0, 1) : node.ports;
    ports.forEach((port, index) => {
      const law =
        node.laws.find((one): one is Relation => one.kind === "relation" && one.port === index) ?? null;
      const written = giving(port, law?.variable === "f" ? "f" : "e");
      const name = port.name === "" ? node.name : `${node.name}.${port.name}`;
      sites.push({ node, port: index, name, written, law });
    });
  }
  return sites;
}

/** Tells whether a resistor's law can be solved for its other variable, by the rules of the notation. */
export function turning(graph: FlatGraph): (site: ResistorSite) => boolean {
  const values = new Map<Expr, number>(graph.parameters.map(({ symbol, value }) => [symbol, value]));
  return ({ law, node, port }) => {
    if (law === null) return true;
    const { effort, flow } = graph.bonds[node.ports[port].bond];
    const [own, left] = law.variable === "e" ? [flow, effort] : [effort, flow];
    return turnRound(graph.pool, law.right, own, left, (symbol) => values.get(symbol)) !== null;
  };
}
