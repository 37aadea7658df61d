import { describe, expect, it } from "vitest";
import type { StateModel } from "../../grammar/equations/model.ts";
import type { FlatNode } from "../../grammar/resolve/graph.ts";
import { drawnModels } from "../independent/drawn-models.ts";
import { evaluated, randomPointOf } from "./same-model.ts";

/** At any state, a junction, a transformer and a gyrator pass on all the power that they get, and keep none. */
const FULL = process.env.FULL === "1";
const POWER_CONSERVING = new Set(["0", "1", "TF", "GY"]);

describe.each([
  ["linear", {}],
  ["curved", { curved: true }],
] as const)("random graphs, %s", (_, laws) => {
  it("power sums to zero at every junction, transformer and gyrator", { timeout: 1_800_000 }, () => {
    const models = drawnModels("power", FULL ? 500 : 60, { tracks: true, ...laws });
    const wrong = models.flatMap(({ seed, model }) =>
      model === null ? [] : unbalanced(model, `${seed}`).map((name) => `graph ${seed}: ${name}`),
    );
    expect(wrong).toEqual([]);
  });
});

function unbalanced(model: StateModel, seed: string): string[] {
  const { valueOf } = evaluated(model, randomPointOf(model, seed));
  const at = (expr: (typeof model.efforts)[number]) => (expr === null ? Number.NaN : valueOf(expr));
  const powers = model.efforts.map((effort, bond) => at(effort) * at(model.flows[bond]));
  const isOff = ({ ports }: FlatNode) => {
    const each = ports.map(({ bond, end }) => (end === "to" ? powers[bond] : -powers[bond]));
    const sum = each.reduce((total, power) => total + power, 0);
    const size = each.reduce((total, power) => total + Math.abs(power), 0);
    return !(Math.abs(sum) <= 1e-9 * (1 + size));
  };
  return model.causal.graph.nodes
    .filter((node) => POWER_CONSERVING.has(node.kind) && isOff(node))
    .map(({ name }) => name);
}
