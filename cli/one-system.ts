import { checkFile, type SystemReport, type TreeCache } from "../grammar/pipeline.ts";
import type { CheckedFile } from "../grammar/writing/json.ts";
import { type ModelFile, modelFiles } from "./model-files.ts";
import { WrongUse } from "./wrong-use.ts";

/** What a command works on that looks at one system: the file, checked, and the system, null where it has none. */
export interface OneSystem {
  readonly from: CheckedFile;
  readonly system: SystemReport | null;
}

export function oneSystem(
  file: string,
  options: { readonly system?: string; readonly stdinName: string },
): OneSystem {
  const [model, ...others] = modelFiles([file], options.stdinName);
  if (others.length > 0) throw new WrongUse(`${file} is a folder; this is done for one file at a time.`);
  const from = checkedSystem(model, options.system);
  return { from, system: from.report.systems.at(0) ?? null };
}

/** The file with one of its systems, the last unless one is named, and with no findings of the others. */
function checkedSystem({ files, path, shown }: ModelFile, name: string | undefined): CheckedFile {
  const cache: TreeCache = new Map();
  const whole = checkFile(files, path, { system: name, cache });
  const chosen = whole.systems.at(-1)?.system;
  if (chosen === undefined && name !== undefined) {
    const all = checkFile(files, path, { cache }).systems.map(({ system }) => system);
    throw new WrongUse(`${shown(path)} holds no system ${name}; it holds: ${all.join(", ") || "none"}.`);
  }
  if (chosen === undefined && whole.findings.length === 0)
    throw new WrongUse(`${shown(path)} holds no system.`);
  const report =
    chosen === undefined || whole.systems.length === 1
      ? whole
      : checkFile(files, path, { system: chosen, cache });
  return { report, files, shown };
}
