import { expect, test } from "vitest";
import { gathered, isOnShelf } from "../../app/editor/drafts.ts";

const saved = new Map([
  ["a.wright", "a"],
  ["b.wright", "b"],
]);
const draft = (key: string, at: string, files: Record<string, string>, commit = "one") => ({
  key,
  draft: {
    commit,
    at,
    files: Object.entries(files).map(([path, text]) => ({ path, base: saved.get(path) ?? null, text })),
  },
});

test("what two tabs left of different files stands together", () => {
  const found = gathered(
    [draft("one", "2026-01-01", { "a.wright": "a1" }), draft("two", "2026-01-02", { "b.wright": "b1" })],
    saved,
  );
  expect(found.draft?.files.map(({ text }) => text).sort()).toEqual(["a1", "b1"]);
  expect(found.others).toEqual([]);
  expect([...found.taken].sort()).toEqual(["one", "two"]);
});

test("of one file the newest stands, and the other is kept and offered", () => {
  const found = gathered(
    [
      draft("old", "2026-01-01", { "a.wright": "a1", "b.wright": "b1" }),
      draft("new", "2026-01-02", { "a.wright": "a2" }),
    ],
    saved,
  );
  expect(found.draft?.files.map(({ text }) => text).sort()).toEqual(["a2", "b1"]);
  expect(found.others.map(({ key, file }) => [key, file.text])).toEqual([["old", "a1"]]);
  expect(found.taken).toEqual(["new"]);
});

test("the same text twice, or one that is saved, is nothing to choose from", () => {
  const twice = gathered(
    [draft("one", "2026-01-01", { "a.wright": "x" }), draft("two", "2026-01-02", { "a.wright": "x" })],
    saved,
  );
  expect(twice.others).toEqual([]);
  const stale = gathered([draft("one", "2026-01-01", { "a.wright": "a" })], saved);
  expect(stale).toEqual({ draft: null, taken: ["one"], others: [] });
});

test("a file that moved since is saved on the version it was written on", () => {
  const moved = draft("one", "2026-01-01", { "a.wright": "mine" }, "old version");
  const { draft: found } = gathered(
    [moved, draft("two", "2026-01-02", { "b.wright": "b1" }, "new version")],
    new Map([...saved, ["a.wright", "theirs"]]),
  );
  expect(found?.commit).toBe("old version");
});

test("a shelf holds its own drafts and no other set's", () => {
  expect(isOnShelf("draft:7:t/boat", "draft:7:t/boat")).toBe(true);
  expect(isOnShelf("draft:7:t/boat", "draft:7:t/boat~x1")).toBe(true);
  expect(isOnShelf("draft:7:t/boat", "draft:7:t/boat-hoist~x1")).toBe(false);
});
