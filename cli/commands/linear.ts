import { Analysis } from "../../grammar/analysis/analyse.ts";
import { atLeast } from "../../grammar/diagnostics/finding.ts";
import { findingsOn, linearDocument } from "../../grammar/writing/linear-json.ts";
import { linearText } from "../../grammar/writing/linear-text.ts";
import { oneSystem } from "../one-system.ts";
import { findingText } from "../output/findings.ts";
import { type ColourChoice, paintFor, print, remark } from "../output/print.ts";
import { remarkFindings } from "../output/remark-findings.ts";
import { sectionsText } from "../output/sections.ts";
import { pointFrom } from "../point-file.ts";

export interface LinearArguments {
  readonly format: "text" | "json";
  readonly at?: string;
  readonly system?: string;
  readonly sensitivity?: boolean;
  readonly color: ColourChoice;
  readonly stdinName: string;
}

/** Prints the linear model of one system. 1 where the system is refused or can't be linearised. */
export function linear(file: string, options: LinearArguments): number {
  const { from, system } = oneSystem(file, options);
  const model = system?.model ?? null;
  const analysis =
    model === null
      ? null
      : options.at === undefined
        ? new Analysis(model)
        : Analysis.at(model, pointFrom(options.at, model));
  const found = findingsOn(analysis);
  if (options.format === "json") {
    const sensitivity = options.sensitivity === true;
    print(JSON.stringify(linearDocument(from, system, analysis, { sensitivity }), null, 2));
  } else {
    if (system !== null && analysis !== null && analysis.linear.kind === "linear") {
      const sections = linearText(analysis, analysis.linear, options.sensitivity === true);
      print(sectionsText(system, sections, paintFor(options.color)));
    }
    remarkFindings(from, system, options.color);
    for (const one of found) remark(findingText(one, from, paintFor(options.color, process.stderr)));
  }
  const refused =
    analysis === null ||
    from.report.findings.some(({ severity, name }) => severity === "error" && !JUDGED.has(name));
  return refused || found.some(({ severity }) => atLeast(severity, "error")) ? 1 : 0;
}

/** A requirement that is not met says nothing against the linear model. */
const JUDGED: ReadonlySet<string> = new Set(["expectation-failed"]);
