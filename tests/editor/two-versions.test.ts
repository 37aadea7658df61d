import fc from "fast-check";
import { expect, test } from "vitest";
import { passagesOf } from "../../app/components/difference.tsx";
import { broughtTogether, linesOf } from "../../app/editor/two-versions.tsx";

const base = "one\ntwo\nthree\nfour\nfive\nsix\nseven\neight\nnine\n";

test("changes to lines apart are brought together; to the same line they are not", () => {
  const theirs = base.replace("two", "two, theirs");
  expect(broughtTogether({ path: "", base, theirs, yours: base.replace("eight", "eight, yours") })).toBe(
    theirs.replace("eight", "eight, yours"),
  );
  expect(broughtTogether({ path: "", base, theirs, yours: base.replace("two", "two, yours") })).toBeNull();
  expect(broughtTogether({ path: "", base: null, theirs, yours: base })).toBeNull();
});

const text = fc
  .array(fc.constantFrom("a", "b", "c", ""), { maxLength: 12 })
  .map((lines) => lines.map((line) => `${line}\n`).join(""));

test("side by side, each column holds its whole text in order", () => {
  fc.assert(
    fc.property(text, text, (left, right) => {
      const lines = linesOf(left, right);
      const column = (side: "left" | "right") =>
        lines.flatMap((line) => (line[side] === null ? [] : [line[side].text]));
      const written = (whole: string) => (whole === "" ? [] : whole.replace(/\n$/, "").split("\n"));
      expect(column("left")).toEqual(written(left));
      expect(column("right")).toEqual(written(right));
    }),
  );
});

test("a difference numbers its lines as both texts do", () => {
  const after = base.replace("five", "5");
  const [passage, ...more] = passagesOf(base, after);
  expect(more).toEqual([]);
  expect(
    passage.rows.map(({ sign, before, after, text }) => `${sign}${before ?? ""}/${after ?? ""} ${text}`),
  ).toEqual([
    " 2/2 two",
    " 3/3 three",
    " 4/4 four",
    "−5/ five",
    "+/5 5",
    " 6/6 six",
    " 7/7 seven",
    " 8/8 eight",
  ]);
});
