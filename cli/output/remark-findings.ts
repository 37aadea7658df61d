import type { SystemReport } from "../../grammar/pipeline.ts";
import type { CheckedFile } from "../../grammar/writing/json.ts";
import { findingText } from "./findings.ts";
import { type ColourChoice, paintFor, remark } from "./print.ts";

/** What beside a report must not be missed: all that refused the system, or else its errors and warnings. */
export function remarkFindings(from: CheckedFile, system: SystemReport | null, color: ColourChoice): void {
  const paint = paintFor(color, process.stderr);
  const refused = system?.model == null;
  for (const found of from.report.findings) {
    if (refused ? found.severity === "error" : found.severity !== "note")
      remark(findingText(found, from, paint));
  }
}
