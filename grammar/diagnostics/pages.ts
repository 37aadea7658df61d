import { FINDINGS, type FindingName, type Severity } from "./finding.ts";

/** The pages as they are written, by path; inlined where they are bundled, so that none is read at run time. */
const TEXTS = import.meta.glob<string>("./explain/*.md", { query: "?raw", import: "default", eager: true });

/** What a page tells about a finding. */
export interface FindingPage {
  readonly name: FindingName;
  readonly severity: Severity;
  /** In one paragraph, what it says. */
  readonly what: string;
  /** The whole page in Markdown, without its heading. */
  readonly text: string;
  readonly examples: readonly FindingExample[];
}

export interface FindingExample {
  /** The failing one has the finding, the mended one does not. */
  readonly role: "failing" | "mended";
  /** Rests on a stage that is not there yet: it is read, but shows its finding only in a later version. */
  readonly later: boolean;
  readonly code: string;
}

const EXAMPLE = /^```wright (failing|mended)( later)?\n([\s\S]*?)^```$/gm;

/** The page of a finding; null where none is written, which a test refuses. */
export function pageOf(name: FindingName): FindingPage | null {
  const written = TEXTS[`./explain/${name}.md`];
  if (written === undefined) return null;
  const text = written.replace(/^# .*\n+/, "");
  const examples = [...text.matchAll(EXAMPLE)].map(([, role, later, code]) => ({
    role: role as FindingExample["role"],
    later: later !== undefined,
    code,
  }));
  return { name, severity: FINDINGS[name], what: text.slice(0, text.indexOf("\n\n")), text, examples };
}

export function isFindingName(name: string): name is FindingName {
  return Object.hasOwn(FINDINGS, name);
}

/** Names that have a page, in whatever order the bundler gives. */
export function pageNames(): string[] {
  return Object.keys(TEXTS).map((path) => path.slice("./explain/".length, -".md".length));
}
