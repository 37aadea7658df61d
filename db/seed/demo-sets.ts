import { readdir, readFile } from "node:fs/promises";
import { join } from "node:path";

/** The files of a set at one time: path → text. */
export type Texts = ReadonlyMap<string, string>;

export interface DemoSet {
  slug: string;
  name: string;
  description: string;
  /** How the set came to be, oldest first. */
  versions: { message: string; files: Texts }[];
}

/** Reads the demo: each folder in `folder` is a model set. */
export async function readDemoSets(folder: string): Promise<DemoSet[]> {
  const entries = await readdir(folder, { withFileTypes: true });
  const slugs = entries.filter((entry) => entry.isDirectory()).map(({ name }) => name);
  return Promise.all(slugs.sort().map(async (slug) => demoSet(slug, await readTexts(join(folder, slug)))));
}

function demoSet(slug: string, files: Texts): DemoSet {
  const name = slug.charAt(0).toUpperCase() + slug.slice(1).replaceAll("-", " ");
  const topFile = [...files].find(([path]) => !path.includes("/") && path.endsWith(".wright"))?.[1] ?? "";
  return { slug, name, description: opening(topFile), versions: historyOf(files) };
}

/** The first sentence of a file's opening `##` lines. */
function opening(text: string): string {
  const lines = text.split("\n").map((line) => line.trim());
  const from = lines.findIndex((line) => line.startsWith("##"));
  if (from < 0) return "";
  const said = [];
  for (const line of lines.slice(from)) {
    if (!line.startsWith("##")) break;
    said.push(line.replace(/^##\s*/, ""));
  }
  return /^.*?\.(?=\s|$)/.exec(said.join(" "))?.[0] ?? said.join(" ");
}

/** A plausible past for a finished set: the bare machine, then what is taken from it, then what must hold. */
function historyOf(files: Texts): DemoSet["versions"] {
  const versions = [
    {
      message: "Draft the machine: parameters, elements and bonds",
      files: without(files, /^\s*(output|expect)\b/),
    },
    { message: "Name the outputs that the controls engineers take", files: without(files, /^\s*expect\b/) },
    { message: "State what must hold: order, dependent stores, loops", files },
  ];
  return versions.filter(({ files }, i) => i === 0 || !sameTexts(files, versions[i - 1].files));
}

function without(files: Texts, statement: RegExp): Texts {
  const strip = (text: string) =>
    text
      .split("\n")
      .filter((line) => !statement.test(line))
      .join("\n")
      .replace(/\n{2,}(?=[ \t]*\})/g, "\n");
  return new Map([...files].map(([path, text]) => [path, path.endsWith(".wright") ? strip(text) : text]));
}

function sameTexts(a: Texts, b: Texts): boolean {
  return a.size === b.size && [...a].every(([path, text]) => b.get(path) === text);
}

async function readTexts(folder: string): Promise<Texts> {
  const entries = await readdir(folder, { recursive: true, withFileTypes: true });
  const paths = entries
    .filter((entry) => entry.isFile() && !entry.name.startsWith("."))
    .map((entry) => join(entry.parentPath, entry.name))
    .sort();
  const texts = await Promise.all(paths.map((path) => readFile(path, "utf8")));
  return new Map(paths.map((path, i) => [path.slice(folder.length + 1).replaceAll("\\", "/"), texts[i]]));
}
