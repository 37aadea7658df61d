import { describe, expect, it } from "vitest";
import type { DiagramBond } from "../../grammar/writing/diagram-model.ts";
import type { Path, Pen, Point } from "../../grammar/writing/drawing.ts";
import { bondShapes } from "../../grammar/writing/drawing-bonds.ts";

const BOND: DiagramBond = {
  id: "a->b",
  from: "a",
  to: "b",
  stroke: "to",
  demanded: null,
  conflict: false,
  domain: "rotation",
  effortUnit: "N*m",
  flowUnit: "rad/s",
  span: { file: "a.wright", start: 0, end: 1 },
};

const LINES: Record<string, readonly Point[]> = {
  right: [
    { x: 0, y: 0 },
    { x: 60, y: 0 },
  ],
  left: [
    { x: 60, y: 0 },
    { x: 0, y: 0 },
  ],
  down: [
    { x: 0, y: 0 },
    { x: 0, y: 60 },
  ],
  up: [
    { x: 0, y: 60 },
    { x: 0, y: 0 },
  ],
  slanted: [
    { x: 0, y: 0 },
    { x: 40, y: 30 },
  ],
  bent: [
    { x: 0, y: 0 },
    { x: 30, y: 0 },
    { x: 30, y: 50 },
    { x: 70, y: 50 },
  ],
};

function paths(bond: Partial<DiagramBond>, line: readonly Point[], pen: Pen): Path[] {
  return bondShapes({ ...BOND, ...bond }, line, null).filter(
    (shape) => shape.kind === "path" && shape.pen === pen,
  ) as Path[];
}

const minus = (a: Point, b: Point): Point => ({ x: a.x - b.x, y: a.y - b.y });
const dot = (a: Point, b: Point) => a.x * b.x + a.y * b.y;

describe.each(Object.entries(LINES))("a bond drawn %s", (_, line) => {
  const end = (which: "from" | "to") => (which === "from" ? line[0] : line[line.length - 1]);
  const along = (which: "from" | "to") =>
    which === "from" ? minus(line[1], line[0]) : minus(line[line.length - 1], line[line.length - 2]);

  it.each(["from", "to"] as const)("has its causal stroke across the %s end", (stroke) => {
    const [bar, ...more] = paths({ stroke }, line, "stroke");
    expect(more).toEqual([]);
    const [a, b] = bar.points;
    expect(dot(minus(b, a), along(stroke))).toBeCloseTo(0, 9);
    expect((a.x + b.x) / 2).toBeCloseTo(end(stroke).x, 9);
    expect((a.y + b.y) / 2).toBeCloseTo(end(stroke).y, 9);
  });

  it("has one barb, at the head of its power, on the side of the flow", () => {
    const [arrow, ...more] = paths({}, line, "arrow");
    expect(more).toEqual([]);
    const [head, tip] = arrow.points;
    expect(head).toEqual(end("to"));
    const back = minus(tip, head);
    expect(dot(back, along("to"))).toBeLessThan(0);
    // Below a level bond, right of an upright one.
    const { x, y } = along("to");
    expect(Math.abs(x) > 1e-9 ? back.y - (back.x * y) / x : back.x).toBeGreaterThan(0);
  });
});

describe("marks of a bond", () => {
  it("has no stroke while causality is open", () => {
    expect(paths({ stroke: null }, LINES.right, "stroke")).toEqual([]);
  });

  it("tells a demanded stroke by a second bar beside the first", () => {
    const [first] = paths({ demanded: "to" }, LINES.right, "stroke");
    const [second] = paths({ demanded: "to" }, LINES.right, "demanded");
    expect(second.points[0].x).toBeLessThan(first.points[0].x);
    expect(paths({ demanded: null }, LINES.right, "demanded")).toEqual([]);
  });

  it("crosses out a bond in conflict", () => {
    expect(paths({ conflict: true }, LINES.right, "conflict")).toHaveLength(2);
  });
});
