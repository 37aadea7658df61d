import {
  type Box,
  boxOf,
  type Drawing,
  type DrawnPart,
  overlap,
  type Point,
} from "../../grammar/writing/drawing.ts";

/** Elements or their names that lie on one another, and bonds that run through an element or a name. */
export function clashes({ nodes, bonds }: Drawing): string[] {
  const together = nodes.flatMap((a, i) =>
    nodes.slice(i + 1).flatMap((b) => (partsOverlap(a, b) ? [`${a.id} on ${b.id}`] : [])),
  );
  const through = bonds.flatMap((bond) =>
    nodes.flatMap((node) => (crosses(bond, node) ? [`${bond.id} through ${node.id}`] : [])),
  );
  return [...together, ...through];
}

function partsOverlap(a: DrawnPart, b: DrawnPart): boolean {
  return a.shapes.some((one) => b.shapes.some((other) => overlap(boxOf([one]), boxOf([other]))));
}

function crosses(bond: DrawnPart, node: DrawnPart): boolean {
  const boxes = node.shapes.map((shape) => boxOf([shape]));
  return bond.shapes.some((shape) => {
    if (shape.kind === "text") return boxes.some((box) => overlap(box, boxOf([shape])));
    return shape.points.some(
      (point, i) => i > 0 && boxes.some((box) => cuts(shape.points[i - 1], point, box)),
    );
  });
}

/** Does the segment run through the box? (Liang and Barsky's clipping.) */
function cuts(a: Point, b: Point, { x, y, width, height }: Box): boolean {
  let [enter, leave] = [0, 1];
  const bounds: [delta: number, low: number][] = [
    [a.x - b.x, a.x - x],
    [b.x - a.x, x + width - a.x],
    [a.y - b.y, a.y - y],
    [b.y - a.y, y + height - a.y],
  ];
  for (const [delta, low] of bounds) {
    if (delta === 0 && low <= 0) return false;
    if (delta < 0) enter = Math.max(enter, low / delta);
    if (delta > 0) leave = Math.min(leave, low / delta);
  }
  return enter < leave;
}
