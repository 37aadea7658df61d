import type { Fact, Finding } from "../../grammar/diagnostics/finding.ts";
import { type CheckedFile, findingsOf } from "../../grammar/writing/json.ts";
import { inert, type Paint } from "./print.ts";

/**
 * Findings for people: a line that says all (place, severity, name, message), then for errors and warnings the line
 * of the text with a mark under it, what led there, and how to mend it.
 */
export function findingText(
  found: Finding,
  from: CheckedFile,
  paint: Paint,
  withFingerprint = false,
): string {
  const { severity, name, message, facts, fix, fingerprint, accepted } = found;
  const known = withFingerprint && fingerprint !== undefined ? [`       fingerprint ${fingerprint}`] : [];
  if (accepted !== undefined) {
    const { owner, until, reason } = accepted;
    return [
      `${placeOf(found.span, from)}  accepted ${severity}  ${name}  ${inert(message)}`,
      `       by ${inert(owner)} until ${until}: ${inert(reason)}`,
      ...known,
    ].join("\n");
  }
  const lines = [
    `${placeOf(found.span, from)}  ${paint(severity, severity)}  ${name}  ${paint("strong", inert(message))}`,
  ];
  if (severity !== "note") lines.push(...frame(found, from, paint));
  for (const fact of facts) lines.push(`       - ${factText(fact, from)}`);
  if (fix !== undefined) lines.push(`       ${paint("good", "mend:")} ${inert(fix.title)}`);
  return [...lines, ...known].join("\n");
}

export function placeOf({ file, start }: Finding["span"], { files, shown }: CheckedFile): string {
  const { line, column } = files.get(file)?.position(start) ?? { line: 1, column: 1 };
  return `${inert(shown(file))}:${line}:${column}`;
}

function factText({ message, span }: Fact, from: CheckedFile): string {
  if (span === undefined) return inert(message);
  return `${inert(message)} (${placeOf(span, from)})`;
}

/** Columns of a line that are shown: what is longer is cut round the mark. */
const WIDTH = 110;

function frame({ span, severity }: Finding, { files }: CheckedFile, paint: Paint): string[] {
  const source = files.get(span.file);
  if (source === undefined) return [];
  const { line, column } = source.position(span.start);
  const text = source.line(line);
  const cut = column > WIDTH ? column - WIDTH / 2 : 0;
  const start = column - 1 - cut;
  const visible = inert(text.slice(cut, cut + WIDTH));
  const length = Math.min(Math.max(span.end - span.start, 1), Math.max(visible.length - start, 1));
  const number = String(line).padStart(5);
  const lead = `${paint("quiet", `${number} |`)} ${cut > 0 ? "…" : ""}`;
  const more = text.length > cut + WIDTH ? "…" : "";
  const indent = " ".repeat(start + (cut > 0 ? 1 : 0));
  return [
    `${lead}${visible}${more}`,
    `${paint("quiet", "      |")} ${indent}${paint(severity, "^".repeat(length))}`,
  ];
}

/** The closing line of a check: `2 files, 3 systems: 1 error, no warnings, 2 notes; 3 requirements met, 1 not judged`. */
export function summaryText(checked: readonly CheckedFile[]): string {
  const findings = findingsOf(checked);
  const open = findings.filter(({ found }) => found.accepted === undefined);
  const count = (severity: string) => open.filter(({ found }) => found.severity === severity).length;
  const systems = checked.flatMap(({ report }) => report.systems);
  const results = systems.flatMap(({ expectations }) => expectations);
  const counts = [
    some(count("error"), "error"),
    some(count("warning"), "warning"),
    some(count("note"), "note"),
  ];
  if (open.length < findings.length) counts.push(`${findings.length - open.length} accepted`);
  const found = counts.join(", ");
  const head = `${some(checked.length, "file")}, ${some(systems.length, "system")}: ${found}`;
  if (results.length === 0) return `${head}.`;
  const met = results.filter(({ passed }) => passed).length;
  const failed = results.filter(({ passed, judged }) => judged && !passed).length;
  const unjudged = results.length - met - failed;
  const parts = [`${met} of ${some(results.length, "requirement")} met`];
  if (failed > 0) parts.push(`${failed} failed`);
  if (unjudged > 0) parts.push(`${unjudged} not judged`);
  return `${head}; ${parts.join(", ")}.`;
}

export function some(count: number, what: string): string {
  return `${count === 0 ? "no" : count} ${what}${count === 1 ? "" : "s"}`;
}
