import path from "node:path";
import {
  readSettings,
  SETTINGS_FILE,
  type Settings,
  SettingsMistakes,
} from "../grammar/diagnostics/settings.ts";
import { Settler } from "../grammar/diagnostics/settle.ts";
import type { CheckedOnDisk } from "./check-run.ts";
import type { DiskFiles } from "./disk-files.ts";
import { filesOfSet } from "./model-files.ts";
import { WrongUse } from "./wrong-use.ts";

const NONE: Settings = { severities: new Map(), accepted: [] };

/** The settings at the root of a set; none where there is no such file, and wrong use where it is wrong. */
export function settingsOf(files: DiskFiles): Settings {
  const source = files.get(SETTINGS_FILE);
  if (source === undefined) return NONE;
  try {
    return readSettings(source.text);
  } catch (error) {
    if (!(error instanceof SettingsMistakes)) throw error;
    const file = path.relative(process.cwd(), path.join(files.root, SETTINGS_FILE));
    throw new WrongUse(error.mistakes.map((mistake) => `${file}: ${mistake}`).join("\n"));
  }
}

/**
 * Holds what was found against the settings of each set. What the settings themselves are guilty of stands with the
 * set's first file; that an accepted finding is gone is known only when every file of its set was looked at in full.
 */
export function settled(
  checked: readonly CheckedOnDisk[],
  { inFull, today }: { readonly inFull: boolean; readonly today: Date },
): CheckedOnDisk[] {
  const day = today.toISOString().slice(0, 10);
  const settlers = new Map<DiskFiles, Settler>();
  const done = checked.map((each) => {
    const { files, report } = each;
    const settler = settlers.get(files) ?? new Settler(settingsOf(files), files, day);
    settlers.set(files, settler);
    return { ...each, report: { ...report, findings: settler.settle(report.findings) } };
  });
  for (const [files, settler] of settlers) {
    const own = done.filter((each) => each.files === files);
    const seen = new Set(own.map(({ report }) => report.path));
    const whole = inFull && settler.accepts && filesOfSet(files.root).every((file) => seen.has(file));
    own[0].report.findings.push(...settler.stale(whole));
  }
  return done;
}
