import type { Finding } from "../diagnostics/finding.ts";
import type { StateModel } from "../equations/model.ts";
import type { FileReport, SystemReport } from "../pipeline.ts";
import type { FlatBond, FlatGraph } from "../resolve/graph.ts";
import type { Span } from "../source/span.ts";
import type { FileSet } from "../source/text.ts";
import type { Unit } from "../units/unit.ts";
import { unitText } from "../units/unit-text.ts";
import type { CheckDocument, EquationsDocument, FindingDocument } from "./schemas.ts";
import { expressionText } from "./text.ts";

/** What `equations --format json` says of one system; a refused one has empty arrays beside its findings. */
export function equationsDocument(
  report: SystemReport | null,
  findings: readonly Finding[],
  files: FileSet,
  model: StateModel | null = report?.model ?? null,
): EquationsDocument {
  const graph = model === null ? null : model.causal.graph;
  return {
    schema: "bondwright/equations@1",
    system: report?.system ?? null,
    states: (model?.states ?? []).map(({ name, unit, start, kind }) => ({
      name,
      unit: unitOfSI(unit),
      start: quantity(start),
      kind,
    })),
    dependent: (model?.dependent ?? []).map(({ name, unit, of, value, rate }) => ({
      name,
      unit: unitOfSI(unit),
      of: [...of],
      value: expressionText(value),
      rate: expressionText(rate),
    })),
    inputs: (model?.inputs ?? []).map(({ name, unit, nominal, differentiated }) => ({
      name,
      unit: unitOfSI(unit),
      nominal: quantity(nominal),
      differentiated,
    })),
    parameters: (graph?.parameters ?? []).map(({ name, value, unit }) => ({
      name,
      value: quantity(value),
      unit: unitOfSI(unit),
    })),
    ...rates(model),
    outputs: (model?.outputs ?? []).map(({ name, unit, value }) => ({
      name,
      unit: unitOfSI(unit),
      value: expressionText(value),
    })),
    loops: (model?.loops ?? []).map(({ variables, residuals, linear, solved }) => ({
      variables: variables.map(({ name }) => name),
      residuals: residuals.map(expressionText),
      linear,
      solved,
    })),
    bonds: graph === null ? [] : graph.bonds.map((bond) => bondDocument(graph, bond, model)),
    findings: findings.map((found) => findingDocument(found, files)),
  };
}

function rates(model: StateModel | null): Pick<EquationsDocument, "equations" | "mass" | "right"> {
  if (model === null) return { equations: [] };
  if (model.implicit === null) {
    return { equations: model.equations.map(({ state, rate }) => ({ state, rate: expressionText(rate) })) };
  }
  const { mass, right } = model.implicit;
  return {
    equations: [],
    mass: mass.map((row) => row.map(expressionText)),
    right: right.map(expressionText),
  };
}

function bondDocument(
  graph: FlatGraph,
  bond: FlatBond,
  model: StateModel | null,
): EquationsDocument["bonds"][number] {
  return {
    id: bond.id,
    from: graph.nodes[bond.from].name,
    to: graph.nodes[bond.to].name,
    stroke: model?.causal.strokes[bond.index] ?? null,
    domain: bond.domain.name,
  };
}

/** What `check --format json` says of all files it looked at. */
export function checkDocument(reports: readonly FileReport[], files: FileSet): CheckDocument {
  const findings = reports.flatMap((report) => report.findings);
  const expectations = reports.flatMap(({ path, systems }) =>
    systems.flatMap((system) =>
      system.expectations.map(({ trial, ...result }) => ({
        ...(trial === null ? {} : { trial }),
        file: path,
        ...result,
      })),
    ),
  );
  const count = (severity: Finding["severity"]) =>
    findings.filter((found) => found.severity === severity).length;
  const systems = reports.flatMap(({ path, systems: own }) =>
    own.map(({ system, model }) => ({ name: system, file: path, derived: model !== null })),
  );
  return {
    schema: "bondwright/check@1",
    files: reports.map(({ path }) => path),
    systems,
    findings: findings.map((found) => findingDocument(found, files)),
    expectations,
    summary: {
      files: reports.length,
      systems: systems.length,
      errors: count("error"),
      warnings: count("warning"),
      notes: count("note"),
      expectations: {
        passed: expectations.filter(({ passed }) => passed).length,
        failed: expectations.filter(({ judged, passed }) => judged && !passed).length,
        unjudged: expectations.filter(({ judged }) => !judged).length,
      },
    },
  };
}

export function findingDocument(found: Finding, files: FileSet): FindingDocument {
  const { name, severity, message, span, facts, fix } = found;
  return {
    name,
    severity,
    message,
    ...place(span, files),
    facts: facts.map((fact) => ({
      message: fact.message,
      ...(fact.span === undefined ? {} : place(fact.span, files)),
    })),
    ...(fix === undefined
      ? {}
      : {
          fix: {
            title: fix.title,
            edits: fix.edits.map(({ span: at, text }) => ({ ...place(at, files), text })),
          },
        }),
  };
}

function place({ file, start, end }: Span, files: FileSet): Pick<FindingDocument, "file" | "start" | "end"> {
  const source = files.get(file);
  const at = (offset: number) => source?.position(offset) ?? { line: 1, column: 1 };
  return { file, start: at(start), end: at(end) };
}

/** JSON has no word for what isn't finite. */
function quantity(value: number): number | "inf" | "-inf" | "nan" {
  if (Number.isFinite(value)) return value;
  return Number.isNaN(value) ? "nan" : value > 0 ? "inf" : "-inf";
}

/** The unit that belongs to an SI value: the written one only where it is an SI unit itself. */
function unitOfSI(unit: Unit): string {
  return unit.factor === 1 && unit.offset === 0 ? unit.text : unitText(unit.dimension);
}
