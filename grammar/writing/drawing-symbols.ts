import type { DiagramNode } from "./diagram-model.ts";
import {
  around,
  corners,
  LETTERING,
  type Path,
  type Point,
  type Shape,
  SUBSCRIPT,
  type Text,
  textWidth,
} from "./drawing.ts";

/** Half the height of every symbol, half the width of a narrow one, and the ring of an open port. */
export const SYMBOL_HALF = 10;
const RING = 5;
const FRAME = 5;

/** Half of the box that bonds stop at: the symbol's, or its frame's where it is marked. */
export function symbolHalf(node: DiagramNode): Point {
  if (node.kind === "port") return { x: RING + 1, y: RING + 1 };
  const [text, subscript] = split(node.symbol);
  const width = textWidth(text, "symbol") + textWidth(subscript, "symbol") * SUBSCRIPT;
  const frame = word(node) === null ? 0 : FRAME;
  // An index reaches lower than its letter.
  return { x: Math.max(width / 2, 7) + frame, y: SYMBOL_HALF + frame + (subscript === "" ? 0 : 3) };
}

/** The word that says what the frame shows. */
export function word(node: DiagramNode): "conflict" | "dependent" | null {
  return node.conflict ? "conflict" : node.dependent ? "dependent" : null;
}

interface WrittenLine {
  readonly text: string;
  readonly lettering: "name" | "word";
}

/** Height of a line of what is written at a symbol. */
export const LINE = 13;

/** From top to bottom: the subs a node was reached through, its own name, and what its mark means, outermost. */
function written(node: DiagramNode, above: boolean): WrittenLine[] {
  const dot = node.id.lastIndexOf(".");
  const names = dot === -1 ? [node.id] : [node.id.slice(0, dot + 1), node.id.slice(dot + 1)];
  const lines: WrittenLine[] = names.map((text) => ({ text, lettering: "name" }));
  const marked = word(node);
  if (marked === null) return lines;
  const mark: WrittenLine = { text: marked, lettering: "word" };
  return above ? [mark, ...lines] : [...lines, mark];
}

/** How wide what is written at a node is. */
export function writtenWidth(node: DiagramNode): number {
  return Math.max(...written(node, false).map(({ text, lettering }) => textWidth(text, lettering)));
}

export function writtenHeight(node: DiagramNode): number {
  return written(node, false).length * LINE;
}

/** How wide a node is with what is written above or below it. */
export function nodeWidth(node: DiagramNode): number {
  return Math.max(2 * symbolHalf(node).x, writtenWidth(node));
}

/** Height from the symbol's middle to the end of what is written above or below it. */
export function nodeReach(node: DiagramNode): number {
  return symbolHalf(node).y + 5 + writtenHeight(node);
}

/** Where the name stands, relative to the symbol's middle: a point of the baseline of the line nearest to it. */
export interface NamePlace {
  readonly at: Point;
  readonly anchor: "start" | "middle" | "end";
}

export function nameAbove(node: DiagramNode): NamePlace {
  return { at: { x: 0, y: -(symbolHalf(node).y + 5) }, anchor: "middle" };
}

export function nameBelow(node: DiagramNode): NamePlace {
  return { at: { x: 0, y: symbolHalf(node).y + 3 + 0.8 * LETTERING.name.size }, anchor: "middle" };
}

/** The symbol in letters, as the trade sets it, with its frame if it is marked, its name and the mark's word. */
export function nodeShapes(node: DiagramNode, centre: Point, name: NamePlace): Shape[] {
  const shapes: Shape[] = node.kind === "port" ? [ring(centre)] : [symbol(node.symbol, centre)];
  const marked = word(node);
  if (marked === "dependent") shapes.push(dependentFrame(node, centre));
  if (marked === "conflict") shapes.push(conflictFrame(node, centre));
  const above = name.at.y < 0;
  const lines = written(node, above);
  for (const [i, { text, lettering }] of lines.entries()) {
    const down = above ? i - (lines.length - 1) : i;
    const at = { x: centre.x + name.at.x, y: centre.y + name.at.y + down * LINE };
    shapes.push({ kind: "text", lettering, at, anchor: name.anchor, text, subscript: "" });
  }
  return shapes;
}

function symbol(letters: string, centre: Point): Text {
  const [text, subscript] = split(letters);
  const at = { x: centre.x, y: centre.y + 0.35 * LETTERING.symbol.size };
  return { kind: "text", lettering: "symbol", at, anchor: "middle", text, subscript };
}

/** `Se` and `Sf` are an S with an index. */
function split(letters: string): [text: string, subscript: string] {
  return /S[ef]$/.test(letters) ? [letters.slice(0, -1), letters.slice(-1)] : [letters, ""];
}

function ring(centre: Point): Path {
  const points = Array.from({ length: 16 }, (_, i) => {
    const angle = (i * Math.PI) / 8;
    return { x: centre.x + RING * Math.cos(angle), y: centre.y + RING * Math.sin(angle) };
  });
  return { kind: "path", pen: "open", points, closed: true };
}

/** A plain box; the pen dashes it. */
function dependentFrame(node: DiagramNode, centre: Point): Path {
  return { kind: "path", pen: "dependent", points: boxAround(node, centre), closed: true };
}

/** A box with its corners cut off: an octagon. */
function conflictFrame(node: DiagramNode, centre: Point): Path {
  const points = boxAround(node, centre).flatMap((corner) => {
    const inX = Math.sign(centre.x - corner.x) * 6;
    const inY = Math.sign(centre.y - corner.y) * 6;
    const alongX = { x: corner.x + inX, y: corner.y };
    const alongY = { x: corner.x, y: corner.y + inY };
    return inX * inY > 0 ? [alongY, alongX] : [alongX, alongY];
  });
  return { kind: "path", pen: "conflict", points, closed: true };
}

function boxAround(node: DiagramNode, centre: Point): Point[] {
  const half = symbolHalf(node);
  return corners(
    around([
      { x: centre.x - half.x, y: centre.y - half.y },
      { x: centre.x + half.x, y: centre.y + half.y },
    ]),
  );
}
