import type { Range } from "./span.ts";
import type { SourceText } from "./text.ts";

/** Why columns of numbers could not be read from a table. */
export type TableSlip =
  | { readonly kind: "no-column"; readonly wanted: string; readonly known: readonly string[] }
  | { readonly kind: "no-number"; readonly text: string; readonly range: Range }
  | { readonly kind: "too-long"; readonly rows: number };

export type Columns =
  | { readonly kind: "columns"; readonly values: readonly number[][]; readonly ranges: readonly Range[] }
  | TableSlip;

interface Cell extends Range {
  readonly text: string;
}

/**
 * Columns of numbers from a table of comma-separated values (RFC 4180: a first line of names, cells in quotes where
 * they hold a separator). As instruments and spreadsheets write them, cells may also be parted by semicolons or tabs;
 * a comma in a number is then its decimal point. Without `names`: the first `count` columns, with or without a line of
 * names above. `ranges` tells where each row stands. Linear in the text; at most `longest` rows.
 */
export function readColumns(
  source: SourceText,
  names: readonly string[],
  count: number,
  longest: number,
): Columns {
  const separator = separatorOf(source.text);
  const rows = cellRows(source.text, separator);
  let first = rows.next();
  const head = first.done ? [] : first.value;
  const named = names.length > 0 || head.some(({ text }) => Number.isNaN(numberIn(text, separator)));
  const places: number[] = [];
  for (const wanted of names) {
    const place = head.findIndex(({ text }) => text.trim() === wanted);
    if (place === -1) return { kind: "no-column", wanted, known: head.map(({ text }) => text.trim()) };
    places.push(place);
  }
  if (names.length === 0) for (let i = 0; i < count; i += 1) places.push(i);
  if (named) first = rows.next();
  const values: number[][] = places.map(() => []);
  const ranges: Range[] = [];
  for (let row = first; !row.done; row = rows.next()) {
    if (ranges.length === longest) return { kind: "too-long", rows: longest };
    const cells = row.value;
    for (const [i, place] of places.entries()) {
      const cell = cells[place] ?? { text: "", start: cells[0].start, end: cells[cells.length - 1].end };
      const value = numberIn(cell.text, separator);
      if (!Number.isFinite(value))
        return { kind: "no-number", text: cell.text, range: { start: cell.start, end: cell.end } };
      values[i].push(value);
    }
    ranges.push({ start: cells[0].start, end: cells[cells.length - 1].end });
  }
  return { kind: "columns", values, ranges };
}

const NUMBER = /^[+-]?(\d+(\.\d*)?|\.\d+)(e[+-]?\d+)?$/i;

function numberIn(text: string, separator: string): number {
  const trimmed = separator === "," ? text.trim() : text.trim().replace(",", ".");
  return NUMBER.test(trimmed) ? Number(trimmed) : Number.NaN;
}

/** What parts the cells of the first line. */
function separatorOf(text: string): string {
  let quoted = false;
  for (const sign of text) {
    if (sign === '"') quoted = !quoted;
    else if (quoted) continue;
    else if (sign === "\n") break;
    else if (sign === ";" || sign === "\t") return sign;
  }
  return ",";
}

/** The rows that hold anything. */
function* cellRows(text: string, separator: string): Generator<Cell[], undefined> {
  let at = text.startsWith("\uFEFF") ? 1 : 0;
  while (at < text.length) {
    const row: Cell[] = [];
    for (;;) {
      const cell = cellAt(text, at, separator);
      row.push(cell);
      at = cell.end;
      if (text[at] !== separator) break;
      at += 1;
    }
    if (text[at] === "\r") at += 1;
    at += 1;
    if (row.some((cell) => cell.text.trim() !== "")) yield row;
  }
}

function cellAt(text: string, start: number, separator: string): Cell {
  let at = start;
  let value = "";
  if (text[at] === '"') {
    for (at += 1; at < text.length; at += 1) {
      if (text[at] === '"') {
        if (text[at + 1] !== '"') break;
        at += 1;
      }
      value += text[at];
    }
    at += 1;
  }
  const rest = at;
  while (at < text.length && text[at] !== separator && text[at] !== "\n") at += 1;
  const end = text[at - 1] === "\r" && at > rest ? at - 1 : Math.min(at, text.length);
  return { text: value + text.slice(rest, end), start, end };
}
