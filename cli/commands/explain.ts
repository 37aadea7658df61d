import { FINDINGS, type FindingName } from "../../grammar/diagnostics/finding.ts";
import { nearest } from "../../grammar/diagnostics/nearest.ts";
import { type FindingPage, isFindingName, pageOf } from "../../grammar/diagnostics/pages.ts";
import { type ColourChoice, inert, type Paint, paintFor, print } from "../output/print.ts";
import { terminalText } from "../output/terminal-text.ts";
import { WrongUse } from "../wrong-use.ts";

export interface ExplainArguments {
  readonly color: ColourChoice;
}

/** Prints the page of a finding; without a name, what each finding says, errors first. */
export function explain(name: string | undefined, { color }: ExplainArguments): number {
  const paint = paintFor(color);
  if (name === undefined) print(listText(paint));
  else if (isFindingName(name)) print(pageText(pageFor(name), paint));
  else throw new WrongUse(unknownText(name));
  return 0;
}

const NAMES = Object.keys(FINDINGS) as FindingName[];

function pageFor(name: FindingName): FindingPage {
  const page = pageOf(name);
  if (page === null) throw new Error(`${name} has no page`);
  return page;
}

/** The nearest name, and those that share a word with what was asked. */
function unknownText(name: string): string {
  const close = nearest(name, NAMES);
  const words = name.split(/[^a-z]+/i).filter((word) => word.length > 3);
  const alike = NAMES.filter((each) => each.split("-").some((word) => words.includes(word)));
  const meant = [...new Set(close === null ? alike : [close, ...alike])];
  const offer = meant.length === 0 ? "" : ` Is ${meant.join(" or ")} meant?`;
  return `There is no finding ${inert(name)}.${offer} \`bondwright explain\` lists them all.`;
}

const TITLES = { error: "Errors", warning: "Warnings", note: "Notes" } as const;

function listText(paint: Paint): string {
  const column = Math.max(...NAMES.map(({ length }) => length)) + 2;
  const blocks = (["error", "warning", "note"] as const).map((severity) => {
    const own = NAMES.filter((name) => FINDINGS[name] === severity);
    const entries = own.map((name) => terminalText(pageFor(name).what, name.padEnd(column)));
    return [paint(severity, TITLES[severity]), ...entries].join("\n");
  });
  return `${blocks.join("\n\n")}\n\n\`bondwright explain NAME\` shows the page of one of them.`;
}

function pageText({ name, severity, text }: FindingPage, paint: Paint): string {
  return `${paint("strong", name)}  ${paint(severity, severity)}\n\n${terminalText(text)}`;
}
