import type { Box, Point } from "../../grammar/writing/drawing.ts";

/** What part of a drawing is shown. Moves and zooms are pure, so that buttons, keys, wheel and pointer share them. */

const CLOSEST = 6;
const FARTHEST = 0.5;

/** `factor` over 1 comes closer; `about` stays where it is. Bounded against the whole drawing. */
export function zoomed(view: Box, whole: Box, factor: number, about: Point = middle(view)): Box {
  const scale = whole.width / view.width;
  const bounded = Math.min(Math.max(scale * factor, FARTHEST), Math.max(CLOSEST, whole.width / 200)) / scale;
  return {
    x: about.x - (about.x - view.x) / bounded,
    y: about.y - (about.y - view.y) / bounded,
    width: view.width / bounded,
    height: view.height / bounded,
  };
}

/** Moves what is shown; its middle stays inside the drawing, so that the drawing cannot be lost. */
export function moved(view: Box, whole: Box, dx: number, dy: number): Box {
  const { x, y } = middle(view);
  const midX = clamp(x + dx, whole.x, whole.x + whole.width);
  const midY = clamp(y + dy, whole.y, whole.y + whole.height);
  return { ...view, x: midX - view.width / 2, y: midY - view.height / 2 };
}

/** The least move that brings `box` into view. */
export function revealing(view: Box, whole: Box, box: Box): Box {
  const dx = Math.min(0, box.x - view.x) + Math.max(0, box.x + box.width - view.x - view.width);
  const dy = Math.min(0, box.y - view.y) + Math.max(0, box.y + box.height - view.y - view.height);
  return dx === 0 && dy === 0 ? view : moved(view, whole, dx, dy);
}

export function middle({ x, y, width, height }: Box): Point {
  return { x: x + width / 2, y: y + height / 2 };
}

function clamp(value: number, low: number, high: number): number {
  return Math.min(Math.max(value, low), high);
}
