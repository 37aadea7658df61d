import { mkdir, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { GitObject, GitRef } from "../../db/models/index.ts";
import { type Actor, keyOf, requirePermission, type SetAddress } from "../session/standing.server.ts";
import { ObjectShelf } from "../storage/object-shelf.server.ts";

/** Objects that are held in memory at a time. */
const batch = 500;

/**
 * Writes a set with all its history as a bare git repository into `folder`, which must not exist. Every object is
 * checked against its name on the way out.
 */
export async function exportSet(actor: Actor, address: SetAddress, folder: string): Promise<void> {
  const key = keyOf(await requirePermission(actor, address, "set.read"));
  await mkdir(join(folder, "objects"), { recursive: true });
  await mkdir(join(folder, "refs", "heads"), { recursive: true });
  await writeFile(join(folder, "HEAD"), "ref: refs/heads/main\n", { flag: "wx" });
  await writeFile(join(folder, "config"), "[core]\n\trepositoryformatversion = 0\n\tbare = true\n");
  // Refs before objects: what a ref names was stored before it.
  const refs = await GitRef.findAll({ where: { ...key }, order: ["name"] });
  const names = await GitObject.findAll({
    where: { ...key },
    attributes: ["oid"],
    order: ["oid"],
    raw: true,
  });
  for (let from = 0; from < names.length; from += batch) {
    const oids = names.slice(from, from + batch).map(({ oid }) => oid);
    const shelf = new ObjectShelf(key);
    await shelf.fetch(oids);
    for (const oid of oids) {
      await mkdir(join(folder, "objects", oid.slice(0, 2)), { recursive: true });
      await writeFile(join(folder, "objects", oid.slice(0, 2), oid.slice(2)), shelf.loose(oid));
    }
  }
  await writeFile(join(folder, "packed-refs"), refs.map(({ oid, name }) => `${oid} ${name}\n`).join(""));
}
