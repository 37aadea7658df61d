import type { StateModel } from "../equations/model.ts";
import { equationLatex, expressionLatex, type LatexOptions } from "./latex.ts";
import { dotted, nameLatex } from "./latex-name.ts";

/** A line is broken here, so that an equation of many terms fits on a page. */
export const TERMS_PER_LINE = 5;

/** The equation of one state: `\dot{x} = …`. */
export function rateLatex(
  state: string,
  rate: Parameters<typeof equationLatex>[1],
  options: LatexOptions = {},
): string {
  return equationLatex(dotted(state), rate, { termsPerLine: TERMS_PER_LINE, ...options });
}

/** All equations of a model, each ready to stand between `$$` or in an `equation` environment. */
export function modelLatex(
  model: StateModel,
): { readonly title: string; readonly equations: readonly string[] }[] {
  const break_ = { termsPerLine: TERMS_PER_LINE };
  const rates =
    model.implicit === null
      ? model.equations.map(({ state, rate }) => rateLatex(state, rate))
      : [
          massLatex(
            model.implicit,
            model.states.map(({ name }) => name),
          ),
        ];
  const open = model.loops.filter(({ solved }) => !solved);
  return [
    { title: "State equations", equations: rates },
    {
      title: "Implicit equations",
      equations: open.flatMap(({ residuals }) =>
        residuals.map((residual) => equationLatex("0", residual, break_)),
      ),
    },
    {
      title: "Dependent stores",
      equations: model.dependent.map(({ name, value }) => equationLatex(nameLatex(name), value, break_)),
    },
    {
      title: "Outputs",
      equations: model.outputs.map(({ name, value }) => equationLatex(nameLatex(name), value, break_)),
    },
  ].filter(({ equations }) => equations.length > 0);
}

/** M·ẋ = h, as matrices. */
function massLatex({ mass, right }: NonNullable<StateModel["implicit"]>, states: readonly string[]): string {
  const matrix = (rows: readonly string[]) => `\\begin{bmatrix}${rows.join("\\\\ ")}\\end{bmatrix}`;
  const rows = mass.map((row) => row.map((entry) => expressionLatex(entry)).join(" & "));
  return `${matrix(rows)} ${matrix(states.map(dotted))} = ${matrix(right.map((entry) => expressionLatex(entry)))}`;
}
