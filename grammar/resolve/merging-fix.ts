import type { Fix, TextEdit } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import type { JunctionDeclaration, Reference, Statement, System } from "../syntax/tree.ts";
import { type DraftBond, type DraftNode, spanOf } from "./draft.ts";
import { eachReference, expressionsOf } from "./tree-walk.ts";

/**
 * Makes one junction of the two that a bond joins: the bond goes, and what was wired to the second is wired to the
 * first. Not offered where anything would be lost or would have to be thought about: a description, a demanded stroke,
 * a `repeat`, a second bond between them, a law or an output that reads the junction.
 */
export function mergingFix(system: System, bond: DraftBond): Fix | undefined {
  if (bond.demanded !== null || system.body.some(({ kind }) => kind === "repeat" || kind === "unreadable"))
    return undefined;
  return merged(system, bond, bond.from, bond.to) ?? merged(system, bond, bond.to, bond.from);
}

function merged(system: System, bond: DraftBond, kept: DraftNode, gone: DraftNode): Fix | undefined {
  const [stays, goes] = [kept.declaration, gone.declaration] as JunctionDeclaration[];
  if (goes.description !== null || goes.remark !== null) return undefined;
  if (stays.domain === null && goes.domain !== null) return undefined;
  const isGone = ({ path }: Reference) => path[0].name.text === gone.local;
  if (system.body.some((statement) => reads(statement, isGone))) return undefined;
  const joining = gone.ends.filter((end) => end.bond.from === kept || end.bond.to === kept);
  if (joining.length !== 1 || kept.ends.length + gone.ends.length === 2) return undefined;

  const { text } = bond.instance.file.source;
  const edit = (range: Range, put: string): TextEdit => ({ span: spanOf(bond.instance, range), text: put });
  const taken = withoutBond(bond, kept, gone);
  if (taken === null) return undefined;
  const lines = taken === "statement" ? [goes.range, bond.wiring.range] : [goes.range];
  if (!lines.every((range) => standsAlone(text, range))) return undefined;
  const edits = lines.map((range) => edit(wholeLine(text, range), ""));
  if (taken !== "statement") edits.push(edit(taken, ""));
  for (const statement of system.body) {
    if (statement.kind !== "wiring" || (statement === bond.wiring && taken === "statement")) continue;
    for (const end of statement.groups.flat()) {
      const away = statement === bond.wiring && taken !== "statement" && isWithin(end.range, taken);
      if (isGone(end) && !away) edits.push(edit(end.range, kept.local));
    }
  }
  return { title: `Make ${gone.local} one with ${kept.local}`, edits };
}

/** What to take out of the wiring, so that this bond is no longer drawn; null where no single stretch of text draws it. */
function withoutBond({ wiring }: DraftBond, kept: DraftNode, gone: DraftNode): Range | "statement" | null {
  const { groups } = wiring;
  const names = new Set([kept.local, gone.local]);
  const isOne = (end: Reference) => end.path.length === 1 && names.has(end.path[0].name.text);
  const at = groups.findIndex(
    (group, i) => i + 1 < groups.length && group.some(isOne) && groups[i + 1].some(isOne),
  );
  if (at === -1) return null;
  const [left, right] = [groups[at], groups[at + 1]];
  if (left.length === 1 && right.length === 1) {
    return groups.length === 2 ? "statement" : { start: left[0].range.end, end: right[0].range.end };
  }
  const [several, other] = left.length > 1 ? [left, right] : [right, left];
  if (other.length !== 1) return null;
  const which = several.findIndex(isOne);
  const range = several[which].range;
  return which === 0
    ? { start: range.start, end: several[1].range.start }
    : { start: several[which - 1].range.end, end: range.end };
}

function reads(statement: Statement, isGone: (reference: Reference) => boolean): boolean {
  let found = false;
  for (const expression of expressionsOf(statement)) {
    eachReference(expression, (reference) => {
      found ||= isGone(reference);
    });
  }
  return found;
}

function isWithin(inner: Range, outer: Range): boolean {
  return outer.start <= inner.start && inner.end <= outer.end;
}

/** A comment behind it would go with it. */
function standsAlone(text: string, range: Range): boolean {
  const { start, end } = wholeLine(text, range);
  return text.slice(start, end).trim() === text.slice(range.start, range.end).trim();
}

/** With its indent and its end of line. */
function wholeLine(text: string, { start, end }: Range): Range {
  const next = text.indexOf("\n", end);
  return { start: text.lastIndexOf("\n", start - 1) + 1, end: next === -1 ? text.length : next + 1 };
}
