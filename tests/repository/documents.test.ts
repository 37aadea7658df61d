import { existsSync } from "node:fs";
import { dirname, join } from "node:path";
import { describe, expect, test } from "vitest";
import { read, trackedFiles } from "./tracked.ts";

const folders = new Set(trackedFiles.flatMap((path) => parents(path)));

describe.each(["README.md", "DEVELOPERS.md"])("%s", (document) => {
  const words = [...read(document).matchAll(/`([^`\s]+)`/g)].map(([, word]) => word as string);

  test("names only paths that exist", () => {
    const paths = words.filter((word) => isPath(word)).map((word) => word.replace(/\/$/, ""));
    expect(paths.length).toBeGreaterThan(3);
    expect(paths.filter((path) => !existsSync(path) && !folders.has(path))).toEqual([]);
  });

  test("names only scripts that package.json has", () => {
    const { scripts } = JSON.parse(read("package.json"));
    const named = [...read(document).matchAll(/npm (?:run )?(start|test|[\w:]+)`/g)].map(
      ([, name]) => name as string,
    );
    expect(named.filter((name) => !(name in scripts) && name !== "ci")).toEqual([]);
  });

  test("shows only pictures and links that are there", () => {
    const links = [...read(document).matchAll(/\]\(([^)#:]+)(?:#[^)]*)?\)/g)].map(
      ([, path]) => path as string,
    );
    expect(links.filter((path) => !existsSync(path))).toEqual([]);
  });
});

/** A word with a slash that starts in one of the project's folders, or a file at the root; no pattern, nothing built. */
function isPath(word: string): boolean {
  if (/[<>*{}=:]/.test(word)) return false;
  return (
    /^(app|cli|db|grammar|models-demo|public|tests|\.ci)\//.test(word) || /^[\w.-]+\.(md|json|ts)$/.test(word)
  );
}

function parents(path: string): string[] {
  const parent = dirname(path);
  return parent === "." ? [] : [...parents(parent), join(parent)];
}
