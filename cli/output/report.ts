import type { CheckRun } from "../check-run.ts";
import type { ReportForm } from "./forms.ts";
import type { Paint } from "./print.ts";

/** The whole text of a report; each form is loaded when it is asked for. */
export async function reportText(run: CheckRun, form: ReportForm, paint: Paint): Promise<string> {
  switch (form) {
    case "text":
      return (await import("./text-report.ts")).textReport(run, paint);
    case "json":
      return (await import("./json-report.ts")).jsonReport(run);
    case "sarif":
      return (await import("./sarif.ts")).sarifReport(run);
    case "junit":
      return (await import("./junit.ts")).junitReport(run);
    case "markdown":
      return (await import("./markdown-report.ts")).markdownReport(run);
    case "annotations":
      return (await import("./annotations.ts")).annotationsReport(run);
  }
}
