import { type CustomPatternMatcherFunc, createToken, Lexer, type TokenType } from "chevrotain";
import { CLAUSE_WORDS, OPERATOR_WORDS } from "./words.ts";

/** A letter of any script, for the lexer's table of first characters, which sorts by blocks of code units. */
const BEYOND_ASCII = [
  ...Array.from({ length: 128 }, (_, i) => 128 + i),
  ...Array.from({ length: 640 }, (_, i) => 256 + i * 102),
];
const ASCII_LETTERS = [..."abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ_"];

const NAME = /[\p{L}_][\p{L}\p{M}\p{Nd}_]*/uy;
const STRANGE = /[^\p{L}\p{N}_\s!-~]+|[$&;?@\\!`|'~\]}{[]|[^\s]/uy;

/** Chevrotain drops the `u` flag of a pattern, so patterns that need it are matched by hand. */
function sticky(pattern: RegExp): CustomPatternMatcherFunc {
  return (text, offset) => {
    pattern.lastIndex = offset;
    return pattern.exec(text);
  };
}

/** Operators that join two operands of an expression. */
export const Binary = createToken({ name: "Binary", pattern: Lexer.NA });
export const Prefix = createToken({ name: "Prefix", pattern: Lexer.NA });
/** What a unit is made of: `N*m*s/rad`, `m^-2`, `1/s`, `%`. */
export const UnitPart = createToken({ name: "UnitPart", pattern: Lexer.NA });
export const UnitHead = createToken({ name: "UnitHead", pattern: Lexer.NA, categories: UnitPart });
export const AnyArrow = createToken({ name: "AnyArrow", pattern: Lexer.NA });

const blank = createToken({
  name: "Blank",
  pattern: sticky(/[^\S\r\n]+/y),
  start_chars_hint: [..." \t\v\f", ...BEYOND_ASCII],
  line_breaks: false,
  group: Lexer.SKIPPED,
});
export const LineEnd = createToken({ name: "LineEnd", pattern: /\r?\n|\r/, line_breaks: true });
export const Comment = createToken({ name: "Comment", pattern: /#[^\r\n]*/ });
/** `-- text`, with a blank on both sides; that one stands before it is seen when lines are made. */
export const Remark = createToken({ name: "Remark", pattern: /--(?=[\s{}]|$)[^\r\n]*/ });
/** Signs of other languages, or of none here; a message says what to write instead. */
export const Slip = createToken({
  name: "Slip",
  pattern: /--+>?|==+|!=|<>|&&|\|\||\*\*|:=|=>|\/\/|\+\+|<<|>>|\+=|-=/,
});
export const Text = createToken({ name: "Text", pattern: /"[^"\r\n]*"/, label: "a text in quotes" });

export const DemandFrom = createToken({
  name: "DemandFrom",
  pattern: "|->",
  label: "`|->`",
  categories: AnyArrow,
});
export const DemandTo = createToken({
  name: "DemandTo",
  pattern: "->|",
  label: "`->|`",
  categories: AnyArrow,
});
export const Arrow = createToken({ name: "Arrow", pattern: "->", label: "`->`", categories: AnyArrow });
export const OneWay = createToken({ name: "OneWay", pattern: "<-", label: "`<-`" });

const operator = (name: string, pattern: string | RegExp, ...more: TokenType[]) =>
  createToken({ name, pattern, label: `\`${pattern}\``, categories: [Binary, ...more] });
export const LessEqual = operator("LessEqual", "<=");
export const GreaterEqual = operator("GreaterEqual", ">=");
export const Less = operator("Less", "<");
export const Greater = operator("Greater", ">");
export const Equals = operator("Equals", "=");
export const Plus = operator("Plus", "+", Prefix);
export const Minus = operator("Minus", "-", Prefix, UnitPart);
export const Star = operator("Star", "*", UnitPart);
export const Slash = operator("Slash", "/", UnitPart);
export const Caret = operator("Caret", "^", UnitPart);
export const And = createToken({ name: "And", pattern: Lexer.NA, label: "`and`", categories: Binary });
export const Or = createToken({ name: "Or", pattern: Lexer.NA, label: "`or`", categories: Binary });
export const Not = createToken({ name: "Not", pattern: Lexer.NA, label: "`not`", categories: Prefix });
export const Where = createToken({ name: "Where", pattern: Lexer.NA, label: "`where`" });
export const Else = createToken({ name: "Else", pattern: Lexer.NA, label: "`else`" });

const sign = (name: string, pattern: string) => createToken({ name, pattern, label: `\`${pattern}\`` });
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

export const NumberText = createToken({
  name: "NumberText",
  pattern: /\d+(?:\.\d+)?(?:[eE][+-]?\d+)?/,
  label: "a number",
  categories: UnitPart,
});
export const Percent = createToken({ name: "Percent", pattern: "%", label: "`%`", categories: UnitHead });
export const Name = createToken({
  name: "Name",
  pattern: sticky(NAME),
  start_chars_hint: [...ASCII_LETTERS, ...BEYOND_ASCII],
  line_breaks: false,
  label: "a name",
  categories: UnitHead,
});
export const Strange = createToken({
  name: "Strange",
  pattern: sticky(STRANGE),
  start_chars_hint: [
    ..."!\"#$%&'()*+,-./:;<=>?@[\\]^`{|}~",
    ...BEYOND_ASCII,
    ...Array.from({ length: 32 }, (_, i) => i),
    127,
  ],
  line_breaks: false,
});

const clause = (word: string) =>
  createToken({ name: `word ${word}`, pattern: Lexer.NA, label: `\`${word}\``, categories: Name });

/** Words inside a statement, by their text: each is also a `Name`, so that it stays free elsewhere. */
export const CLAUSES: ReadonlyMap<string, TokenType> = new Map(
  CLAUSE_WORDS.map((word) => [word, clause(word)]),
);

export function clauseToken(word: (typeof CLAUSE_WORDS)[number]): TokenType {
  return CLAUSES.get(word) as TokenType;
}

const OPERATORS: ReadonlyMap<string, TokenType> = new Map(
  OPERATOR_WORDS.map((word) => [word, { and: And, or: Or, not: Not, where: Where, else: Else }[word]]),
);

/** The token type of a word that is more than a name, by its text. */
export function wordType(text: string): TokenType | undefined {
  return CLAUSES.get(text) ?? OPERATORS.get(text);
}

/** Is `type` that type, or one of its kind? */
export function belongs(type: TokenType, category: TokenType): boolean {
  return type === category || type.CATEGORIES?.includes(category) === true;
}

const LEXED = [
  blank,
  LineEnd,
  Name,
  NumberText,
  Comment,
  Remark,
  Slip,
  DemandFrom,
  DemandTo,
  Arrow,
  OneWay,
  LessEqual,
  GreaterEqual,
  Less,
  Greater,
  Equals,
  Plus,
  Minus,
  Star,
  Slash,
  Caret,
  DotDot,
  Dot,
  Comma,
  Colon,
  Open,
  Close,
  OpenIndex,
  CloseIndex,
  OpenBlock,
  CloseBlock,
  Percent,
  Text,
  Strange,
];

export const VOCABULARY = [
  ...LEXED,
  Binary,
  Prefix,
  UnitPart,
  UnitHead,
  AnyArrow,
  And,
  Or,
  Not,
  Where,
  Else,
  ...CLAUSES.values(),
];

let lexer: Lexer | null = null;

/** Built on first use: reading a word of help must not wait for it. */
export function notationLexer(): Lexer {
  lexer ??= new Lexer(VOCABULARY, {
    positionTracking: "onlyOffset",
    skipValidations: true,
    ensureOptimizations: true,
  });
  return lexer;
}
