import { existsSync } from "node:fs";
import { dirname } from "node:path";
import { describe, expect, test } from "vitest";
import { read, trackedFiles } from "./tracked.ts";

const folders = new Set(trackedFiles.flatMap(foldersAbove));

describe.each(["README.md", "DEVELOPERS.md"])("%s", (document) => {
  const text = read(document);

  test("names only paths that exist", () => {
    const words = [...text.matchAll(/`([^`\s]+)`/g)].map(([, word]) => word as string);
    const named = [...words.filter(isPath), ...pathsInTree(text)];
    expect(named).not.toEqual([]);
    expect(named.filter((path) => !exists(path))).toEqual([]);
  });

  test("names only scripts that package.json has", () => {
    const { scripts } = JSON.parse(read("package.json"));
    const named = [...text.matchAll(/npm (?:run )?(start|test|[\w:]+)`/g)].map(([, name]) => name as string);
    expect(named.filter((name) => !(name in scripts))).toEqual([]);
  });

  test("shows only pictures and links that are there", () => {
    const links = [...text.matchAll(/\]\(([^)#:]+)(?:#[^)]*)?\)/g)].map(([, path]) => path as string);
    expect(links.filter((path) => !exists(path))).toEqual([]);
  });
});

/** A word that starts in one of the project's folders, or a file at the root; no pattern, nothing that is built. */
function isPath(word: string): boolean {
  if (/[<>*{}=:]/.test(word)) return false;
  return (
    /^(app|cli|db|grammar|models-demo|public|tests|\.ci)\//.test(word) || /^[\w.-]+\.(md|json|ts)$/.test(word)
  );
}

/** The folders and files at the head of the lines of a drawn tree; what is in a folder stands two blanks deeper. */
function pathsInTree(text: string): string[] {
  const tree = /```\n(grammar\/ [\s\S]*?)```/.exec(text)?.[1] ?? "";
  const found: string[] = [];
  let top = "";
  for (const line of tree.split("\n")) {
    const [, indent, heads] = /^( {0,2})((?:[\w-]+(?:\/|\.ts) )+)/.exec(line) ?? [];
    const names = heads?.trim().split(" ") ?? [];
    if (indent === "") top = names[0] ?? "";
    found.push(...names.map((name) => (indent === "" ? name : top + name)));
  }
  return found;
}

function exists(path: string): boolean {
  return existsSync(path) && (trackedFiles.includes(path) || folders.has(path.replace(/\/$/, "")));
}

function foldersAbove(path: string): string[] {
  const parent = dirname(path);
  return parent === "." ? [] : [...foldersAbove(parent), parent];
}
