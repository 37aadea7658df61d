import type { Position } from "./span.ts";

/** One file of a model set: its path from the set's root, its text, and the only line/column conversion. */
export class SourceText {
  readonly path: string;
  readonly text: string;
  #lineStarts: number[] | null = null;

  constructor(path: string, text: string) {
    this.path = path;
    this.text = text;
  }

  /** The offset at which each line starts; computed on first use, since most files are never shown. */
  get lineStarts(): readonly number[] {
    if (this.#lineStarts === null) {
      const starts = [0];
      for (let at = this.text.indexOf("\n"); at !== -1; at = this.text.indexOf("\n", at + 1)) {
        starts.push(at + 1);
      }
      this.#lineStarts = starts;
    }
    return this.#lineStarts;
  }

  position(offset: number): Position {
    const starts = this.lineStarts;
    let low = 0;
    let high = starts.length - 1;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if (starts[middle] <= offset) low = middle;
      else high = middle - 1;
    }
    return { line: low + 1, column: offset - starts[low] + 1 };
  }

  /** The inverse of `position`; clamps to the text, so that a stale position never points outside. */
  offset(position: Position): number {
    const starts = this.lineStarts;
    const line = Math.min(Math.max(position.line, 1), starts.length);
    return Math.min(starts[line - 1] + Math.max(position.column - 1, 0), this.text.length);
  }

  /** The text of a 1-based line, without its line end. */
  line(number: number): string {
    const starts = this.lineStarts;
    const start = starts[number - 1] ?? this.text.length;
    const end = number < starts.length ? starts[number] - 1 : this.text.length;
    return this.text.slice(start, end).replace(/\r$/, "");
  }
}

/** What a check starts from: every file that `use` and data references may reach, by path from the set's root. */
export type FileSet = ReadonlyMap<string, SourceText>;

export function fileSet(files: Iterable<readonly [path: string, text: string]>): FileSet {
  const set = new Map<string, SourceText>();
  for (const [path, text] of files) set.set(path, new SourceText(path, text));
  return set;
}
