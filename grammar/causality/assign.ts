import type { Finding } from "../diagnostics/finding.ts";
import { byName, compareNames, type FlatGraph, type FlatNode } from "../resolve/graph.ts";
import { conflictFinding, singularFinding } from "./conflict.ts";
import { fixedSteps, type StoreSite, storeSites } from "./elements.ts";
import { type Clash, Propagation } from "./propagation.ts";
import { searchStrokes } from "./search.ts";
import type { CausalGraph } from "./strokes.ts";
import { tiedStores } from "./tied-stores.ts";
import { granted, isChoice, reversed, type Tied, type Wish, wishes } from "./wishes.ts";

/**
 * Sequential assignment of causal strokes (the procedure of Karnopp, Margolis, Rosenberg: System Dynamics): what
 * leaves no choice first, then stores, then resistors, then open ports, then what is left; each stroke is followed to
 * its end before the next is set. Every choice goes by full name in natural order, so the order of lines does not
 * matter. Linear in the number of bonds beside sorting.
 */
export function assignCausality(graph: FlatGraph): { causal: CausalGraph; findings: Finding[] } {
  const nodes = [...graph.nodes].sort(byName);
  const stores = storeSites(nodes);
  const tied = new Map<number, readonly number[]>();
  let assigned = assignSequentially(graph, nodes, stores, tied);
  while (assigned.findings.length === 0) {
    const more = tiedStores(graph, assigned.causal.strokes, stores).filter(({ bond }) => !tied.has(bond));
    if (more.length === 0) break;
    for (const { bond, premises } of more) tied.set(bond, premises);
    const again = assignSequentially(graph, nodes, stores, tied);
    // What was to be mended may be held by demanded strokes; then the first way stays.
    if (again.findings.length > 0) break;
    assigned = again;
  }
  return assigned;
}

/** Each finding tells its whole chain; who has this many conflicts mends them in turns. */
const MOST_CONFLICTS = 100;

function assignSequentially(
  graph: FlatGraph,
  nodes: readonly FlatNode[],
  stores: readonly StoreSite[],
  tied: Tied,
): { causal: CausalGraph; findings: Finding[] } {
  const propagation = new Propagation(graph);
  if (settleFixed(graph, nodes, propagation).length === 0) {
    const chosen = grant(wishes(graph, nodes, stores, tied, openIn(propagation)), propagation);
    if (chosen !== null) return { causal: causalGraph(graph, propagation, stores, chosen), findings: [] };
  }

  // Where contradictions meet depends on the order in which junctions list their bonds, so that is made canonical.
  const ordered = inNaturalOrder(graph);
  const careful = new Propagation(ordered);
  const clashes = settleFixed(ordered, nodes, careful);
  if (clashes.length > 0) {
    // What contradicts itself after a conflict is not worth a finding: one mistake, one finding.
    const chosen = grant(wishes(graph, nodes, stores, tied, openIn(careful)), careful) ?? [];
    const causal = causalGraph(graph, careful, stores, chosen);
    return {
      causal,
      findings: clashes.slice(0, MOST_CONFLICTS).map((clash) => conflictFinding(causal, clash)),
    };
  }
  const found = searchStrokes(ordered, careful, [...wishes(graph, nodes, stores, tied, () => true)]);
  const causal = causalGraph(graph, careful, stores, "chosen" in found ? found.chosen : []);
  const findings = "clashes" in found ? [singularFinding(causal, found.bond, ...found.clashes)] : [];
  return { causal, findings };
}

function openIn(propagation: Propagation): (bond: number) => boolean {
  return (bond) => propagation.strokes[bond] === null;
}

function settleFixed(graph: FlatGraph, nodes: readonly FlatNode[], propagation: Propagation): Clash[] {
  return fixedSteps(graph, nodes).flatMap((step) => propagation.settle(step));
}

/** Grants one wish after the other. The bonds that were chosen, or null where one can't have either stroke. */
function grant(inTurn: Iterable<Wish>, propagation: Propagation): number[] | null {
  const chosen: number[] = [];
  let stuck = false;
  for (const wish of inTurn) {
    if (propagation.strokes[wish.bond] !== null) continue;
    const refusal = propagation.attempt(granted(wish));
    if (refusal !== null) stuck = propagation.attempt(reversed(wish, refusal.premises)) !== null || stuck;
    else if (isChoice(wish)) chosen.push(wish.bond);
  }
  return stuck ? null : chosen;
}

function inNaturalOrder(graph: FlatGraph): FlatGraph {
  const byBond = (a: { bond: number }, b: { bond: number }) =>
    compareNames(graph.bonds[a.bond].id, graph.bonds[b.bond].id);
  const nodes = graph.nodes.map((node) =>
    node.kind === "0" || node.kind === "1" ? { ...node, ports: [...node.ports].sort(byBond) } : node,
  );
  return { ...graph, nodes };
}

function causalGraph(
  graph: FlatGraph,
  { strokes, reasons }: Propagation,
  sites: readonly StoreSite[],
  chosen: readonly number[],
): CausalGraph {
  const stores = sites.map(({ node, port, variable, name, integral }) => ({
    node: node.index,
    port,
    variable,
    name,
    integral: strokes[node.ports[port].bond] === integral,
  }));
  return { graph, strokes, reasons, stores, chosen };
}
