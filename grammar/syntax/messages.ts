import {
  EOF,
  type IParserErrorMessageProvider,
  type IRecognitionException,
  type IToken,
  tokenLabel,
} from "chevrotain";
import type { Range } from "../source/span.ts";
import { FORMS, SIGNS } from "./forms.ts";
import type { Mistake } from "./mistake.ts";
import {
  belongs,
  Close,
  CloseIndex,
  Equals,
  Name,
  NumberText,
  OneWay,
  Open,
  OpenIndex,
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

/**
 * What the grammar stumbled on, in a sentence: what is wrong, where, and how the statement is written.
 * `tokens` are those of the line, `form` says which statement it is.
 */
export function explain(error: IRecognitionException, form: string, tokens: readonly IToken[]): Mistake {
  const found = error.token;
  const atEnd = found.tokenType === EOF;
  const after = atEnd ? tokens.at(-1) : tokens[tokens.indexOf(found) - 1];
  const place = atEnd ? after : found;
  const range = place === undefined ? { start: 0, end: 0 } : rangeOf(place);
  const pattern = FORMS.get(form);
  const how = pattern === undefined ? "" : `; write \`${pattern}\``;
  const where = atEnd ? "at the end of the line" : `before ${show(found)}`;

  if (found.tokenType === OneWay) {
    const message =
      "`<-` makes a law one way and stands only after its left side; to compare with a negative value write `x < -3`.";
    return { name: "syntax", range, message, mend: { range, text: " < -" } };
  }
  if (error.name === "NotAllInputParsedException") {
    return { name: "syntax", range, message: redundant(found, after, form, how) };
  }
  if (error.name !== "MismatchedTokenException") {
    return {
      name: "syntax",
      range,
      message: `${MISSING.get(error.message) ?? "Something"} is missing ${where}${how}.`,
    };
  }
  if (error.message === "a name" && RESERVED_NAMES.has(found.image)) {
    const message = `${show(found)} is reserved and can't be a name; choose another.`;
    return { name: "reserved-name", range, message };
  }
  const message = `${capital(error.message)} is missing ${where}${how}.`;
  if (error.message !== "`)`" && error.message !== "`]`") return { name: "syntax", range, message };
  const opened = lastOpen(atEnd ? tokens : tokens.slice(0, tokens.indexOf(found)));
  if (opened === null) return { name: "syntax", range, message };
  const facts = [{ message: `${show(opened)} is opened here`, range: rangeOf(opened) }];
  const end = { start: range.end, end: range.end };
  const mend = atEnd ? { range: end, text: opened.tokenType === Open ? ")" : "]" } : undefined;
  return { name: "syntax", range, message, facts, mend };
}

function lastOpen(tokens: readonly IToken[]): IToken | null {
  let closed = 0;
  for (let i = tokens.length - 1; i >= 0; i -= 1) {
    const type = tokens[i].tokenType;
    if (type === Close || type === CloseIndex) closed += 1;
    else if ((type === Open || type === OpenIndex) && closed === 0) return tokens[i];
    else if (type === Open || type === OpenIndex) closed -= 1;
  }
  return null;
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

/** Statements that end in an expression, where two values side by side want an operator. */
const EXPRESSIVE: ReadonlySet<string> = new Set([
  "param",
  "const",
  "let",
  "output",
  "track",
  "start",
  "expect",
  "set",
  "drive",
  "run",
  "record",
  "vary",
  "function",
]);

function redundant(found: IToken, after: IToken | undefined, form: string, how: string): string {
  if (found.tokenType === Close || found.tokenType === CloseIndex) return `${show(found)} closes nothing.`;
  if (found.tokenType === Equals) return `A second \`=\` has no place here${how}.`;
  const joins =
    form === "wiring"
      ? "An arrow or a comma"
      : form === "element"
        ? "A comma or an operator"
        : EXPRESSIVE.has(form)
          ? "An operator"
          : null;
  const operand =
    after !== undefined && (isWord(after) || after.tokenType === NumberText || after.tokenType === Close);
  if (
    joins !== null &&
    operand &&
    (isWord(found) || found.tokenType === NumberText || found.tokenType === Open)
  ) {
    return `${joins} is missing between ${show(after)} and ${show(found)}${how}.`;
  }
  return `${capital(show(found))} has no place here${how}.`;
}

/** What to say of a sign that the notation does not have, and how to mend it. */
export function explainSign(token: IToken): Mistake {
  const range = rangeOf(token);
  const first = String.fromCodePoint(token.image.codePointAt(0) ?? 0);
  const known = SIGNS.get(token.image) ?? (token.tokenType === Strange ? SIGNS.get(first) : undefined);
  if (known === undefined && token.image.startsWith("--")) {
    const message =
      "`--` begins a remark and wants a blank on both sides; to take away a negative value write `a - (-b)`.";
    return { name: "syntax", range: { start: range.start, end: range.start + 2 }, message };
  }
  if (known === undefined)
    return { name: "syntax", range, message: `${show(token)} has no meaning in the notation.` };
  const message = `${show(token)} has no meaning here: ${known.advice}.`;
  const mend =
    known.instead === undefined || token.image.length > 3 ? undefined : { range, text: known.instead };
  return { name: "syntax", range, message, mend };
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

export function rangeOf(token: IToken): Range {
  return { start: token.startOffset, end: token.startOffset + token.image.length };
}

function isWord(token: IToken): boolean {
  return belongs(token.tokenType, Name);
}

function capital(text: string): string {
  return /^[a-z]/.test(text) ? text[0].toUpperCase() + text.slice(1) : text;
}
