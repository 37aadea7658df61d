import { Client } from "pg";
import { afterEach, beforeAll, expect, test, vi } from "vitest";
import { readFiles } from "../../app/operations/read-files.server.ts";
import { saveFiles } from "../../app/operations/save-files.server.ts";
import { Commit, GitRef, JournalEntry } from "../../db/models/index.ts";
import { newTeam } from "../operations/people.ts";
import { testDatabase } from "../support/database.ts";

/**
 * The k-th statement of a save fails, for every k: the set is as it was before or as it is after, never between,
 * and a second try succeeds.
 */

type Answer = (error: Error) => void;
type Query = (this: Client & { connection: { stream: { destroy(): void } } }, ...args: unknown[]) => unknown;

const sound = Client.prototype.query as unknown as Query;

/** Makes the k-th statement from now on fail; returns how many were asked for, and restores. */
function failStatement(k: number, how: "refused" | "connection lost") {
  let asked = 0;
  const failing: Query = function (...args) {
    asked += 1;
    if (asked !== k) return sound.apply(this, args);
    if (how === "connection lost") {
      // The statement is on its way when the line breaks: nobody knows whether it was carried out.
      const sent = sound.apply(this, args);
      this.connection.stream.destroy();
      return sent;
    }
    setImmediate(args.at(-1) as Answer, Object.assign(new Error("no room left"), { code: "53100" }));
  };
  vi.spyOn(console, "warn").mockImplementation(() => {}); // Sequelize tells of each broken transaction.
  vi.spyOn(Client.prototype, "query").mockImplementation(failing as never);
  return () => {
    vi.restoreAllMocks();
    return asked;
  };
}

beforeAll(() => testDatabase());
afterEach(() => vi.restoreAllMocks());

test.each(["refused", "connection lost"] as const)("a save with any one statement %s", async (how) => {
  const { modeller, address, key } = await newTeam("modeller");
  const save = async (parent: string | null, text: string) => {
    const files = [{ path: "parts/a.wright", text }];
    return saveFiles(modeller, { ...address, branch: "main", parent, files, message: text });
  };
  const state = async () => {
    const { commit, files } = await readFiles(modeller, address);
    const ref = await GitRef.findOne({ where: key });
    expect(ref?.oid ?? null).toBe(commit);
    const commits = await Commit.count({ where: { ...key } });
    expect(await JournalEntry.count({ where: { subject: key.setId } })).toBe(commits);
    return { commit, commits, text: files[0]?.[1] ?? null };
  };

  let reached = true;
  for (let k = 1; reached; k++) {
    const before = await state();
    const text = `after fault ${k}`;
    const stop = failStatement(k, how);
    const outcome = await save(before.commit, text).catch((fault: Error) => fault);
    reached = stop() >= k;
    const after = await state();
    const saved = { commits: before.commits + 1, text };
    if (outcome instanceof Error) {
      // A refusal before the end has changed nothing; one in place of the last word may have come too late.
      if (after.commit !== before.commit) expect(after, `statement ${k}`).toMatchObject(saved);
      else expect(after, `statement ${k}`).toEqual(before);
      const again = await save(before.commit, text);
      expect(again.kind, `again after ${k}`).toBe(after.commit === before.commit ? "saved" : "unchanged");
    } else expect(after, `statement ${k}`).toMatchObject(saved);
    if (reached) expect(outcome, `statement ${k}`).toBeInstanceOf(Error);
  }
});
