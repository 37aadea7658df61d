import { existsSync, readdirSync, readFileSync, statSync } from "node:fs";
import path from "node:path";
import { SETTINGS_FILE } from "../grammar/diagnostics/settings.ts";
import { compareNames } from "../grammar/resolve/graph.ts";
import { SourceText } from "../grammar/source/text.ts";
import { DiskFiles, decode, isFile, readText } from "./disk-files.ts";
import { WrongUse } from "./wrong-use.ts";

/** A `.wright` file to work on, in the set it belongs to. */
export interface ModelFile {
  /** From the set's root, with `/`. */
  readonly path: string;
  readonly files: DiskFiles;
  /** How paths of its set are shown: from the working directory. */
  readonly shown: (path: string) => string;
  /** null for standard input. */
  readonly onDisk: string | null;
}

/** The settings of a model set mark its root. */
const ROOT_MARK = SETTINGS_FILE;

/** The files that the arguments name: files as given, folders with all `.wright` files below, `-` standard input. */
export function modelFiles(args: readonly string[], stdinName: string): ModelFile[] {
  const sets = new Map<string, DiskFiles>();
  const found = new Map<string, ModelFile>();
  for (const arg of args) {
    if (arg === "-") {
      const file = standardInput(stdinName, sets);
      found.set(file.path, file);
      continue;
    }
    const given = path.resolve(arg);
    const stat = statSync(given, { throwIfNoEntry: false });
    if (stat === undefined) throw new WrongUse(`${arg}: there is no such file or folder.`);
    const inside = stat.isDirectory() ? wrightFiles(given) : [given];
    if (inside.length === 0) throw new WrongUse(`${arg}: there is no .wright file in this folder.`);
    for (const file of inside) {
      if (found.has(file)) continue;
      const root = rootOf(file, targetsIn(readText(file) ?? ""), stat.isDirectory() ? given : null);
      found.set(file, modelFile(file, setAt(root, sets), file));
    }
  }
  return [...found.values()];
}

function setAt(root: string, sets: Map<string, DiskFiles>): DiskFiles {
  const set = sets.get(root) ?? new DiskFiles(root);
  sets.set(root, set);
  return set;
}

function modelFile(file: string, files: DiskFiles, onDisk: string | null): ModelFile {
  const shown = (inSet: string) => fromHere(path.join(files.root, inSet));
  return { path: path.relative(files.root, file).split(path.sep).join("/"), files, shown, onDisk };
}

/** From the working directory where that is shorter to read, and never so that a line starts with a command for CI. */
function fromHere(file: string): string {
  const relative = path.relative(process.cwd(), file);
  const shown = relative.startsWith(`..${path.sep}..${path.sep}..`) ? file : relative;
  return /^[:#[]/.test(shown) ? `./${shown}` : shown.split(path.sep).join("/");
}

function standardInput(name: string, sets: Map<string, DiskFiles>): ModelFile {
  const text = decode(readFileSync(0), "standard input");
  const file = path.resolve(name);
  const files = setAt(rootOf(file, targetsIn(text), null), sets);
  const model = modelFile(file, files, null);
  files.set(model.path, new SourceText(model.path, text));
  return model;
}

/** The folder with all that are looked into below it. */
export function foldersBelow(folder: string): string[] {
  const inside = readdirSync(folder, { withFileTypes: true })
    .filter((entry) => entry.isDirectory() && !isPassedOver(entry.name))
    .flatMap(({ name }) => foldersBelow(path.join(folder, name)));
  return [folder, ...inside];
}

/** In natural order. */
function wrightFiles(folder: string): string[] {
  const entries = readdirSync(folder, { withFileTypes: true }).sort((a, b) => compareNames(a.name, b.name));
  return entries.flatMap((entry) => {
    const file = path.join(folder, entry.name);
    if (entry.isDirectory()) return isPassedOver(entry.name) ? [] : wrightFiles(file);
    return entry.name.endsWith(".wright") && isFile(file) ? [file] : [];
  });
}

/** All `.wright` files of the set with this root, from the root; a folder with a mark of its own is another set. */
export function filesOfSet(root: string): string[] {
  const inside = (folder: string): string[] =>
    readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
      const file = path.join(folder, entry.name);
      if (!entry.isDirectory()) return entry.name.endsWith(".wright") && isFile(file) ? [file] : [];
      return isPassedOver(entry.name) || existsSync(path.join(file, ROOT_MARK)) ? [] : inside(file);
    });
  return inside(root).map((file) => path.relative(root, file).split(path.sep).join("/"));
}

/** Hidden folders and installed packages hold no models of ours. */
function isPassedOver(folder: string): boolean {
  return folder.startsWith(".") || folder === "node_modules";
}

function rootOf(file: string, targets: readonly string[], given: string | null): string {
  const above = foldersAbove(file);
  const marked = above.find((folder) => existsSync(path.join(folder, ROOT_MARK)));
  if (marked !== undefined) return marked;
  const nearest = given ?? above[0];
  const leads = (folder: string) => targets.every((target) => isFile(path.join(folder, target)));
  return leads(nearest) ? nearest : (above.find(leads) ?? nearest);
}

function foldersAbove(file: string): string[] {
  const folders: string[] = [];
  for (let folder = path.dirname(file); ; folder = path.dirname(folder)) {
    folders.push(folder);
    if (path.dirname(folder) === folder) return folders;
  }
}

/** The files of the same set that a text uses; a released set is named with `@`. */
function targetsIn(text: string): string[] {
  const targets: string[] = [];
  for (const [, target] of text.matchAll(/^[ \t]*use\b[^"\n]*"([^"\n]*)"/gm)) {
    if (!target.includes("@")) targets.push(target);
  }
  return targets;
}
