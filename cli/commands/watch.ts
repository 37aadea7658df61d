import { type FSWatcher, watch as watchFolder } from "node:fs";
import path from "node:path";
import { remark } from "../output/print.ts";
import { Rechecker } from "../rechecker.ts";
import { WrongUse } from "../wrong-use.ts";
import { type CheckArguments, reportRun } from "./check.ts";

/** What is saved in several steps is looked at once it is still, in ms. */
const SETTLES_IN = 40;

/** Checks, and checks again whenever a file changes that it rests on, until it is interrupted; the last verdict counts. */
export async function watch(paths: readonly string[], options: CheckArguments): Promise<number> {
  if (paths.includes("-")) throw new WrongUse("Standard input cannot be watched.");
  const rechecker = new Rechecker(paths, options);
  let exitCode: number | null = null;
  for await (const { files, follow } of changes(() => rechecker.folders())) {
    try {
      const first = exitCode === null;
      const count = rechecker.recheck(files);
      // Before the report: who has read it may go on at once in a folder that is new.
      follow();
      if (count === 0 && !first) continue;
      exitCode = await reportRun(rechecker.checked, new Date(), options);
      if (!first) remark(`checked ${count} of ${rechecker.checked.length} again`);
    } catch (error) {
      // What stands half-written on the disk is wrong for a moment, and no reason to stop.
      if (!(error instanceof WrongUse) || exitCode === null) throw error;
      remark(`bondwright: ${error.message}`);
      exitCode = 2;
    }
  }
  return exitCode ?? 0;
}

/**
 * Sets of files on disk that changed, one for each time that it got still; the first, empty, comes once all is watched.
 * Ends with an interrupt.
 */
async function* changes(
  folders: () => Set<string>,
): AsyncGenerator<{ readonly files: ReadonlySet<string>; readonly follow: () => void }> {
  const watchers = new Map<string, FSWatcher>();
  let changed = new Set<string>();
  let ended = false;
  let timer: NodeJS.Timeout | undefined;
  let wake = () => {};
  const end = () => {
    ended = true;
    wake();
  };
  const settle = () => {
    clearTimeout(timer);
    timer = setTimeout(() => wake(), SETTLES_IN);
  };
  const note = (file: string) => {
    changed.add(file);
    settle();
  };
  const follow = () => keepWatching(folders(), watchers, note);
  process.once("SIGINT", end).once("SIGTERM", end);
  try {
    follow();
    yield { files: new Set(), follow };
    while (!ended) {
      await new Promise<void>((resolve) => {
        wake = resolve;
        if (ended) resolve();
        // What changed while the last change was looked at.
        else if (changed.size > 0) settle();
      });
      const now = changed;
      changed = new Set();
      if (!ended && now.size > 0) yield { files: now, follow };
    }
  } finally {
    clearTimeout(timer);
    process.off("SIGINT", end).off("SIGTERM", end);
    for (const watcher of watchers.values()) watcher.close();
  }
}

/** Watches these folders and no others; one that was made again in its place is watched anew. */
function keepWatching(
  folders: Set<string>,
  watchers: Map<string, FSWatcher>,
  note: (file: string) => void,
): void {
  for (const [folder, watcher] of watchers) {
    if (folders.has(folder)) continue;
    watcher.close();
    watchers.delete(folder);
  }
  for (const folder of folders) {
    if (watchers.has(folder)) continue;
    try {
      const watcher = watchFolder(folder, (_, name) =>
        note(name === null ? folder : path.join(folder, name)),
      );
      watcher.on("error", () => {
        watcher.close();
        watchers.delete(folder);
      });
      watchers.set(folder, watcher);
    } catch (error) {
      throw new WrongUse(`${folder} cannot be watched: ${error instanceof Error ? error.message : error}`);
    }
  }
}
