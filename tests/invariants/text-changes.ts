import { linesOf } from "../independent/graph-text.ts";
import type { BondEnd, RandomGraph } from "../independent/random-graph.ts";

/** Changes of a model's text that change nothing of the machine. */

/** A graph with other names for its nodes, in another natural order. */
export function renamed(
  graph: RandomGraph,
  order: readonly number[],
): { graph: RandomGraph; nameIn: (name: string) => string } {
  const names = new Map(graph.nodes.map(({ name }, i) => [name, `y${order[i]}`]));
  const nameIn = (name: string) => {
    const [, prefix, node, rest] = /^(v_)?([^.]*)(.*)$/.exec(name) ?? [];
    return `${prefix ?? ""}${names.get(node) ?? node}${rest}`;
  };
  return {
    graph: {
      ...graph,
      nodes: graph.nodes.map((node) => ({ ...node, name: nameIn(node.name) })),
      inputs: graph.inputs.map((input) => ({ ...input, name: nameIn(input.name) })),
    },
    nameIn,
  };
}

export function turned(graph: RandomGraph, bond: number): RandomGraph {
  const [from, to] = graph.bonds[bond];
  return { ...graph, bonds: graph.bonds.map((each, i) => (i === bond ? [to, from] : each)) };
}

/** Bonds between two junctions of one kind. */
export function likeBonds({ nodes, bonds }: RandomGraph): number[] {
  const kindOf = ({ node }: BondEnd) => nodes[node].kind;
  return bonds.flatMap(([from, to], i) => {
    const junctions = kindOf(from) === "0" || kindOf(from) === "1";
    return junctions && kindOf(from) === kindOf(to) ? [i] : [];
  });
}

/** Nodes that can go into a part: their laws read nothing but their own parameters and time. */
export function movable({ nodes, tracks }: RandomGraph): number[] {
  return nodes.flatMap(({ kind, modulation }, i) => {
    const reads = kind === "Se" || kind === "Sf" || (modulation !== null && modulation !== "time");
    return reads || tracks.some(({ of }) => of === i) ? [] : [i];
  });
}

/**
 * The text with some nodes in a part of their own, `PART`, joined through ports: a bond that crosses is cut in two.
 * The part's ports take or give as the bond runs.
 */
export function nested(graph: RandomGraph, inside: ReadonlySet<number>): string {
  const { nodes, bonds } = graph;
  const own = (line: string, names: ReadonlySet<string>) => {
    const word = /^(?:param v_|\w+ )(x(?:[A-Z]+|\d)_\d+)/.exec(line)?.[1];
    return word !== undefined && names.has(word);
  };
  const names = new Set([...inside].map((node) => nodes[node].name));
  const crossing = new Set(
    bonds.flatMap(([from, to], i) => (inside.has(from.node) !== inside.has(to.node) ? [i] : [])),
  );
  // Bonds stand last, one a line, in their order.
  const all = linesOf(graph);
  const [statements, wiring] = [all.slice(0, -bonds.length), all.slice(-bonds.length)];
  const within: string[] = statements.filter((line) => own(line, names));
  const outside: string[] = [...statements.filter((line) => !own(line, names)), "sub part = Part()"];
  for (const [i, line] of wiring.entries()) {
    const [from, to] = line.split(" -> ");
    const takes = inside.has(bonds[i][1].node);
    const domain = domainOf(graph, i);
    if (!crossing.has(i)) (takes ? within : outside).push(line);
    else if (takes) {
      within.push(`port way${i} takes ${domain}`, `way${i} -> ${to}`);
      outside.push(`${from} -> part.way${i}`);
    } else {
      within.push(`port way${i} gives ${domain}`, `${from} -> way${i}`);
      outside.push(`part.way${i} -> ${to}`);
    }
  }
  return `notation 1\nsystem Part {\n${within.join("\n")}\n}\nsystem Random {\n${outside.join("\n")}\n}\n`;
}

function domainOf({ nodes, bonds }: RandomGraph, bond: number): string {
  const [from, to] = bonds[bond];
  const junction =
    [from, to].find(({ node }) => nodes[node].kind === "0" || nodes[node].kind === "1") ?? from;
  return nodes[junction.node].domains[0];
}
