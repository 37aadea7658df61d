import { compareNames, type FlatGraph, type FlatNode } from "../resolve/graph.ts";
import { resistorSites, type StoreSite, turning } from "./elements.ts";
import type { Step } from "./propagation.ts";
import { opposite } from "./propagation.ts";
import type { Reason, Stroke } from "./strokes.ts";

/** A stroke that the theory leaves open, with what is preferred for it. */
export interface Wish {
  readonly node: number;
  readonly bond: number;
  readonly stroke: Stroke;
  /** Why it stands as wished, and why it stands otherwise where the wish contradicts what stands before. */
  readonly rule: Reason["rule"];
  readonly otherwise: "derivative-store" | "excluded";
  /** What the wish itself rests on; nothing, where it is free. */
  readonly premises?: readonly number[];
}

/** Stores that are known to depend on others, by bond, with the bonds of those. */
export type Tied = ReadonlyMap<number, readonly number[]>;

/**
 * All choices in their order: stores, integral; resistors whose law can't be turned round, then the others, as their
 * law is written; open ports; then any bond. Each group goes by full name. Later groups look at what the earlier ones
 * have left open, so that a law is only looked at where it matters.
 */
export function* wishes(
  graph: FlatGraph,
  nodes: readonly FlatNode[],
  stores: readonly StoreSite[],
  tied: Tied,
  isOpen: (bond: number) => boolean,
): Generator<Wish> {
  for (const { node, port, integral } of stores) {
    const { bond } = node.ports[port];
    const premises = tied.get(bond);
    const common = { node: node.index, bond, otherwise: "derivative-store" } as const;
    if (premises === undefined) yield { ...common, stroke: integral, rule: "integral-store" };
    else {
      const stroke = opposite(integral);
      yield { ...common, stroke, rule: "derivative-store", otherwise: "excluded", premises };
    }
  }
  const free = resistorSites(nodes).filter(({ node, port }) => isOpen(node.ports[port].bond));
  const turns = turning(graph);
  const stubborn = new Set(free.filter((site) => !turns(site)));
  for (const site of [...stubborn, ...free.filter((each) => !stubborn.has(each))]) {
    const rule = stubborn.has(site) ? "law-not-invertible" : "chosen-resistor";
    const { bond } = site.node.ports[site.port];
    yield { node: site.node.index, bond, stroke: site.written, rule, otherwise: "excluded" };
  }
  for (const { kind, index, ports } of nodes) {
    if (kind !== "port" || ports.length === 0) continue;
    // The world outside an open port is taken to give the flow; where it can't, the effort.
    yield {
      node: index,
      bond: ports[0].bond,
      stroke: ports[0].end,
      rule: "open-port",
      otherwise: "excluded",
    };
  }
  const open = graph.bonds.filter(({ index }) => isOpen(index));
  for (const { index, from } of open.sort((a, b) => compareNames(a.id, b.id))) {
    yield { node: from, bond: index, stroke: "to", rule: "chosen-bond", otherwise: "excluded" };
  }
}

export function granted({ node, bond, stroke, rule, premises = [] }: Wish): Step {
  return { bond, stroke, reason: { rule, node, premises } };
}

/** Did nothing but the wish bring the stroke about? Stores are wished to integrate, so that theirs is no choice. */
export function isChoice({ rule }: Wish): boolean {
  return rule !== "integral-store" && rule !== "derivative-store";
}

export function reversed({ node, bond, stroke, otherwise }: Wish, premises: readonly number[]): Step {
  return { bond, stroke: opposite(stroke), reason: { rule: otherwise, node, premises } };
}
