/** A part of a row that stands in a column of its run. */
export interface Cell {
  readonly column: number;
  readonly text: string;
  /** Blanks at least before it. */
  readonly gap: number;
  /** How many of its characters hang out to the left of the column: `= ` before a sub's system. */
  readonly hang: number;
  /** The column does not make room for what stands before this one. */
  readonly loose: boolean;
}

export interface Row {
  readonly indent: number;
  /** Rows of one family that follow each other are aligned; null: this row stands for itself. */
  readonly family: string | null;
  readonly cells: readonly Cell[];
  /** The remark or comment behind it, the column where its author put it, and whether the others make room for it. */
  readonly tail: { readonly text: string; readonly column: number | null; readonly loose: boolean } | null;
}

export function cell(column: number, text: string, more: Partial<Cell> = {}): Cell {
  return { column, text, gap: 1, hang: 0, loose: false, ...more };
}

/** How far from its text a remark may stand where its author has aligned it so. */
const FARTHEST = 40;

/** The rows of one run as lines, columns aligned. */
export function align(rows: readonly Row[]): string[] {
  const texts = rows.map(({ indent, cells }) => " ".repeat(indent) + cells[0].text);
  const columns = new Set(rows.flatMap(({ cells }) => cells.slice(1).map(({ column }) => column)));
  for (const column of [...columns].sort((a, b) => a - b)) {
    let at = 0;
    const here = rows.map(({ cells }) => cells.find((part, i) => i > 0 && part.column === column));
    for (const [i, part] of here.entries()) {
      if (part !== undefined && !part.loose) at = Math.max(at, texts[i].length + part.gap + part.hang);
    }
    for (const [i, part] of here.entries()) {
      if (part === undefined) continue;
      texts[i] = texts[i].padEnd(Math.max(at - part.hang, texts[i].length + part.gap)) + part.text;
    }
  }
  addTails(rows, texts);
  return texts;
}

/**
 * Remarks of a run stand in one column: the one that they share already, where it has room, so that a remark aligned
 * with those of the paragraph above stays there; otherwise one blank behind the longest text.
 */
function addTails(rows: readonly Row[], texts: string[]): void {
  const all = rows.flatMap(({ tail }, i) => (tail === null ? [] : [{ ...tail, at: i }]));
  const firm = all.some(({ loose }) => !loose) ? all.filter(({ loose }) => !loose) : all;
  if (firm.length === 0) return;
  const least = Math.max(...firm.map(({ at }) => texts[at].length + 1));
  const shared = firm[0].column;
  const kept = shared !== null && firm.every(({ column }) => column === shared) && shared >= least;
  const column = kept && shared <= least + FARTHEST ? shared : least;
  for (const { at, text } of all) texts[at] = texts[at].padEnd(Math.max(column, texts[at].length + 1)) + text;
}
