import { equal, multiply } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Dimension, Unit } from "../units/unit.ts";
import { unitOf } from "../units/unit-text.ts";
import type { Domain } from "./graph.ts";

const SECOND: Dimension = [0, 0, 1, 0, 0, 0, 0];

function builtIn(name: string, texts: string, pseudo = false): Domain {
  const [effort, flow, momentum, displacement] = texts.split(" ").map((text) => {
    const unit = parseUnit(text);
    if (unit === null) throw new Error(`${text} is not a unit`);
    return unit;
  });
  return { name, effort, flow, momentum, displacement, pseudo };
}

/** Effort, flow, momentum (∫e dt) and displacement (∫f dt) of each built-in domain. */
export const DOMAINS: ReadonlyMap<string, Domain> = new Map(
  [
    builtIn("translation", "N m/s N*s m"),
    builtIn("rotation", "N*m rad/s N*m*s rad"),
    builtIn("electrical", "V A Wb C"),
    builtIn("hydraulic", "Pa m^3/s Pa*s m^3"),
    builtIn("thermal", "K W/K K*s J/K"),
    builtIn("heat", "K W K*s J", true),
    builtIn("magnetic", "A Wb/s C Wb"),
    builtIn("acoustic", "Pa m^3/s Pa*s m^3"),
    builtIn("chemical", "J/mol mol/s J*s/mol mol"),
  ].map((domain) => [domain.name, domain]),
);

/** A domain that the text declares: what its momentum and displacement are called follows from effort and flow. */
export function declaredDomain(name: string, effort: Unit, flow: Unit, pseudo: boolean): Domain {
  return {
    name,
    effort,
    flow,
    momentum: unitOf(multiply(effort.dimension, SECOND)),
    displacement: unitOf(multiply(flow.dimension, SECOND)),
    pseudo,
  };
}

/** Two files may each declare a domain of one name; they are one if they measure alike. */
export function sameDomain(a: Domain, b: Domain): boolean {
  return (
    a === b ||
    (a.name === b.name &&
      equal(a.effort.dimension, b.effort.dimension) &&
      equal(a.flow.dimension, b.flow.dimension))
  );
}

export function unitOfVariable(domain: Domain, variable: "e" | "f" | "p" | "q"): Unit {
  switch (variable) {
    case "e":
      return domain.effort;
    case "f":
      return domain.flow;
    case "p":
      return domain.momentum;
    case "q":
      return domain.displacement;
  }
}
