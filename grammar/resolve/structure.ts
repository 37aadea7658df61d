import type { Indices, Instance, Value } from "./draft.ts";
import { plainNumber, type WholeScope } from "./whole-numbers.ts";

const numbers = new WeakMap<Value, number | null>();

/** Indices first, which hide values; then params and consts, which thereby shape the structure. */
export function wholeScope(instance: Instance, indices: Indices): WholeScope {
  return (name) => indices.get(name) ?? numberOf(instance, name);
}

function numberOf(instance: Instance, name: string): number | null {
  const value = instance.values.get(name);
  if (value === undefined) {
    const placed = instance.file.visible.values.get(name);
    return placed?.item.kind === "const" ? plainNumber(placed.item.value, () => null) : null;
  }
  const { statement, override } = value;
  if (statement.kind !== "param" && statement.kind !== "const") return null;
  instance.structural.add(name);
  const known = numbers.get(value);
  if (known !== undefined) return known;
  numbers.set(value, null); // while it is worked out, so that a circle ends
  const number =
    override === null
      ? plainNumber(statement.value, wholeScope(instance, value.indices))
      : plainNumber(override.value, wholeScope(override.instance, override.indices));
  numbers.set(value, number);
  return number;
}
