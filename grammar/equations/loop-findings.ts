import { type Fact, type Finding, finding } from "../diagnostics/finding.ts";
import type { FlatNode } from "../resolve/graph.ts";
import { compareNames } from "../symbolic/names.ts";
import type { Assignment, Assignments } from "./assignments.ts";
import { listed } from "./listed.ts";
import type { AlgebraicLoop } from "./model.ts";

/** The elements of a loop (its junctions only where there are no others), by name. */
function elementsOf(assignments: Assignments, members: readonly Assignment[]): FlatNode[] {
  const { nodes } = assignments.causal.graph;
  const all = [...new Set(members.map(({ node }) => nodes[node]))];
  const elements = all.filter(({ kind }) => kind !== "0" && kind !== "1");
  return (elements.length > 0 ? elements : all).sort((a, b) => compareNames(a.name, b.name));
}

const SHOWN = 8;

export function bondFacts(assignments: Assignments, bonds: readonly number[]): Fact[] {
  const shown = bonds.slice(0, SHOWN).map((index) => assignments.causal.graph.bonds[index]);
  if (shown.length === 0) return [];
  const rest = bonds.length - shown.length;
  const more = rest === 0 ? "" : rest === 1 ? ", and one bond more" : `, and ${rest} bonds more`;
  const ids = shown.map(({ id }) => `\`${id}\``).join(", ");
  return [{ message: `it runs through ${ids}${more}`, span: shown[0].span }];
}

export function loopFinding(
  assignments: Assignments,
  members: readonly Assignment[],
  loop: AlgebraicLoop,
): Finding {
  const elements = elementsOf(assignments, members);
  const how = loop.solved
    ? "it is solved in closed form"
    : loop.linear
      ? "it is linear and solved with numbers, since its closed form is too long to read"
      : "it is solved numerically";
  const between =
    elements.length === 1
      ? `The efforts and flows at ${listed(elements.map(({ name }) => name))} depend on each other`
      : `The efforts and flows of ${listed(elements.map(({ name }) => name))} depend on each other`;
  return finding("algebraic-loop", elements[0].span, `${between} with no store between them; ${how}.`, {
    facts: bondFacts(assignments, loop.bonds),
  });
}

export function implicitNote(
  assignments: Assignments,
  torn: readonly Assignment[],
  loop: AlgebraicLoop,
): Finding {
  const { nodes } = assignments.causal.graph;
  const stubborn = torn.find(({ residual }) => residual !== null);
  const unknowns = `${listed(loop.variables.map(({ name }) => name))} ${loop.variables.length === 1 ? "is" : "are"}`;
  if (stubborn !== undefined) {
    const message = `The law of \`${nodes[stubborn.node].name}\` can't be turned round, so ${unknowns} found numerically from it.`;
    return finding("implicit-equation", stubborn.span, message);
  }
  return finding(
    "implicit-equation",
    torn[0].span,
    `The loop has no closed form that the notation allows, so ${unknowns} found numerically.`,
  );
}
