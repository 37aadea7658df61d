import path from "node:path";
import type { Severity } from "../../grammar/diagnostics/finding.ts";
import type { TreeCache } from "../../grammar/pipeline.ts";
import { asRun, type CheckedOnDisk, checkOne, inBrief } from "../check-run.ts";
import { modelFiles } from "../model-files.ts";
import { REPORT_FORMS, type ReportForm } from "../output/forms.ts";
import { type ColourChoice, paintFor, print } from "../output/print.ts";
import { Progress } from "../output/progress.ts";
import { reportText } from "../output/report.ts";
import { writeWhole } from "../write-file.ts";
import { WrongUse } from "../wrong-use.ts";

export interface CheckArguments {
  readonly format: ReportForm;
  /** `FORM=FILE`, as they were given. */
  readonly output: readonly string[];
  readonly failOn: Severity;
  readonly system?: string;
  readonly trial?: string;
  readonly quiet?: boolean;
  readonly fingerprints?: boolean;
  readonly watch?: boolean;
  readonly color: ColourChoice;
  readonly stdinName: string;
}

/** Checks files and prints what was found. Returns the exit code: 0 clean, 1 findings or failed requirements. */
export async function check(paths: readonly string[], options: CheckArguments): Promise<number> {
  outputsOf(options.output);
  if (options.watch) return (await import("./watch.ts")).watch(paths, options);
  const startedAt = new Date();
  const progress = new Progress();
  const cache: TreeCache = new Map();
  const models = modelFiles(paths, options.stdinName);
  const checked = models.map((model, index) => {
    progress.say(index, models.length, model.shown(model.path));
    return inBrief(checkOne(model, options, cache));
  });
  progress.end();
  return reportRun(checked, startedAt, options);
}

/** Writes and prints the reports that are asked for. */
export async function reportRun(
  checked: readonly CheckedOnDisk[],
  startedAt: Date,
  options: CheckArguments,
): Promise<number> {
  const { failOn, quiet = false, fingerprints = false } = options;
  const run = asRun(checked, options, { failOn, startedAt, quiet, fingerprints });
  // Before anything is printed: what can't be written is no check that somebody may rely on.
  for (const { form, file } of outputsOf(options.output)) {
    writeWhole(file, await reportText(run, form, paintFor("never")));
  }
  const text = await reportText(run, options.format, paintFor(options.color));
  if (text !== "") print(text);
  return run.passed ? 0 : 1;
}

function outputsOf(given: readonly string[]): { form: ReportForm; file: string }[] {
  const taken = new Set<string>();
  return given.map((output) => {
    const [, word, file] = /^([^=]*)=(.+)$/s.exec(output) ?? [];
    const form = REPORT_FORMS.find((each) => each === word);
    if (form === undefined || file === undefined)
      throw new WrongUse(`--output ${output}: FORM=FILE is wanted, FORM one of ${REPORT_FORMS.join(", ")}.`);
    if (taken.has(path.resolve(file))) throw new WrongUse(`--output ${file} is asked for twice.`);
    taken.add(path.resolve(file));
    return { form, file };
  });
}
