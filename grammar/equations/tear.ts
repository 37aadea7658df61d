import type { Symbol } from "../symbolic/expression.ts";
import { compareNames } from "../symbolic/names.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { Assignment, Assignments } from "./assignments.ts";
import { connectedGroups } from "./dependency.ts";
import { variableName } from "./loops.ts";

export interface TornLoop {
  /** By name; taken as unknown. */
  readonly torn: readonly Assignment[];
  /** The others, each after what it depends on. */
  readonly ordered: readonly Assignment[];
}

/**
 * Which variables of a loop to take as unknown: those that no law gives in closed form, then those on bonds whose
 * stroke was chosen (at free resistors first, as causality chose them), then, while circles are left, the first by
 * name on each.
 */
export function tearLoop(assignments: Assignments, members: readonly Assignment[]): TornLoop {
  const torn = new Set<Assignment>(members.filter(({ right }) => right === null));
  const byVariable = new Map(members.map((member) => [member.variable, member]));
  const edges = new Map(members.map((member) => [member, neighbours(member, byVariable)]));
  const chosen = chosenOrder(assignments);
  let open = members.filter((member) => !torn.has(member));
  const ordered: Assignment[] = [];
  let first = true;
  while (open.length > 0) {
    const index = new Map(open.map((member, i) => [member, i]));
    const inside = open.map((member) => {
      const found: number[] = [];
      for (const other of edges.get(member) ?? []) {
        const at = index.get(other);
        if (at !== undefined) found.push(at);
      }
      return found;
    });
    const groups = connectedGroups(open.length, (i) => inside[i]);
    const circles = groups.filter((group) => group.length > 1 || inside[group[0]].includes(group[0]));
    if (circles.length === 0) {
      for (const [i] of groups) ordered.push(open[i]);
      break;
    }
    for (const circle of circles) {
      const candidates = circle.map((i) => open[i]);
      for (const pick of picks(assignments, candidates, chosen, first)) torn.add(pick);
    }
    first = false;
    open = open.filter((member) => !torn.has(member));
  }
  const named = [...torn].map((member) => ({ member, name: variableName(assignments, member.variable) }));
  named.sort((a, b) => compareNames(a.name, b.name));
  return { torn: named.map(({ member }) => member), ordered };
}

/** All chosen bonds at once (one variable each) the first time; then one variable at a time. */
function picks(
  assignments: Assignments,
  candidates: readonly Assignment[],
  chosen: ReadonlyMap<number, number>,
  first: boolean,
): Assignment[] {
  const byName = (a: Assignment, b: Assignment) =>
    compareNames(variableName(assignments, a.variable), variableName(assignments, b.variable));
  if (first) {
    const perBond = new Map<number, Assignment>();
    for (const candidate of candidates) {
      const bond = assignments.bondOf(candidate.variable)?.index;
      if (bond === undefined || !chosen.has(bond)) continue;
      const other = perBond.get(bond);
      // What an element's law gives is kept; what the junctions give back to it is torn.
      if (other === undefined || (other.rule === "law" && candidate.rule !== "law"))
        perBond.set(bond, candidate);
    }
    if (perBond.size > 0) return [...perBond.values()];
  }
  return [[...candidates].sort(byName)[0]];
}

function chosenOrder(assignments: Assignments): ReadonlyMap<number, number> {
  return new Map(assignments.causal.chosen.map((bond, i) => [bond, i]));
}

function neighbours(member: Assignment, byVariable: ReadonlyMap<Symbol, Assignment>): Assignment[] {
  const expr = member.right ?? member.residual;
  if (expr === null) return [];
  return [...symbolsOf(expr)].flatMap((symbol) => byVariable.get(symbol) ?? []);
}
