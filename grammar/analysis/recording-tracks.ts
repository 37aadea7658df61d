import type { StateModel } from "../equations/model.ts";
import type { FlatGraph, FlatLaw } from "../resolve/graph.ts";
import type { Expr } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";

/**
 * The states that settle the motion, by index: all but the tracked displacements that no law reads, directly or
 * through the rate of another one. Those only record: order, stability, modes and equilibrium leave them out.
 */
export function movingStates(model: StateModel): number[] {
  const read = tracksRead(model.causal.graph);
  return model.states.flatMap(({ kind, name }, i) => (kind !== "tracked" || read.has(name) ? [i] : []));
}

function tracksRead(graph: FlatGraph): ReadonlySet<string> {
  const byName = new Map(graph.tracks.map((track) => [track.name, track]));
  const read = new Set<string>();
  if (byName.size === 0) return read;
  const open: Expr[] = graph.nodes.flatMap(({ laws }) => laws.map(expressionOf));
  for (let expr = open.pop(); expr !== undefined; expr = open.pop()) {
    for (const { name } of symbolsOf(expr)) {
      const track = byName.get(name);
      if (track === undefined || read.has(name)) continue;
      read.add(name);
      open.push(track.rate);
    }
  }
  return read;
}

function expressionOf(law: FlatLaw): Expr {
  return law.kind === "relation" ? law.right : law.kind === "ratio" ? law.ratio : law.energy;
}
