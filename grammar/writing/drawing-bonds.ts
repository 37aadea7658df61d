import type { DiagramBond } from "./diagram-model.ts";
import { type Path, type Point, type Shape, type Text, textWidth } from "./drawing.ts";

const BARB = 11;
const BARB_ANGLE = (32 * Math.PI) / 180;
/** Half the length of a causal stroke. */
const STROKE_HALF = 7;

/**
 * A bond as the trade draws it. The half arrow's one barb is at the head of positive power, below the line or right of
 * it, where the flow is written; the causal stroke stands across the end that is told the effort.
 * `line` goes from the bond's `from` to its `to`.
 */
export function bondShapes(
  bond: DiagramBond,
  line: readonly Point[],
  labelled: "from" | "to" | "both" | null,
): Shape[] {
  const shapes: Shape[] = [path("bond", line), path("arrow", halfArrow(line))];
  if (bond.stroke !== null) {
    const inwards = bond.stroke === "to" ? [...line].reverse() : line;
    shapes.push(path("stroke", across(inwards, 0)));
    if (bond.demanded === bond.stroke) shapes.push(path("demanded", across(inwards, 4)));
  }
  if (bond.conflict) shapes.push(...crossedOut(line));
  if (labelled !== null) shapes.push(domainLabel(bond.domain, line, labelled));
  return shapes;
}

function path(pen: Path["pen"], points: readonly Point[]): Path {
  return { kind: "path", pen, points, closed: false };
}

/** From the head back along the bond, turned off to the flow's side. */
function halfArrow(line: readonly Point[]): Point[] {
  const head = line[line.length - 1];
  const back = direction(head, line[line.length - 2]);
  const turn = flowSide(back) * BARB_ANGLE;
  const x = back.x * Math.cos(turn) - back.y * Math.sin(turn);
  const y = back.x * Math.sin(turn) + back.y * Math.cos(turn);
  return [head, { x: head.x + BARB * x, y: head.y + BARB * y }];
}

/** Sign of the turn from the direction back along the bond to the side below it, or right of an upright one. */
function flowSide(back: Point): 1 | -1 {
  const below = Math.abs(back.x) > 1e-6 ? back.x > 0 : back.y < 0;
  return below ? 1 : -1;
}

/** A bar across the first end of the line, `inset` along it. */
function across(line: readonly Point[], inset: number): Point[] {
  const along = direction(line[0], line[1]);
  const foot = { x: line[0].x + along.x * inset, y: line[0].y + along.y * inset };
  return [
    { x: foot.x - along.y * STROKE_HALF, y: foot.y + along.x * STROKE_HALF },
    { x: foot.x + along.y * STROKE_HALF, y: foot.y - along.x * STROKE_HALF },
  ];
}

function crossedOut(line: readonly Point[]): Path[] {
  const { x, y } = middleOf(line).at;
  return [1, -1].map((slope) =>
    path("conflict", [
      { x: x - 5, y: y - 5 * slope },
      { x: x + 5, y: y + 5 * slope },
    ]),
  );
}

/**
 * Over the bond at the end where the domain changes; over its longest piece where the one at that end is too short;
 * beside it where the longest piece is upright.
 */
function domainLabel(text: string, line: readonly Point[], end: "from" | "to" | "both"): Text {
  const lettering = "domain";
  const { at, along } = middleOf(line);
  if (Math.abs(along.y) > Math.abs(along.x)) {
    return {
      kind: "text",
      lettering,
      at: { x: at.x + 6, y: at.y + 3 },
      anchor: "start",
      text,
      subscript: "",
    };
  }
  const [foot, next] = end === "from" ? [line[0], line[1]] : [line[line.length - 1], line[line.length - 2]];
  const short = line.length > 2 && Math.abs(next.x - foot.x) < textWidth(text, lettering) + 8;
  if (end === "both" || short)
    return { kind: "text", lettering, at: { x: at.x, y: at.y - 5 }, anchor: "middle", text, subscript: "" };
  const right = next.x > foot.x;
  const start = { x: foot.x + (right ? 6 : -6), y: foot.y - 5 };
  return { kind: "text", lettering, at: start, anchor: right ? "start" : "end", text, subscript: "" };
}

/** The middle of the longest straight piece. */
export function middleOf(line: readonly Point[]): { readonly at: Point; readonly along: Point } {
  let longest = 0;
  let at = line[0];
  let along = { x: 1, y: 0 };
  for (let i = 1; i < line.length; i += 1) {
    const [a, b] = [line[i - 1], line[i]];
    const length = Math.hypot(b.x - a.x, b.y - a.y);
    if (length <= longest) continue;
    longest = length;
    at = { x: (a.x + b.x) / 2, y: (a.y + b.y) / 2 };
    along = direction(a, b);
  }
  return { at, along };
}

export function direction(from: Point, to: Point): Point {
  const length = Math.hypot(to.x - from.x, to.y - from.y) || 1;
  return { x: (to.x - from.x) / length, y: (to.y - from.y) / length };
}
