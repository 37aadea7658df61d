import type { StateModel } from "../equations/model.ts";
import { numberText } from "../units/unit-text.ts";
import { expressionText } from "./text.ts";
import { parameterText, pointText } from "./value-text.ts";

export interface TextSection {
  readonly title: string;
  readonly lines: readonly string[];
}

/** The equations of a model as lines of text, section by section; a section with nothing in it is left out. */
export function modelText(model: StateModel): TextSection[] {
  const sections: TextSection[] = [
    { title: "State equations", lines: rateLines(model) },
    {
      title: "Dependent stores",
      lines: columns(
        model.dependent.map(({ name, value, of }) => [
          `${name} = ${expressionText(value)}`,
          of.length === 0 ? "" : `settled by ${of.join(", ")}`,
        ]),
      ),
    },
    {
      title: "Algebraic loops",
      lines: model.loops.flatMap(({ variables, residuals, linear, solved }) => {
        const names = variables.map(({ name }) => name).join(", ");
        if (solved) return [`${names}: ${linear ? "linear, " : ""}solved`];
        return [
          `${names}: solved numerically`,
          ...residuals.map((residual) => `  0 = ${expressionText(residual)}`),
        ];
      }),
    },
    {
      title: "Outputs",
      lines: columns(
        model.outputs.map(({ name, value, unit }) => [
          `${name} = ${expressionText(value)}`,
          shownIn(unit.text),
        ]),
      ),
    },
  ];
  return sections.filter(({ lines }) => lines.length > 0);
}

/** What the equations are written in: states, inputs and parameters with their values. */
export function glossaryText(model: StateModel): TextSection[] {
  const { parameters } = model.causal.graph;
  const sections: TextSection[] = [
    {
      title: "States",
      lines: columns(model.states.map(({ name, unit, start }) => [name, `from ${pointText(start, unit)}`])),
    },
    {
      title: "Inputs",
      lines: columns(
        model.inputs.map(({ name, unit, nominal }) => [name, `nominal ${pointText(nominal, unit)}`]),
      ),
    },
    {
      title: "Parameters",
      lines: columns(
        parameters.map(({ name, value, unit, description }) => [
          `${name} = ${parameterText(value, unit)}`,
          description ?? "",
        ]),
      ),
    },
  ];
  return sections.filter(({ lines }) => lines.length > 0);
}

function rateLines({ implicit, equations, states }: StateModel): string[] {
  if (implicit === null) return equations.map(({ state, rate }) => `${state}' = ${expressionText(rate)}`);
  return implicit.mass.map((row, i) => {
    const terms = row.flatMap((entry, j) => {
      if (entry.op === "number" && entry.value === 0) return [];
      const factor = entry.op === "number" && entry.value === 1 ? "" : `(${expressionText(entry)})*`;
      return [`${factor}${states[j].name}'`];
    });
    return `${terms.join(" + ") || numberText(0)} = ${expressionText(implicit.right[i])}`;
  });
}

function shownIn(unit: string): string {
  return unit === "1" ? "" : `in ${unit}`;
}

/** Beyond this a column would push the next one off the page, and the next cell follows after two blanks. */
const WIDEST = 72;

/** Rows with their first cells padded to one width. */
export function columns(rows: readonly (readonly [string, string])[]): string[] {
  const width = rows.reduce(
    (most, [first]) => (first.length <= WIDEST ? Math.max(most, first.length) : most),
    0,
  );
  return rows.map(([first, second]) => (second === "" ? first : `${first.padEnd(width)}  ${second}`));
}
