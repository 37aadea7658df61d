import type { DiagramModel, DiagramNode } from "./diagram-model.ts";

/**
 * Which nodes carry the drawing and which hang on them. The *spine* is what power runs through: junctions, two-ports,
 * fields. One-ports are *leaves* of the spine node beside them. A junction that has only one-ports and one neighbour in
 * the spine *hangs* under that neighbour (the spring and damper between two masses), unless the spine would end there.
 */
export interface Spine {
  /** Indices of nodes, in the order of the text. */
  readonly hubs: readonly number[];
  /** By node: what hangs on it, in the order of the text. */
  readonly leaves: readonly (readonly Hanging[])[];
  readonly hanging: readonly (readonly Hanging[])[];
  /** Bonds between hubs, each pointing away from where the drawing starts. */
  readonly links: readonly Link[];
}

export interface Hanging {
  readonly node: number;
  readonly bond: number;
}

export interface Link {
  readonly bond: number;
  readonly near: number;
  readonly far: number;
}

interface Graph {
  readonly ends: readonly { readonly from: number; readonly to: number }[];
  /** By node: its bonds with the node at the other end. */
  readonly around: readonly (readonly Hanging[])[];
}

export function findSpine(model: DiagramModel): Spine {
  const graph = graphOf(model);
  const { nodes } = model;
  const leaves: Hanging[][] = nodes.map(() => []);
  const hanging: Hanging[][] = nodes.map(() => []);

  const isLeaf = nodes.map(() => false);
  for (const [node, beside] of graph.around.entries()) {
    if (beside.length !== 1 || beside[0].node === node) continue;
    const host = beside[0].node;
    // Two one-ports bonded to each other: the first carries the second.
    if (graph.around[host].length === 1 && node < host) continue;
    isLeaf[node] = true;
    leaves[host].push({ node, bond: beside[0].bond });
  }

  const isHanging = nodes.map(() => false);
  const spineNeighbours = (node: number) => graph.around[node].filter((beside) => !isLeaf[beside.node]);
  for (const host of nodes.keys()) {
    if (isLeaf[host]) continue;
    const neighbours = spineNeighbours(host);
    const candidates = neighbours.filter(({ node }) => {
      return (
        isJunction(nodes[node]) &&
        spineNeighbours(node).length === 1 &&
        leaves[node].length >= 1 &&
        leaves[node].length <= 3
      );
    });
    // The chain goes on through two neighbours; sources and inertias are where chains end.
    const kept = (node: number) =>
      leaves[node].filter(({ node: leaf }) => /S[ef]|I/.test(nodes[leaf].symbol)).length;
    candidates.sort((a, b) => kept(a.node) - kept(b.node) || b.node - a.node);
    for (const candidate of candidates.slice(0, Math.max(0, neighbours.length - 2))) {
      isHanging[candidate.node] = true;
      hanging[host].push(candidate);
    }
    hanging[host].sort((a, b) => a.node - b.node);
  }

  const hubs = [...nodes.keys()].filter((node) => !isLeaf[node] && !isHanging[node]);
  const inSpine = nodes.map((_, node) => !isLeaf[node] && !isHanging[node]);
  return { hubs, leaves, hanging, links: linksOutwards(model, graph, hubs, inSpine, leaves) };
}

function graphOf(model: DiagramModel): Graph {
  const index = new Map(model.nodes.map(({ id }, i) => [id, i]));
  const ends = model.bonds.map(({ from, to }) => ({ from: index.get(from) ?? 0, to: index.get(to) ?? 0 }));
  const around: Hanging[][] = model.nodes.map(() => []);
  for (const [bond, { from, to }] of ends.entries()) {
    around[from].push({ node: to, bond });
    if (to !== from) around[to].push({ node: from, bond });
  }
  return { ends, around };
}

/**
 * Directs the bonds of the spine by distance from a root, so that a chain is drawn as a chain whatever way its power
 * counts. The root of a connected part is one of the two ends farthest from each other, the first in the text; where
 * there is no end, the first node with a source.
 */
function linksOutwards(
  model: DiagramModel,
  graph: Graph,
  hubs: readonly number[],
  inSpine: readonly boolean[],
  leaves: readonly (readonly Hanging[])[],
): Link[] {
  /** By node: when it was reached from the root of its part; −1 before. */
  const order: number[] = model.nodes.map(() => -1);
  let reached = 0;
  const degree = (node: number) => graph.around[node].filter((beside) => inSpine[beside.node]).length;
  const sourced = (node: number) =>
    model.nodes[node].kind === "port" ||
    leaves[node].some(({ node: leaf }) => /S[ef]/.test(model.nodes[leaf].kind));

  for (const first of hubs) {
    if (order[first] !== -1) continue;
    const part = sweep(graph, inSpine, first);
    const isEnd = (hub: number) => degree(hub) <= 1;
    const inText = [...part].sort((a, b) => a - b);
    const farEnd = part.findLast(isEnd);
    const otherEnd = farEnd === undefined ? undefined : sweep(graph, inSpine, farEnd).findLast(isEnd);
    const root = inText.find((hub) => hub === farEnd || hub === otherEnd) ?? inText.find(sourced) ?? first;
    for (const hub of sweep(graph, inSpine, root)) {
      order[hub] = reached;
      reached += 1;
    }
  }
  const links: Link[] = [];
  for (const [bond, { from, to }] of graph.ends.entries()) {
    if (!inSpine[from] || !inSpine[to] || from === to) continue;
    links.push(order[from] < order[to] ? { bond, near: from, far: to } : { bond, near: to, far: from });
  }
  return links;
}

/** Breadth first from `start`; the last one is among the farthest. */
function sweep(graph: Graph, inSpine: readonly boolean[], start: number): number[] {
  const found = [start];
  const seen = new Set(found);
  for (const node of found) {
    for (const beside of graph.around[node]) {
      if (!inSpine[beside.node] || seen.has(beside.node)) continue;
      seen.add(beside.node);
      found.push(beside.node);
    }
  }
  return found;
}

export function isJunction({ kind }: DiagramNode): boolean {
  return kind === "0" || kind === "1";
}
