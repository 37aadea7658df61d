import type { Unit } from "../../grammar/units/unit.ts";

/** An SI value in the unit it was written in, to six figures: more than any parameter of a machine is known to. */
export function shownIn(si: number, unit: Unit): string {
  return shownNumber((si - unit.offset) / unit.factor);
}

export function shownNumber(value: number): string {
  if (!Number.isFinite(value)) return String(value);
  return String(Number(value.toPrecision(6))).replace("-", "−");
}
