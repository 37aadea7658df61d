import { describe, expect, it } from "vitest";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import type { Symbol } from "../../grammar/symbolic/expression.ts";
import { seeded } from "./derived.ts";
import { type RandomGraph, randomGraph, textOf } from "./random-graph.ts";
import { ratesWithoutCausality } from "./rates-without-causality.ts";

/**
 * The same rates by a way that knows nothing of causality: random graphs, all relations at once, against the derived
 * equations at a random point. Graphs whose sources or stores contradict each other are refused by the core and give
 * nothing to compare; enough must remain, of every kind.
 */
describe("random graphs, all relations solved at once", () => {
  const graphs = acceptedGraphs(60);

  it("hold independent and dependent stores, loops and two-ports", () => {
    expect(graphs.filter(({ model }) => model.dependent.length > 0).length).toBeGreaterThan(5);
    expect(graphs.filter(({ model }) => model.loops.length > 0).length).toBeGreaterThan(5);
    expect(
      graphs.filter(({ graph }) => graph.nodes.some(({ kind }) => kind === "GY")).length,
    ).toBeGreaterThan(5);
    expect(
      graphs.filter(({ model }) => model.inputs.some(({ differentiated }) => differentiated)).length,
    ).toBeGreaterThan(0);
  });

  it.each(graphs.map(({ seed, graph, model }) => ({ seed, graph, model })))(
    "graph $seed",
    ({ seed, graph, model }) => {
      const draw = seeded(`state ${seed}`);
      const given = new Map(model.states.map(({ name }) => [name.slice(0, -2), 4 * draw() - 2]));
      const wanted = ratesWithoutCausality(graph, given);
      const lookup = lookupIn(graph, given);
      const found = new Map([
        ...model.equations.map(({ state, rate }) => [state, evaluate(rate, lookup)] as const),
        ...model.dependent.map(({ name, rate }) => [name, evaluate(rate, lookup)] as const),
      ]);
      expect([...found.keys()].map((name) => name.slice(0, -2)).sort()).toEqual([...wanted.keys()].sort());
      for (const [name, rate] of found) {
        const other = wanted.get(name.slice(0, -2));
        if (typeof other !== "number")
          throw new Error(`all relations together leave the rate of ${name} open`);
        expect(Math.abs(rate - other), name).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(other)));
      }
    },
  );
});

interface Accepted {
  readonly seed: number;
  readonly graph: RandomGraph;
  readonly model: StateModel;
}

/** The first graphs of a seeded series from which the core derives equations in closed form, with a store in them. */
function acceptedGraphs(wanted: number): Accepted[] {
  const accepted: Accepted[] = [];
  for (let seed = 1; accepted.length < wanted && seed < 40 * wanted; seed += 1) {
    const graph = randomGraph(seeded(`graph ${seed}`));
    const text = `notation 1\nsystem Random {\n${textOf(graph)}\n}\n`;
    const { systems } = checkFile(fileSet([["random.wright", text]]), "random.wright");
    const model = systems[0]?.model ?? null;
    if (model !== null && model.implicit === null && model.states.length > 0)
      accepted.push({ seed, graph, model });
  }
  return accepted;
}

function lookupIn(graph: RandomGraph, given: ReadonlyMap<string, number>): (symbol: Symbol) => number {
  const nodes = new Map(graph.nodes.map((node) => [node.name, node]));
  return ({ role, name }) => {
    const node = nodes.get(name.replace(/^v_/, ""));
    if (role === "inputRate") return node?.rate ?? Number.NaN;
    if (role === "parameter" || role === "input") return node?.value ?? Number.NaN;
    return given.get(name.slice(0, -2)) ?? Number.NaN;
  };
}
