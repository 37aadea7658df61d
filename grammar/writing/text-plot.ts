import { numberText } from "../units/unit-text.ts";

const COLUMNS = 60;
const ROWS = 6;
/** A cell of braille has two columns and four rows of dots; bits by column and row (Unicode 2800–28FF). */
const DOTS = [
  [0x01, 0x02, 0x04, 0x40],
  [0x08, 0x10, 0x20, 0x80],
];

/** A curve in a few lines of text, its greatest and least value beside it. Nothing where it has no finite values. */
export function textPlot(times: readonly number[], values: readonly number[]): string[] {
  const finite = values.filter(Number.isFinite);
  if (finite.length < 2) return [];
  const low = finite.reduce((least, value) => Math.min(least, value));
  const high = finite.reduce((most, value) => Math.max(most, value));
  const [from, to] = [times[0], times[times.length - 1]];
  const columns = 2 * COLUMNS;
  const tops = new Array<number>(columns).fill(Number.POSITIVE_INFINITY);
  const bottoms = new Array<number>(columns).fill(Number.NEGATIVE_INFINITY);
  const mark = (x: number, y: number) => {
    tops[x] = Math.min(tops[x], y);
    bottoms[x] = Math.max(bottoms[x], y);
  };
  const rowOf = (value: number) =>
    high === low ? 2 * ROWS : Math.round(((high - value) / (high - low)) * (4 * ROWS - 1));
  const columnOf = (time: number) => Math.round(((time - from) / (to - from)) * (columns - 1));
  for (let i = 1; i < times.length; i += 1) {
    if (!Number.isFinite(values[i - 1]) || !Number.isFinite(values[i])) continue;
    const [start, end] = [columnOf(times[i - 1]), columnOf(times[i])];
    for (let x = start; x <= end; x += 1) {
      const share = end === start ? 1 : (x - start) / (end - start);
      const y = rowOf(values[i - 1] + share * (values[i] - values[i - 1]));
      mark(x, y);
      // What rises faster than a dot a column stays one line.
      if (x > start) mark(x, Math.min(Math.max(y, tops[x - 1] - 1), bottoms[x - 1] + 1));
    }
    if (start === end) mark(start, rowOf(values[i - 1]));
  }
  const cells = Array.from({ length: ROWS }, () => new Array<number>(COLUMNS).fill(0));
  for (let x = 0; x < columns; x += 1)
    for (let y = tops[x]; y <= bottoms[x]; y += 1) cells[y >> 2][x >> 1] |= DOTS[x & 1][y & 3];
  const labels = cells.map((_, row) =>
    row === 0 ? numberText(high, 4) : row === ROWS - 1 ? numberText(low, 4) : "",
  );
  const width = Math.max(...labels.map(({ length }) => length));
  return cells.map(
    (row, i) =>
      `${labels[i].padStart(width)} │${row.map((bits) => String.fromCharCode(0x2800 + bits)).join("")}`,
  );
}
