import { describe, expect, it, vi } from "vitest";
import type { Drawing, Point } from "../../grammar/writing/drawing.ts";
import { drawingSvg } from "../../grammar/writing/drawing-svg.ts";
import { clashes } from "./clashes.ts";
import { drawn, folded } from "./drawn.ts";
import { BRIDGE, HOIST, massChain, sketched } from "./sketched.ts";

// A layout of a thousand elements takes a second, and several on a machine with other work.
vi.setConfig({ testTimeout: 60_000 });

const ELEMENT_WIDTH = 40;

describe("a chain folded into rows", () => {
  it.each([
    ["hoist", HOIST, 640],
    ["hoist", HOIST, 360],
    ["chain", massChain(12), 640],
    ["chain", massChain(12), 300],
  ])("the %s fits the width, and nothing lies on anything else", async (_, sketch, width) => {
    const { drawing, turns } = await folded(sketched(sketch), width);
    expect(turns.length).toBeGreaterThan(0);
    expect(drawing.box.width).toBeLessThanOrEqual(width + 24);
    expect(clashes(drawing)).toEqual([]);
  });

  it("is left alone where it fits, and where several bonds hold it together", async () => {
    const model = sketched(HOIST);
    const whole = await drawn(model);
    expect(drawingSvg((await folded(model, whole.box.width)).drawing)).toBe(drawingSvg(whole));
    const { drawing, turns } = await folded(sketched(BRIDGE), 100);
    expect(clashes(drawing)).toEqual([]);
    for (const turn of turns) expect(turn).not.toMatch(/left|right/);
  });

  it("has rows that are about equally long", async () => {
    const { drawing, turns } = await folded(sketched(HOIST), 640);
    expect(turns).toHaveLength(1);
    const ends = drawing.nodes.map(({ centre }) => centre);
    const middle = (Math.min(...ends.map(({ y }) => y)) + Math.max(...ends.map(({ y }) => y))) / 2;
    const reach = (row: Point[]) => Math.max(...row.map(({ x }) => x)) - drawing.box.x;
    const [upper, lower] = [ends.filter(({ y }) => y < middle), ends.filter(({ y }) => y >= middle)];
    expect(reach(lower) / reach(upper)).toBeGreaterThan(0.6);
    expect(reach(upper) / reach(lower)).toBeGreaterThan(0.6);
  });

  it("moves little when an element comes or goes", async () => {
    const cells = massChain(20);
    const before = await folded(sketched(cells), 700);
    for (const { id, kind } of sketched(cells).nodes) {
      if (kind !== "0" && kind !== "1") continue;
      const edited = sketched(`${cells}\nR added\n${id} -> added |from`);
      const after = (await folded(edited, 700, before)).drawing;
      // What hangs under a junction off the chain makes its row deeper: the rows below it move down, and only down.
      const deeper = id.startsWith("between");
      expect(medianMove(before.drawing, after, deeper ? 0 : 1), id).toBeLessThan(ELEMENT_WIDTH);
    }
  });

  it("takes a thousand elements", async () => {
    const { drawing } = await folded(sketched(massChain(167)), 640);
    expect(drawing.nodes).toHaveLength(1002);
    expect(drawing.box.width).toBeLessThanOrEqual(664);
    expect(drawingSvg(drawing)).not.toMatch(/NaN|Infinity|undefined/);
  });
});

function medianMove(before: Drawing, after: Drawing, vertical: 0 | 1): number {
  const was = new Map<string, Point>(before.nodes.map(({ id, centre }) => [id, centre]));
  const moves = after.nodes.flatMap(({ id, centre }) => {
    const old = was.get(id);
    return old === undefined ? [] : [Math.hypot(centre.x - old.x, vertical * (centre.y - old.y))];
  });
  return moves.sort((a, b) => a - b)[moves.length >> 1] ?? 0;
}
