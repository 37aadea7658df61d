import type { Finding } from "../../grammar/diagnostics/finding.ts";
import type { FileReport, SystemReport, TreeCache } from "../../grammar/pipeline.ts";
import type { Span } from "../../grammar/source/span.ts";
import type { FileSet } from "../../grammar/source/text.ts";
import { diagramModel } from "../../grammar/writing/diagram-model.ts";
import { modelView } from "./build-model-view.ts";
import { outlineOf } from "./outline.ts";
import { placeOf } from "./place.ts";
import { shownIn } from "./shown-number.ts";
import { tiedLines } from "./tied-lines.ts";
import type {
  ExpectationView,
  FileView,
  FindingView,
  Place,
  SystemView,
  ValueView,
  Variables,
} from "./view-model.ts";

/** Report of the core → what the right page shows. */
export function viewOf(
  report: FileReport,
  files: FileSet,
  trees: TreeCache,
  wanted: { readonly system: string | null; readonly variables: Variables },
): FileView {
  const shown =
    report.systems.find(({ system }) => system === wanted.system) ?? report.systems.at(-1) ?? null;
  return {
    path: report.path,
    systems: report.systems.map(({ system }) => system),
    system: shown === null ? null : systemView(shown, report, files, wanted.variables),
    findings: report.findings.map((found) => findingView(found, files)),
    outline: outlineOf(report, files, trees),
  };
}

function systemView(
  system: SystemReport,
  report: FileReport,
  files: FileSet,
  variables: Variables,
): SystemView {
  const { graph, causal, model } = system;
  const placed = (span: Span) => placeOf(span, files);
  return {
    name: system.system,
    description: graph?.description ?? null,
    model: graph === null || model === null ? null : modelView(graph, model, variables, placed),
    diagram: graph === null ? null : diagramModel(graph, causal, model, system.findings),
    parameters: (graph?.parameters ?? []).map((parameter): ValueView => {
      const { range, unit } = parameter;
      return {
        name: parameter.name,
        value: shownIn(parameter.value, unit),
        unit: unit.text,
        range: range === null ? null : `${shownIn(range.low, unit)} .. ${shownIn(range.high, unit)}`,
        description: parameter.description,
        place: placed(parameter.span),
        nodes: [],
        bonds: [],
        values: [parameter.name],
      };
    }),
    inputs: (graph?.inputs ?? []).map((input): ValueView => {
      return {
        name: input.name,
        value: shownIn(input.nominal, input.unit),
        unit: input.unit.text,
        range: null,
        description: input.description,
        place: placed(input.span),
        nodes: [],
        bonds: [],
        values: [input.name],
      };
    }),
    expectations: expectations(system, placed),
    tied: graph === null ? [] : tiedLines(graph, report.tree, system.system, files),
  };
}

/** Every `expect` of the text appears: what the core stopped before judging is said to be so, never left out. */
function expectations(system: SystemReport, placed: (span: Span) => Place): ExpectationView[] {
  const judged = system.expectations.map(
    (result): Omit<ExpectationView, "place"> => ({
      text: result.text,
      verdict: !result.judged ? "not judged" : result.passed ? "passed" : "failed",
      measured: result.measured,
      wanted: result.wanted,
      message: result.message,
    }),
  );
  return (system.graph?.expectations ?? []).map(({ text, span }, index): ExpectationView => {
    const result = judged[index]?.text === text ? judged[index] : judged.find((one) => one.text === text);
    const notJudged = { text, verdict: "not judged" as const, measured: null, wanted: "", message: null };
    return { ...(result ?? notJudged), place: placed(span) };
  });
}

function findingView(found: Finding, files: FileSet): FindingView {
  return {
    name: found.name,
    severity: found.severity,
    message: found.message,
    place: placeOf(found.span, files),
    facts: found.facts.map(({ message, span }) => ({
      message,
      place: span === undefined ? null : placeOf(span, files),
    })),
    fix: found.fix
      ? {
          title: found.fix.title,
          edits: found.fix.edits.map(({ span, text }) => ({ place: placeOf(span, files), text })),
        }
      : null,
  };
}
