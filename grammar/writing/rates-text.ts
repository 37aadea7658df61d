import type { Evaluated } from "../analysis/evaluate-model.ts";
import { rateUnit } from "../analysis/rate-unit.ts";
import type { StateModel } from "../equations/model.ts";
import type { Expr } from "../symbolic/expression.ts";
import { numberText, quantityText } from "../units/unit-text.ts";
import { table } from "./linear-text.ts";
import type { TextSection } from "./system-text.ts";

/** All that a model says at one point, as lines of text. */
export function ratesText(model: StateModel, { valueOf, rates }: Evaluated): TextSection[] {
  const { bonds } = model.causal.graph;
  const shown = (expr: Expr | null, unit: string) => (expr === null ? "-" : withUnit(valueOf(expr), unit));
  const sections: TextSection[] = [
    {
      title: "Rates",
      lines: table([
        ...model.states.map((state, i) => [
          `${state.name}'`,
          quantityText(rates[i], rateUnit(model, state), 8),
        ]),
        ...model.dependent.map((store) => [
          `${store.name}'`,
          quantityText(valueOf(store.rate), rateUnit(model, store), 8),
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
