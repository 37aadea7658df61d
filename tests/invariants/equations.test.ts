import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fileSet, type SourceText } from "../../grammar/source/text.ts";
import { formatText } from "../../grammar/syntax/format.ts";
import { drawnModels } from "../independent/drawn-models.ts";
import { linesOf, textOf } from "../independent/graph-text.ts";
import type { RandomGraph } from "../independent/random-graph.ts";
import { expectSameMachine, modelOf, saidBy } from "./same-model.ts";
import { likeBonds, movable, nested, renamed, turned } from "./text-changes.ts";

/** What may be changed in a text without any change of the machine that it tells of. */
const FULL = process.env.FULL === "1";
const PATIENCE = { timeout: 1_800_000 };

const graphs = drawnModels("invariants", FULL ? 600 : 80, { tracks: true }).flatMap(
  ({ seed, graph, model }) => (model === null || model.states.length === 0 ? [] : [{ seed, graph, model }]),
);
const bySeed = new Map(graphs.map((one) => [one.seed, one]));
const of = (seed: number) => bySeed.get(seed) as (typeof graphs)[number];
/** Drawn as their seeds, so that a counterexample is short. */
const anyOf = (which: (graph: RandomGraph) => boolean) =>
  fc.constantFrom(...graphs.filter(({ graph }) => which(graph)).map(({ seed }) => seed));
const anyAtAll = anyOf(() => true);
const shuffled = (length: number) =>
  fc.shuffledSubarray(
    Array.from({ length }, (_, i) => i),
    { minLength: length },
  );
const runs = { numRuns: FULL ? 1_500 : 60 };

describe("the equations stay when", () => {
  it("lines stand in another order", PATIENCE, () => {
    const cases = anyAtAll.chain((seed) =>
      fc.tuple(fc.constant(seed), shuffled(linesOf(of(seed).graph).length)),
    );
    fc.assert(
      fc.property(cases, ([seed, order]) => {
        const lines = linesOf(of(seed).graph);
        const text = `notation 1\nsystem Random {\n${order.map((i) => lines[i]).join("\n")}\n}\n`;
        expect(saidBy(modelOf(text))).toEqual(saidBy(of(seed).model));
      }),
      runs,
    );
  });

  it("the text is formatted", PATIENCE, () => {
    fc.assert(
      fc.property(anyAtAll, (seed) => {
        const files = fileSet([["random.wright", textOf(of(seed).graph)]]);
        const formatted = formatText(files.get("random.wright") as SourceText);
        expect(saidBy(modelOf(formatted))).toEqual(saidBy(of(seed).model));
      }),
      runs,
    );
  });

  // Between a 0- and a 1-junction the direction of a bond says which way is positive: there it is no matter of taste.
  it("an unnamed bond between two junctions of one kind is turned round", PATIENCE, () => {
    const cases = anyOf((graph) => likeBonds(graph).length > 0).chain((seed) =>
      fc.tuple(fc.constant(seed), fc.constantFrom(...likeBonds(of(seed).graph))),
    );
    fc.assert(
      fc.property(cases, ([seed, bond]) => {
        expect(saidBy(modelOf(textOf(turned(of(seed).graph, bond))))).toEqual(saidBy(of(seed).model));
      }),
      runs,
    );
  });
});

describe("the machine stays the same when", () => {
  it("its nodes have other names", PATIENCE, () => {
    const cases = anyAtAll.chain((seed) =>
      fc.tuple(fc.constant(seed), shuffled(of(seed).graph.nodes.length), fc.nat()),
    );
    fc.assert(
      fc.property(cases, ([seed, order, point]) => {
        const { graph, model } = of(seed);
        const other = renamed(graph, order);
        expectSameMachine(model, modelOf(textOf(other.graph)), other.nameIn, `${point}`);
      }),
      runs,
    );
  });

  it("some of its nodes are put into a part", PATIENCE, () => {
    const cases = anyOf((graph) => movable(graph).length > 0).chain((seed) =>
      fc.tuple(fc.constant(seed), fc.subarray(movable(of(seed).graph), { minLength: 1 }), fc.nat()),
    );
    fc.assert(
      fc.property(cases, ([seed, inside, point]) => {
        const { graph, model } = of(seed);
        const names = new Set(inside.map((node) => graph.nodes[node].name));
        const nameIn = (name: string) => (names.has(name.split(".")[0]) ? `part.${name}` : name);
        expectSameMachine(model, modelOf(nested(graph, new Set(inside))), nameIn, `${point}`);
      }),
      runs,
    );
  });
});
