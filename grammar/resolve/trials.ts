import { type Finding, finding } from "../diagnostics/finding.ts";
import { nearest } from "../diagnostics/nearest.ts";
import type { Trial, TrialStatement } from "../syntax/tree.ts";
import { type SourceFile, spanIn } from "./files.ts";
import { templateOf } from "./template.ts";

/**
 * Trials are read and their names looked up. That they are not run is a note, not an error: a model with trials
 * is a valid model, and what a trial demands is told apart as not judged.
 */
export function checkTrials(file: SourceFile): Finding[] {
  const findings: Finding[] = [];
  const names = new Map<string, Trial>();
  for (const trial of file.tree.items) {
    if (trial.kind !== "trial") continue;
    const { name } = trial;
    if (names.has(name.text)) {
      findings.push(
        finding("duplicate-name", spanIn(file, name.range), `A trial \`${name.text}\` is there already.`),
      );
    }
    names.set(name.text, trial);
    const before = findings.length;
    checkNames(file, trial, findings);
    if (findings.length > before) continue;
    findings.push({
      ...finding(
        "not-yet",
        spanIn(file, name.range),
        `The trial \`${name.text}\` is read, but trials are not yet run.`,
      ),
      severity: "note",
    });
  }
  return findings;
}

function checkNames(file: SourceFile, trial: Trial, findings: Finding[]): void {
  const unknown = (
    range: { start: number; end: number },
    message: string,
    name: string,
    known: Iterable<string>,
  ) => {
    const meant = nearest(name, known);
    const span = spanIn(file, range);
    findings.push(
      meant === null
        ? finding("unknown-name", span, message)
        : finding("unknown-name", span, `${message} Is \`${meant}\` meant?`, {
            fix: { title: `Write ${meant}`, edits: [{ span, text: meant }] },
          }),
    );
  };
  const { text, range } = trial.system;
  const placed = file.visible.systems.get(text);
  if (placed === undefined) {
    if (file.missing === true || file.missing.has(text)) return;
    unknown(range, `There is no system \`${text}\`.`, text, file.visible.systems.keys());
    return;
  }
  const { statements } = templateOf(placed.item);
  if (statements.some(({ kind }) => kind === "unreadable")) return;
  for (const statement of trial.body) {
    const wanted = wantedName(statement);
    if (wanted === null || wanted.reference.path.length > 1) continue;
    const known = statements.flatMap((one) =>
      wanted.kinds.includes(one.kind) && "name" in one && "text" in one.name ? [one.name.text] : [],
    );
    const { name, range: at } = wanted.reference.path[0];
    if (!known.includes(name.text))
      unknown(at, `${text} has no ${wanted.kinds[0]} \`${name.text}\`.`, name.text, known);
  }
}

function wantedName(statement: TrialStatement) {
  switch (statement.kind) {
    case "set":
    case "vary":
      return { reference: statement.name, kinds: ["param"] };
    case "drive":
      return { reference: statement.input, kinds: ["input"] };
    default:
      return null;
  }
}
