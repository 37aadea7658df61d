import type { Finding } from "../diagnostics/finding.ts";
import { byName, compareNames, type FlatGraph, type FlatNode } from "../resolve/graph.ts";
import { conflictFinding, singularFinding } from "./conflict.ts";
import {
  fixedSteps,
  type ResistorSite,
  resistorSites,
  type StoreSite,
  storeSites,
  turning,
} from "./elements.ts";
import { type Clash, opposite, Propagation, type Step } from "./propagation.ts";
import type { CausalGraph, Reason, Stroke } from "./strokes.ts";

/**
 * Sequential assignment of causal strokes (the procedure of Karnopp, Margolis, Rosenberg: System Dynamics): what
 * leaves no choice first, then stores, then resistors, then open ports, then what is left; each stroke is followed to
 * its end before the next is set. Every choice goes by full name in natural order, so the order of lines does not
 * matter. Linear in the number of bonds beside sorting.
 */
export function assignCausality(graph: FlatGraph): { causal: CausalGraph; findings: Finding[] } {
  const plain = new Assignment(graph, false);
  if (plain.clean) return plain.result();
  // Where conflicts meet depends on the order in which junctions list their bonds, so it is made canonical; and a
  // dead end that came from leaving junctions open is met again with each junction settled as soon as it is touched.
  const careful = new Assignment(inNaturalOrder(graph), true);
  const { causal, findings } = careful.result();
  return { causal: { ...causal, graph }, findings };
}

function inNaturalOrder(graph: FlatGraph): FlatGraph {
  const nodes = graph.nodes.map((node) =>
    node.kind === "0" || node.kind === "1"
      ? {
          ...node,
          ports: [...node.ports].sort((a, b) => compareNames(graph.bonds[a.bond].id, graph.bonds[b.bond].id)),
        }
      : node,
  );
  return { ...graph, nodes };
}

class Assignment {
  readonly #graph: FlatGraph;
  readonly #eager: boolean;
  readonly #propagation: Propagation;
  readonly #chosen: number[] = [];
  readonly #clashes: Clash[] = [];
  readonly #deadEnds: { readonly bond: number; readonly first: Clash; readonly second: Clash }[] = [];
  readonly #stores: readonly StoreSite[];

  /** `eager`: a junction at which a choice was made is settled at once, instead of after all other choices. */
  constructor(graph: FlatGraph, eager: boolean) {
    this.#graph = graph;
    this.#eager = eager;
    this.#propagation = new Propagation(graph);
    const nodes = [...graph.nodes].sort(byName);
    this.#stores = storeSites(nodes);
    for (const step of fixedSteps(graph, nodes)) this.#clashes.push(...this.#propagation.settle(step));
    this.#integrate();
    this.#chooseResistors(resistorSites(nodes));
    this.#openPorts(nodes);
    this.#chooseBonds();
  }

  get clean(): boolean {
    return this.#clashes.length === 0 && this.#deadEnds.length === 0;
  }

  result(): { causal: CausalGraph; findings: Finding[] } {
    const { strokes, reasons } = this.#propagation;
    const stores = this.#stores.map(({ node, port, variable, name, integral }) => ({
      node: node.index,
      port,
      variable,
      name,
      integral: strokes[node.ports[port].bond] === integral,
    }));
    const causal = { graph: this.#graph, strokes, reasons, stores, chosen: this.#chosen };
    const findings = this.#clashes.map((clash) => conflictFinding(causal, clash));
    if (findings.length === 0) {
      findings.push(
        ...this.#deadEnds
          .slice(0, 1)
          .map(({ bond, first, second }) => singularFinding(causal, bond, first, second)),
      );
    }
    return { causal, findings };
  }

  #integrate(): void {
    for (const { node, port, integral } of this.#stores) {
      this.#choose(node, node.ports[port].bond, integral, "integral-store", "derivative-store");
    }
  }

  #chooseResistors(sites: readonly ResistorSite[]): void {
    const free = sites.filter((site) => this.#isOpen(site.node.ports[site.port].bond));
    const turns = turning(this.#graph);
    const stubborn = new Set(free.filter((site) => !turns(site)));
    const inTurn = [...stubborn, ...free.filter((site) => !stubborn.has(site))];
    for (const site of inTurn) {
      const rule = stubborn.has(site) ? "law-not-invertible" : "chosen-resistor";
      this.#choose(site.node, site.node.ports[site.port].bond, site.written, rule, "excluded");
    }
  }

  /** The world outside an open port is taken to give the flow; where it can't, the effort. */
  #openPorts(nodes: readonly FlatNode[]): void {
    for (const node of nodes) {
      const [port] = node.ports;
      if (node.kind === "port" && port !== undefined)
        this.#choose(node, port.bond, port.end, "open-port", "excluded");
    }
  }

  #chooseBonds(): void {
    const open = this.#graph.bonds.filter(({ index }) => this.#isOpen(index));
    open.sort((a, b) => compareNames(a.id, b.id));
    for (const { index, from } of open) {
      this.#choose(this.#graph.nodes[from], index, "to", "chosen-bond", "excluded");
    }
  }

  #isOpen(bond: number): boolean {
    return this.#propagation.strokes[bond] === null;
  }

  /** Sets a wished stroke; where that contradicts what already stands, the opposite is forced by the same premises. */
  #choose(
    node: FlatNode,
    bond: number,
    wished: Stroke,
    rule: Reason["rule"],
    otherwise: Reason["rule"],
  ): void {
    if (!this.#isOpen(bond)) return;
    const step: Step = { bond, stroke: wished, reason: { rule, node: node.index, premises: [] } };
    const refused = this.#propagation.attempt(step);
    if (refused === null) {
      if (rule !== "integral-store") this.#chosen.push(bond);
    } else {
      const reason: Reason = { rule: otherwise, node: node.index, premises: refused.premises };
      const again = this.#propagation.attempt({ bond, stroke: opposite(wished), reason });
      if (again !== null) {
        this.#deadEnds.push({ bond, first: refused.clash, second: again.clash });
        return;
      }
    }
    if (this.#eager) this.#settleNeighbours(bond);
  }

  /** One more choice at each junction that the bond touches and that is still open, by the names of its bonds. */
  #settleNeighbours(bond: number): void {
    const { from, to } = this.#graph.bonds[bond];
    for (const index of [from, to]) {
      const node = this.#graph.nodes[index];
      if (node.kind !== "0" && node.kind !== "1") continue;
      for (const port of node.ports) {
        const brings = node.kind === "0" ? port.end : opposite(port.end);
        if (this.#isOpen(port.bond)) this.#choose(node, port.bond, brings, "chosen-bond", "excluded");
      }
    }
  }
}
