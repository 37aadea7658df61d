import { readdirSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { type FileSet, fileSet } from "../../grammar/source/text.ts";

/** A finding that a case expects, as `README.md` describes. */
export interface ExpectedFinding {
  readonly file: string;
  /** 1-based. */
  readonly line: number;
  readonly name: string;
  readonly excerpt: string;
  columns: { readonly start: number; readonly end: number } | null;
  readonly facts: string[];
  fixed: string | null;
}

export interface ExpectedEquation {
  readonly kind: "equation" | "output";
  readonly left: string;
  readonly right: string;
}

export interface Case {
  readonly name: string;
  readonly files: FileSet;
  readonly findings: readonly ExpectedFinding[];
  readonly equations: readonly ExpectedEquation[];
}

export const MAIN_FILE = "case.wright";

const ROOT = fileURLToPath(new URL(".", import.meta.url));

export function stages(): string[] {
  return readdirSync(ROOT, { withFileTypes: true }).flatMap((entry) =>
    entry.isDirectory() ? [entry.name] : [],
  );
}

export function casesOf(stage: string): Case[] {
  const names = readdirSync(`${ROOT}${stage}`).filter((name) => name.endsWith(".wright"));
  return names.sort().map((name) => readCase(name, readFileSync(`${ROOT}${stage}/${name}`, "utf8")));
}

export function readCase(name: string, text: string): Case {
  const findings: ExpectedFinding[] = [];
  const equations: ExpectedEquation[] = [];
  const files: [string, string[]][] = [[MAIN_FILE, []]];
  let spoken = 0;
  for (const row of text.split("\n")) {
    const [file, rows] = files[files.length - 1];
    const [, sign, rest = ""] = /^\s*#([!\-:>]|\s*(?=\^))(.*)$/.exec(row) ?? [];
    const last = findings.at(-1);
    if (sign === ":" && rest.startsWith(" file ")) {
      files.push([rest.slice(6).trim(), []]);
      spoken = 0;
      continue;
    }
    rows.push(row);
    if (sign === undefined) spoken = rows.length;
    else if (sign === "!") {
      const [, finding, excerpt] = /^\s*(\S+)\s*(.*)$/.exec(rest) ?? [];
      findings.push({ file, line: spoken, name: finding, excerpt, columns: null, facts: [], fixed: null });
    } else if (sign === ":") {
      const [, kind, left, right] = /^ (equation|output) (\S+) = (.*)$/.exec(rest) ?? [];
      if (kind === undefined) throw new Error(`${name}: can't read ${row}`);
      equations.push({ kind: kind as "equation" | "output", left, right });
    } else if (last === undefined) throw new Error(`${name}: nothing stands above ${row}`);
    else if (sign === "-") last.facts.push(rest.trim());
    else if (sign === ">") last.fixed = rest.slice(1);
    else last.columns = { start: row.indexOf("^") + 1, end: row.lastIndexOf("^") + 2 };
  }
  return { name, files: fileSet(files.map(([path, rows]) => [path, rows.join("\n")])), findings, equations };
}
