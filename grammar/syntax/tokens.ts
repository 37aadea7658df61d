import { createToken, Lexer, type TokenType } from "chevrotain";
import { CLAUSE_WORDS, OPERATOR_WORDS } from "./words.ts";

/** What the scanner makes and the grammar is written in. Categories say what may stand for what. */
const token = (name: string, more: { label?: string; categories?: TokenType | TokenType[] } = {}) =>
  createToken({ name, pattern: Lexer.NA, ...more });

/** Operators that join two operands of an expression. */
export const Binary = token("Binary");
export const Prefix = token("Prefix");
/** What a unit is made of: `N*m*s/rad`, `m^-2`, `1/s`, `%`. */
export const UnitPart = token("UnitPart");
export const UnitHead = token("UnitHead", { categories: UnitPart });
export const AnyArrow = token("AnyArrow");

export const LineEnd = token("LineEnd");
export const Comment = token("Comment");
/** `-- text`, with a blank on both sides; that one stands before it is seen when lines are made. */
export const Remark = token("Remark");
/** Signs of other languages, or of none here; a message says what to write instead. */
export const Slip = token("Slip");
export const Text = token("Text", { label: "a text in quotes" });
/** What has no meaning in the notation. */
export const Strange = token("Strange");

const signs: [text: string, type: TokenType][] = [];
/** A sign that is always the same; of two that begin alike the longer one stands first. */
const sign = (name: string, text: string, ...categories: TokenType[]) => {
  const type = token(name, { label: `\`${text}\``, categories });
  signs.push([text, type]);
  return type;
};
export const DemandFrom = sign("DemandFrom", "|->", AnyArrow);
export const DemandTo = sign("DemandTo", "->|", AnyArrow);
export const Arrow = sign("Arrow", "->", AnyArrow);
export const OneWay = sign("OneWay", "<-");
export const LessEqual = sign("LessEqual", "<=", Binary);
export const GreaterEqual = sign("GreaterEqual", ">=", Binary);
export const Less = sign("Less", "<", Binary);
export const Greater = sign("Greater", ">", Binary);
export const Equals = sign("Equals", "=", Binary);
export const Plus = sign("Plus", "+", Binary, Prefix);
export const Minus = sign("Minus", "-", Binary, Prefix, UnitPart);
export const Star = sign("Star", "*", Binary, UnitPart);
export const Slash = sign("Slash", "/", Binary, UnitPart);
export const Caret = sign("Caret", "^", Binary, UnitPart);
export const DotDot = sign("DotDot", "..");
export const Dot = sign("Dot", ".");
export const Comma = sign("Comma", ",");
export const Colon = sign("Colon", ":");
export const Open = sign("Open", "(");
export const Close = sign("Close", ")");
export const OpenIndex = sign("OpenIndex", "[");
export const CloseIndex = sign("CloseIndex", "]");
export const OpenBlock = sign("OpenBlock", "{");
export const CloseBlock = sign("CloseBlock", "}");
export const Percent = sign("Percent", "%", UnitHead);
export const SIGNS: readonly (readonly [text: string, type: TokenType])[] = signs;

export const NumberText = token("NumberText", { label: "a number", categories: UnitPart });
export const Name = token("Name", { label: "a name", categories: UnitHead });
export const And = token("And", { label: "`and`", categories: Binary });
export const Or = token("Or", { label: "`or`", categories: Binary });
export const Not = token("Not", { label: "`not`", categories: Prefix });
export const Where = token("Where", { label: "`where`" });
export const Else = token("Else", { label: "`else`" });
const OPERATORS: Record<(typeof OPERATOR_WORDS)[number], TokenType> = {
  and: And,
  or: Or,
  not: Not,
  where: Where,
  else: Else,
};

/** Words inside a statement: each is also a `Name`, so that it stays free elsewhere. */
const CLAUSES: ReadonlyMap<string, TokenType> = new Map(
  CLAUSE_WORDS.map((word) => [word, token(`word ${word}`, { label: `\`${word}\``, categories: Name })]),
);

export function clauseToken(word: (typeof CLAUSE_WORDS)[number]): TokenType {
  return CLAUSES.get(word) as TokenType;
}

/** Words that are more than a name, by their text. */
export const WORDS: ReadonlyMap<string, TokenType> = new Map([
  ...CLAUSES,
  ...OPERATOR_WORDS.map((word) => [word, OPERATORS[word]] as const),
]);

/** Is `type` that type, or one of its kind? */
export function belongs(type: TokenType, category: TokenType): boolean {
  return type === category || type.CATEGORIES?.includes(category) === true;
}

export const VOCABULARY = [
  ...[Binary, Prefix, UnitPart, UnitHead, AnyArrow],
  ...[LineEnd, Comment, Remark, Slip, Text, Strange, NumberText, Name],
  ...signs.map(([, type]) => type),
  ...WORDS.values(),
];
