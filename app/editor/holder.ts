import type { FileView, OutlineEntry } from "./view-model.ts";

/** The system or trial whose braces hold the line. */
export function holderAt(view: FileView, line: number): OutlineEntry | null {
  const holds = ({ space, within, place, lastLine }: OutlineEntry) =>
    within === null &&
    (space === "system" || space === "trial") &&
    place.file === view.path &&
    place.line <= line &&
    line <= lastLine;
  return view.outline.find(holds) ?? null;
}
