import type { StateModel } from "../equations/model.ts";
import type { FlatGraph, FlatLaw } from "../resolve/graph.ts";
import type { Expr } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";

/** What the structure of a model says about itself: the measures that need no numbers. */
export const COUNTS: Readonly<Record<string, (model: StateModel) => number>> = {
  order: ({ states, causal }) => {
    const read = tracksRead(causal.graph);
    return states.filter(({ kind, name }) => kind !== "tracked" || read.has(name)).length;
  },
  dependent: ({ dependent }) => dependent.length,
  loops: ({ loops }) => loops.filter(({ circular }) => circular).length,
};

/** A fact that holds or doesn't: null where it holds, else what speaks against it. */
export const FACTS: Readonly<Record<string, (model: StateModel) => string | null>> = {
  integral: ({ dependent }) => {
    if (dependent.length === 0) return null;
    const names = dependent.map(({ name }) => name).join(", ");
    return `${dependent.length === 1 ? "1 dependent store" : `${dependent.length} dependent stores`}: ${names}`;
  },
};

/** What edition 1 can ask of a system beside these, and what is not worked out yet. */
export const LATER: ReadonlySet<string> = new Set([
  "stable",
  "frequency",
  "damping",
  "mode",
  "gain",
  "phase",
  "bandwidth",
  "steady",
]);

/** Tracked displacements that a law reads, directly or through the rate of another one; the rest only record. */
function tracksRead(graph: FlatGraph): ReadonlySet<string> {
  const byName = new Map(graph.tracks.map((track) => [track.name, track]));
  const read = new Set<string>();
  const open: Expr[] = graph.nodes.flatMap(({ laws }) => laws.map(expressionOf));
  if (byName.size === 0) return read;
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
