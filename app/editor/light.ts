/**
 * What lights up together. A line of the text, a node, a bond and a term of an equation are tied by the nodes and
 * bonds of the flat graph, by their names: pointing at any of them lights all that share one with it.
 */
export interface Light {
  readonly nodes: readonly string[];
  readonly bonds: readonly string[];
  /** Parameters, inputs and outputs: what a line about a value lights. */
  readonly values: readonly string[];
}

export const DARK: Light = { nodes: [], bonds: [], values: [] };

export function isDark(light: Light): boolean {
  return light.nodes.length === 0 && light.bonds.length === 0 && light.values.length === 0;
}

const meets = <T>(some: readonly T[], others: readonly T[]) => some.some((one) => others.includes(one));

export function shares(a: Light, b: Light): boolean {
  return meets(a.nodes, b.nodes) || meets(a.bonds, b.bonds) || meets(a.values, b.values);
}

export function sameLight(a: Light, b: Light): boolean {
  const same = <T>(some: readonly T[], others: readonly T[]) =>
    some.length === others.length && some.every((one, index) => one === others[index]);
  return same(a.nodes, b.nodes) && same(a.bonds, b.bonds) && same(a.values, b.values);
}

/** Lines of the shown file that something follows from, with what they light. */
export interface TiedLine extends Light {
  readonly line: number;
}

export function lightOfLine(tied: readonly TiedLine[], line: number): Light {
  return tied.find((one) => one.line === line) ?? DARK;
}

export function litLines(tied: readonly TiedLine[], light: Light): number[] {
  return isDark(light) ? [] : tied.filter((one) => shares(one, light)).map(({ line }) => line);
}
