import type { SystemReport } from "../../grammar/pipeline.ts";
import type { TextSection } from "../../grammar/writing/system-text.ts";
import { inert, type Paint } from "./print.ts";

/** A report on one system: its name and what it is, then the sections, indented under their titles. */
export function sectionsText(
  { system, graph }: SystemReport,
  sections: readonly TextSection[],
  paint: Paint,
): string {
  const about = graph?.description ? `: ${inert(graph.description.split("\n")[0])}` : "";
  const blocks = sections.map(({ title, lines }) =>
    [paint("strong", title), ...lines.map((line) => `  ${inert(line)}`)].join("\n"),
  );
  return [`${paint("strong", inert(system))}${about}`, ...blocks].join("\n\n");
}
