import type { FlatGraph } from "../resolve/graph.ts";
import { type Clash, opposite, type Propagation } from "./propagation.ts";
import { granted, isChoice, reversed, type Wish } from "./wishes.ts";

interface Decision {
  readonly wish: Wish;
  readonly mark: number;
  /** Where the search stood in the list of wishes. */
  readonly cursor: number;
  readonly granted: boolean;
}

/** What may be taken back before the search gives up, times the number of bonds: about a second of work. */
const WORK_AT_MOST = 2e6;

/**
 * Strokes for structures in which choices taken one after another end in a contradiction: rings of junctions and
 * resistors side by side. A junction that a choice touches is settled before the next choice, so that a contradiction
 * shows where it arises; then the last choice that can still be otherwise is taken back. Returns the bonds that were
 * chosen, or the two contradictions at which the search ended.
 */
export function searchStrokes(
  graph: FlatGraph,
  propagation: Propagation,
  wishes: readonly Wish[],
): { readonly chosen: number[] } | { readonly bond: number; readonly clashes: readonly [Clash, Clash] } {
  const decisions: Decision[] = [];
  let cursor = 0;
  let allowed = WORK_AT_MOST / (graph.bonds.length + 1);
  let end: { bond: number; clashes: [Clash, Clash] } | null = null;
  const isOpen = (bond: number) => propagation.strokes[bond] === null;

  for (;;) {
    const touched = decisions.at(-1)?.wish.bond;
    let wish = touched === undefined ? null : unsettled(graph, touched, isOpen);
    if (wish === null) {
      while (cursor < wishes.length && !isOpen(wishes[cursor].bond)) cursor += 1;
      if (cursor === wishes.length) break;
      wish = wishes[cursor];
    }
    const mark = propagation.mark;
    const first = propagation.attempt(granted(wish));
    if (first === null) {
      decisions.push({ wish, mark, cursor, granted: true });
      continue;
    }
    const second = propagation.attempt(reversed(wish, first.premises));
    if (second === null) {
      decisions.push({ wish, mark, cursor, granted: false });
      continue;
    }
    end ??= { bond: wish.bond, clashes: [first.clash, second.clash] };
    const blamed = [...first.premises, ...second.premises];
    for (;;) {
      const last = decisions.pop();
      allowed -= 1;
      if (last === undefined || allowed < 0) return end;
      propagation.undo(last.mark);
      if (!last.granted) continue;
      const premises = [...new Set(blamed)].filter((bond) => !isOpen(bond));
      if (propagation.attempt(reversed(last.wish, premises)) !== null) continue;
      cursor = last.cursor;
      decisions.push({ ...last, granted: false });
      break;
    }
  }
  const taken = decisions.filter((each) => each.granted && isChoice(each.wish));
  return { chosen: taken.map((each) => each.wish.bond) };
}

/** The next bond of a junction at either end of `bond` that is still open, wished to bring what the junction lacks. */
function unsettled(graph: FlatGraph, bond: number, isOpen: (bond: number) => boolean): Wish | null {
  const { from, to } = graph.bonds[bond];
  for (const index of [from, to]) {
    const { kind, ports } = graph.nodes[index];
    if (kind !== "0" && kind !== "1") continue;
    const port = ports.find((each) => isOpen(each.bond));
    if (port === undefined) continue;
    const stroke = kind === "0" ? port.end : opposite(port.end);
    return { node: index, bond: port.bond, stroke, rule: "chosen-bond", otherwise: "excluded" };
  }
  return null;
}
