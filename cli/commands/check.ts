import { atLeast, type Severity } from "../../grammar/diagnostics/finding.ts";
import { checkFile, type TreeCache } from "../../grammar/pipeline.ts";
import { type CheckedFile, checkDocument, findingsOf } from "../../grammar/writing/json.ts";
import { modelFiles } from "../model-files.ts";
import { findingText, summaryText } from "../output/findings.ts";
import { type ColourChoice, paintFor, print } from "../output/print.ts";
import { WrongUse } from "../wrong-use.ts";

export interface CheckArguments {
  readonly format: "text" | "json";
  readonly failOn: Severity;
  readonly system?: string;
  readonly quiet?: boolean;
  readonly color: ColourChoice;
  readonly stdinName: string;
}

/** Checks files and prints what was found. Returns the exit code: 0 clean, 1 findings or failed requirements. */
export function check(paths: readonly string[], options: CheckArguments): number {
  const cache: TreeCache = new Map();
  const checked = modelFiles(paths, options.stdinName).map(
    ({ path, files, shown }): CheckedFile => ({
      report: checkFile(files, path, { system: options.system, cache }),
      files,
      shown,
    }),
  );
  if (options.system !== undefined && checked.every(({ report }) => report.systems.length === 0)) {
    throw new WrongUse(`No file that was given holds a system ${options.system}.`);
  }
  const text =
    options.format === "json"
      ? JSON.stringify(checkDocument(checked), null, 2)
      : textReport(checked, options);
  if (text !== "") print(text);
  return passes(checked, options.failOn) ? 0 : 1;
}

function passes(checked: readonly CheckedFile[], failOn: Severity): boolean {
  const stopping = findingsOf(checked).some(({ found }) => atLeast(found.severity, failOn));
  const failed = checked.some(({ report }) =>
    report.systems.some(({ expectations }) => expectations.some(({ judged, passed }) => judged && !passed)),
  );
  return !stopping && !failed;
}

function textReport(checked: readonly CheckedFile[], { quiet, failOn, color }: CheckArguments): string {
  const paint = paintFor(color);
  const shown = findingsOf(checked).filter(({ found }) => !quiet || atLeast(found.severity, failOn));
  const blocks = shown.map(({ found, from }) => findingText(found, from, paint));
  if (!quiet) blocks.push(summaryText(checked), ...moreText(shown));
  return blocks.join("\n");
}

/** Where to read on about the gravest finding; notes speak for themselves. */
function moreText(shown: ReturnType<typeof findingsOf>): string[] {
  const [gravest] = (["error", "warning"] as const).flatMap((severity) =>
    shown.filter(({ found }) => found.severity === severity),
  );
  return gravest === undefined ? [] : [`\`bondwright explain ${gravest.found.name}\` tells more.`];
}
