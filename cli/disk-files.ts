import { closeSync, openSync, readSync, statSync } from "node:fs";
import path from "node:path";
import { SourceText } from "../grammar/source/text.ts";
import { WrongUse } from "./wrong-use.ts";

/** More than the notation allows in a file: the rest would not be looked at, and `too-large` says so. */
const READ_AT_MOST = 4 * 1024 * 1024;

/** A model set on disk: a file is read when it is first asked for, by its path from the root, and none outside it. */
export class DiskFiles extends Map<string, SourceText> {
  readonly root: string;
  #asked: Set<string> | null = null;

  constructor(root: string) {
    super();
    this.root = root;
  }

  override get(name: string): SourceText | undefined {
    this.#asked?.add(name);
    const known = super.get(name);
    if (known !== undefined || !isInside(name)) return known;
    const text = readText(path.join(this.root, name));
    if (text === null) return undefined;
    const source = new SourceText(name, text);
    this.set(name, source);
    return source;
  }

  override has(name: string): boolean {
    this.#asked?.add(name);
    return super.has(name) || (isInside(name) && isFile(path.join(this.root, name)));
  }

  /** What was read of a file so far. */
  read(name: string): SourceText | undefined {
    return super.get(name);
  }

  /** Does some work, and tells which files it asked for, by their paths on disk; those that are not there too. */
  asked<T>(work: () => T): { readonly result: T; readonly asked: ReadonlySet<string> } {
    const names = new Set<string>();
    this.#asked = names;
    try {
      const result = work();
      return {
        result,
        asked: new Set([...names].filter(isInside).map((name) => path.join(this.root, name))),
      };
    } finally {
      this.#asked = null;
    }
  }
}

function isInside(name: string): boolean {
  return !path.isAbsolute(name) && !name.split(/[\\/]/).includes("..");
}

export function isFile(file: string): boolean {
  return statSync(file, { throwIfNoEntry: false })?.isFile() ?? false;
}

/** null where there is no such file; what is there and can't be read, or is no text, stops the command. */
export function readText(file: string): string | null {
  if (!isFile(file)) return null;
  try {
    const handle = openSync(file, "r");
    try {
      return decode(readUpTo(handle), file);
    } finally {
      closeSync(handle);
    }
  } catch (error) {
    if (error instanceof WrongUse) throw error;
    throw new WrongUse(`${file} cannot be read: ${error instanceof Error ? error.message : String(error)}`);
  }
}

function readUpTo(handle: number): Buffer {
  const chunks: Buffer[] = [];
  let length = 0;
  while (length < READ_AT_MOST) {
    const chunk = Buffer.allocUnsafe(64 * 1024);
    const count = readSync(handle, chunk, 0, chunk.length, null);
    if (count === 0) break;
    chunks.push(chunk.subarray(0, count));
    length += count;
  }
  return Buffer.concat(chunks);
}

export function decode(bytes: Buffer, name: string): string {
  const whole = bytes.length < READ_AT_MOST;
  try {
    return new TextDecoder("utf-8", { fatal: true, ignoreBOM: false }).decode(bytes, { stream: !whole });
  } catch {
    throw new WrongUse(`${name} is not UTF-8 text.`);
  }
}
