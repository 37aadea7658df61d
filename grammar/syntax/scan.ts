import type { IToken, TokenType } from "chevrotain";
import { Comment, LineEnd, Name, NumberText, Remark, SIGNS, Slip, Strange, Text, WORDS } from "./tokens.ts";

const NAME = /[\p{L}_][\p{L}\p{M}\p{Nd}_]*/uy;
const BLANKS = /[^\S\r\n]+/y;
const STRANGE = /[^\p{L}\p{N}_\s!-~]+|[^\s]/uy;

/** What is neither a name nor one sign, in the order in which it is tried. */
const PATTERNS: readonly (readonly [RegExp, TokenType])[] = [
  [/\r?\n|\r/y, LineEnd],
  [/\d+(?:\.\d+)?(?:[eE][+-]?\d+)?/y, NumberText],
  [/#[^\r\n]*/y, Comment],
  [/--(?=[\s{}]|$)[^\r\n]*/y, Remark],
  [/--+>?|==+|!=|<>|&&|\|\||\*\*|:=|=>|\/\/|\+\+|<<|>>|\+=|-=/y, Slip],
  [/"[^"\r\n]*"/y, Text],
];

/** Signs that nothing longer begins with, by their code. */
const LONE_SIGNS: ReadonlyMap<number, TokenType> = new Map([
  [10, LineEnd],
  ...SIGNS.filter(([sign]) => "^,()[]{}%".includes(sign)).map(
    ([sign, type]) => [sign.charCodeAt(0), type] as const,
  ),
]);
const SPACE = 32;

/**
 * The tokens of a text, with nothing left over: what has no meaning is a token too. By hand, since Chevrotain's lexer
 * takes longer to be built than a small file takes to be checked, and comes to names of any script by a detour.
 */
export function scan(text: string): IToken[] {
  const tokens: IToken[] = [];
  let at = 0;
  while (at < text.length) {
    const code = text.charCodeAt(at);
    if (code === SPACE) {
      at += 1;
      continue;
    }
    const end = endOfName(text, at, code);
    if (end > at) {
      const name = text.slice(at, end);
      at = put(tokens, WORDS.get(name) ?? Name, at, name);
      continue;
    }
    const lone = LONE_SIGNS.get(code);
    if (lone === undefined) at = scanOther(text, at, tokens);
    else at = put(tokens, lone, at, text[at]);
  }
  return tokens;
}

function scanOther(text: string, at: number, tokens: IToken[]): number {
  const blanks = endOf(BLANKS, text, at);
  if (blanks > at) return blanks;
  for (const [pattern, type] of PATTERNS) {
    const end = endOf(pattern, text, at);
    if (end > at) return put(tokens, type, at, text.slice(at, end));
  }
  for (const [sign, type] of SIGNS) if (text.startsWith(sign, at)) return put(tokens, type, at, sign);
  return put(tokens, Strange, at, text.slice(at, endOf(STRANGE, text, at)));
}

/** Adds a token and gives the place behind it. */
function put(tokens: IToken[], type: TokenType, at: number, image: string): number {
  tokens.push({ image, startOffset: at, tokenType: type, tokenTypeIdx: type.tokenTypeIdx as number });
  return at + image.length;
}

/** The end of a match that begins at `at`; `at` itself where there is none. */
function endOf(pattern: RegExp, text: string, at: number): number {
  pattern.lastIndex = at;
  return pattern.test(text) ? pattern.lastIndex : at;
}

/** Letter by letter in ASCII, by pattern beyond it. */
function endOfName(text: string, at: number, first: number): number {
  if (first > 127) return endOf(NAME, text, at);
  if (!isLetter(first)) return at;
  let end = at + 1;
  let code = text.charCodeAt(end);
  while (isLetter(code) || (code >= 48 && code <= 57)) code = text.charCodeAt(++end);
  return code > 127 ? endOf(NAME, text, at) : end;
}

function isLetter(code: number): boolean {
  return (code >= 97 && code <= 122) || (code >= 65 && code <= 90) || code === 95;
}
