import { type Finding, finding } from "../diagnostics/finding.ts";
import type { FlatNode } from "../resolve/graph.ts";
import type { Symbol } from "../symbolic/expression.ts";
import { compareNames } from "../symbolic/names.ts";
import type { Assignment, Assignments } from "./assignments.ts";
import { listed } from "./listed.ts";
import { bondFacts } from "./loop-findings.ts";
import type { Deficiency } from "./rank.ts";

/** A loop whose relations do not settle it. */
export interface SingularLoop {
  readonly members: readonly Assignment[];
  readonly bonds: readonly number[];
  readonly deficiency: Deficiency;
  /** By algebra, so for all values of the parameters; else at the given ones. */
  readonly proved: boolean;
  /** What is given to the loop from outside. */
  readonly given: readonly Symbol[];
}

/**
 * Told apart by what a loop is made of and by what is amiss: rings of two-ports whose gain is one, paths side by side
 * that may share a flow or an effort as they like, sources or stores that contradict each other. The efforts and the
 * flows of one ring are singular together, since power is conserved round it: what one leaves open the other asks for,
 * and one finding says so.
 */
export function singularFindings(assignments: Assignments, singular: readonly SingularLoop[]): Finding[] {
  const { nodes } = assignments.causal.graph;
  const rings = new Map<string, { own: FlatNode[]; loops: SingularLoop[] }>();
  for (const loop of singular) {
    const own = [...new Set(loop.members.map(({ node }) => nodes[node]))];
    own.sort((a, b) => compareNames(a.name, b.name));
    const key = own.map(({ index }) => index).join();
    const ring = rings.get(key);
    if (ring === undefined) rings.set(key, { own, loops: [loop] });
    else ring.loops.push(loop);
  }
  return [...rings.values()].map(({ own, loops }) => {
    return finding("singular-junctions", own[0].span, cause(own, loops), {
      facts: bondFacts(assignments, loops[0].bonds),
    });
  });
}

function cause(own: readonly FlatNode[], loops: readonly SingularLoop[]): string {
  const values = loops.some(({ proved }) => proved) ? "" : " at the given values";
  const open = loops.some(({ deficiency }) => deficiency === "open");
  const elements = own.filter(({ kind }) => kind !== "0" && kind !== "1");
  const names = listed((elements.length > 0 ? elements : own).map(({ name }) => name));
  if (elements.length === 0) {
    return open
      ? `Nothing settles what goes round ${names}: these junctions only pass it on to each other.`
      : `The relations of ${names} can't all hold: ${givenWords(loops)}.`;
  }
  if (elements.every(({ kind }) => kind === "TF" || kind === "GY")) {
    const ring = elements.length === 1 ? "ring through" : "ring of";
    const gain = `Round the ${ring} ${names} what goes in comes back with gain one${values}`;
    return open
      ? `${gain}, so the effort or the flow that goes round it is left undetermined.`
      : `${gain}, which can't hold: ${givenWords(loops)}.`;
  }
  return open
    ? `The relations of ${names} do not settle their efforts and flows${values}: one of them follows from the others.`
    : `The relations of ${names} contradict each other${values}: ${givenWords(loops)}.`;
}

function givenWords(loops: readonly SingularLoop[]): string {
  const given = [...new Set(loops.flatMap((loop) => loop.given))];
  const what = given.filter(({ role }) => role === "state" || role === "input").map(({ name }) => name);
  what.sort(compareNames);
  if (what.length === 0) return "what the sources give does not fit into them";
  return `${listed(what)} would have to fit together, and nothing makes ${what.length === 1 ? "it" : "them"}`;
}
