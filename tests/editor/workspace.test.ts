import { expect, test } from "vitest";
import { type Draft, next, opened, unsaved } from "../../app/editor/workspace.ts";

const files = (texts: Record<string, string>) => new Map(Object.entries(texts));
const start = opened("one", files({ "a.wright": "a", "b.wright": "b" }));
const typed = next(start, { kind: "typed", path: "a.wright", text: "a, mine" });

test("what is typed is unsaved until it is saved, and typing the old text back makes it clean", () => {
  expect(unsaved(typed)).toEqual([{ path: "a.wright", base: "a", text: "a, mine" }]);
  expect(unsaved(next(typed, { kind: "typed", path: "a.wright", text: "a" }))).toEqual([]);
  const saved = next(typed, { kind: "saved", commit: "two", files: unsaved(typed) });
  expect(saved.commit).toBe("two");
  expect(unsaved(saved)).toEqual([]);
});

test("what is typed while a save is under way stays unsaved", () => {
  const sent = unsaved(typed);
  const onward = next(typed, { kind: "typed", path: "a.wright", text: "a, mine, more" });
  const saved = next(onward, { kind: "saved", commit: "two", files: sent });
  expect(unsaved(saved)).toEqual([{ path: "a.wright", base: "a, mine", text: "a, mine, more" }]);
});

test("a newer version underneath moves the parent where nobody else touched what is unsaved", () => {
  const moved = next(typed, {
    kind: "loaded",
    commit: "two",
    files: files({ "a.wright": "a", "b.wright": "b, theirs" }),
  });
  expect(moved.commit).toBe("two");
  expect(moved.texts.get("b.wright")).toBe("b, theirs");
  expect(unsaved(moved)).toEqual([{ path: "a.wright", base: "a", text: "a, mine" }]);
});

test("where someone else changed what is unsaved the old parent stays, so that the server sees the collision", () => {
  const kept = next(typed, {
    kind: "loaded",
    commit: "two",
    files: files({ "a.wright": "a, theirs", "b.wright": "b, theirs" }),
  });
  expect(kept.commit).toBe("one");
  expect(kept.texts.get("a.wright")).toBe("a, mine");
  expect(kept.texts.get("b.wright")).toBe("b, theirs");
  expect(unsaved(kept)).toEqual([{ path: "a.wright", base: "a", text: "a, mine" }]);
});

test("a draft stands on the newest version where its files did not move, and on its own where they did", () => {
  const draft: Draft = { commit: "zero", at: "2026-01-01T00:00:00.000Z", files: unsaved(typed) };
  expect(next(start, { kind: "restored", draft }).commit).toBe("one");
  const moved = opened("one", files({ "a.wright": "a, theirs" }));
  const restored = next(moved, { kind: "restored", draft });
  expect(restored.commit).toBe("zero");
  expect(restored.texts.get("a.wright")).toBe("a, mine");
  expect(next(restored, { kind: "discarded" }).texts.get("a.wright")).toBe("a, theirs");
});

test("settled collisions go on from their version, with the text that was chosen", () => {
  const settled = next(typed, {
    kind: "settled",
    head: "two",
    files: [
      { path: "a.wright", theirs: "a, theirs", chosen: "a, both" },
      { path: "b.wright", theirs: null, chosen: null },
    ],
  });
  expect(settled.commit).toBe("two");
  expect([...settled.texts]).toEqual([["a.wright", "a, both"]]);
  expect(unsaved(settled)).toEqual([{ path: "a.wright", base: "a, theirs", text: "a, both" }]);
});
