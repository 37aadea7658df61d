import type { Transaction } from "sequelize";
import { hashPassword } from "../../app/session/password.server.ts";
import { storeCommit } from "../../app/storage/commit.server.ts";
import { ObjectShelf } from "../../app/storage/object-shelf.server.ts";
import { mainBranch, moveRef } from "../../app/storage/refs.server.ts";
import { type Tree, writeText } from "../../app/storage/tree.server.ts";
import { inTurn } from "../in-turn.ts";
import { type Commit, JournalEntry, Membership, ModelSet, Team, User } from "../models/index.ts";
import { type DemoSet, readDemoSets, type Texts } from "./demo-sets.ts";
import { demoPeople, demoTeam } from "./people.ts";

const dayMs = 86_400_000;

/**
 * Puts the demo into a database that holds no team yet: its team, its people and a model set for each folder in
 * `folder`, each with a short past. Returns false, and does nothing, when there is a team already.
 */
export async function seedDemo(folder: string): Promise<boolean> {
  const sets = await readDemoSets(folder);
  return inTurn(async (transaction) => {
    if ((await Team.count({ transaction })) > 0) return false;
    const team = await Team.create(demoTeam, { transaction });
    const people = await hirePeople(team, transaction);
    const writers = people.filter(({ role }) => role === "modeller" || role === "reviewer");
    for (const [i, set] of sets.entries()) {
      const daysAgo = 10 + 9 * (sets.length - i);
      await fillSet(
        team,
        set,
        writers.map(({ user }) => user),
        daysAgo,
        transaction,
      );
    }
    return true;
  });
}

async function hirePeople(team: Team, transaction: Transaction) {
  const hired = [];
  for (const { name, email, password, role } of demoPeople) {
    const passwordHash = await hashPassword(password);
    const user = await User.create({ email, displayName: name, passwordHash }, { transaction });
    await Membership.create({ teamId: team.id, userId: user.id, role }, { transaction });
    hired.push({ user, role });
  }
  return hired;
}

/** Writes the versions of a set, a few working days apart, by the writers in turn. */
async function fillSet(
  team: Team,
  { slug, name, description, versions }: DemoSet,
  writers: User[],
  daysAgo: number,
  transaction: Transaction,
): Promise<void> {
  const set = await ModelSet.create({ teamId: team.id, slug, name, description }, { transaction });
  const key = { teamId: team.id, setId: set.id };
  let parent: { commit: Commit; files: Tree } | null = null;
  for (const [i, { message, files: texts }] of versions.entries()) {
    const shelf = new ObjectShelf(key, transaction);
    const files = await writeTexts(shelf, texts);
    const writer = writers[i % writers.length];
    const author = { id: writer.id, name: writer.displayName, email: writer.email };
    const time = new Date(Math.floor(Date.now() / dayMs - daysAgo + 2 * i) * dayMs + (9 + 2 * i) * 3_600_000);
    const commit: Commit = await storeCommit(shelf, { parent, files, author, time, message });
    await moveRef(key, mainBranch, parent?.commit.oid ?? null, commit.oid, transaction);
    const details = { commit: commit.oid, paths: commit.changedPaths };
    await JournalEntry.create(
      { teamId: team.id, actorId: writer.id, at: time, action: "set.saved", subject: set.id, details },
      { transaction },
    );
    parent = { commit, files };
  }
}

async function writeTexts(shelf: ObjectShelf, texts: Texts): Promise<Tree> {
  const files = new Map<string, string>();
  for (const [path, text] of texts) files.set(path, await writeText(shelf, text));
  return files;
}
