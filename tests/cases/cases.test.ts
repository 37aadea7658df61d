import { describe, expect, test } from "vitest";
import type { Finding } from "../../grammar/diagnostics/finding.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { SourceText } from "../../grammar/source/text.ts";
import { format, formatText } from "../../grammar/syntax/format.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import { meaning } from "../syntax/meaning.ts";
import { type Case, casesOf, type ExpectedFinding, MAIN_FILE, stages } from "./case.ts";
import { holds } from "./equation.ts";

/** Stages whose cases have a runner of their own. */
const ELSEWHERE = new Set(["causality"]);

for (const stage of stages().filter((name) => !ELSEWHERE.has(name))) {
  describe(stage, () => {
    for (const one of casesOf(stage)) {
      test(one.name, () => {
        const source = one.files.get(MAIN_FILE) as SourceText;
        const alone = stage === "syntax" || stage === "format";
        if (alone) compare(one, parse(source).findings);
        else {
          const report = checkFile(one.files, MAIN_FILE);
          compare(one, report.findings);
          for (const equation of one.equations) expect(holds(equation, report), equation.left).toBe("");
        }
        for (const file of one.files.values()) staysWhenFormatted(file);
        if (stage === "format") expect(formatText(source)).toBe(formatted(one));
      });
    }
  });
}

/** A text of `format` stays as it is, but `x.messy.wright` becomes `x.wright`. */
function formatted({ name, files }: Case): string | undefined {
  if (!name.endsWith(".messy.wright")) return files.get(MAIN_FILE)?.text;
  return casesOf("format")
    .find((other) => other.name === name.replace(".messy", ""))
    ?.files.get(MAIN_FILE)?.text;
}

function compare(one: Case, findings: readonly Finding[]): void {
  const open = [...one.findings];
  const unexpected: string[] = [];
  for (const finding of findings) {
    const at = open.findIndex((expected) => differences(one, expected, finding).length === 0);
    if (at !== -1) open.splice(at, 1);
    else if (finding.severity !== "note") unexpected.push(shown(one, finding));
  }
  const missing = open.map((expected) => {
    const near = findings
      .filter(({ name, span }) => name === expected.name && lineOf(one, span) === expected.line)
      .flatMap((finding) => differences(one, expected, finding));
    return `line ${expected.line}: ${expected.name} ${expected.excerpt}${near.length === 0 ? "" : ` (${near.join("; ")})`}`;
  });
  expect({ missing, unexpected }).toEqual({ missing: [], unexpected: [] });
}

function differences(
  one: Case,
  expected: ExpectedFinding,
  { name, message, span, facts, fix }: Finding,
): string[] {
  if (name !== expected.name || span.file !== expected.file) return [`is ${name} in ${span.file}`];
  const source = one.files.get(span.file) as SourceText;
  const start = source.position(span.start);
  const end = source.position(span.end);
  const wrong: string[] = [];
  if (start.line !== expected.line) wrong.push(`is on line ${start.line}`);
  if (!bare(message).includes(bare(expected.excerpt))) wrong.push(`says ${message}`);
  const { columns } = expected;
  if (
    columns !== null &&
    (start.column !== columns.start || end.column !== columns.end || end.line !== start.line)
  ) {
    wrong.push(`is at columns ${start.column} to ${end.column}`);
  }
  for (const fact of expected.facts) {
    if (!facts.some((known) => bare(known.message).includes(bare(fact)))) wrong.push(`has no fact ${fact}`);
  }
  if (expected.fixed !== null) {
    const lines = fix === undefined ? [] : mended(source, fix.edits).split("\n");
    if (!lines.some((line) => line.trim() === expected.fixed?.trim()))
      wrong.push(`has no fix to ${expected.fixed}`);
  }
  return wrong;
}

function mended(
  source: SourceText,
  edits: readonly { span: { start: number; end: number }; text: string }[],
): string {
  const backwards = [...edits].sort((a, b) => b.span.start - a.span.start);
  return backwards.reduce(
    (text, { span, text: by }) => text.slice(0, span.start) + by + text.slice(span.end),
    source.text,
  );
}

function lineOf(one: Case, span: Finding["span"]): number {
  return (one.files.get(span.file) as SourceText).position(span.start).line;
}

function bare(text: string): string {
  return text.replaceAll("`", "").trim();
}

function shown(one: Case, { name, message, span }: Finding): string {
  const { line, column } = (one.files.get(span.file) as SourceText).position(span.start);
  return `line ${line}, column ${column}: ${name} ${message}`;
}

function staysWhenFormatted(source: SourceText): void {
  const { tree } = parse(source);
  const once = new SourceText(source.path, format(tree, source));
  const again = parse(once).tree;
  expect(meaning(again, once)).toEqual(meaning(tree, source));
  expect(format(again, once)).toBe(once.text);
}
