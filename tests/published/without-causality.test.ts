import { describe, expect, it } from "vitest";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import type { Expr, Symbol } from "../../grammar/symbolic/expression.ts";
import { expressionText } from "../../grammar/writing/text.ts";
import { seeded } from "./derived.ts";
import { type RandomGraph, randomGraph, textOf } from "./random-graph.ts";
import { solvedWithoutCausality } from "./rates-without-causality.ts";

/**
 * The same rates by a way that knows nothing of causality: random graphs, all relations at once, against the derived
 * equations at a random point. Graphs that the core refuses must contradict themselves here too.
 */
describe("random graphs, all relations solved at once", () => {
  const { accepted, refused } = sorted(100);

  it("hold independent and dependent stores, loops, two-ports, rates of inputs, and contradictions", () => {
    const count = (which: (one: Accepted) => boolean) => accepted.filter(which).length;
    expect(count(({ model }) => model.states.length > 0)).toBeGreaterThan(60);
    expect(count(({ model }) => model.dependent.length > 0)).toBeGreaterThan(20);
    expect(count(({ model }) => model.loops.length > 0)).toBeGreaterThan(15);
    expect(count(({ graph }) => graph.nodes.some(({ kind }) => kind === "GY"))).toBeGreaterThan(20);
    expect(count(({ model }) => model.inputs.some(({ differentiated }) => differentiated))).toBeGreaterThan(
      5,
    );
    expect(refused.length).toBeGreaterThan(3);
  });

  it.each(accepted)("graph $seed", ({ seed, graph, model }) => {
    const draw = seeded(`state ${seed}`);
    const given = new Map(model.states.map(({ name }) => [storeOf(name), 4 * draw() - 2]));
    const wanted = solvedWithoutCausality(graph, given);
    const lookup = lookupIn(graph, given, wanted.rates);

    const stores = [...model.states, ...model.dependent].map(({ name }) => storeOf(name));
    expect(stores.sort()).toEqual([...wanted.rates.keys()].sort());
    const rateOf = (name: string) => wanted.rates.get(storeOf(name)) ?? Number.NaN;
    for (const { state, rate } of model.implicit === null ? model.equations : []) {
      agree(`rate of ${state}`, rate, rateOf(state), lookup);
    }
    // Where the rates stay coupled, M*x' = h holds for the rates found here.
    for (const [row, right] of model.implicit?.right.entries() ?? []) {
      const { mass = [] } = model.implicit ?? {};
      const left = mass[row].reduce(
        (sum, cell, i) => sum + evaluate(cell, lookup) * rateOf(model.states[i].name),
        0,
      );
      agree(`row ${row} of the coupled rates`, right, left, lookup);
    }
    for (const { name, rate } of model.dependent) agree(`rate of ${name}`, rate, rateOf(name), lookup);
    for (const [b, { id }] of model.causal.graph.bonds.entries()) {
      agree(`${id}.e`, model.efforts[b], wanted.efforts[b], lookup);
      agree(`${id}.f`, model.flows[b], wanted.flows[b], lookup);
    }
  });

  it.each(accepted)(
    "graph $seed gives the same text whatever the order of its lines",
    ({ seed, graph, model }) => {
      const shuffled = shuffle(textOf(graph).split("\n"), seeded(`lines ${seed}`)).join("\n");
      const again = modelOf(shuffled);
      if (again === null) throw new Error("refused in another order");
      expect(textsOf(again)).toEqual(textsOf(model));
    },
  );

  it.each(refused)(
    "graph $seed is refused, and its relations contradict each other at every state",
    ({ graph }) => {
      expect(contradictory(graph)).toBe(true);
    },
  );
});

interface Accepted {
  readonly seed: number;
  readonly graph: RandomGraph;
  readonly model: StateModel;
}

/** The first graphs of a seeded series: those from which the core derives equations, and the others. */
function sorted(wanted: number): { accepted: Accepted[]; refused: Omit<Accepted, "model">[] } {
  const accepted: Accepted[] = [];
  const refused: Omit<Accepted, "model">[] = [];
  for (let seed = 1; accepted.length < wanted; seed += 1) {
    const graph = randomGraph(seeded(`graph ${seed}`));
    const model = modelOf(textOf(graph));
    if (model === null) refused.push({ seed, graph });
    else accepted.push({ seed, graph, model });
  }
  return { accepted, refused };
}

function modelOf(body: string): StateModel | null {
  const text = `notation 1\nsystem Random {\n${body}\n}\n`;
  return checkFile(fileSet([["random.wright", text]]), "random.wright").systems[0].model;
}

function textsOf(model: StateModel): readonly string[] {
  return [
    ...model.equations.map(({ state, rate }) => `${state}' = ${expressionText(rate)}`),
    ...model.dependent.map(
      ({ name, value, rate }) => `${name} = ${expressionText(value)}, ' = ${expressionText(rate)}`,
    ),
  ];
}

/** Fisher and Yates's shuffle. */
function shuffle<T>(items: readonly T[], draw: () => number): T[] {
  const shuffled = [...items];
  for (let i = shuffled.length - 1; i > 0; i -= 1) {
    const j = Math.floor(draw() * (i + 1));
    [shuffled[i], shuffled[j]] = [shuffled[j], shuffled[i]];
  }
  return shuffled;
}

function agree(
  what: string,
  found: Expr | null,
  wanted: number | null,
  lookup: (symbol: Symbol) => number,
): void {
  if (found === null || wanted === null) throw new Error(`${what} was left open`);
  const value = evaluate(found, lookup);
  expect(Math.abs(value - wanted), what).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(wanted)));
}

/** Whatever the stores hold: sources that contradict each other do so at every state. */
function contradictory(graph: RandomGraph): boolean {
  try {
    solvedWithoutCausality(graph, new Map());
    return false;
  } catch {
    return true;
  }
}

function lookupIn(
  graph: RandomGraph,
  given: ReadonlyMap<string, number>,
  rates: ReadonlyMap<string, number | null>,
): (symbol: Symbol) => number {
  const nodes = new Map(graph.nodes.map((node) => [node.name, node]));
  return ({ role, name }) => {
    const node = nodes.get(name.replace(/^v_/, ""));
    if (role === "rate") return rates.get(storeOf(name)) ?? Number.NaN;
    if (role === "inputRate") return node?.rate ?? Number.NaN;
    if (role === "parameter" || role === "input") return node?.value ?? Number.NaN;
    return given.get(storeOf(name)) ?? Number.NaN;
  };
}

/** `xC_7.q` is the state of the store `xC_7`. */
function storeOf(state: string): string {
  return state.replace(/\.[pq]$/, "");
}
