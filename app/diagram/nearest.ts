import type { Drawing, DrawnPart } from "../../grammar/writing/drawing.ts";

export type Way = "left" | "right" | "up" | "down";

/** A part of the drawing as the page speaks of it. */
export interface Part {
  readonly kind: "node" | "bond";
  readonly id: string;
}

const AHEAD: Record<Way, readonly [x: number, y: number]> = {
  left: [-1, 0],
  right: [1, 0],
  up: [0, -1],
  down: [0, 1],
};

/** The part that an arrow key leads to: near, and rather ahead than aside; null at the edge. */
export function nearest(drawing: Drawing, from: Part, way: Way): Part | null {
  const here = partsOf(drawing).find(({ kind, id }) => kind === from.kind && id === from.id);
  if (here === undefined) return null;
  const [aheadX, aheadY] = AHEAD[way];
  let best: Part | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (const { kind, id, centre } of partsOf(drawing)) {
    const dx = centre.x - here.centre.x;
    const dy = centre.y - here.centre.y;
    const ahead = dx * aheadX + dy * aheadY;
    const aside = Math.abs(dx * aheadY) + Math.abs(dy * aheadX);
    if (ahead < 1 || aside > 2 * ahead) continue;
    if (ahead + 2 * aside < least) {
      least = ahead + 2 * aside;
      best = { kind, id };
    }
  }
  return best;
}

function partsOf(drawing: Drawing): (DrawnPart & Part)[] {
  return [
    ...drawing.nodes.map((part) => ({ ...part, kind: "node" as const })),
    ...drawing.bonds.map((part) => ({ ...part, kind: "bond" as const })),
  ];
}
