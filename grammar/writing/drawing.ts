/**
 * A bond graph as drawn: simple shapes with positions, each belonging to one node or bond, in SVG user units with y
 * downwards. The page and the exported file render the same shapes, so that they cannot differ.
 */
export interface Drawing {
  readonly title: string;
  readonly box: Box;
  readonly bonds: readonly DrawnPart[];
  readonly nodes: readonly DrawnPart[];
}

/** One bond or one node: `id` as in the diagram model, `says` its name for those who listen instead of look. */
export interface DrawnPart {
  readonly id: string;
  readonly says: string;
  /** Where the symbol's middle or the bond's middle is. */
  readonly centre: Point;
  readonly shapes: readonly Shape[];
}

export interface Point {
  readonly x: number;
  readonly y: number;
}

export interface Box {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

export type Shape = Path | Text;

export interface Path {
  readonly kind: "path";
  readonly pen: Pen;
  readonly points: readonly Point[];
  readonly closed: boolean;
}

/**
 * `bond` the line, `arrow` its half arrow, `stroke` the causal stroke, `demanded` the second bar of a demanded one,
 * `dependent` and `conflict` the frames of marked symbols, `open` the ring of an open port.
 */
export type Pen = "bond" | "arrow" | "stroke" | "demanded" | "dependent" | "conflict" | "open";

export interface Text {
  readonly kind: "text";
  readonly lettering: Lettering;
  /** The middle (or start, or end) of the baseline. */
  readonly at: Point;
  readonly anchor: "start" | "middle" | "end";
  readonly text: string;
  /** Set lower behind the text: the `e` of `Se`. */
  readonly subscript: string;
}

export type Lettering = "symbol" | "name" | "domain" | "word";

/** Sizes in user units, which are pixels at reading size: none is under 11. Widths are estimates that hold for the fonts named in the SVG and for their stand-ins. */
export const LETTERING: Record<Lettering, { readonly size: number; readonly advance: number }> = {
  symbol: { size: 20, advance: 12.2 },
  name: { size: 12, advance: 7.25 },
  domain: { size: 11, advance: 5.8 },
  word: { size: 11, advance: 6.2 },
};

export function textWidth(text: string, lettering: Lettering): number {
  return [...text].length * LETTERING[lettering].advance;
}

/** The box a text takes; ascent and descent by the usual 0.75 and 0.22 of the size. */
export function textBox({ at, anchor, text, subscript, lettering }: Text): Box {
  const { size } = LETTERING[lettering];
  const width = textWidth(text, lettering) + textWidth(subscript, lettering) * SUBSCRIPT;
  const x = anchor === "start" ? at.x : anchor === "middle" ? at.x - width / 2 : at.x - width;
  return { x, y: at.y - 0.75 * size, width, height: 0.97 * size };
}

/** Size of a subscript relative to its text. */
export const SUBSCRIPT = 0.68;

export function boxOf(shapes: readonly Shape[]): Box {
  return around(shapes.flatMap((shape) => (shape.kind === "path" ? shape.points : corners(textBox(shape)))));
}

export function around(points: readonly Point[]): Box {
  let left = Number.POSITIVE_INFINITY;
  let top = Number.POSITIVE_INFINITY;
  let right = Number.NEGATIVE_INFINITY;
  let bottom = Number.NEGATIVE_INFINITY;
  for (const { x, y } of points) {
    left = Math.min(left, x);
    right = Math.max(right, x);
    top = Math.min(top, y);
    bottom = Math.max(bottom, y);
  }
  if (left > right) return { x: 0, y: 0, width: 0, height: 0 };
  return { x: left, y: top, width: right - left, height: bottom - top };
}

export function corners({ x, y, width, height }: Box): Point[] {
  return [
    { x, y },
    { x: x + width, y },
    { x: x + width, y: y + height },
    { x, y: y + height },
  ];
}

export function overlap(a: Box, b: Box): boolean {
  return a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;
}
