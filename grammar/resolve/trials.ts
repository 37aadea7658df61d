import { type Finding, finding } from "../diagnostics/finding.ts";
import { nearest } from "../diagnostics/nearest.ts";
import type { Trial } from "../syntax/tree.ts";
import { type SourceFile, spanIn } from "./files.ts";
import type { FlatTrial } from "./flat-trial.ts";
import type { FlatGraph } from "./graph.ts";
import type { Translator } from "./translate.ts";
import { flatTrial } from "./trial.ts";

/** What a trial needs of the system it runs: worked out, with its names still open to be looked up. */
export interface RunnableSystem {
  readonly graph: FlatGraph | null;
  readonly translator: Translator | null;
}

/** Every trial of a file, with the findings in its own text; a refused system's findings stand elsewhere. */
export function resolveTrials(
  file: SourceFile,
  systemOf: (name: string) => RunnableSystem | null,
): { trials: FlatTrial[]; findings: Finding[] } {
  const findings: Finding[] = [];
  const trials: FlatTrial[] = [];
  const names = new Set<string>();
  for (const trial of file.tree.items) {
    if (trial.kind !== "trial") continue;
    const { name } = trial;
    if (names.has(name.text)) {
      findings.push(
        finding("duplicate-name", spanIn(file, name.range), `A trial \`${name.text}\` is there already.`),
      );
      continue;
    }
    names.add(name.text);
    const system = knownSystem(file, trial, findings) ? systemOf(trial.system.text) : null;
    const made = flatTrial(file, trial, system);
    findings.push(...made.findings);
    trials.push(made.trial);
  }
  return { trials, findings };
}

function knownSystem(file: SourceFile, { system }: Trial, findings: Finding[]): boolean {
  const { text, range } = system;
  if (file.visible.systems.has(text)) return true;
  if (file.missing === true || file.missing.has(text)) return false;
  const meant = nearest(text, file.visible.systems.keys());
  const span = spanIn(file, range);
  const message = `There is no system \`${text}\`.${meant === null ? "" : ` Is \`${meant}\` meant?`}`;
  const fix = meant === null ? undefined : { title: `Write ${meant}`, edits: [{ span, text: meant }] };
  findings.push(finding("unknown-name", span, message, { fix }));
  return false;
}
