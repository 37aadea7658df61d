import { findingsOf } from "../../grammar/writing/json.ts";
import { type CheckRun, stops } from "../check-run.ts";
import { findingText, summaryText } from "./findings.ts";
import type { Paint } from "./print.ts";

/** What a person reads: every finding with its line, how many there were, and where to read on. */
export function textReport(run: CheckRun, paint: Paint): string {
  const { checked, quiet, fingerprints } = run;
  const shown = findingsOf(checked).filter(({ found }) => !quiet || stops(found, run));
  const blocks = shown.map(({ found, from }) => findingText(found, from, paint, fingerprints));
  if (!quiet) blocks.push(summaryText(checked), ...moreText(shown));
  return blocks.length === 0 ? "" : `${blocks.join("\n")}\n`;
}

/** Where to read on about the gravest finding; notes speak for themselves. */
function moreText(shown: ReturnType<typeof findingsOf>): string[] {
  const [gravest] = (["error", "warning"] as const).flatMap((severity) =>
    shown.filter(({ found }) => found.severity === severity && found.accepted === undefined),
  );
  return gravest === undefined ? [] : [`\`bondwright explain ${gravest.found.name}\` tells more.`];
}
