import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { readFindingPage, readReference } from "../../app/reference/read-reference.server.ts";
import { FINDINGS, type FindingName } from "../../grammar/diagnostics/finding.ts";
import { pageOf } from "../../grammar/diagnostics/pages.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { formatText } from "../../grammar/syntax/format.ts";
import {
  DRIVE_HELPERS,
  ELEMENT_WORDS,
  FILE_WORDS,
  FUNCTION_NAMES,
  RESERVED_NAMES,
  SYSTEM_MEASURES,
  SYSTEM_WORDS,
  TRIAL_MEASURES,
  TRIAL_WORDS,
} from "../../grammar/syntax/words.ts";
import { UNITS } from "../../grammar/units/table.ts";

const names = Object.keys(FINDINGS) as FindingName[];

/** What a reader sees of a piece of our HTML. */
function shown(html: string): string {
  return html
    .replace(/<[^>]*>/g, "")
    .replace(
      /&(lt|gt|amp|quot|#39);/g,
      (_, name) => ({ lt: "<", gt: ">", amp: "&", quot: '"' })[name as "lt"] ?? "'",
    );
}

const codes = (html: string) => [...html.matchAll(/<code>(.*?)<\/code>/g)].map(([, code]) => shown(code));

describe.each(names)("the page of %s", (name) => {
  const { html, severity } = readFindingPage(name);

  test("shows its severity, its words and both examples to the letter", () => {
    const page = pageOf(name);
    expect(severity).toBe(FINDINGS[name]);
    expect(shown(html)).toContain(page?.what.replaceAll("`", ""));
    const blocks = [...html.matchAll(/<pre[^>]*>([\s\S]*?)<\/pre>/g)].map(([, code]) => `${shown(code)}\n`);
    expect(blocks).toEqual(page?.examples.map(({ code }) => code));
    expect(html).toMatch(/<figcaption>Fails[\s\S]*<figcaption>Mended</);
  });
});

test("a page of no finding is not found", () => {
  for (const name of ["no-such-finding", "__proto__", "constructor", "../reference"])
    expect(() => readFindingPage(name)).toThrow(expect.objectContaining({ init: { status: 404 } }));
});

describe("the reference", () => {
  const { html, headings } = readReference();
  const words = new Set(codes(html).flatMap((code) => code.match(/[\p{L}\p{N}_]+/gu) ?? []));

  test("has an anchor of its own for every heading, and every link within it leads to one", () => {
    const ids = headings.map(({ id }) => id);
    expect(new Set(ids).size).toBe(ids.length);
    const links = [...html.matchAll(/href="([^"]*)"/g)].map(([, link]) => link);
    expect(links.filter((link) => link.startsWith("#") && !ids.includes(link.slice(1)))).toEqual([]);
    const pages = links.filter((link) => !link.startsWith("#"));
    expect([...new Set(pages)].sort()).toEqual(names.map((name) => `/reference/findings/${name}`).sort());
  });

  test("speaks of every word of the notation", () => {
    const all = [
      FILE_WORDS,
      SYSTEM_WORDS,
      TRIAL_WORDS,
      ELEMENT_WORDS.values(),
      FUNCTION_NAMES,
      RESERVED_NAMES,
    ];
    const measures = [DRIVE_HELPERS, SYSTEM_MEASURES, TRIAL_MEASURES];
    expect([...all, ...measures].flatMap((list) => [...list]).filter((word) => !words.has(word))).toEqual([]);
  });

  test("lists every unit", () => {
    const listed = codes(html);
    expect([...UNITS.keys()].filter((unit) => !listed.includes(unit))).toEqual([]);
  });

  test("says what results are not", () => {
    expect(shown(html)).toContain(
      "not a substitute for testing, for the safety standards and codes that apply",
    );
  });

  test("leaves no table unfilled", () => {
    expect(html).not.toContain("&lt;!--");
  });
});

const folder = new URL("../../grammar/reference/", import.meta.url);
const blocks = readdirSync(folder).flatMap((file) => {
  const text = readFileSync(new URL(file, folder), "utf8");
  return [...text.matchAll(/^```wright\n([\s\S]*?)^```$/gm)].map(([, code], i) => ({
    name: `${file} #${i + 1}`,
    code,
  }));
});

test("shows notation in its chapters", () => {
  expect(blocks.length).toBeGreaterThanOrEqual(4);
});

test.each(blocks)("$name is in order and in the notation's own layout", ({ code }) => {
  const files = fileSet([["main.wright", code]]);
  const found = checkFile(files, "main.wright").findings.filter(({ name }) => name !== "not-yet");
  expect(found.map(({ name, message }) => `${name}: ${message}`)).toEqual([]);
  const [[, source]] = [...files];
  expect(formatText(source)).toBe(code);
});
