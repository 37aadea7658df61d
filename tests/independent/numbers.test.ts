import { describe, expect, it } from "vitest";
import { type Answered, asked, type Drawn, drawnModels, randomPoint } from "./drawn-models.ts";
import { python } from "./python.ts";
import type { RandomGraph } from "./random-graph.ts";

/**
 * The derived equations against a way that knows nothing of causality: NumPy solves all relations of a graph at once,
 * together with their derivatives in time, for the same values of the independent stores.
 */
interface Solved extends Answered {
  /** What is left of the relations at the solution, relative: not zero where they contradict each other. */
  readonly left: number;
  /** By how much rounding may have moved the solution. */
  readonly uncertainty: number;
  readonly order: number;
  readonly undetermined: number;
}

const FULL = process.env.FULL === "1";
const PATIENCE = 1_800_000;
const CONTRADICTORY = 1e-9;

describe(
  "random linear graphs, all relations solved at once by NumPy",
  () => {
    const drawn = drawnModels("linear", FULL ? 2_000 : 300, { tracks: true });
    const solved = python<Solved[]>(
      "solve_numbers.py",
      drawn.map(({ seed, graph, model }) => ({ graph, point: randomPoint(graph, model, `point ${seed}`) })),
    );
    const pairs = drawn.map((one, i) => ({ ...one, solved: solved[i] }));
    const accepted = pairs.flatMap((pair) => (pair.model === null ? [] : [{ ...pair, model: pair.model }]));

    it("hold what the core has to tell apart", () => {
      const share = (which: (one: (typeof accepted)[number]) => boolean) =>
        accepted.filter(which).length / accepted.length;
      expect(share(({ model }) => model.dependent.length > 0)).toBeGreaterThan(0.3);
      expect(share(({ model }) => model.loops.length > 0)).toBeGreaterThan(0.1);
      expect(share(({ model }) => model.implicit !== null)).toBeGreaterThan(0);
      expect(share(({ model }) => model.inputs.some(({ differentiated }) => differentiated))).toBeGreaterThan(
        0.1,
      );
      expect(share(({ graph }) => graph.tracks.length > 0)).toBeGreaterThan(0.05);
      expect(share(({ graph }) => graph.nodes.some(({ kind }) => kind === "IC"))).toBeGreaterThan(0.05);
      expect(share(({ solved: { uncertainty } }) => uncertainty < 1e-8)).toBeGreaterThan(0.95);
    });

    it("have the same efforts, flows, dependent values and rates at a random point", () => {
      const wrong = accepted.flatMap(({ seed, graph, model, solved: wanted }) =>
        differences(asked(model, randomPoint(graph, model, `point ${seed}`)), wanted).map(
          (what) => `graph ${seed}: ${what}`,
        ),
      );
      expect(wrong).toEqual([]);
    });

    it("have as many independent stores as the rank of the relations leaves free", () => {
      const orders = (of: (one: (typeof accepted)[number]) => number) =>
        accepted.map((one) => [one.seed, of(one)]);
      expect(orders(({ model }) => model.states.filter(({ kind }) => kind !== "tracked").length)).toEqual(
        orders((one) => one.solved.order),
      );
    });

    it("that are refused contradict themselves or leave something open", () => {
      const refused = pairs.filter(({ model }) => model === null);
      const sound = refused.filter(
        ({ solved: { left, undetermined } }) => left < CONTRADICTORY && undetermined === 0,
      );
      // `not-computable` says what the core can't do, and nothing of the model; it stays rare.
      const isBeyond = ({ refusedFor }: Drawn) => refusedFor.every((name) => name === "not-computable");
      const wrong = sound.filter((one) => !isBeyond(one));
      expect(wrong.map(({ seed, refusedFor }) => `graph ${seed}: ${refusedFor.join(", ")}`)).toEqual([]);
      expect(sound.length).toBeLessThan(0.002 * pairs.length);
    });
  },
  PATIENCE,
);

describe(
  "random graphs with square-law resistors and stiffening stores",
  () => {
    const drawn = drawnModels("curved", FULL ? 500 : 60, { tracks: true, curved: true });
    const accepted = drawn.flatMap((one) => {
      if (one.model === null) return [];
      const point = randomPoint(one.graph, one.model, `point ${one.seed}`);
      return [{ ...one, model: one.model, point, found: asked(one.model, point) }];
    });

    it("keep all relations and their derivatives where the derived equations say", () => {
      const cases = accepted.flatMap((one) =>
        typeof one.found === "string"
          ? []
          : [{ seed: one.seed, graph: one.graph, point: one.point, guess: one.found }],
      );
      expect(cases.length).toBeGreaterThan(0.9 * accepted.length);
      const solved = python<Solved[]>("solve_numbers.py", cases);
      // A square law has no slope at rest: there, as in what is nearly singular, rounding settles nothing.
      const judged = cases.flatMap((one, i) =>
        solved[i].uncertainty < 1e-6 && !rests(one.graph, one.guess) ? [{ ...one, solved: solved[i] }] : [],
      );
      expect(judged.length).toBeGreaterThan(0.85 * cases.length);
      const wrong = judged.flatMap((one) =>
        differences(one.guess, one.solved).map((what) => `graph ${one.seed}: ${what}`),
      );
      expect(wrong).toEqual([]);
    });
  },
  PATIENCE,
);

/** A square-law resistor without flow. */
function rests({ nodes, bonds }: RandomGraph, { flows }: Answered): boolean {
  return bonds.some(([, { node }], bond) => {
    const { kind, curved } = nodes[node];
    return kind === "R" && curved && Math.abs(flows[bond] ?? 0) < 1e-6;
  });
}

/** To 1e-9, and what rounding may have done. */
function differences(found: Answered | string, wanted: Solved): string[] {
  if (typeof found === "string") return [found];
  const allowed = (value: number) => 1e-9 * Math.max(1, Math.abs(value)) + wanted.uncertainty;
  const compare = (what: string, a: number | null | undefined, b: number | null | undefined) => {
    if (a === null || a === undefined) return [`the core leaves ${what} open`];
    if (b === null || b === undefined) return [`the relations leave ${what} open`];
    return Math.abs(a - b) <= allowed(b) ? [] : [`${what} is ${a} for the core and ${b} for the relations`];
  };
  if (wanted.left > CONTRADICTORY) return ["the relations contradict each other"];
  const names = Object.keys(wanted.rates);
  return [
    ...found.efforts.flatMap((effort, bond) => compare(`effort ${bond}`, effort, wanted.efforts[bond])),
    ...found.flows.flatMap((flow, bond) => compare(`flow ${bond}`, flow, wanted.flows[bond])),
    ...names.flatMap((name) => compare(name, found.stored[name], wanted.stored[name])),
    ...names.flatMap((name) => compare(`the rate of ${name}`, found.rates[name], wanted.rates[name])),
  ];
}
