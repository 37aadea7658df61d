import {
  EOF,
  type IParserErrorMessageProvider,
  type IRecognitionException,
  type IToken,
  tokenLabel,
} from "chevrotain";
import type { Fix } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import { FORMS, SIGNS } from "./forms.ts";
import {
  belongs,
  Close,
  CloseIndex,
  Equals,
  Name,
  NumberText,
  OneWay,
  Open,
  Strange,
  Text,
} from "./tokens.ts";
import { RESERVED_NAMES } from "./words.ts";

/**
 * Chevrotain's own sentences are replaced: the provider only passes on what was expected, and `explain` says it in
 * the words of the notation.
 */
export const EXPECTED: IParserErrorMessageProvider = {
  buildMismatchTokenMessage: ({ expected }) => tokenLabel(expected),
  buildNotAllInputParsedMessage: () => "",
  buildNoViableAltMessage: ({ ruleName }) => ruleName,
  buildEarlyExitMessage: ({ ruleName }) => `first of ${ruleName}`,
};

export interface Explained {
  readonly name: "syntax" | "reserved-name";
  readonly range: Range;
  readonly message: string;
}

/** What the grammar stumbled on, in a sentence: what is wrong, where, and how the statement is written. */
export function explain(error: IRecognitionException, form: string, after: IToken | undefined): Explained {
  const found = error.token;
  const atEnd = found.tokenType === EOF;
  const place = atEnd ? after : found;
  const range = place === undefined ? { start: 0, end: 0 } : extent(place);
  const pattern = FORMS.get(form);
  const how = pattern === undefined ? "" : `; write \`${pattern}\``;
  const where = atEnd ? "at the end of the line" : `before ${show(found)}`;

  if (found.tokenType === OneWay) {
    const message =
      "`<-` makes a law one way and stands only after its left side; to compare with a negative value write `x < -3`.";
    return { name: "syntax", range, message };
  }
  if (error.name === "MismatchedTokenException") {
    if (error.message === "a name" && RESERVED_NAMES.has(found.image)) {
      return {
        name: "reserved-name",
        range,
        message: `${show(found)} is reserved and can't be a name; choose another.`,
      };
    }
    return { name: "syntax", range, message: `${capital(error.message)} is missing ${where}${how}.` };
  }
  if (error.name === "NotAllInputParsedException") {
    return { name: "syntax", range, message: redundant(found, after, how) };
  }
  const missing = MISSING.get(error.message) ?? "Something";
  return { name: "syntax", range, message: `${missing} is missing ${where}${how}.` };
}

/** By the rule in which no way went on. */
const MISSING: ReadonlyMap<string, string> = new Map([
  ["operand", "A value"],
  ["unit", "A unit"],
  ["law", "`=` (or `<-` for a one-way law)"],
  ["port", "`takes` or `gives`"],
  ["start", "What starts, as `spring.q`,"],
  ["curve", '`= (x, y) …` or `from "file.csv"`'],
  ["compare", "`<` or `<=`"],
  ["first of curvePoints", "A point `(x, y)`"],
  ["first of wiring", "An arrow `->`"],
  ["first of ends", "A node"],
  ["first of element", "A port"],
  ["first of record", "A signal"],
  ["first of function", "A parameter"],
  ["first of use", "A name"],
  ["first of compare", "A column in quotes"],
  ["first of curveFile", "A column in quotes"],
]);

function redundant(found: IToken, after: IToken | undefined, how: string): string {
  if (found.tokenType === Close || found.tokenType === CloseIndex) return `${show(found)} closes nothing.`;
  if (found.tokenType === Equals) return `A second \`=\` has no place here${how}.`;
  const operand =
    after !== undefined && (isWord(after) || after.tokenType === NumberText || after.tokenType === Close);
  if (operand && (isWord(found) || found.tokenType === NumberText || found.tokenType === Open)) {
    return `An operator is missing between ${show(after)} and ${show(found)}${how}.`;
  }
  return `${capital(show(found))} has no place here${how}.`;
}

/** What to say of a sign that the notation does not have, and how to mend it. */
export function explainSign(token: IToken, path: string): { range: Range; message: string; fix?: Fix } {
  const range = extent(token);
  const first = String.fromCodePoint(token.image.codePointAt(0) ?? 0);
  const known = SIGNS.get(token.image) ?? (token.tokenType === Strange ? SIGNS.get(first) : undefined);
  if (token.image.startsWith("--") && known === undefined) {
    const range = { start: token.startOffset, end: token.startOffset + 2 };
    const message =
      "`--` begins a remark and wants a blank on both sides; to take away a negative value write `a - (-b)`.";
    return { range, message };
  }
  const message =
    known === undefined
      ? `${show(token)} has no meaning in the notation.`
      : `${show(token)} has no meaning here: ${known.advice}.`;
  if (known?.instead === undefined || token.image.length > 2) return { range, message };
  const edits = [{ span: { file: path, ...range }, text: known.instead }];
  return { range, message, fix: { title: `Write \`${known.instead}\``, edits } };
}

/** A token as a message shows it: short, and nothing unprintable. */
export function show(token: IToken): string {
  const text = token.image.length > 24 ? `${token.image.slice(0, 23)}…` : token.image;
  const clean = text.replace(
    /[\p{C}\p{Zl}\p{Zp}]/gu,
    (sign) => `U+${(sign.codePointAt(0) ?? 0).toString(16).toUpperCase().padStart(4, "0")}`,
  );
  return token.tokenType === Text ? clean : `\`${clean}\``;
}

function extent(token: IToken): Range {
  return { start: token.startOffset, end: token.startOffset + token.image.length };
}

function isWord(token: IToken): boolean {
  return belongs(token.tokenType, Name);
}

function capital(text: string): string {
  return /^[a-z]/.test(text) ? text[0].toUpperCase() + text.slice(1) : text;
}
