import { atLeast, type Finding, type Severity } from "../grammar/diagnostics/finding.ts";
import { checkFile, type FileReport, type TreeCache } from "../grammar/pipeline.ts";
import type { File, Trial } from "../grammar/syntax/tree.ts";
import { type CheckedFile, findingsOf } from "../grammar/writing/json.ts";
import type { DiskFiles } from "./disk-files.ts";
import type { ModelFile } from "./model-files.ts";
import { settled } from "./set-settings.ts";
import { WrongUse } from "./wrong-use.ts";

export interface CheckedOnDisk extends CheckedFile {
  readonly files: DiskFiles;
  readonly report: Omit<FileReport, "findings"> & { readonly findings: Finding[] };
  /** How long it took. */
  readonly seconds: number;
}

/** What is asked of a check beside its files. */
export interface CheckFilter {
  readonly system?: string;
  readonly trial?: string;
}

/** A check of some files, held against the settings of their sets: what every form of report is written from. */
export interface CheckRun {
  readonly checked: readonly CheckedOnDisk[];
  readonly failOn: Severity;
  readonly passed: boolean;
  readonly startedAt: Date;
  /** Show only what fails. */
  readonly quiet: boolean;
  readonly fingerprints: boolean;
}

export function checkOne({ files, path, shown }: ModelFile, filter: CheckFilter, cache: TreeCache) {
  const start = performance.now();
  const report = filtered(files, path, filter, cache);
  const seconds = (performance.now() - start) / 1000;
  return { report: { ...report, findings: [...report.findings] }, files, shown, seconds };
}

/** What reports are written from, without graphs, models and runs: those of a large set would fill the memory. */
export function inBrief(checked: CheckedOnDisk): CheckedOnDisk {
  const systems = checked.report.systems.map((one) => ({ ...one, graph: null, causal: null, model: null }));
  return { ...checked, report: { ...checked.report, systems, trials: [] } };
}

function filtered(
  files: DiskFiles,
  path: string,
  { system, trial }: CheckFilter,
  cache: TreeCache,
): FileReport {
  if (trial === undefined) return checkFile(files, path, { system, cache, trials: true });
  // The whole file is read once for its tree; checks of other systems than the trial's are not asked for.
  const { tree } = checkFile(files, path, { system: "", cache });
  const asked = trialsOf(tree).find(({ name }) => name.text === trial);
  const only = system ?? asked?.system.text ?? "";
  const report = checkFile(files, path, { system: only, cache, trials: trial });
  return asked === undefined ? report : withoutOtherTrials(report, asked);
}

function trialsOf({ items }: File): Trial[] {
  return items.filter((item) => item.kind === "trial");
}

function withoutOtherTrials(report: FileReport, asked: Trial): FileReport {
  const others = trialsOf(report.tree).filter((trial) => trial !== asked);
  const inOther = ({ span }: Finding) =>
    span.file === report.path &&
    others.some(({ range }) => range.start <= span.start && span.end <= range.end);
  return {
    ...report,
    findings: report.findings.filter((found) => !inOther(found)),
    systems: report.systems.map((system) => ({
      ...system,
      expectations: system.expectations.filter(({ trial }) => trial === null || trial === asked.name.text),
    })),
  };
}

/** Puts what was checked together: asked-for names that are nowhere are wrong use, settings have their say. */
export function asRun(
  checked: readonly CheckedOnDisk[],
  filter: CheckFilter,
  options: Pick<CheckRun, "failOn" | "startedAt" | "quiet" | "fingerprints">,
): CheckRun {
  const { system, trial } = filter;
  if (trial !== undefined && !checked.some(({ report }) => hasTrial(report, trial)))
    throw new WrongUse(`No file that was given holds a trial ${trial}.`);
  if (system !== undefined && checked.every(({ report }) => report.systems.length === 0))
    throw new WrongUse(`No file that was given holds a system ${system}.`);
  const inFull = system === undefined && trial === undefined;
  const judged = settled(checked, { inFull, today: options.startedAt });
  const stopping = findingsOf(judged).some(({ found }) => stops(found, options));
  const failed = judged.some(({ report }) =>
    report.systems.some(({ expectations }) => expectations.some(({ judged, passed }) => judged && !passed)),
  );
  return { ...options, checked: judged, passed: !stopping && !failed };
}

function hasTrial({ tree }: { readonly tree: File }, trial: string): boolean {
  return trialsOf(tree).some(({ name }) => name.text === trial);
}

/** The finding alone makes the check fail. */
export function stops(found: Finding, { failOn }: Pick<CheckRun, "failOn">): boolean {
  return found.accepted === undefined && atLeast(found.severity, failOn);
}
