import { type Finding, type FindingName, finding } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";

/** What is wrong with a statement, as the parser sees it: a finding that does not know its file yet. */
export interface Mistake {
  readonly name: FindingName;
  readonly range: Range;
  readonly message: string;
  readonly facts?: readonly { readonly message: string; readonly range: Range }[];
  /** The text that would stand right, and where. */
  readonly mend?: { readonly range: Range; readonly text: string };
}

export function toFinding({ name, range, message, facts = [], mend }: Mistake, file: string): Finding {
  const told = facts.map((fact) => ({ message: fact.message, span: { file, ...fact.range } }));
  if (mend === undefined) return finding(name, { file, ...range }, message, { facts: told });
  const edits = [{ span: { file, ...mend.range }, text: mend.text }];
  const fix = { title: `Write \`${mend.text.trim()}\``, edits };
  return finding(name, { file, ...range }, message, { facts: told, fix });
}
