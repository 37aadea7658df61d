import { inCoEnergy } from "../../grammar/equations/coenergy.ts";
import { derivationOf } from "../../grammar/equations/derivation.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import type { SystemReport } from "../../grammar/pipeline.ts";
import type { Span } from "../../grammar/source/span.ts";
import { type CheckedFile, equationsDocument } from "../../grammar/writing/json.ts";
import { systemMarkdown } from "../../grammar/writing/markdown.ts";
import { modelLatex } from "../../grammar/writing/system-latex.ts";
import { columns, glossaryText, modelText, type TextSection } from "../../grammar/writing/system-text.ts";
import { expressionText } from "../../grammar/writing/text.ts";
import { oneSystem } from "../one-system.ts";
import { type ColourChoice, inert, paintFor, print } from "../output/print.ts";
import { remarkFindings } from "../output/remark-findings.ts";
import { sectionsText } from "../output/sections.ts";

export interface EquationsArguments {
  readonly format: "text" | "json" | "latex" | "markdown";
  readonly system?: string;
  readonly steps?: boolean;
  readonly states: "energy" | "co-energy";
  readonly color: ColourChoice;
  readonly stdinName: string;
}

/** Prints the equations of one system; findings go beside them, to standard error. 1 where an error refused it. */
export function equations(file: string, options: EquationsArguments): number {
  const { from, system } = oneSystem(file, options);
  const text = reportText(from, system, options);
  if (text !== "") print(text);
  if (options.format === "text" || options.format === "latex") remarkFindings(from, system, options.color);
  const refused = system?.model == null || from.report.findings.some(({ severity }) => severity === "error");
  return refused ? 1 : 0;
}

function reportText(from: CheckedFile, system: SystemReport | null, options: EquationsArguments): string {
  const model =
    system?.model == null ? null : options.states === "co-energy" ? inCoEnergy(system.model) : system.model;
  if (options.format === "json") return JSON.stringify(equationsDocument(from, system, model), null, 2);
  if (system === null) return "";
  if (options.format === "markdown") return systemMarkdown(from, { ...system, model });
  if (model === null) return "";
  if (options.format === "latex") return latexText(system, model);
  const sections = [
    ...modelText(model),
    ...(options.steps ? stepSections(from, system.model as StateModel) : []),
    ...glossaryText(model),
  ];
  return sectionsText(system, sections, paintFor(options.color));
}

function latexText(system: SystemReport, model: StateModel): string {
  const sections = modelLatex(model).map(({ title, equations: lines }) =>
    [`% ${title}`, ...lines.map((line) => `\\[ ${line} \\]`)].join("\n"),
  );
  return [`% ${inert(system.system)}`, ...sections].join("\n");
}

/** Each equation's way from the rate of its store to what is collected, with the line that each step stands on; in energy variables. */
function stepSections({ report, files, shown }: CheckedFile, model: StateModel): TextSection[] {
  const place = ({ file, start }: Span) => {
    const line = `line ${files.get(file)?.position(start).line ?? 1}`;
    return file === report.path ? line : `${shown(file)}, ${line}`;
  };
  return model.states.map(({ name }) => ({
    title: `Steps to ${name}'`,
    lines: columns(
      derivationOf(model, name).map(({ left, right, rule, span }) => [
        `${expressionText(left)} = ${expressionText(right)}`,
        `${rule.replace("-", " ")}, ${place(span)}`,
      ]),
    ),
  }));
}
