import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { type DiagramModel, diagramModel } from "../../grammar/writing/diagram-model.ts";
import { clashes } from "./clashes.ts";
import { drawn } from "./drawn.ts";

function modelOf(body: string): { text: string; model: DiagramModel } {
  const text = `notation 1\nsystem Shown {\n${body}\n}\n`;
  const { graph, causal, model, findings } = checkFile(fileSet([["shown.wright", text]]), "shown.wright")
    .systems[0];
  if (graph === null) throw new Error(findings.map(({ message }) => message).join("\n"));
  return { text, model: diagramModel(graph, causal, model, findings) };
}

describe("what a drawing is made from", () => {
  it("is every element and bond of the text, with its symbol, stroke, domain and place", () => {
    const { text, model } = modelOf(`
      param k = 0.8 N*m/A -- motor constant
      input u : V
      param l = 0.3 m
      input x : 1
      Se supply e = 3 V
      1  mesh : electrical
      R  coil   e = 2 ohm * f
      GY motor  out.e = k*in.f
      1  shaft : rotation
      I  rotor  f = p/(2 kg*m^2)
      TF crank  out.f = x*l*in.f
      C  spring e = 5 N/m * q
      supply -> mesh -> coil
      mesh -> motor -> shaft -> rotor
      shaft -> crank -> spring
    `);
    expect(model.nodes.map(({ symbol, id, domain }) => [symbol, id, domain])).toEqual([
      ["Se", "supply", "electrical"],
      ["1", "mesh", "electrical"],
      ["R", "coil", "electrical"],
      ["GY", "motor", null],
      ["1", "shaft", "rotation"],
      ["I", "rotor", "rotation"],
      ["MTF", "crank", null],
      ["C", "spring", "translation"],
    ]);
    expect(model.bonds.map(({ id, stroke, domain }) => [id, stroke, domain])).toEqual([
      ["supply->mesh", "to", "electrical"],
      ["mesh->coil", "to", "electrical"],
      ["mesh->motor", "from", "electrical"],
      ["motor->shaft", "to", "rotation"],
      ["shaft->rotor", "to", "rotation"],
      ["shaft->crank", "from", "rotation"],
      ["crank->spring", "from", "translation"],
    ]);
    for (const { id, span } of model.nodes) expect(text.slice(span.start, span.end)).toContain(id);
    expect(model.bonds[0]).toMatchObject({ effortUnit: "V", flowUnit: "A", from: "supply", to: "mesh" });
  });

  it("is plain data, as a worker sends it", () => {
    const { model } = modelOf("Se a e = 3 V\nR b e = 2 ohm * f\na -> b");
    expect(structuredClone(model)).toEqual(model);
    expect(JSON.parse(JSON.stringify(model))).toEqual(model);
  });

  it("tells the dependent store", () => {
    const { model } = modelOf(`
      input F : N
      Se push e = F
      1  rod : translation
      I  a f = p/(2 kg)
      I  b f = p/(3 kg)
      push -> rod -> a, b
    `);
    expect(model.nodes.filter(({ dependent }) => dependent).map(({ id }) => id)).toEqual(["b"]);
  });

  it("tells where causality is in conflict, on the bond and on what it meets at", () => {
    const { model } = modelOf(`
      Se a e = 3 V
      Se b e = 2 V
      0  rail : electrical
      R  load e = 2 ohm * f
      a -> rail -> load
      b -> rail
    `);
    expect(model.bonds.filter(({ conflict }) => conflict).map(({ id }) => id)).toEqual(["b->rail"]);
    expect(model.nodes.filter(({ conflict }) => conflict).map(({ id }) => id)).toEqual(["rail"]);
  });

  it("tells a demanded stroke", () => {
    const { model } = modelOf(`
      Se a e = 3 V
      1  mesh : electrical
      I  coil f = p/(2 H)
      R  load e = 3 ohm * f
      a -> mesh ->| coil
      mesh -> load
    `);
    expect(model.bonds.map(({ id, demanded }) => [id, demanded])).toEqual([
      ["a->mesh", null],
      ["mesh->coil", "to"],
      ["mesh->load", null],
    ]);
  });
});

describe("the demo's drawings", () => {
  const root = new URL("../../models-demo/", import.meta.url);
  const sets = readdirSync(root, { withFileTypes: true }).filter((entry) => entry.isDirectory());

  it.each(sets.map(({ name }) => name))(
    "every system of %s is drawn with nothing on anything else",
    async (set) => {
      const paths = readdirSync(new URL(`${set}/`, root), { recursive: true, encoding: "utf8" });
      const sources = paths.filter((path) => path.endsWith(".wright"));
      const files = fileSet(
        sources.map((path) => [path, readFileSync(new URL(`${set}/${path}`, root), "utf8")] as const),
      );
      for (const path of sources) {
        for (const { graph, causal, model, findings } of checkFile(files, path).systems) {
          if (graph === null) throw new Error(`${path} was not resolved`);
          const drawing = await drawn(diagramModel(graph, causal, model, findings));
          expect(clashes(drawing)).toEqual([]);
          expect(drawing.nodes).toHaveLength(graph.nodes.length);
          expect(drawing.bonds).toHaveLength(graph.bonds.length);
        }
      }
    },
  );
});
