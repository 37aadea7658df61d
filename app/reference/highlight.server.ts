import { notationTokens } from "../editor/notation/tokens.ts";
import { escapeHtml } from "./escape-html.ts";

type Rule = readonly [pattern: RegExp, tokens: string | readonly string[]];

/** The rules of the editor's highlighter, to be tried at one place of a line; those from its start only there. */
const RULES = (notationTokens.tokenizer.root as unknown as readonly Rule[]).map(([pattern, tokens]) => ({
  pattern: new RegExp(pattern.source, "uy"),
  tokens,
}));

/** Notation as HTML, coloured as in the editor by the same rules. */
export function notationHtml(text: string): string {
  return text.split("\n").map(lineHtml).join("\n");
}

function lineHtml(line: string): string {
  let html = "";
  for (let at = 0; at < line.length; ) {
    const { text, parts } = matchAt(line, at);
    html += parts.map(([token, part]) => spanHtml(token, part)).join("");
    at += text.length;
  }
  return html;
}

function matchAt(line: string, at: number): { text: string; parts: readonly (readonly [string, string])[] } {
  for (const { pattern, tokens } of RULES) {
    pattern.lastIndex = at;
    const match = pattern.exec(line);
    if (match === null || match[0] === "") continue;
    const [text, ...groups] = match;
    if (typeof tokens === "string") return { text, parts: [[tokens, text]] };
    return { text, parts: tokens.map((token, index) => [token, groups[index] ?? ""]) };
  }
  const text = String.fromCodePoint(line.codePointAt(at) as number);
  return { text, parts: [["", text]] };
}

function spanHtml(token: string, text: string): string {
  const escaped = escapeHtml(text);
  if (token === "" || token === "name" || token === "delimiter") return escaped;
  return `<span class="${token.replace(".", " ")}">${escaped}</span>`;
}
