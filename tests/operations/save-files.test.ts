import { Client } from "pg";
import { beforeAll, describe, expect, test, vi } from "vitest";
import { listHistory } from "../../app/operations/list-history.server.ts";
import { readFiles } from "../../app/operations/read-files.server.ts";
import { saveFiles } from "../../app/operations/save-files.server.ts";
import { Commit, GitObject, JournalEntry } from "../../db/models/index.ts";
import { testDatabase } from "../support/database.ts";
import { newTeam } from "./people.ts";

beforeAll(() => testDatabase());

type World = Awaited<ReturnType<typeof newTeam<"modeller">>>;

function save(
  { modeller, address }: World,
  parent: string | null,
  files: Record<string, string | null>,
  message = "Say",
) {
  const edits = Object.entries(files).map(([path, text]) => ({ path, text }));
  return saveFiles(modeller, { ...address, branch: "main", parent, files: edits, message });
}

async function saved(
  world: World,
  parent: string | null,
  files: Record<string, string | null>,
  message?: string,
) {
  const result = await save(world, parent, files, message);
  if (result.kind !== "saved") throw new Error(`Not saved: ${JSON.stringify(result)}`);
  return result.commit.oid;
}

async function filesOf({ modeller, address }: World, commit?: string) {
  return Object.fromEntries((await readFiles(modeller, { ...address, commit })).files);
}

describe("a save", () => {
  test("is read back, as it was and as it became", async () => {
    const world = await newTeam("modeller");
    const first = await saved(world, null, { "a.wright": "one\n", "parts/rope.wright": "rope å\r\n" });
    const second = await saved(world, first, { "a.wright": "two\n", "parts/rope.wright": null });
    expect(await filesOf(world, first)).toEqual({ "a.wright": "one\n", "parts/rope.wright": "rope å\r\n" });
    expect(await filesOf(world)).toEqual({ "a.wright": "two\n" });
    const { commits } = await listHistory(world.modeller, { ...world.address, limit: 10 });
    expect(commits.map(({ oid, position, paths }) => ({ oid, position, paths }))).toEqual([
      { oid: second, position: 2, paths: ["a.wright", "parts/rope.wright"] },
      { oid: first, position: 1, paths: ["a.wright", "parts/rope.wright"] },
    ]);
    const entries = await JournalEntry.findAll({ where: { teamId: world.key.teamId } });
    expect(entries.map(({ details }) => details.commit).sort()).toEqual([first, second].sort());
  });

  test("of what the files hold already writes nothing", async () => {
    const world = await newTeam("modeller");
    const head = await saved(world, null, { "a.wright": "one" });
    expect(await save(world, head, { "a.wright": "one" })).toEqual({ kind: "unchanged", head });
    expect(await Commit.count({ where: world.key })).toBe(1);
  });

  test("over someone's newer version of the file shows all three texts and writes nothing", async () => {
    const world = await newTeam("modeller");
    const base = await saved(world, null, { "a.wright": "base", "b.wright": "b" });
    const head = await saved(world, base, { "a.wright": "theirs" }, "Theirs");
    const result = await save(world, base, { "a.wright": "yours", "b.wright": "mine" });
    expect(result).toMatchObject({
      kind: "behind",
      head,
      newest: { oid: head, message: "Theirs", author: "modeller" },
      collisions: [{ path: "a.wright", base: "base", theirs: "theirs", yours: "yours" }],
    });
    expect(await filesOf(world)).toEqual({ "a.wright": "theirs", "b.wright": "b" });
  });

  test.each([
    [
      "edited, theirs taken away",
      { "a.wright": null },
      { "a.wright": "yours" },
      { theirs: null, yours: "yours" },
    ],
    [
      "taken away, theirs edited",
      { "a.wright": "theirs" },
      { "a.wright": null },
      { theirs: "theirs", yours: null },
    ],
  ])("of a file %s is told", async (_, theirs, yours, collision) => {
    const world = await newTeam("modeller");
    const base = await saved(world, null, { "a.wright": "base", "b.wright": "b" });
    await saved(world, base, theirs);
    expect(await save(world, base, yours)).toMatchObject({ kind: "behind", collisions: [collision] });
  });

  test("beside someone's newer version of another file keeps both", async () => {
    const world = await newTeam("modeller");
    const base = await saved(world, null, { "a.wright": "a", "b.wright": "b" });
    await saved(world, base, { "a.wright": "a2" });
    expect(await save(world, base, { "b.wright": "b2" })).toMatchObject({ kind: "saved", merged: true });
    expect(await filesOf(world)).toEqual({ "a.wright": "a2", "b.wright": "b2" });
  });

  test("of 40 people at once from one parent: one wins, 39 are told", async () => {
    const world = await newTeam("modeller");
    const base = await saved(world, null, { "a.wright": "base" });
    const results = await Promise.all(
      Array.from({ length: 40 }, (_, i) => save(world, base, { "a.wright": `text of ${i}` })),
    );
    const kinds = results.map(({ kind }) => kind).sort();
    expect(kinds).toEqual([...Array(39).fill("behind"), "saved"]);
    expect(await Commit.count({ where: world.key })).toBe(2);
  });

  test("of 10 people at once into an empty set: one begins it, 9 are told", async () => {
    const world = await newTeam("modeller");
    const saves = Array.from({ length: 10 }, (_, i) => save(world, null, { "a.wright": `text of ${i}` }));
    const kinds = (await Promise.all(saves)).map(({ kind }) => kind).sort();
    expect(kinds).toEqual([...Array(9).fill("behind"), "saved"]);
  });

  test("may take the last file away, and begin anew", async () => {
    const world = await newTeam("modeller");
    const first = await saved(world, null, { "parts/a.wright": "a" });
    const empty = await saved(world, first, { "parts/a.wright": null });
    expect(await filesOf(world)).toEqual({});
    await saved(world, empty, { "b.wright": "b" });
    expect(await filesOf(world)).toEqual({ "b.wright": "b" });
  });

  test("of 20 people at once, each another file: all stand", async () => {
    const world = await newTeam("modeller");
    const base = await saved(world, null, { "a.wright": "base" });
    await Promise.all(
      Array.from({ length: 20 }, (_, i) => saved(world, base, { [`file${i}.wright`]: `${i}` })),
    );
    expect(Object.keys(await filesOf(world))).toHaveLength(21);
    const { commits } = await listHistory(world.modeller, { ...world.address, limit: 50 });
    expect(commits.map(({ position }) => position)).toEqual(Array.from({ length: 21 }, (_, i) => 21 - i));
  });

  test("takes at most twelve statements, folder and all", async () => {
    const world = await newTeam("modeller");
    const head = await saved(world, null, { "parts/rope.wright": "rope" });
    const query = vi.spyOn(Client.prototype, "query");
    await saved(world, head, { "parts/rope.wright": "rope 2" });
    const statements = query.mock.calls.map(([statement]) => String(statement));
    query.mockRestore();
    expect(statements.length, statements.join("\n")).toBeLessThanOrEqual(12);
  });

  test.each([
    [{ "../a": "x" }, "Say"],
    [{ ".git/config": "x" }, "Say"],
    [{ "A.wright": "x" }, "Say"],
    [{ "a.wright/b": "x" }, "Say"],
    [{ "b.wright": "nul \0" }, "Say"],
    [{ "b.wright": "half \ud800" }, "Say"],
    [{ "b.wright": "x" }, " \n "],
  ])("of %j with message %j is refused in words", async (files, message) => {
    const world = await newTeam("modeller");
    const head = await saved(world, null, { "a.wright": "a" });
    const result = await save(world, head, files as Record<string, string>, message);
    expect(result).toMatchObject({
      kind: "refused",
      problems: [{ message: expect.stringMatching(/^[A-Z“].*\.$/) }],
    });
    expect(await GitObject.count({ where: world.key })).toBe(3);
  });

  test("on a version of another set is refused as one that does not exist", async () => {
    const [world, other] = [await newTeam("modeller"), await newTeam("modeller")];
    const foreign = await saved(other, null, { "a.wright": "secret" });
    for (const parent of [foreign, "0".repeat(40), "nonsense"])
      await expect(save(world, parent, { "a.wright": "x" })).rejects.toMatchObject({ init: { status: 404 } });
  });
});
