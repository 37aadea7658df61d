/** Writing to people's terminals: colours by their wish, and nothing from a model that a terminal would obey. */
export type ColourChoice = "auto" | "always" | "never";

export type Paint = (style: Style, text: string) => string;

export type Style = "error" | "warning" | "note" | "strong" | "quiet" | "good";

const CODES: Record<Style, string> = {
  error: "1;31",
  warning: "1;33",
  note: "1;36",
  strong: "1",
  quiet: "2",
  good: "32",
};

/** NO_COLOR (https://no-color.org) and a dumb terminal mean none, unless the argument asks for colours. */
export function paintFor(choice: ColourChoice, stream: NodeJS.WriteStream = process.stdout): Paint {
  const plain = Boolean(process.env.NO_COLOR) || process.env.TERM === "dumb" || stream.isTTY !== true;
  const coloured = choice === "always" || (choice === "auto" && !plain);
  return (style, text) => (coloured ? `\u001b[${CODES[style]}m${text}\u001b[0m` : text);
}

// biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is looked for.
const OBEYED = /[\u0000-\u0008\u000a-\u001f\u007f-\u009f\u2028\u2029\u200e\u200f\u202a-\u202e\u2066-\u2069]/g;

/** What some build machines obey wherever it stands in a line: `##vso[`, `##[`, `##teamcity[` and their like. */
const COMMAND = /##(?=[a-z]*\[)/gi;

/**
 * Text of a model on one line: control and direction characters show as replacement characters, tabs as blanks, and
 * what begins a command for a build machine loses its second sign.
 */
export function inert(text: string): string {
  return text.replace(OBEYED, "\ufffd").replaceAll("\t", " ").replace(COMMAND, "#\ufffd");
}

/** What JSON lets stand in a text though a terminal may obey it. */
const OBEYED_IN_JSON = /[\u007f-\u009f\u2028\u2029\u200e\u200f\u202a-\u202e\u2066-\u2069]/g;

/** JSON that means the same and holds nothing that a terminal or a build machine would obey. */
export function inertJson(document: unknown): string {
  const text = JSON.stringify(document, null, 2)
    .replace(COMMAND, "#\\u0023")
    .replace(OBEYED_IN_JSON, (sign) => `\\u${sign.charCodeAt(0).toString(16).padStart(4, "0")}`);
  return `${text}\n`;
}

/** The report of a command, and the only thing that it may write to standard output. */
export function print(text: string): void {
  process.stdout.write(text.endsWith("\n") ? text : `${text}\n`);
}

/** What is not part of the report. */
export function remark(text: string): void {
  process.stderr.write(`${text}\n`);
}
