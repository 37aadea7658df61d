import type { Transaction } from "sequelize";
import { GitRef, ModelSet } from "../../db/models/index.ts";
import type { SetKey } from "./object-shelf.server.ts";

export const mainBranch = "refs/heads/main";

/** Where a branch stands, or null if there is no such branch. */
export async function readRef(key: SetKey, name: string): Promise<string | null> {
  return (await GitRef.findOne({ where: { ...key, name } }))?.oid ?? null;
}

/** Where a branch stands, or null if there is no such branch; nobody else moves it until the transaction ends. */
export async function lockRef(key: SetKey, name: string, transaction: Transaction): Promise<string | null> {
  const find = () => GitRef.findOne({ where: { ...key, name }, lock: transaction.LOCK.UPDATE, transaction });
  const ref = await find();
  if (ref) return ref.oid;
  // What is not there cannot be locked: those who would begin the branch take turns at the set instead.
  const where = { teamId: key.teamId, id: key.setId };
  await ModelSet.findOne({ where, lock: transaction.LOCK.NO_KEY_UPDATE, transaction });
  return (await find())?.oid ?? null;
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
    // One that is there already makes this fail, and the transaction with it.
    await GitRef.create({ ...key, name, oid }, { transaction });
    return true;
  }
  const [moved] = await GitRef.update({ oid }, { where: { ...key, name, oid: expected }, transaction });
  return moved === 1;
}
