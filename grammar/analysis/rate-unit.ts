import type { DependentStore, State, StateModel } from "../equations/model.ts";
import { multiply } from "../units/dimension.ts";
import type { Dimension, Unit } from "../units/unit.ts";
import { unitOf } from "../units/unit-text.ts";

const PER_SECOND: Dimension = [0, 0, -1, 0, 0, 0, 0];

/** The unit of a state's rate as its domain has it: N*m for the momentum of a rotor, not J. */
export function rateUnit({ causal }: StateModel, state: State | DependentStore): Unit {
  const { bond, kind, unit } = state;
  if (bond === null) return unitOf(multiply(unit.dimension, PER_SECOND));
  const { domain } = causal.graph.bonds[bond];
  return kind === "p" ? domain.effort : domain.flow;
}
