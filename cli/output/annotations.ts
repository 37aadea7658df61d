import { findingsOf } from "../../grammar/writing/json.ts";
import { type CheckRun, stops } from "../check-run.ts";
import { placeOf } from "./findings.ts";
import { inert } from "./print.ts";

/** A line a finding, `path:line:column: severity: message [name]`: what build machines and editors look for. */
export function annotationsReport(run: CheckRun): string {
  return findingsOf(run.checked)
    .filter(({ found }) => found.accepted === undefined && (!run.quiet || stops(found, run)))
    .map(({ found, from }) => {
      const { severity, message, name, span } = found;
      return `${placeOf(span, from)}: ${severity}: ${inert(message)} [${name}]\n`;
    })
    .join("");
}
