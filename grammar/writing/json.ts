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

/** A file that was checked, the set it was checked in, and how paths of that set are shown to the reader. */
export interface CheckedFile {
  readonly report: FileReport;
  readonly files: FileSet;
  readonly shown: (path: string) => string;
}

/** What `equations --format json` says of one system; a refused one has empty arrays beside its findings. */
export function equationsDocument(
  { report, files, shown }: CheckedFile,
  system: SystemReport | null,
  model: StateModel | null = system?.model ?? null,
): EquationsDocument {
  const graph = model === null ? null : model.causal.graph;
  return {
    schema: "bondwright/equations@1",
    system: system?.system ?? null,
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
    findings: report.findings.map((found) => findingDocument(found, files, shown)),
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
export function checkDocument(checked: readonly CheckedFile[]): CheckDocument {
  const findings = findingsOf(checked).map(({ found, from }) =>
    findingDocument(found, from.files, from.shown),
  );
  const expectations = checked.flatMap(({ report, shown }) =>
    report.systems.flatMap((system) =>
      system.expectations.map(({ system: name, trial, ...result }) => ({
        system: name,
        ...(trial === null ? {} : { trial }),
        file: shown(report.path),
        ...result,
      })),
    ),
  );
  const count = (severity: Finding["severity"]) =>
    findings.filter((found) => found.severity === severity && found.accepted === undefined).length;
  const systems = checked.flatMap(({ report, shown }) =>
    report.systems.map(({ system, derived }) => ({ name: system, file: shown(report.path), derived })),
  );
  return {
    schema: "bondwright/check@1",
    files: checked.map(({ report, shown }) => shown(report.path)),
    systems,
    findings,
    expectations,
    summary: {
      files: checked.length,
      systems: systems.length,
      errors: count("error"),
      warnings: count("warning"),
      notes: count("note"),
      accepted: findings.filter(({ accepted }) => accepted !== undefined).length,
      expectations: {
        passed: expectations.filter(({ passed }) => passed).length,
        failed: expectations.filter(({ judged, passed }) => judged && !passed).length,
        unjudged: expectations.filter(({ judged }) => !judged).length,
      },
    },
  };
}

/** All findings, each once: a file that others use is seen again with each of them. */
export function findingsOf(checked: readonly CheckedFile[]): { found: Finding; from: CheckedFile }[] {
  const seen = new Set<string>();
  return checked.flatMap((from) =>
    from.report.findings.flatMap((found) => {
      const { file, start, end } = found.span;
      const key = [from.shown(file), start, end, found.name, found.message].join("\n");
      if (seen.has(key)) return [];
      seen.add(key);
      return [{ found, from }];
    }),
  );
}

type Shown = CheckedFile["shown"];

export function findingDocument(
  found: Finding,
  files: FileSet,
  shown: Shown = (path) => path,
): FindingDocument {
  const { name, severity, message, span, facts, fix, fingerprint, accepted } = found;
  const at = (where: Span) => place(where, files, shown);
  return {
    name,
    severity,
    message,
    ...at(span),
    facts: facts.map((fact) => ({
      message: fact.message,
      ...(fact.span === undefined ? {} : at(fact.span)),
    })),
    ...(fix === undefined
      ? {}
      : {
          fix: { title: fix.title, edits: fix.edits.map((edit) => ({ ...at(edit.span), text: edit.text })) },
        }),
    ...(fingerprint === undefined ? {} : { fingerprint }),
    ...(accepted === undefined ? {} : { accepted }),
  };
}

function place({ file, start, end }: Span, files: FileSet, shown: Shown) {
  const source = files.get(file);
  const at = (offset: number) => source?.position(offset) ?? { line: 1, column: 1 };
  return { file: shown(file), start: at(start), end: at(end) };
}

/** JSON has no word for what isn't finite. */
export function quantity(value: number): number | "inf" | "-inf" | "nan" {
  if (Number.isFinite(value)) return value;
  return Number.isNaN(value) ? "nan" : value > 0 ? "inf" : "-inf";
}

/** The unit that belongs to an SI value: the written one only where it is an SI unit itself. */
export function unitOfSI(unit: Unit): string {
  return unit.factor === 1 && unit.offset === 0 ? unit.text : unitText(unit.dimension);
}
