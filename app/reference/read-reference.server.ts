import { type FindingPage, isFindingName, pageOf } from "../../grammar/diagnostics/pages.ts";
import { refuse } from "../session/refusal.server.ts";
import { type Rendered, renderMarkdown } from "./render.server.ts";

const TEXTS = import.meta.glob<string>("../../grammar/reference/*.md", {
  query: "?raw",
  import: "default",
  eager: true,
});

const INDEX = `# Findings

Every finding has a name that never changes, a severity, a place in the text, one sentence, the facts that led to it, and where there is one, a fix. A set's checks fail on errors; notes fail nothing.

<!-- findings -->
`;

let reference: Rendered | undefined;

/** The whole reference of the notation, its chapters in their order and the index of findings last. */
export function readReference(): Rendered {
  const chapters = Object.keys(TEXTS).sort();
  reference ??= renderMarkdown([...chapters.map((path) => TEXTS[path]), INDEX].join("\n\n"));
  return reference;
}

/** The page of one finding; 404 where there is none of that name. */
export function readFindingPage(name: string): Pick<FindingPage, "name" | "severity"> & { html: string } {
  const page = isFindingName(name) ? pageOf(name) : null;
  if (page === null) refuse(404, "There is no finding of this name; the reference lists them all.");
  return { name: page.name, severity: page.severity, html: renderMarkdown(page.text).html };
}
