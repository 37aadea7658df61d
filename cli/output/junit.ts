import type { Finding } from "../../grammar/diagnostics/finding.ts";
import type { ExpectationResult } from "../../grammar/expectations/result.ts";
import { findingsOf } from "../../grammar/writing/json.ts";
import { type CheckedOnDisk, type CheckRun, stops } from "../check-run.ts";
import { findingText } from "./findings.ts";
import { inert } from "./print.ts";
import { xmlAttributes, xmlText } from "./xml.ts";

interface Case {
  readonly of: string;
  readonly name: string;
  readonly outcome: "passed" | "failed" | "skipped";
  readonly message: string;
  readonly detail: string;
}

/** The report as JUnit XML: a suite a file; in it a case for its findings, and one for each of its requirements. */
export function junitReport(run: CheckRun): string {
  const names = new Set<string>();
  const stopping = stoppingByFile(run);
  const suites = run.checked.map((checked, id) =>
    suiteText(checked, casesOf(checked, stopping.get(checked) ?? [], run, names), id, run),
  );
  return `<?xml version="1.0" encoding="UTF-8"?>\n<testsuites>\n${suites.join("")}</testsuites>\n`;
}

type Located = { readonly found: Finding; readonly from: CheckedOnDisk };

/**
 * What makes the check fail, by the file that it stands in, or where that was not checked itself, by the file whose
 * check showed it. A failed requirement has a case of its own.
 */
function stoppingByFile(run: CheckRun): Map<CheckedOnDisk, Located[]> {
  const owners = new Map(run.checked.map((each) => [each.shown(each.report.path), each]));
  const grouped = new Map<CheckedOnDisk, Located[]>();
  for (const { found, from } of findingsOf(run.checked) as Located[]) {
    if (!stops(found, run) || found.name === "expectation-failed") continue;
    const owner = owners.get(from.shown(found.span.file)) ?? from;
    const own = grouped.get(owner) ?? [];
    grouped.set(owner, own);
    own.push({ found, from });
  }
  return grouped;
}

function casesOf(
  { report, shown }: CheckedOnDisk,
  stopping: readonly Located[],
  { failOn }: CheckRun,
  names: Set<string>,
): Case[] {
  const file = inert(shown(report.path))
    .replace(/\.wright$/, "")
    .replace(/^(\.\.?\/)+/, "")
    .replaceAll("/", ".");
  const name = failOn === "error" ? "no errors" : `no findings of severity ${failOn} or over`;
  const first: Case = {
    of: file,
    name,
    outcome: stopping.length === 0 ? "passed" : "failed",
    message: stopping.map(({ found }) => `${found.name}: ${inert(found.message)}`).join("; "),
    detail: stopping.map(({ found, from }) => findingText(found, from, (_, text) => text)).join("\n"),
  };
  const results = report.systems.flatMap(({ expectations }) => expectations);
  return [first, ...results.map((result) => requirementCase(result, file))].map((each) => ({
    ...each,
    name: unused(each, names),
  }));
}

function requirementCase(result: ExpectationResult, file: string): Case {
  const { system, trial, text, judged, passed, wanted, measured, message } = result;
  const said = message ?? `wanted ${wanted}, measured ${measured ?? "nothing"}`;
  return {
    of: [file, inert(system), ...(trial === null ? [] : [inert(trial)])].join("."),
    name: inert(text).replace(/\s+/g, " ").trim(),
    outcome: !judged ? "skipped" : passed ? "passed" : "failed",
    message: inert(said),
    detail: `wanted: ${inert(wanted)}\nmeasured: ${inert(measured ?? "nothing")}`,
  };
}

/** A name that no other case of the same class has. */
function unused({ of, name }: Case, names: Set<string>): string {
  let free = name;
  for (let count = 2; names.has(`${of}\n${free}`); count++) free = `${name} (${count})`;
  names.add(`${of}\n${free}`);
  return free;
}

function suiteText(
  { report, shown, seconds }: CheckedOnDisk,
  cases: readonly Case[],
  id: number,
  { startedAt }: CheckRun,
): string {
  const attributes = {
    id,
    name: inert(shown(report.path)),
    package: "bondwright",
    timestamp: startedAt.toISOString().slice(0, 19),
    hostname: "localhost",
    tests: cases.length,
    failures: cases.filter(({ outcome }) => outcome === "failed").length,
    errors: 0,
    skipped: cases.filter(({ outcome }) => outcome === "skipped").length,
    time: seconds.toFixed(3),
  };
  const lines = [
    `  <testsuite${xmlAttributes(attributes)}>`,
    "    <properties/>",
    ...cases.map((each, index) => caseText(each, index === 0 ? seconds : 0)),
    "    <system-out/>",
    "    <system-err/>",
    "  </testsuite>",
  ];
  return `${lines.join("\n")}\n`;
}

function caseText({ of, name, outcome, message, detail }: Case, seconds: number): string {
  const head = `    <testcase${xmlAttributes({ classname: of, name, time: seconds.toFixed(3) })}`;
  if (outcome === "passed") return `${head}/>`;
  if (outcome === "skipped") return `${head}><skipped${xmlAttributes({ message })}/></testcase>`;
  const failure = `<failure${xmlAttributes({ type: "finding", message })}>${xmlText(detail)}</failure>`;
  return `${head}>${failure}</testcase>`;
}
