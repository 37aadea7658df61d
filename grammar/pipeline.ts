import { assignCausality } from "./causality/assign.ts";
import type { CausalGraph } from "./causality/strokes.ts";
import type { Finding } from "./diagnostics/finding.ts";
import { deriveEquations } from "./equations/derive.ts";
import type { StateModel } from "./equations/model.ts";
import { passivityFindings } from "./equations/passivity.ts";
import { reciprocityFindings } from "./equations/reciprocity.ts";
import { judge } from "./expectations/judge.ts";
import { judgeTrial, type TrialReport } from "./expectations/judge-trial.ts";
import type { ExpectationResult } from "./expectations/result.ts";
import type { FlatTrial } from "./resolve/flat-trial.ts";
import type { FlatGraph } from "./resolve/graph.ts";
import { resolve } from "./resolve/resolve.ts";
import type { FileSet, SourceText } from "./source/text.ts";
import { parse } from "./syntax/parse.ts";
import type { File } from "./syntax/tree.ts";

/**
 * The core from end to end: text → tree → flat bond graph → causal graph → state model → judged expectations.
 * Each stage is a pure function that returns a value and findings and never throws for what a user wrote. A stage
 * that cannot go on gives null, and what stands before it is still shown. The door for `app` and `cli`.
 */
export interface FileReport {
  readonly path: string;
  readonly tree: File;
  readonly systems: readonly SystemReport[];
  /** In the order of the text; run only where that was asked for. */
  readonly trials: readonly TrialReport[];
  /** All findings with a span in the file, of every stage, in the order of the text. */
  readonly findings: readonly Finding[];
}

export interface SystemReport {
  readonly system: string;
  readonly graph: FlatGraph | null;
  readonly causal: CausalGraph | null;
  readonly model: StateModel | null;
  /** It has equations; still known when the model itself was let go. */
  readonly derived: boolean;
  readonly findings: readonly Finding[];
  readonly expectations: readonly ExpectationResult[];
}

/** Trees by file, kept between checks so that a key stroke reparses only the file it changed. */
export type TreeCache = Map<SourceText, ReturnType<typeof parse>>;

export interface CheckOptions {
  /** Only this system; all of the file otherwise. */
  readonly system?: string;
  readonly cache?: TreeCache;
  /** Run the trials: all of the systems asked for, or the one of this name. Key strokes do without. */
  readonly trials?: boolean | string;
  /** Told now and then how far the trials are; false cancels them. */
  progress?(share: number): boolean;
}

export function checkFile(files: FileSet, path: string, options: CheckOptions = {}): FileReport {
  const cache: TreeCache = options.cache ?? new Map();
  const parseOnce = (source: SourceText) => {
    const known = cache.get(source);
    if (known !== undefined) return known;
    const parsed = parse(source);
    cache.set(source, parsed);
    return parsed;
  };
  const source = files.get(path);
  if (source === undefined) throw new Error(`checkFile was asked for ${path}, which is not in the set`);

  const { tree, findings: syntaxFindings } = parseOnce(source);
  const resolved = resolve(files, path, parseOnce);
  const systems = resolved.systems
    .filter(({ name }) => options.system === undefined || name === options.system)
    .map(({ name, graph, findings }) => derive(name, graph, findings));

  const asked = resolved.trials.filter(({ name, system }) => {
    if (options.system !== undefined && system !== options.system) return false;
    return options.trials === true || options.trials === name;
  });
  const trials = asked.map((trial, i) => {
    const progress = (share: number) => options.progress?.((i + share) / asked.length) ?? true;
    return judgeTrial(trial, modelOf(trial, systems), progress);
  });
  const findings = [
    ...syntaxFindings,
    ...resolved.findings,
    ...systems.flatMap((system) => system.findings),
    ...trials.flatMap((trial) => trial.findings),
  ];
  const judged = systems.map((system) => ({
    ...system,
    expectations: [...system.expectations, ...trials.flatMap((one) => resultsOf(one, system.system))],
  }));
  return { path, tree, systems: judged, trials, findings: inTextOrder(findings, path) };
}

function resultsOf({ trial, expectations }: TrialReport, system: string): readonly ExpectationResult[] {
  return trial.system === system ? expectations : [];
}

/** The model a trial runs: that of its system here, or derived for it where the system comes from another file. */
function modelOf({ graph, system }: FlatTrial, systems: readonly SystemReport[]): StateModel | null {
  if (graph === null) return null;
  const own = systems.find((one) => one.graph === graph);
  return own === undefined ? derive(system, graph, []).model : own.model;
}

function derive(system: string, graph: FlatGraph | null, resolveFindings: readonly Finding[]): SystemReport {
  const refused = resolveFindings.some(({ severity }) => severity === "error");
  if (graph === null || refused) {
    // The requirements of a refused system have failed with it; its findings say why.
    const expectations = graph === null ? [] : judge(graph, null).results;
    return {
      system,
      graph,
      causal: null,
      model: null,
      derived: false,
      findings: resolveFindings,
      expectations,
    };
  }
  const lawFindings = [...reciprocityFindings(graph), ...passivityFindings(graph)];
  const { causal, findings: causalFindings } = assignCausality(graph);
  const conflict = causalFindings.some(({ severity }) => severity === "error");
  const { model, findings: equationFindings } = conflict
    ? { model: null, findings: [] }
    : deriveEquations(causal);
  const { results, findings: judgedFindings } = judge(graph, model);
  return {
    system,
    graph,
    causal,
    model,
    derived: model !== null,
    findings: [...resolveFindings, ...lawFindings, ...causalFindings, ...equationFindings, ...judgedFindings],
    expectations: results,
  };
}

function inTextOrder(findings: readonly Finding[], path: string): Finding[] {
  const seen = new Set<string>();
  const own = findings.filter((found) => {
    const key = `${found.name} ${found.span.file} ${found.span.start} ${found.span.end} ${found.message}`;
    if (seen.has(key)) return false;
    seen.add(key);
    return true;
  });
  const here = (found: Finding) => (found.span.file === path ? 0 : 1);
  return own.sort((a, b) => here(a) - here(b) || a.span.start - b.span.start || a.span.end - b.span.end);
}
