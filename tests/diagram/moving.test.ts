import { describe, expect, it } from "vitest";
import { nearest, type Part } from "../../app/diagram/nearest.ts";
import { middle, moved, revealing, zoomed } from "../../app/diagram/view-box.ts";
import { drawn } from "./drawn.ts";
import { HOIST, sketched } from "./sketched.ts";

const WHOLE = { x: 0, y: 0, width: 800, height: 200 };

describe("what is shown of a drawing", () => {
  it("keeps the point under the pointer where it is when it zooms", () => {
    const about = { x: 200, y: 50 };
    const view = zoomed(WHOLE, WHOLE, 2, about);
    expect(view.width).toBe(400);
    expect((about.x - view.x) / view.width).toBeCloseTo((about.x - WHOLE.x) / WHOLE.width, 12);
    expect((about.y - view.y) / view.height).toBeCloseTo((about.y - WHOLE.y) / WHOLE.height, 12);
  });

  it("comes no closer and goes no farther than is of use", () => {
    const closest = zoomed(WHOLE, WHOLE, 1e9);
    expect(closest.width).toBeGreaterThan(100);
    expect(zoomed(closest, WHOLE, 2).width).toBeCloseTo(closest.width, 9);
    expect(zoomed(WHOLE, WHOLE, 1e-9).width).toBe(1600);
  });

  it("cannot lose the drawing by moving", () => {
    expect(middle(moved(WHOLE, WHOLE, 1e6, -1e6))).toEqual({ x: 800, y: 0 });
  });

  it("moves only as far as needed to show an element", () => {
    const view = { x: 0, y: 0, width: 400, height: 200 };
    expect(revealing(view, WHOLE, { x: 100, y: 50, width: 40, height: 40 })).toBe(view);
    expect(revealing(view, WHOLE, { x: 390, y: 50, width: 40, height: 40 }).x).toBe(30);
  });
});

describe("arrow keys on an element", () => {
  it("lead along the chain and off it, and stop at its ends", async () => {
    const drawing = await drawn(sketched(HOIST));
    const node = (id: string): Part => ({ kind: "node", id });
    const along = (start: Part, ...ways: ("left" | "right" | "up" | "down")[]) =>
      ways.reduce<Part | null>((part, way) => (part === null ? null : nearest(drawing, part, way)), start);
    expect(along(node("supply"), "right")).toEqual({ kind: "bond", id: "supply->armature" });
    expect(along(node("supply"), "right", "right")).toEqual(node("armature"));
    expect(along(node("armature"), "up", "up")).toEqual(node("R_a"));
    expect(along(node("armature"), "down", "down")).toEqual(node("winding"));
    expect(along(node("supply"), "left")).toBeNull();
  });
});
