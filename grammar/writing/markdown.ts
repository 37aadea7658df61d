import type { SystemReport } from "../pipeline.ts";
import type { Unit } from "../units/unit.ts";
import { numberText, unitText } from "../units/unit-text.ts";
import type { CheckedFile } from "./json.ts";
import { modelLatex } from "./system-latex.ts";
import { modelText } from "./system-text.ts";
import { parameterText, pointText } from "./value-text.ts";

/** What every report, release and generated file says (the models steer machines that can hurt people). */
export const CARE =
  "Derived from the model as written. This is not a substitute for testing, for the safety standards and codes that " +
  "apply, or for the judgement of a licensed engineer.";

/** A report of one system to file or to send: equations, what they rest on, and what was open when it was written. */
export function systemMarkdown(from: CheckedFile, system: SystemReport): string {
  const { graph, model } = system;
  const parts = [`# ${escaped(system.system)}`];
  if (graph?.description) parts.push(escapedHtml(graph.description));
  parts.push(`> ${CARE}`, openFindings(from));
  if (model === null) parts.push("No equations could be derived; the findings say why.");
  else {
    const { states, inputs, causal } = model;
    parts.push(
      section(
        "States",
        table(
          ["state", "unit", "start"],
          states.map((s) => [s.name, s.unit.text, pointText(s.start, s.unit)]),
        ),
      ),
      section(
        "Inputs",
        table(
          ["input", "unit", "nominal"],
          inputs.map((i) => [i.name, i.unit.text, pointText(i.nominal, i.unit)]),
        ),
      ),
      ...modelText(model).map(({ title, lines }) =>
        section(title, lines.length === 0 ? "" : `\`\`\`text\n${lines.join("\n")}\n\`\`\``),
      ),
      section(
        "Typeset",
        modelLatex(model)
          .map(
            ({ title, equations }) =>
              `### ${title}\n\n${equations.map((one) => `$$\n${one}\n$$`).join("\n\n")}`,
          )
          .join("\n\n"),
      ),
      section(
        "Parameters",
        table(
          ["parameter", "value", "in SI", "meaning"],
          causal.graph.parameters.map((one) => [
            one.name,
            parameterText(one.value, one.unit),
            siText(one.value, one.unit),
            one.description ?? "",
          ]),
        ),
      ),
    );
  }
  parts.push(
    section(
      "Requirements",
      table(
        ["requirement", "result", "measured"],
        system.expectations.map(({ text, judged, passed, measured, message }) => [
          text,
          !judged ? "not judged" : passed ? "met" : "not met",
          measured ?? message ?? "",
        ]),
      ),
    ),
  );
  return `${parts.filter((part) => part !== "").join("\n\n")}\n`;
}

function openFindings({ report, files, shown }: CheckedFile): string {
  const lines = report.findings.map(({ name, severity, message, span }) => {
    const line = files.get(span.file)?.position(span.start).line ?? 1;
    return `- ${severity} ${name}, ${escaped(shown(span.file))} line ${line}: ${escaped(message)}`;
  });
  return section("Open findings", lines.length === 0 ? "None." : lines.join("\n"));
}

function section(title: string, body: string): string {
  return body === "" ? "" : `## ${title}\n\n${body}`;
}

function table(head: readonly string[], rows: readonly (readonly string[])[]): string {
  if (rows.length === 0) return "";
  const line = (cells: readonly string[]) => `| ${cells.map(escaped).join(" | ")} |`;
  return [line(head), line(head.map(() => "---")), ...rows.map(line)].join("\n");
}

function siText(value: number, unit: Unit): string {
  const si = unitText(unit.dimension);
  return si === "1" ? numberText(value, 8) : `${numberText(value, 8)} ${si}`;
}

/** Text that stays text: no emphasis, link, cell border or HTML comes out of a name or a message. */
function escaped(text: string): string {
  return escapedHtml(text.replace(/[\\`*_[\]|]/g, "\\$&").replace(/[\r\n]+/g, " "));
}

/** A description may use Markdown, but no HTML. */
function escapedHtml(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;");
}
