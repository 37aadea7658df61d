import type { Evaluated } from "../analysis/evaluate-model.ts";
import type { StateModel } from "../equations/model.ts";
import type { Expr } from "../symbolic/expression.ts";
import { multiply } from "../units/dimension.ts";
import type { Dimension } from "../units/unit.ts";
import { numberText, quantityText, unitText } from "../units/unit-text.ts";
import { table } from "./linear-text.ts";
import type { TextSection } from "./system-text.ts";

const PER_SECOND: Dimension = [0, 0, -1, 0, 0, 0, 0];

/** All that a model says at one point, as lines of text. */
export function ratesText(model: StateModel, { valueOf, rates }: Evaluated): TextSection[] {
  const { bonds } = model.causal.graph;
  const perSecond = (value: number, dimension: Dimension) =>
    withUnit(value, unitText(multiply(dimension, PER_SECOND)));
  const shown = (expr: Expr | null, unit: string) => (expr === null ? "-" : withUnit(valueOf(expr), unit));
  const sections: TextSection[] = [
    {
      title: "Rates",
      lines: table([
        ...model.states.map(({ name, unit }, i) => [`${name}'`, perSecond(rates[i], unit.dimension)]),
        ...model.dependent.map(({ name, unit, rate }) => [
          `${name}'`,
          perSecond(valueOf(rate), unit.dimension),
        ]),
      ]),
    },
    {
      title: "Outputs",
      lines: table(
        model.outputs.map(({ name, unit, value }) => [name, quantityText(valueOf(value), unit, 8)]),
      ),
    },
    {
      title: "Bonds",
      lines: table(
        bonds.map(({ id, domain }, i) => [
          id,
          `e = ${shown(model.efforts[i], domain.effort.text)}`,
          `f = ${shown(model.flows[i], domain.flow.text)}`,
        ]),
      ),
    },
  ];
  return sections.filter(({ lines }) => lines.length > 0);
}

function withUnit(value: number, unit: string): string {
  return unit === "1" ? numberText(value, 8) : `${numberText(value, 8)} ${unit}`;
}
