import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { deflateSync } from "node:zlib";
import fc from "fast-check";
import { QueryTypes } from "sequelize";
import { beforeAll, describe, expect, test, vi } from "vitest";
import { exportSet } from "../../app/operations/export-set.server.ts";
import { listHistory } from "../../app/operations/list-history.server.ts";
import { readCommit } from "../../app/operations/read-commit.server.ts";
import { readFile } from "../../app/operations/read-file.server.ts";
import { readFiles } from "../../app/operations/read-files.server.ts";
import { saveFiles } from "../../app/operations/save-files.server.ts";
import { clashes, pathProblem } from "../../app/storage/safe-path.ts";
import { database } from "../../db/connect.ts";
import { GitObject } from "../../db/models/index.ts";
import { testDatabase } from "../support/database.ts";
import { newTeam } from "./people.ts";

beforeAll(() => testDatabase());

type Texts = Record<string, string | null>;

/** A set with one commit for each of these changes; the names of the commits, oldest first. */
async function setWith(...changes: Texts[]) {
  const team = await newTeam("modeller");
  const commits: string[] = [];
  for (const [i, change] of changes.entries()) {
    const files = Object.entries(change).map(([path, text]) => ({ path, text }));
    const request = { ...team.address, branch: "main" as const, parent: commits.at(-1) ?? null, files };
    const saved = await saveFiles(team.modeller, { ...request, message: `Version ${i + 1}` });
    if (saved.kind !== "saved") throw new Error(JSON.stringify(saved));
    commits.push(saved.commit.oid);
  }
  return { ...team, commits };
}

async function blobOf(key: { teamId: string; setId: string }) {
  return GitObject.findOne({ where: { ...key, type: "blob" }, rejectOnEmpty: true });
}

describe("an object, once stored,", () => {
  test.each([
    "UPDATE git_objects SET content = '\\x00'",
    "UPDATE git_objects SET oid = repeat('0', 40)",
    "UPDATE commits SET message = 'else'",
    "UPDATE journal SET action = 'else'",
    "DELETE FROM journal",
    "TRUNCATE journal",
  ])("is not rewritten: %s", async (statement) => {
    await setWith({ "a.wright": "one" });
    await expect(database.query(statement)).rejects.toThrow(/is never rewritten/);
  });

  test("is kept once, however often it is saved", async () => {
    const { key } = await setWith(
      { "a.wright": "same", "b.wright": "same" },
      { "a.wright": "else" },
      { "a.wright": "same" },
    );
    expect(await GitObject.count({ where: { ...key, type: "blob" } })).toBe(2);
  });

  test.each([
    ["whose bytes were turned", (content: Buffer) => content.fill(content[12] ^ 1, 12, 13)],
    ["that was replaced by a sound one of other content", () => deflateSync("blob 5\0other")],
    ["that was cut short", (content: Buffer) => content.subarray(0, -6)],
  ])("%s is never served nor exported", async (_, damage) => {
    const { modeller, address, key, commits } = await setWith({ "a.wright": "sound\n" });
    const blob = await blobOf(key);
    await database.query("ALTER TABLE git_objects DISABLE TRIGGER git_objects_stand");
    await database.query("UPDATE git_objects SET content = $1 WHERE set_id = $2 AND oid = $3", {
      bind: [damage(Buffer.from(blob.content)), key.setId, blob.oid],
    });
    await database.query("ALTER TABLE git_objects ENABLE TRIGGER git_objects_stand");
    const asked = { ...address, commit: commits[0] };
    await expect(readFiles(modeller, address)).rejects.toThrow(blob.oid);
    await expect(readCommit(modeller, asked)).rejects.toThrow(blob.oid);
    await expect(readFile(modeller, { ...asked, path: "a.wright" })).rejects.toThrow(blob.oid);
    const folder = mkdtempSync(join(tmpdir(), "bondwright-"));
    await expect(exportSet(modeller, address, folder)).rejects.toThrow(blob.oid);
    rmSync(folder, { recursive: true });
  });
});

test("an export is a repository that git finds without fault, with the same history and texts", async () => {
  const { modeller, address, commits } = await setWith(
    {
      "hoist.wright": "one\n",
      "parts/rope.wright": "rope\n",
      "parts/deep/er/x.wright": "",
      "parts.wright": "p",
      "parts-a": "q",
    },
    { "hoist.wright": "two å\n", "parts/deep/er/x.wright": null },
    { "notes/Ålesund.md": "Grüße\r\n" },
  );
  const folder = mkdtempSync(join(tmpdir(), "bondwright-"));
  try {
    await exportSet(modeller, address, folder);
    const git = (...args: string[]) =>
      execFileSync("git", ["-C", folder, ...args], { encoding: "utf8", stdio: "pipe" });
    expect(git("fsck", "--strict", "--full", "--no-dangling")).toBe("");
    expect(git("log", "--format=%H %s", "main").trim().split("\n")).toEqual(
      [...commits].reverse().map((oid, i) => `${oid} Version ${commits.length - i}`),
    );
    expect(git("log", "-1", "--format=%an <%ae>")).toBe(`modeller <${modeller.email}>\n`);
    for (const [path, text] of (await readFiles(modeller, address)).files)
      expect(git("cat-file", "blob", `main:${path}`)).toBe(text);
    expect(
      git("-c", "core.quotePath=false", "ls-tree", "-r", "--name-only", "main").trim().split("\n"),
    ).toHaveLength(5);
  } finally {
    rmSync(folder, { recursive: true });
  }
});

test("whatever names pass for safe, git finds no fault with them", async () => {
  const name = fc.oneof(
    fc.string({ unit: "grapheme", minLength: 1, maxLength: 6 }),
    fc.string({ unit: "grapheme-ascii", minLength: 1, maxLength: 6 }),
  );
  const awkward = fc.constantFrom(
    ".git",
    "git~1",
    "GIT~2",
    "con",
    "..",
    "a.",
    "a ",
    "a:b",
    ".gitmodules",
    "\u200d.git",
  );
  const path = fc.array(fc.oneof({ weight: 5, arbitrary: name }, awkward), { minLength: 1, maxLength: 3 });
  const candidates = fc.sample(path, { numRuns: 4000, seed: 20261201 }).map((names) => names.join("/"));
  const safe = new Set(candidates.filter((candidate) => pathProblem(candidate) === null));
  for (const clashing of clashes(safe).keys()) safe.delete(clashing);
  expect(safe.size).toBeGreaterThan(300);
  const { modeller, address } = await setWith(Object.fromEntries([...safe].map((path) => [path, path])));
  const folder = mkdtempSync(join(tmpdir(), "bondwright-"));
  try {
    await exportSet(modeller, address, folder);
    const git = (...args: string[]) =>
      execFileSync("git", ["-C", folder, ...args], { encoding: "utf8", stdio: "pipe" });
    expect(git("fsck", "--strict", "--full")).toBe("");
    const listed = git("ls-tree", "-r", "-z", "--name-only", "main").split("\0").filter(Boolean);
    expect(listed.sort()).toEqual([...safe].sort());
  } finally {
    rmSync(folder, { recursive: true });
  }
});

describe("history", () => {
  test("comes in pages, newest first, of all files or of one", async () => {
    const changes = Array.from({ length: 7 }, (_, i) => ({ [i % 2 ? "b.wright" : "a.wright"]: `${i}` }));
    const { modeller, address, commits } = await setWith(...changes);
    const newest = [...commits].reverse();
    const page = await listHistory(modeller, { ...address, limit: 3 });
    expect(page.commits.map(({ oid }) => oid)).toEqual(newest.slice(0, 3));
    const rest = await listHistory(modeller, { ...address, limit: 10, before: page.next as string });
    expect(rest.commits.map(({ oid }) => oid)).toEqual(newest.slice(3));
    expect(rest.next).toBeNull();
    const ofB = await listHistory(modeller, { ...address, limit: 2, path: "b.wright" });
    expect(ofB.commits.map(({ message }) => message)).toEqual(["Version 6", "Version 4"]);
    const olderB = await listHistory(modeller, {
      ...address,
      limit: 2,
      path: "b.wright",
      before: ofB.next as string,
    });
    expect(olderB.commits.map(({ message }) => message)).toEqual(["Version 2"]);
  });

  test("keeps its order when the clock is set back", async () => {
    const { modeller, address, key, commits } = await setWith({ "a.wright": "1" }, { "a.wright": "2" });
    const [first] = await database.query<{ time: Date }>(
      "SELECT time FROM commits WHERE set_id = $1 AND oid = $2",
      {
        bind: [key.setId, commits[0]],
        type: QueryTypes.SELECT,
      },
    );
    vi.useFakeTimers({ now: first.time.getTime() - 86_400_000, toFake: ["Date"] });
    try {
      const files = [{ path: "a.wright", text: "3" }];
      await saveFiles(modeller, {
        ...address,
        branch: "main",
        parent: commits[1],
        files,
        message: "Yesterday",
      });
    } finally {
      vi.useRealTimers();
    }
    const { commits: shown } = await listHistory(modeller, { ...address, limit: 10 });
    expect(shown.map(({ message }) => message)).toEqual(["Yesterday", "Version 2", "Version 1"]);
    expect(shown[0].time < shown[1].time).toBe(true);
  });

  test("shows what a commit changed: new, changed and taken away", async () => {
    const { modeller, address, commits } = await setWith(
      { "a.wright": "a", "b.wright": "b", "c.wright": "c" },
      { "a.wright": "a2", "b.wright": null, "d/d.wright": "d" },
    );
    const second = await readCommit(modeller, { ...address, commit: commits[1] });
    expect(second.parent).toBe(commits[0]);
    expect(second.changes).toEqual([
      { path: "a.wright", before: "a", after: "a2" },
      { path: "b.wright", before: "b", after: null },
      { path: "d/d.wright", before: null, after: "d" },
    ]);
    const first = await readCommit(modeller, { ...address, commit: commits[0] });
    expect(first.changes.map(({ before }) => before)).toEqual([null, null, null]);
  });
});
