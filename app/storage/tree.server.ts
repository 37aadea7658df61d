import git from "isomorphic-git";
import type { ObjectShelf } from "./object-shelf.server.ts";

/** The files of a version: path → name of the blob. */
export type Tree = ReadonlyMap<string, string>;

/** An empty folder, which git knows by this name whether or not it is stored. */
const emptyTree = "4b825dc642cb6eb9a060e54bf8d69288fbee4904";

/** Reads a tree with all its folders: one query a level. */
export async function readTree(shelf: ObjectShelf, oid: string): Promise<Map<string, string>> {
  const files = new Map<string, string>();
  let level = oid === emptyTree ? [] : [{ prefix: "", oid }];
  while (level.length > 0) {
    await shelf.fetch(level.map((folder) => folder.oid));
    const below: typeof level = [];
    for (const folder of level) {
      const { tree } = await git.readTree({ ...shelf.git, oid: folder.oid });
      for (const entry of tree) {
        const path = folder.prefix + entry.path;
        if (entry.type === "tree") below.push({ prefix: `${path}/`, oid: entry.oid });
        else files.set(path, entry.oid);
      }
    }
    level = below;
  }
  return files;
}

interface Folder {
  folders: Map<string, Folder>;
  files: Map<string, string>;
}

/** Puts the tree objects for these files on the shelf and returns the name of the root. */
export async function writeTree(shelf: ObjectShelf, files: Tree): Promise<string> {
  const root = newFolder();
  for (const [path, oid] of files) {
    const names = path.split("/");
    const name = names.pop() as string;
    let folder = root;
    for (const step of names) {
      const next = folder.folders.get(step) ?? newFolder();
      folder.folders.set(step, next);
      folder = next;
    }
    folder.files.set(name, oid);
  }
  return writeFolder(shelf, root);
}

function newFolder(): Folder {
  return { folders: new Map(), files: new Map() };
}

async function writeFolder(shelf: ObjectShelf, folder: Folder): Promise<string> {
  const entries = [...folder.files].map(([path, oid]) => ({
    mode: "100644",
    path,
    oid,
    type: "blob" as const,
  }));
  const below = [];
  for (const [path, child] of folder.folders)
    below.push({ mode: "040000", path, oid: await writeFolder(shelf, child), type: "tree" as const });
  return git.writeTree({ ...shelf.git, tree: [...entries, ...below] });
}

/** Puts a file's text on the shelf and returns the name of its blob. */
export function writeText(shelf: ObjectShelf, text: string): Promise<string> {
  return git.writeBlob({ ...shelf.git, blob: Buffer.from(text, "utf8") });
}

/** The texts of these blobs, in one query. */
export async function readTexts(shelf: ObjectShelf, oids: Iterable<string>): Promise<Map<string, string>> {
  const wanted = [...new Set(oids)];
  await shelf.fetch(wanted);
  return new Map(wanted.map((oid) => [oid, shelf.unpacked(oid).body.toString("utf8")]));
}

/** The paths at which two versions differ, in order. */
export function changedPaths(before: Tree, after: Tree): string[] {
  const paths = new Set([...before.keys(), ...after.keys()]);
  return [...paths].filter((path) => before.get(path) !== after.get(path)).sort();
}
