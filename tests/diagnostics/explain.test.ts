import { describe, expect, it } from "vitest";
import { FINDINGS, type FindingName } from "../../grammar/diagnostics/finding.ts";
import { type FindingExample, pageNames, pageOf } from "../../grammar/diagnostics/pages.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";

function check({ code }: FindingExample) {
  return checkFile(fileSet([["main.wright", code]]), "main.wright", { trials: true }).findings;
}

function pageFor(name: FindingName) {
  const page = pageOf(name);
  if (page === null) throw new Error(`${name} has no page in grammar/diagnostics/explain/`);
  return page;
}

const names = Object.keys(FINDINGS) as FindingName[];

it("every finding has a page, and every page a finding", () => {
  expect(pageNames().sort()).toEqual([...names].sort());
});

/** Pages whose examples rest on a stage that is not there yet. Each goes from this list when its stage comes. */
it("the examples that are not run yet are these", () => {
  const later = names.filter((name) => pageFor(name).examples.some((example) => example.later));
  expect(later).toEqual(["check-stopped", "not-yet", "unstable-trial", "stale-acceptance"]);
});

/** A page that shows what it speaks of, and how it is mended, or it misleads the reader it was written for. */
describe.each(names)("the page of %s", (name) => {
  const { what, text, examples } = pageFor(name);

  it("says in a paragraph what the finding is, and shows one failing and one mended example", () => {
    expect(what).toMatch(/^[A-Z][\s\S]*\.$/);
    expect(examples.map(({ role }) => role)).toEqual(["failing", "mended"]);
    expect(text.match(/^```/gm)).toHaveLength(4);
  });

  it("fails with that finding, and is mended without a new error", () => {
    const [failing, mended] = examples;
    const before = check(failing).map((found) => found.name);
    const after = check(mended);
    // One that fails as it says has no reason to be marked as later.
    if (failing.later) expect(before).not.toContain(name);
    else expect(before).toContain(name);
    if (failing.later) expect(before).not.toContain("syntax");
    expect(after.map((found) => found.name)).not.toContain(name);
    const errors = after.filter((found) => found.severity === "error");
    expect(mended.later ? errors.filter((found) => found.name !== "not-yet") : errors).toEqual([]);
  });
});
