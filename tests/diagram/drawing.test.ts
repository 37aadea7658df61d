import { describe, expect, it, vi } from "vitest";
import { type Box, boxOf, type Drawing, type Point } from "../../grammar/writing/drawing.ts";
import { layoutKey } from "../../grammar/writing/drawing-layout.ts";
import { drawingSvg } from "../../grammar/writing/drawing-svg.ts";
import { seeded } from "../published/derived.ts";
import { clashes } from "./clashes.ts";
import { drawn } from "./drawn.ts";
import { randomGraph } from "./random-graph.ts";
import { BRIDGE, GEARED, HOIST, MARKED, massChain, sketched } from "./sketched.ts";

// A layout of a thousand elements takes a second, and several on a machine with other work.
vi.setConfig({ testTimeout: 60_000 });

const SKETCHES: [name: string, sketch: string][] = [
  ["hoist", HOIST],
  ["geared", GEARED],
  ["bridge", BRIDGE],
  ["marked", MARKED],
  ["chain", massChain(6)],
];

describe.each(SKETCHES)("the drawing of the %s", (_, sketch) => {
  it("shows every element and every bond, with a name for those who listen", async () => {
    const model = sketched(sketch);
    const drawing = await drawn(model);
    expect(drawing.nodes.map(({ id }) => id)).toEqual(model.nodes.map(({ id }) => id));
    expect(drawing.bonds.map(({ id }) => id)).toEqual(model.bonds.map(({ id }) => id));
    for (const { says } of [...drawing.nodes, ...drawing.bonds]) expect(says).not.toBe("");
  });

  it("lets nothing lie on anything else", async () => {
    expect(clashes(await drawn(sketched(sketch)))).toEqual([]);
  });

  it("is the same each time, to the byte", async () => {
    const [once, again] = [await drawn(sketched(sketch)), await drawn(sketched(sketch))];
    expect(drawingSvg(again)).toBe(drawingSvg(once));
  });

  it("keeps everything inside its frame", async () => {
    const drawing = await drawn(sketched(sketch));
    for (const { shapes } of [...drawing.nodes, ...drawing.bonds])
      expect(inside(boxOf(shapes), drawing.box)).toBe(true);
  });
});

describe("random graphs with names of all lengths and marks", () => {
  const NAMES = ["k", "winding", "part.spring", "hydraulic_accumulator", "davit.rope[12].strands"];
  const MARKS = ["", "", "", " dependent", " conflict"];

  it.each(Array.from({ length: 60 }, (_, seed) => seed))(
    "nothing lies on anything else in graph %i",
    async (seed) => {
      const { nodes, bonds } = randomGraph(seeded(`drawing ${seed}`));
      const names = nodes.map((_, i) => `${NAMES[(i * 7 + seed) % NAMES.length]}_${i}`);
      const sketch = [
        ...nodes.map(({ kind }, i) => `${kind} ${names[i]}${MARKS[(i * 3 + seed) % MARKS.length]}`),
        ...bonds.map(([from, to], i) => `${names[from]} -> ${names[to]} ${i % 2 === 0 ? "||to" : "|from"}`),
      ];
      expect(clashes(await drawn(sketched(sketch.join("\n"))))).toEqual([]);
    },
  );
});

describe("after an edit of one element", () => {
  it.each(SKETCHES)("most of the %s stays where it was", async (_, sketch) => {
    const lines = sketch.trim().split("\n");
    const before = await drawn(sketched(sketch));
    const moves: number[] = [];
    for (const id of leavesOf(sketch)) {
      const without = lines.filter((line) => !line.trim().split(/\s+/).includes(id)).join("\n");
      moves.push(medianMove(before, await drawn(sketched(without), before)));
    }
    for (const { id, kind } of sketched(sketch).nodes) {
      if (kind !== "0" && kind !== "1") continue;
      const withMore = `${sketch}\nR added\n${id} -> added |from`;
      moves.push(medianMove(before, await drawn(sketched(withMore), before)));
    }
    expect(Math.max(...moves)).toBeLessThan(ELEMENT_WIDTH);
  });

  it("asks for no new layout when only strokes changed, and for one when a bond did", () => {
    const model = sketched(HOIST);
    expect(layoutKey(sketched(HOIST.replace("|from electrical", "|to electrical")))).toBe(layoutKey(model));
    expect(layoutKey(sketched(HOIST.replace("shaft -> bearing", "bearing -> shaft")))).not.toBe(
      layoutKey(model),
    );
  });
});

describe("how the trade draws", () => {
  it("draws a chain level, from its source to its load", async () => {
    const { nodes } = await drawn(sketched(HOIST));
    const chain = ["supply", "armature", "motor", "shaft", "gearbox", "drum", "rope.line", "boat", "weight"];
    const centres = chain.map((id) => nodes.find((node) => node.id === id)?.centre as Point);
    for (const { y } of centres) expect(y).toBeCloseTo(centres[0].y, 6);
    for (let i = 1; i < centres.length; i += 1) expect(centres[i].x).toBeGreaterThan(centres[i - 1].x);
  });

  it("names the domains where they change and nowhere else", async () => {
    const { bonds } = await drawn(sketched(HOIST));
    const named = bonds.filter(({ shapes }) =>
      shapes.some((s) => s.kind === "text" && s.lettering === "domain"),
    );
    expect(named.map(({ id }) => id)).toEqual([
      "armature->motor",
      "motor->shaft",
      "gearbox->drum",
      "drum->rope.line",
    ]);
  });

  it("marks a dependent store and a conflict with a frame and a word", async () => {
    const { nodes } = await drawn(sketched(MARKED));
    const marks = (id: string) =>
      (nodes.find((node) => node.id === id)?.shapes ?? []).flatMap((shape) =>
        shape.kind === "path" ? [shape.pen] : shape.lettering === "word" ? [shape.text] : [],
      );
    expect(marks("spring")).toEqual(["dependent", "dependent"]);
    expect(marks("mass")).toEqual(["conflict", "conflict"]);
    expect(marks("body")).toEqual([]);
  });

  it("draws what has no element beside it, a bond to itself and two bonds side by side", async () => {
    const drawing = await drawn(sketched("0 alone\n1 self\nself -> self\n1 a\nR r\na -> r\na -> r"));
    expect(drawing.nodes).toHaveLength(4);
    expect(drawing.bonds).toHaveLength(3);
    expect(drawingSvg(drawing)).not.toMatch(/NaN|Infinity|undefined/);
  });

  it("draws a thousand elements", async () => {
    const drawing = await drawn(sketched(massChain(167)));
    expect(drawing.nodes).toHaveLength(1002);
    expect(drawingSvg(drawing)).not.toMatch(/NaN|Infinity|undefined/);
  });
});

/** Of an element with a short name under it. */
const ELEMENT_WIDTH = 40;

function leavesOf(sketch: string): string[] {
  const { nodes, bonds } = sketched(sketch);
  return nodes.flatMap(({ id }) =>
    bonds.filter(({ from, to }) => from === id || to === id).length === 1 ? [id] : [],
  );
}

function medianMove(before: Drawing, after: Drawing): number {
  const was = new Map(before.nodes.map(({ id, centre }) => [id, centre]));
  const moves = after.nodes.flatMap(({ id, centre }) => {
    const old = was.get(id);
    return old === undefined ? [] : [Math.hypot(centre.x - old.x, centre.y - old.y)];
  });
  return moves.sort((a, b) => a - b)[moves.length >> 1] ?? 0;
}

function inside(inner: Box, outer: Box): boolean {
  return (
    inner.x >= outer.x &&
    inner.y >= outer.y &&
    inner.x + inner.width <= outer.x + outer.width &&
    inner.y + inner.height <= outer.y + outer.height
  );
}
