import { inCoEnergy } from "../../grammar/equations/coenergy.ts";
import { derivationOf } from "../../grammar/equations/derivation.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile, type SystemReport, type TreeCache } from "../../grammar/pipeline.ts";
import type { Span } from "../../grammar/source/span.ts";
import { type CheckedFile, equationsDocument } from "../../grammar/writing/json.ts";
import { systemMarkdown } from "../../grammar/writing/markdown.ts";
import { modelLatex } from "../../grammar/writing/system-latex.ts";
import { columns, glossaryText, modelText, type TextSection } from "../../grammar/writing/system-text.ts";
import { expressionText } from "../../grammar/writing/text.ts";
import { type ModelFile, modelFiles } from "../model-files.ts";
import { findingText } from "../output/findings.ts";
import { type ColourChoice, inert, type Paint, paintFor, print, remark } from "../output/print.ts";
import { WrongUse } from "../wrong-use.ts";

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
  const [model, ...others] = modelFiles([file], options.stdinName);
  if (others.length > 0) throw new WrongUse(`${file} is a folder; equations are derived for one file.`);
  const from = checkedSystem(model, options.system);
  const system = from.report.systems.at(0) ?? null;
  const text = reportText(from, system, options);
  if (text !== "") print(text);
  if (options.format === "text" || options.format === "latex") remarkFindings(from, system, options.color);
  const refused = system?.model == null || from.report.findings.some(({ severity }) => severity === "error");
  return refused ? 1 : 0;
}

/** The file with one of its systems, the last unless one is named, and with no findings of the others. */
function checkedSystem({ files, path, shown }: ModelFile, name: string | undefined): CheckedFile {
  const cache: TreeCache = new Map();
  const whole = checkFile(files, path, { system: name, cache });
  const chosen = whole.systems.at(-1)?.system;
  if (chosen === undefined && name !== undefined) {
    const all = checkFile(files, path, { cache }).systems.map(({ system }) => system);
    throw new WrongUse(`${shown(path)} holds no system ${name}; it holds: ${all.join(", ") || "none"}.`);
  }
  if (chosen === undefined && whole.findings.length === 0)
    throw new WrongUse(`${shown(path)} holds no system.`);
  const report =
    chosen === undefined || whole.systems.length === 1
      ? whole
      : checkFile(files, path, { system: chosen, cache });
  return { report, files, shown };
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
  return textReport(system, sections, paintFor(options.color));
}

function latexText(system: SystemReport, model: StateModel): string {
  const sections = modelLatex(model).map(({ title, equations: lines }) =>
    [`% ${title}`, ...lines.map((line) => `\\[ ${line} \\]`)].join("\n"),
  );
  return [`% ${inert(system.system)}`, ...sections].join("\n");
}

function textReport({ system, graph }: SystemReport, sections: readonly TextSection[], paint: Paint): string {
  const about = graph?.description ? `: ${inert(graph.description.split("\n")[0])}` : "";
  const blocks = sections.map(({ title, lines }) =>
    [paint("strong", title), ...lines.map((line) => `  ${inert(line)}`)].join("\n"),
  );
  return [`${paint("strong", inert(system))}${about}`, ...blocks].join("\n\n");
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

function remarkFindings(from: CheckedFile, system: SystemReport | null, color: ColourChoice): void {
  const paint = paintFor(color, process.stderr);
  const refused = system?.model == null;
  for (const found of from.report.findings) {
    if (refused ? found.severity === "error" : found.severity !== "note")
      remark(findingText(found, from, paint));
  }
}
