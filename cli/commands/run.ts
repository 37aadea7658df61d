import { checkFile } from "../../grammar/pipeline.ts";
import type { CheckedFile } from "../../grammar/writing/json.ts";
import { runCsv } from "../../grammar/writing/run-csv.ts";
import { runDocument } from "../../grammar/writing/run-json.ts";
import { runText } from "../../grammar/writing/run-text.ts";
import { modelFiles } from "../model-files.ts";
import { findingText } from "../output/findings.ts";
import { type ColourChoice, inert, paintFor, print, remark } from "../output/print.ts";
import { WrongUse } from "../wrong-use.ts";

export interface RunArguments {
  readonly format: "text" | "json" | "csv";
  readonly trial?: string;
  readonly system?: string;
  readonly color: ColourChoice;
  readonly stdinName: string;
}

/** Runs the trials of a file and prints what came out. 1 where a run stops or a requirement is not met. */
export function run(file: string, options: RunArguments): number {
  const from = runTrials(file, options);
  const { trials, findings } = from.report;
  if (options.format === "json") print(JSON.stringify(runDocument(from), null, 2));
  else if (options.format === "csv") {
    if (trials.length > 1) {
      const names = trials.map(({ trial }) => trial.name).join(", ");
      throw new WrongUse(`One trial makes one table; choose with --trial one of ${names}.`);
    }
    print(runCsv(trials[0]));
  } else {
    const paint = paintFor(options.color);
    for (const one of trials) {
      const { name, system, description } = one.trial;
      const about = description === null ? "" : `: ${inert(description.split("\n")[0])}`;
      const blocks = runText(one).map(({ title, lines }) =>
        [paint("strong", inert(title)), ...lines.map((line) => `  ${inert(line)}`)].join("\n"),
      );
      print(`${[`${paint("strong", `${name} of ${system}`)}${about}`, ...blocks].join("\n\n")}\n`);
    }
  }
  // Findings that keep a trial from being run, or say that it ended otherwise than was wanted.
  const grave = findings.filter(({ severity }) => severity !== "note");
  if (options.format !== "json") {
    const paint = paintFor(options.color, process.stderr);
    for (const found of grave) remark(findingText(found, from, paint));
  }
  const failed = trials.some(
    ({ result, expectations }) =>
      result === null || result.status === "stopped" || expectations.some(({ passed }) => !passed),
  );
  return failed || grave.some(({ severity }) => severity === "error") ? 1 : 0;
}

function runTrials(file: string, { trial, system, stdinName }: RunArguments): CheckedFile {
  const [model, ...others] = modelFiles([file], stdinName);
  if (others.length > 0) throw new WrongUse(`${file} is a folder; this is done for one file at a time.`);
  const { files, path, shown } = model;
  const report = checkFile(files, path, { system, trials: trial ?? true });
  if (report.trials.length > 0) return { report, files, shown };
  const known = report.tree.items.flatMap((item) => (item.kind === "trial" ? [item.name.text] : []));
  if (known.length === 0) throw new WrongUse(`${shown(path)} holds no trial.`);
  throw new WrongUse(`${shown(path)} holds no such trial; it holds: ${known.join(", ")}.`);
}
