import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { FINDINGS } from "../../grammar/diagnostics/finding.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";

const folder = new URL("../../grammar/diagnostics/explain/", import.meta.url);
const pages = readdirSync(folder).map((file) => ({
  name: file.replace(/\.md$/, ""),
  text: readFileSync(new URL(file, folder), "utf8"),
}));

function example(page: string, which: "failing" | "mended"): string {
  const found = new RegExp(`\`\`\`wright ${which}\n([^]*?)\`\`\``).exec(page);
  if (found === null) throw new Error(`the page has no ${which} example`);
  return found[1];
}

function check(text: string) {
  return checkFile(fileSet([["main.wright", text]]), "main.wright").findings;
}

/** A page that shows what it speaks of, and how it is mended, or it misleads the reader it was written for. */
describe.each(pages)("the page of $name", ({ name, text }) => {
  it("is about a finding that exists", () => {
    expect(FINDINGS).toHaveProperty([name]);
    expect(text).toMatch(new RegExp(`^# ${name}\n`));
  });

  it("fails with that finding, and is mended without a new error", () => {
    expect(check(example(text, "failing")).map((found) => found.name)).toContain(name);
    const after = check(example(text, "mended"));
    expect(after.map((found) => found.name)).not.toContain(name);
    expect(after.filter((found) => found.severity === "error")).toEqual([]);
  });
});
