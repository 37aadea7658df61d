import type { Fix } from "../diagnostics/finding.ts";
import { type End, spanOf } from "./draft.ts";

/**
 * Turns the bond of an element round in the text. Where the element is the only one before the first arrow of a
 * two-part line, both sides change places; where others stand beside or behind, it moves to a line of its own.
 */
export function reversingFix(end: End): Fix | undefined {
  const { bond } = end;
  const { wiring, instance } = bond;
  const { source } = instance.file;
  const [first, second] = wiring.groups;
  const at = first.findIndex(({ range }) => range.start === end.range.start);
  if (at === -1 || bond.instance !== bond.from.instance) return undefined;
  const textOf = (range: { start: number; end: number }) => source.text.slice(range.start, range.end);
  const element = textOf(end.range);
  const arrow = wiring.arrows[0];
  const turned = arrow.stroke === null ? "->" : arrow.stroke === "from" ? "->|" : "|->";
  if (second.length > 1) return undefined;
  const partner = textOf(second[0].range);
  const title = `Let the bond point at ${element}`;
  const edit = (start: number, stop: number, text: string) => ({
    span: spanOf(instance, { start, end: stop }),
    text,
  });
  if (first.length === 1 && wiring.groups.length === 2) {
    return {
      title,
      edits: [
        edit(end.range.start, end.range.end, partner),
        edit(arrow.range.start, arrow.range.end, turned),
        edit(second[0].range.start, second[0].range.end, element),
      ],
    };
  }
  if (wiring.as !== null) return undefined;
  const line = `${indentOf(source.text, wiring.range.start)}${partner} ${turned} ${element}`;
  const added = edit(wiring.range.end, wiring.range.end, `\n${line}`);
  if (first.length === 1) return { title, edits: [edit(end.range.start, second[0].range.start, ""), added] };
  const next = first[at + 1];
  const removed =
    next === undefined
      ? edit(first[at - 1].range.end, end.range.end, "")
      : edit(end.range.start, next.range.start, "");
  return { title, edits: [removed, added] };
}

function indentOf(text: string, offset: number): string {
  const start = text.lastIndexOf("\n", offset - 1) + 1;
  return /^[ \t]*/.exec(text.slice(start, offset))?.[0] ?? "";
}
