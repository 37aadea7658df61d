import { describe, expect, test } from "vitest";
import { SourceText } from "../../grammar/source/text.ts";
import { format, formatText } from "../../grammar/syntax/format.ts";
import { parse } from "../../grammar/syntax/parse.ts";

function system(lines: string): string {
  return `notation 1\nsystem S {\n${lines}\n}\n`;
}

/** Names of the findings, after formatting the text as well: neither may run out of room. */
function namesOf(text: string): string[] {
  const source = new SourceText("case.wright", text);
  const { tree, findings } = parse(source);
  format(tree, source);
  return findings.map(({ name }) => name);
}

describe("what is too large is said once", () => {
  test.each([
    ["10 MB of text", "param k = 3 N\n".repeat(720_000)],
    ["2 MB in letters of three bytes", `# ${"質".repeat(700_000)}`],
    ["10,000 brackets", system(`let x = ${"(".repeat(10_000)}1${")".repeat(10_000)}`)],
    ["201 brackets", system(`let x = ${"(".repeat(201)}1${")".repeat(201)}`)],
    ["10,000 open brackets", system(`let x = ${"(".repeat(10_000)}`)],
    ["10,000 indices", system(`let x = ${"a[".repeat(10_000)}1${"]".repeat(10_000)}`)],
    ["10,000 signs", system(`let x = ${"- ".repeat(10_000)}1`)],
    ["10,000 powers", system(`let x = 9${"^9".repeat(10_000)}`)],
    ["10,000 branches", system(`let x = ${"1 where a else ".repeat(10_000)}1`)],
    [
      "150 brackets with 150 signs in each",
      system(`let x = ${`(${"- ".repeat(150)}`.repeat(150)}1${")".repeat(150)}`),
    ],
    ["a sum of 100,000 terms", system(`let x = a${" + a".repeat(100_000)}`)],
    ["10,000 blocks", system(`${"repeat i = 1 .. 2 {\n".repeat(10_000)}${"}\n".repeat(10_000)}`)],
  ])("%s", (_, text) => {
    expect(namesOf(text)).toEqual(["too-large"]);
  });
});

describe("what is large, but not too large, is read", () => {
  test.each([
    ["200 brackets", system(`let x = ${"(".repeat(200)}1${")".repeat(200)}`)],
    ["198 calls", system(`let x = ${"sin(".repeat(198)}1${")".repeat(198)}`)],
    ["a sum of 20,000 terms", system(`let x = a${" + a".repeat(19_999)}`)],
    ["190 blocks", system(`${"repeat i = 1 .. 2 {\n".repeat(190)}${"}\n".repeat(190)}`)],
    ["20,000 wires", system("a -> b\n".repeat(20_000))],
  ])("%s", (_, text) => {
    expect(namesOf(text)).toEqual([]);
  });
});

test("a text of nothing but slips has a bounded number of findings, and the last says so", () => {
  const { findings } = parse(new SourceText("case.wright", system("param 3\n".repeat(20_000))));
  expect(findings.length).toBe(501);
  expect(findings.at(-1)?.message).toContain("not read");
});

describe("texts as they come", () => {
  const sound = "notation 1\nsystem S {\n  param k = 3 N # soft\n}\n";

  test("line ends of other systems, a byte order mark and tabs are read, and formatted away", () => {
    const foreign = `\ufeff${sound.replaceAll("\n", "\r\n").replace("  param", "\tparam")}`;
    expect(namesOf(foreign)).toEqual([]);
    expect(formatText(new SourceText("case.wright", foreign))).toBe(sound);
  });

  test.each([
    ["a NUL", `${sound}\0`, "NUL"],
    ["a byte that was no UTF-8, in a comment", sound.replace("soft", "so\ufffdt"), "UTF-8"],
    ["half a surrogate pair", `${sound}\ud800`, "no meaning"],
  ])("%s is said", (_, text, word) => {
    const { findings } = parse(new SourceText("case.wright", text));
    expect(findings.map(({ message }) => message)).toEqual([expect.stringContaining(word)]);
  });

  test("an empty file and one of blanks have no findings, and format to nothing", () => {
    expect(namesOf("")).toEqual([]);
    expect(namesOf(" \n\t\n")).toEqual([]);
    expect(formatText(new SourceText("case.wright", " \n\t\n"))).toBe("");
  });
});
