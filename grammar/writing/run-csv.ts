import type { TrialReport } from "../expectations/judge-trial.ts";
import { unitOfSI } from "./json.ts";

/** The samples of a run as comma-separated values (RFC 4180), in SI, one row a time. */
export function runCsv({ signals, result }: TrialReport): string {
  const head = ["time [s]", ...signals.map(({ name, unit }) => `${name} [${unitOfSI(unit)}]`)].map(cell);
  const rows = (result?.times ?? []).map((time, row) => [
    String(time),
    ...signals.map((_, i) => String(result?.samples[i][row])),
  ]);
  return [head, ...rows].map((cells) => cells.join(",")).join("\r\n");
}

/** A text that a spreadsheet would take for a formula begins with an apostrophe. */
function cell(text: string): string {
  const inert = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(inert) ? `"${inert.replaceAll('"', '""')}"` : inert;
}
