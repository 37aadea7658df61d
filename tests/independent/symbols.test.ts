import { expect, it } from "vitest";
import type { StateModel } from "../../grammar/equations/model.ts";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import { drawnModels } from "./drawn-models.ts";
import { python } from "./python.ts";
import type { RandomGraph } from "./random-graph.ts";

const FULL = process.env.FULL === "1";

it("SymPy derives the same equations from all relations at once, with no causality", () => {
  const drawn = drawnModels("symbols", FULL ? 100 : 22, { junctions: 3 }).flatMap(({ seed, graph, model }) =>
    // What is left implicit has no closed form to compare; more relations than these take SymPy minutes.
    model === null || model.implicit !== null || model.states.length === 0 || isLarge(graph)
      ? []
      : [{ seed, graph, model }],
  );
  expect(drawn.length).toBeGreaterThanOrEqual(FULL ? 50 : 8);
  const cases = drawn.map(({ graph, model }) => ({
    graph,
    independent: model.states.map(({ name }) => name),
    claimed: claimsOf(model),
  }));
  const wrong = python<string[][]>("solve_symbols.py", cases);
  expect(wrong.flatMap((each, i) => each.map((what) => `graph ${drawn[i].seed}: ${what}`))).toEqual([]);
}, 1_800_000);

function isLarge({ nodes, bonds }: RandomGraph): boolean {
  const parameters = nodes.flatMap(({ matrix }) => matrix.flat()).length;
  return bonds.length > 8 || parameters > 12;
}

type Tree = number | string | readonly (string | Tree)[];

function claimsOf(model: StateModel): Record<string, { value: Tree; rate: Tree }> {
  const claims = [
    ...model.states.map(({ name, symbol }, i) => [name, symbol, model.equations[i].rate] as const),
    ...model.dependent.map(({ name, value, rate }) => [name, value, rate] as const),
  ];
  return Object.fromEntries(
    claims.map(([name, value, rate]) => [name, { value: treeOf(value), rate: treeOf(rate) }]),
  );
}

/** Nested lists; the rate of an input has a prime. */
function treeOf(expr: Expr): Tree {
  if (expr.op === "number") return expr.value;
  if (expr.op === "symbol") return expr.role === "inputRate" ? `${expr.name}'` : expr.name;
  return [expr.op, ...expr.args.map(treeOf)];
}
