import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { checkFile } from "../../grammar/pipeline.ts";
import { type FileSet, fileSet } from "../../grammar/source/text.ts";
import { formatText } from "../../grammar/syntax/format.ts";

const demo = new URL("../../models-demo/", import.meta.url);

function setIn(folder: string): FileSet {
  const root = new URL(`${folder}/`, demo);
  const paths = readdirSync(root, { recursive: true, encoding: "utf8" });
  return fileSet(
    paths
      .filter((path) => path.endsWith(".wright"))
      .map((path) => [path, readFileSync(new URL(path, root), "utf8")] as const),
  );
}

/** What newcomers open first: it holds what it says of itself, and shows one of each kind of result. */
describe.each(readdirSync(demo))("the demo's set %s", (folder) => {
  const files = setIn(folder);
  it.each([...files.keys()])("%s is laid out, without an error, and meets its requirements", (path) => {
    const source = files.get(path);
    expect(source && formatText(source)).toBe(source?.text);
    const { findings, systems } = checkFile(files, path, { trials: true });
    expect(findings.filter(({ severity }) => severity === "error")).toEqual([]);
    const results = systems.flatMap(({ expectations }) => expectations);
    expect(results.filter(({ passed }) => !passed)).toEqual([]);
  });
});

it("the demo shows a dependent store and an algebraic loop", () => {
  const names = readdirSync(demo).flatMap((folder) => {
    const files = setIn(folder);
    return [...files.keys()].flatMap((path) => checkFile(files, path).findings.map(({ name }) => name));
  });
  expect(names).toContain("derivative-causality");
  expect(names).toContain("algebraic-loop");
});
