import { format as formatTree } from "../../grammar/syntax/format.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import { modelFiles } from "../model-files.ts";
import { findingText } from "../output/findings.ts";
import { inert, paintFor, print, remark } from "../output/print.ts";
import { writeWhole } from "../write-file.ts";
import { WrongUse } from "../wrong-use.ts";

export interface FormatArguments {
  readonly check?: boolean;
  readonly stdout?: boolean;
  readonly stdinName: string;
}

/** Formats files in place, or only looks. A file with a syntax error stays as it is, and makes the exit code 1. */
export function format(paths: readonly string[], options: FormatArguments): number {
  const files = modelFiles(paths, options.stdinName);
  if (options.stdout && files.length > 1) throw new WrongUse("--stdout takes one file.");
  let exitCode = 0;
  for (const file of files) {
    const source = file.files.get(file.path);
    if (source === undefined) throw new WrongUse(`${file.shown(file.path)} cannot be read.`);
    const { tree, findings } = parse(source);
    const errors = findings.filter(({ severity }) => severity === "error");
    if (errors.length > 0) {
      const from = {
        report: { path: file.path, tree, systems: [], trials: [], findings },
        files: file.files,
        shown: file.shown,
      };
      for (const found of errors) remark(findingText(found, from, paintFor("auto", process.stderr)));
      exitCode = 1;
      continue;
    }
    const text = formatTree(tree, source);
    const changed = text !== source.text;
    const name = inert(file.shown(file.path));
    if (options.check) {
      if (!changed) continue;
      print(`would format ${name}`);
      exitCode = 1;
    } else if (options.stdout || file.onDisk === null) process.stdout.write(text);
    else if (changed) {
      writeWhole(file.onDisk, text);
      print(`formatted ${name}`);
    }
  }
  return exitCode;
}
