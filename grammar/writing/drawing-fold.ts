import type { DiagramModel } from "./diagram-model.ts";
import type { Point } from "./drawing.ts";
import type { Arrangement, Block } from "./drawing-arrange.ts";
import type { LayoutAnswer } from "./drawing-layout.ts";

/**
 * A long chain in rows, as text is set in lines: where a single bond leads on from one part of the drawing to the
 * next, the rest can go on in a new row, and that bond leads back to its beginning. What several bonds hold together
 * stays together, however wide.
 */
export interface Fold {
  readonly answer: LayoutAnswer;
  /** Ids of the bonds that lead from one row to the next. */
  readonly turns: readonly string[];
}

/** Room at either end of a row for the bond that leads on. */
const TURN = 22;
const BETWEEN_ROWS = 36;

/** A stretch of the chain that is not folded. */
interface Piece {
  readonly blocks: readonly Placed[];
  readonly left: number;
  readonly right: number;
  /** The bond that leads to the next piece; null after the last, and where nothing leads on. */
  readonly onwards: number | null;
}

interface Placed {
  readonly block: Block;
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

type Row = readonly Piece[];

/**
 * Folds what the layout answered to `width`. Turns that an earlier fold had (`kept`) are taken again where they still
 * serve, so that an edit moves what stands in its row and not the whole drawing.
 */
export function foldLayout(
  model: DiagramModel,
  arrangement: Arrangement,
  answer: LayoutAnswer,
  width: number,
  kept: ReadonlySet<string> = new Set(),
): Fold {
  const pieces = piecesOf(arrangement, answer);
  if (pieces.length < 2 || rowWidth(pieces) <= width) return { answer, turns: [] };
  const rows = rowsOf(pieces, width, (bond) => kept.has(model.bonds[bond].id));
  if (rows.length < 2) return { answer, turns: [] };
  const turns = rows.slice(0, -1).flatMap((row) => {
    const bond = row[row.length - 1].onwards;
    return bond === null ? [] : [model.bonds[bond].id];
  });
  return { answer: stacked(arrangement, answer, rows), turns };
}

function piecesOf({ blocks, links }: Arrangement, answer: LayoutAnswer): Piece[] {
  const origin = new Map((answer.children ?? []).map(({ id, x = 0, y = 0 }) => [id, { x, y }]));
  const placed = blocks
    .map((block): Placed => {
      const { left, right, up, down } = block.extent;
      const at = origin.get(`n${block.hub}`) ?? { x: 0, y: 0 };
      return { block, ...at, width: left + right, height: up + down };
    })
    .sort((a, b) => a.x - b.x);
  const rank = new Map(placed.map(({ block }, i) => [block.hub, i]));
  // Behind the i-th block: how many bonds lead past it, and the sum of their numbers, which is the one if it is one.
  const count: number[] = Array.from({ length: placed.length + 1 }, () => 0);
  const sum = [...count];
  for (const { bond, near, far } of links) {
    const [a, b] = [rank.get(near) ?? 0, rank.get(far) ?? 0];
    const [first, last] = [Math.min(a, b), Math.max(a, b)];
    count[first] += 1;
    count[last] -= 1;
    sum[first] += bond;
    sum[last] -= bond;
  }
  const pieces: Piece[] = [];
  let current: Placed[] = [];
  let right = Number.NEGATIVE_INFINITY;
  let [past, bond] = [0, 0];
  for (const [i, one] of placed.entries()) {
    current.push(one);
    right = Math.max(right, one.x + one.width);
    past += count[i];
    bond += sum[i];
    const next = placed[i + 1];
    if (next !== undefined && (past > 1 || next.x < right)) continue;
    const onwards = next !== undefined && past === 1 ? bond : null;
    pieces.push({ blocks: current, left: current[0].x, right, onwards });
    current = [];
  }
  return pieces;
}

function rowWidth(row: Row): number {
  return row[row.length - 1].right - row[0].left;
}

/** As few rows as the width allows, all about as long. */
function rowsOf(pieces: readonly Piece[], width: number, isKept: (bond: number) => boolean): Row[] {
  const room = width - 2 * TURN;
  const fresh = evenRows(pieces, room);
  const stretches: Piece[][] = [[]];
  for (const piece of pieces) {
    stretches[stretches.length - 1].push(piece);
    if (piece.onwards !== null && isKept(piece.onwards)) stretches.push([]);
  }
  const again = stretches
    .filter((stretch) => stretch.length > 0)
    .flatMap((stretch) => evenRows(stretch, room));
  return stretches.length > 1 && again.length <= fresh.length + 1 ? again : fresh;
}

function evenRows(pieces: readonly Piece[], room: number): Row[] {
  const rows = filledRows(pieces, room);
  let [least, most] = [0, room];
  for (let i = 0; i < 12 && rows.length > 1; i += 1) {
    const middle = (least + most) / 2;
    if (filledRows(pieces, middle).length > rows.length) least = middle;
    else most = middle;
  }
  return filledRows(pieces, most);
}

function filledRows(pieces: readonly Piece[], room: number): Row[] {
  const rows: Piece[][] = [];
  for (const piece of pieces) {
    const row = rows[rows.length - 1];
    if (row !== undefined && piece.right - row[0].left <= room) row.push(piece);
    else rows.push([piece]);
  }
  return rows;
}

interface Shelf {
  readonly shift: Point;
  readonly right: number;
  readonly bottom: number;
}

function stacked(arrangement: Arrangement, answer: LayoutAnswer, rows: readonly Row[]): LayoutAnswer {
  const rowOf = new Map(
    rows.flatMap((row, i) => row.flatMap(({ blocks }) => blocks.map(({ block }) => [block.hub, i] as const))),
  );
  const sections = new Map((answer.edges ?? []).map(({ id, sections: [section] = [] }) => [id, section]));
  const routes = arrangement.links.flatMap(({ bond, near, far }) => {
    const section = sections.get(`b${bond}`);
    if (section === undefined) return [];
    const points = [section.startPoint, ...(section.bendPoints ?? []), section.endPoint];
    return [{ bond, from: rowOf.get(near) ?? 0, to: rowOf.get(far) ?? 0, points }];
  });
  const shelves = shelvesOf(rows, routes);
  const moved = ({ x, y }: Point, row: number) => ({
    x: x + shelves[row].shift.x,
    y: y + shelves[row].shift.y,
  });
  const children = rows.flatMap((row, i) =>
    row.flatMap(({ blocks }) =>
      blocks.map(({ block, x, y }) => ({ id: `n${block.hub}`, ...moved({ x, y }, i) })),
    ),
  );
  const edges = routes.map(({ bond, from, to, points }) => {
    const line =
      from === to
        ? points.map((point) => moved(point, from))
        : from < to
          ? turned(points, rows[from], from, to)
          : turned([...points].reverse(), rows[to], to, from).reverse();
    return {
      id: `b${bond}`,
      sections: [{ startPoint: line[0], bendPoints: line.slice(1, -1), endPoint: line[line.length - 1] }],
    };
  });
  return { children, edges };

  /** Out of the row at its end, back between the rows, and into the next one at its beginning. */
  function turned(points: readonly Point[], row: Row, from: number, to: number): Point[] {
    const end = row[row.length - 1].right;
    const start = rows[to][0].left;
    const before = points.filter(({ x }) => x <= end + 0.5).map((point) => moved(point, from));
    const after = points.filter(({ x }) => x >= start - 0.5).map((point) => moved(point, to));
    const [last, first] = [before[before.length - 1], after[0]];
    const [out, back] = [shelves[from].right + TURN / 2, -TURN / 2];
    const lane = shelves[from].bottom + BETWEEN_ROWS / 2;
    return [
      ...before,
      { x: out, y: last.y },
      { x: out, y: lane },
      { x: back, y: lane },
      { x: back, y: first.y },
      ...after,
    ];
  }
}

/** Where each row goes: under the one before, all beginning at the same x. */
function shelvesOf(
  rows: readonly Row[],
  routes: readonly { readonly from: number; readonly to: number; readonly points: readonly Point[] }[],
): Shelf[] {
  const spans = rows.map((row) => {
    const blocks = row.flatMap((piece) => piece.blocks);
    return {
      top: blocks.reduce((least, { y }) => Math.min(least, y), Number.POSITIVE_INFINITY),
      bottom: blocks.reduce((most, { y, height }) => Math.max(most, y + height), Number.NEGATIVE_INFINITY),
    };
  });
  for (const { from, to, points } of routes) {
    if (from !== to) continue;
    for (const { y } of points) {
      spans[from].top = Math.min(spans[from].top, y);
      spans[from].bottom = Math.max(spans[from].bottom, y);
    }
  }
  let next = 0;
  return rows.map((row, i) => {
    const { top, bottom } = spans[i];
    const shift = { x: -row[0].left, y: next - top };
    next += bottom - top + BETWEEN_ROWS;
    return { shift, right: rowWidth(row), bottom: bottom + shift.y };
  });
}
