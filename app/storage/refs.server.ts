import type { Transaction } from "sequelize";
import { GitRef } from "../../db/models/index.ts";
import type { SetKey } from "./object-shelf.server.ts";

export const mainBranch = "refs/heads/main";

/** Where a branch stands, or null if there is no such branch. */
export async function readRef(key: SetKey, name: string): Promise<string | null> {
  return (await GitRef.findOne({ where: { ...key, name } }))?.oid ?? null;
}

/** Where a branch stands; nobody else moves it until the transaction ends. */
export async function lockRef(key: SetKey, name: string, transaction: Transaction): Promise<string | null> {
  const ref = await GitRef.findOne({ where: { ...key, name }, lock: transaction.LOCK.UPDATE, transaction });
  return ref?.oid ?? null;
}

/** Moves a branch from `expected` (null: it is new). False when it stood elsewhere: then nothing has moved. */
export async function moveRef(
  key: SetKey,
  name: string,
  expected: string | null,
  oid: string,
  transaction: Transaction,
): Promise<boolean> {
  if (expected === null) {
    const [, isNew] = await GitRef.findOrCreate({
      where: { ...key, name },
      defaults: { ...key, name, oid },
      transaction,
    });
    return isNew;
  }
  const [moved] = await GitRef.update({ oid }, { where: { ...key, name, oid: expected }, transaction });
  return moved === 1;
}
