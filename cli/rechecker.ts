import { statSync } from "node:fs";
import path from "node:path";
import { SETTINGS_FILE } from "../grammar/diagnostics/settings.ts";
import type { TreeCache } from "../grammar/pipeline.ts";
import { type CheckedOnDisk, type CheckFilter, checkOne, inBrief } from "./check-run.ts";
import { type DiskFiles, isFile } from "./disk-files.ts";
import { foldersBelow, type ModelFile, modelFiles } from "./model-files.ts";

interface Checked {
  readonly checked: CheckedOnDisk;
  /** Every file that the check looked at or for. */
  readonly asked: ReadonlySet<string>;
}

/** Keeps the check of some files up to date: what a change does not reach is not checked again. */
export class Rechecker {
  readonly #paths: readonly string[];
  readonly #filter: CheckFilter;
  #models: readonly ModelFile[] = [];
  #known = new Set<string>();
  #checks = new Map<ModelFile, Checked>();
  #cache: TreeCache = new Map();

  constructor(paths: readonly string[], filter: CheckFilter) {
    this.#paths = paths;
    this.#filter = filter;
    this.#start();
  }

  get checked(): CheckedOnDisk[] {
    return [...this.#checks.values()].map(({ checked }) => checked);
  }

  /** How many texts and trees are kept: as many as there are files, however often they were saved. */
  get kept(): number {
    return this.#cache.size;
  }

  /** The folders in which a change may change what is found. */
  folders(): Set<string> {
    const folders = new Set(this.#models.map(({ files }) => files.root));
    for (const { asked } of this.#checks.values()) {
      for (const file of asked) folders.add(path.dirname(file));
    }
    for (const given of this.#paths.map((each) => path.resolve(each))) {
      for (const folder of isFolder(given) ? foldersBelow(given) : []) folders.add(folder);
    }
    return new Set([...folders].filter(isFolder));
  }

  /** Checks again what these changed files on disk reach; the number of files checked, 0 where it is none. */
  recheck(changed: Iterable<string>): number {
    const files = [...changed];
    if (files.some((file) => this.#changesWhatIsThere(file))) {
      this.#start();
      return this.#models.length;
    }
    for (const set of new Set(this.#models.map((model) => model.files)))
      for (const file of files) this.#forget(set, file);
    const reached = this.#models.filter((model) =>
      files.some((file) => this.#checks.get(model)?.asked.has(file)),
    );
    for (const model of reached) this.#check(model);
    return reached.length;
  }

  /** Files came or went, or the root of a set did. */
  #changesWhatIsThere(file: string): boolean {
    const name = path.basename(file);
    if (name === SETTINGS_FILE) return true;
    if (name.startsWith(".")) return false;
    if (this.#known.has(file)) return !isFile(file);
    if (name.endsWith(".wright") && isFile(file)) return !this.#asked(file);
    if (isFolder(file)) return true;
    return [...this.#known].some((known) => known.startsWith(file + path.sep));
  }

  #asked(file: string): boolean {
    return [...this.#checks.values()].some(({ asked }) => asked.has(file));
  }

  #start(): void {
    this.#models = modelFiles(this.#paths, "stdin.wright");
    this.#known = new Set(this.#models.flatMap(({ onDisk }) => onDisk ?? []));
    this.#checks = new Map();
    this.#cache = new Map();
    for (const model of this.#models) this.#check(model);
  }

  #forget(set: DiskFiles, file: string): void {
    const name = path.relative(set.root, file).split(path.sep).join("/");
    const source = set.read(name);
    if (source !== undefined) this.#cache.delete(source);
    set.delete(name);
  }

  #check(model: ModelFile): void {
    const { result, asked } = model.files.asked(() => inBrief(checkOne(model, this.#filter, this.#cache)));
    this.#checks.set(model, { checked: result, asked });
  }
}

function isFolder(file: string): boolean {
  return statSync(file, { throwIfNoEntry: false })?.isDirectory() ?? false;
}
