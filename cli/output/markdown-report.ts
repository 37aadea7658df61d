import { findingsOf } from "../../grammar/writing/json.ts";
import type { CheckRun } from "../check-run.ts";
import { placeOf, summaryText } from "./findings.ts";
import { inert } from "./print.ts";

/** Rows of a table: merge pages refuse what is too long, and nobody reads it. */
const ROWS = 50;

const SEVERITIES = ["error", "warning", "note"] as const;

/** A summary for the page of a merge request: the verdict, what was found, which requirements are met. */
export function markdownReport(run: CheckRun): string {
  const blocks = [
    `## Bondwright check: ${run.passed ? "passed" : "**failed**"}`,
    markdownText(summaryText(run.checked)),
    ...findingsTable(run),
    ...requirementsTable(run),
    "Derived from the models as written; not a substitute for testing, for the safety standards and codes that apply, or for the judgement of a licensed engineer.",
  ];
  return `${blocks.join("\n\n")}\n`;
}

function findingsTable({ checked }: CheckRun): string[] {
  const all = findingsOf(checked);
  const open = all.filter(({ found }) => found.accepted === undefined);
  const rows = SEVERITIES.flatMap((severity) =>
    open
      .filter(({ found }) => found.severity === severity)
      .map(({ found, from }) => [
        code(placeOf(found.span, from)),
        severity,
        code(found.name),
        markdownText(found.message),
      ]),
  );
  const accepted = all.flatMap(({ found, from }) =>
    found.accepted === undefined
      ? []
      : [
          [
            code(placeOf(found.span, from)),
            code(found.name),
            markdownText(found.accepted.owner),
            found.accepted.until,
            markdownText(found.accepted.reason),
          ],
        ],
  );
  return [
    ...table("Findings", ["Place", "Severity", "Finding", "What is wrong"], rows),
    ...table("Accepted", ["Place", "Finding", "Owner", "Until", "Reason"], accepted),
  ];
}

function requirementsTable({ checked }: CheckRun): string[] {
  const results = checked.flatMap(({ report }) => report.systems.flatMap(({ expectations }) => expectations));
  const rank = ({ judged, passed }: (typeof results)[number]) => (passed ? 2 : judged ? 0 : 1);
  const rows = results
    .sort((a, b) => rank(a) - rank(b))
    .map(({ system, trial, text, measured, judged, passed }) => [
      passed ? "met" : judged ? "**failed**" : "not judged",
      code(trial === null ? system : `${system}, ${trial}`),
      code(text),
      measured === null ? "" : code(measured),
    ]);
  return table("Requirements", ["Result", "System", "Requirement", "Measured"], rows);
}

function table(title: string, head: readonly string[], rows: readonly (readonly string[])[]): string[] {
  if (rows.length === 0) return [];
  const lines = [head, head.map(() => "---"), ...rows.slice(0, ROWS)].map(
    (cells) => `| ${cells.join(" | ")} |`,
  );
  const more = rows.length > ROWS ? [`… and ${rows.length - ROWS} more.`] : [];
  return [`### ${title}`, lines.join("\n"), ...more];
}

/** A sentence of ours with code between backquotes; what a model put into it is text and nothing else. */
function markdownText(sentence: string): string {
  return sentence
    .split(/`([^`]*)`/)
    .map((part, index) => (index % 2 === 1 ? code(part) : prose(part)))
    .join("");
}

/** As a tag, since its inside can be escaped: between backquotes nothing can. */
function code(text: string): string {
  return text === "" ? "" : `<code>${escaped(text)}</code>`;
}

/** In prose a word joiner comes after what sites act on once the page is made: mentions, references, addresses. */
function prose(text: string): string {
  return escaped(text.replace(/[@#!]|www\.|:\/\//gi, (found) => `${found[0]}\u2060${found.slice(1)}`));
}

/** Signs that Markdown or HTML would act on, as character references; an address is no link. */
function escaped(text: string): string {
  return inert(text).replace(
    /[&<>`|*_~[\]\\@#!$]|:(?=\/)|(?<=\bwww)\./gi,
    (sign) => `&#${sign.charCodeAt(0)};`,
  );
}
