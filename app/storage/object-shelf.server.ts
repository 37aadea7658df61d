import { createHash } from "node:crypto";
import { inflateSync } from "node:zlib";
import type { Transaction } from "sequelize";
import { GitObject } from "../../db/models/index.ts";

/** Whose objects these are. */
export interface SetKey {
  teamId: string;
  setId: string;
}

export interface Unpacked {
  type: GitObject["type"];
  body: Buffer;
}

/** What was read is not what was written: nothing of it may be shown. */
export class DamagedObject extends Error {
  constructor(oid: string, why: string) {
    super(`The stored object ${oid} is damaged: ${why}.`);
    this.name = "DamagedObject";
  }
}

/**
 * The git objects of one model set, for the length of one piece of work.
 *
 * Objects are read in bulk (`fetch`), each is checked against its name before anything of it is used, and new ones
 * are held back until `store` writes them in one statement. `git` is the door for isomorphic-git: to it the shelf
 * looks like a folder of loose objects.
 */
export class ObjectShelf {
  readonly key: SetKey;
  readonly transaction: Transaction | undefined;
  readonly git = { gitdir: "/set", fs: { promises: this.#folder() } };
  #loose = new Map<string, Buffer>();
  #unpacked = new Map<string, Unpacked>();
  #added = new Set<string>();

  constructor(key: SetKey, transaction?: Transaction) {
    this.key = key;
    this.transaction = transaction;
  }

  /** Brings the named objects onto the shelf with one query, if any is not there yet. */
  async fetch(oids: Iterable<string>): Promise<void> {
    const missing = [...new Set(oids)].filter((oid) => !this.#loose.has(oid));
    if (missing.length === 0) return;
    const rows = await GitObject.findAll({
      where: { ...this.key, oid: missing },
      attributes: ["oid", "content"],
      transaction: this.transaction,
      raw: true,
    });
    for (const { oid, content } of rows) {
      this.#unpacked.set(oid, unpack(oid, content));
      this.#loose.set(oid, content);
    }
    for (const oid of missing) if (!this.#loose.has(oid)) throw new DamagedObject(oid, "it is missing");
  }

  /** An object that `fetch` or isomorphic-git has put on the shelf. */
  unpacked(oid: string): Unpacked {
    const object = this.#unpacked.get(oid);
    if (!object) throw new Error(`The object ${oid} was not fetched.`);
    return object;
  }

  /** A fetched object as git stores it in a file of its own. */
  loose(oid: string): Buffer {
    const content = this.#loose.get(oid);
    if (!content) throw new Error(`The object ${oid} was not fetched.`);
    return content;
  }

  /** Writes what isomorphic-git has added, in one statement. What is there already stays as it is. */
  async store(): Promise<void> {
    const rows = [...this.#added].map((oid) => {
      const { type, body } = this.unpacked(oid);
      return { ...this.key, oid, type, size: body.length, content: this.loose(oid) };
    });
    this.#added.clear();
    if (rows.length > 0)
      await GitObject.bulkCreate(rows, { ignoreDuplicates: true, transaction: this.transaction });
  }

  #folder() {
    const absent = (path: string) => Object.assign(new Error(`${path} is not there`), { code: "ENOENT" });
    const never = async (path: string) => {
      throw absent(path);
    };
    return {
      readFile: async (path: string) => {
        const content = this.#loose.get(oidOf(path));
        if (!content) throw absent(path);
        return content;
      },
      stat: async (path: string) => {
        if (!this.#loose.has(oidOf(path))) throw absent(path);
        return {};
      },
      writeFile: async (path: string, content: Buffer) => {
        const oid = oidOf(path);
        this.#unpacked.set(oid, unpack(oid, content));
        this.#loose.set(oid, content);
        this.#added.add(oid);
      },
      readdir: async () => [],
      mkdir: async () => {},
      lstat: never,
      unlink: never,
      rmdir: never,
      readlink: never,
      symlink: never,
    };
  }
}

/** `…/objects/ab/cdef…` names the object `abcdef…`. */
function oidOf(path: string): string {
  return path.slice(-41).replace("/", "");
}

function unpack(oid: string, content: Buffer): Unpacked {
  let object: Buffer;
  try {
    object = inflateSync(content);
  } catch {
    throw new DamagedObject(oid, "it cannot be unpacked");
  }
  if (createHash("sha1").update(object).digest("hex") !== oid)
    throw new DamagedObject(oid, "its content does not match its name");
  const headEnd = object.indexOf(0);
  const [type] = object.toString("latin1", 0, headEnd).split(" ");
  return { type: type as GitObject["type"], body: object.subarray(headEnd + 1) };
}
