import type { IToken, TokenType } from "chevrotain";
import { parseUnit } from "../units/parse-unit.ts";
import { LIMITS } from "./limits.ts";
import {
  AnyArrow,
  Binary,
  belongs,
  Close,
  CloseBlock,
  CloseIndex,
  Comma,
  Comment as CommentToken,
  DotDot,
  Else,
  LineEnd,
  Name,
  Not,
  NumberText,
  OneWay,
  Open,
  OpenBlock,
  OpenIndex,
  Remark,
  Slip,
  Strange,
  Where,
} from "./tokens.ts";
import type { Comment } from "./tree.ts";
import { ELEMENT_WORDS, STATEMENT_WORDS } from "./words.ts";

/** One statement's tokens, or a lone `}`; what braces open and close is for the outline to say. */
export interface Line {
  readonly tokens: IToken[];
  readonly opens: IToken | null;
  readonly closes: IToken | null;
  /** The joined `##` lines directly above. */
  description: string | null;
  remark: string | null;
  /** The first sign that has no meaning in the notation. */
  stray: IToken | null;
  /** The bracket that is one too many within the others. */
  tooDeep: IToken | null;
}

export interface Lines {
  readonly lines: readonly Line[];
  readonly comments: readonly Comment[];
  /** Remarks with no declaration before them; kept as comments. */
  readonly homeless: readonly IToken[];
}

/** Cuts the tokens of a file into statements: by line ends, but for those that a statement goes on over. */
export function toLines(text: string, tokens: readonly IToken[]): Lines {
  return new LineMaker(text, tokens).run();
}

class LineMaker {
  readonly #text: string;
  readonly #tokens: readonly IToken[];
  readonly #lines: Line[] = [];
  readonly #comments: { text: string; range: Comment["range"]; description: boolean }[] = [];
  readonly #homeless: IToken[] = [];
  /** Brackets that are open in the current statement. */
  #open: IToken[] = [];
  #current: IToken[] = [];
  #remark: string | null = null;
  #stray: IToken | null = null;
  #tooDeep: IToken | null = null;
  /** The `##` lines, by index in `#comments`, that the next line stands directly under. */
  #above: number[] = [];
  /** What the current physical line holds up to here. */
  #row: { comment: boolean; words: boolean; line: Line | null } = {
    comment: false,
    words: false,
    line: null,
  };

  constructor(text: string, tokens: readonly IToken[]) {
    this.#text = text;
    this.#tokens = tokens;
  }

  run(): Lines {
    for (let i = 0; i < this.#tokens.length; i += 1) {
      const token = this.#tokens[i];
      const type = token.tokenType;
      if (type === LineEnd) this.#endRow(i);
      else if (type === CommentToken) this.#comment(token);
      else if (type === Remark && this.#afterBlank(token)) this.#takeRemark(token);
      else if (type === OpenBlock) this.#finish(token, null);
      else if (type === CloseBlock) {
        if (this.#current.length > 0) this.#finish(null, null);
        this.#finish(null, token);
      } else this.#take(token);
    }
    if (this.#current.length > 0) this.#finish(null, null);
    return { lines: this.#lines, comments: this.#comments, homeless: this.#homeless };
  }

  #take(token: IToken): void {
    const type = token.tokenType;
    if (type === Open || type === OpenIndex) {
      this.#open.push(token);
      if (this.#open.length > LIMITS.depth) this.#tooDeep ??= token;
    } else if (type === Close || type === CloseIndex) this.#open.pop();
    else if (type === Slip || type === Strange || type === Remark) this.#stray ??= token;
    this.#current.push(token);
    this.#row.words = true;
  }

  #finish(opens: IToken | null, closes: IToken | null): void {
    const description = this.#above.length === 0 || closes !== null ? null : this.#describe();
    const line: Line = {
      tokens: this.#current,
      opens,
      closes,
      description,
      remark: this.#remark,
      stray: this.#stray,
      tooDeep: this.#tooDeep,
    };
    this.#lines.push(line);
    this.#row.line = line;
    this.#current = [];
    this.#open = [];
    this.#remark = null;
    this.#stray = null;
    this.#tooDeep = null;
    this.#above = [];
  }

  #describe(): string {
    const rows = this.#above.map((index) => {
      this.#comments[index].description = true;
      return this.#comments[index].text.slice(2).replace(/^ /, "").trimEnd();
    });
    return rows.join("\n");
  }

  #endRow(at: number): void {
    if (this.#current.length === 0) {
      if (!this.#row.comment) this.#above = [];
    } else if (!this.#goesOn(at) || this.#beginsStatement(at + 1)) this.#finish(null, null);
    this.#row = { comment: false, words: false, line: null };
  }

  #comment(token: IToken): void {
    const alone = this.#row.line === null && this.#current.length === 0;
    this.#row.comment = true;
    const text = token.image.trimEnd();
    const range = { start: token.startOffset, end: token.startOffset + text.length };
    this.#comments.push({ text, range, description: false });
    if (!alone) return;
    if (text.startsWith("##")) this.#above.push(this.#comments.length - 1);
    else this.#above = [];
  }

  #takeRemark(token: IToken): void {
    const text = token.image.slice(2).trim();
    const line = this.#row.line;
    if (this.#current.length > 0 && this.#row.words) {
      this.#remark = join(this.#remark, text);
    } else if (this.#current.length === 0 && line !== null && line.closes === null) {
      line.remark = join(line.remark, text);
    } else {
      this.#homeless.push(token);
      this.#row.comment = true;
      this.#above = [];
      const range = { start: token.startOffset, end: token.startOffset + token.image.trimEnd().length };
      this.#comments.push({ text: token.image.trimEnd(), range, description: false });
    }
  }

  #afterBlank(token: IToken): boolean {
    return token.startOffset === 0 || /[\s{}]/.test(this.#text[token.startOffset - 1]);
  }

  #goesOn(at: number): boolean {
    if (this.#open.length > 0) return true;
    if (this.#current[0].image === "curve" && this.#tokens[this.#nextSpeaking(at)]?.tokenType === Open)
      return true;
    const type = (this.#current.at(-1) as IToken).tokenType;
    return GOES_ON.has(type) || belongs(type, Binary) || belongs(type, AnyArrow);
  }

  /** Index of the next token that is neither a line end nor a comment. */
  #nextSpeaking(from: number): number {
    let at = from;
    while (at < this.#tokens.length && SILENT.has(this.#tokens[at].tokenType)) at += 1;
    return at;
  }

  /**
   * Does the row after this one begin a statement of its own? Then an open bracket or a last operator was a slip,
   * and it costs this statement alone. No expression holds two words side by side, nor an arrow inside brackets.
   */
  #beginsStatement(from: number): boolean {
    const at = this.#nextSpeaking(from);
    const first = this.#tokens[at];
    const second = this.#tokens[at + 1];
    if (first === undefined || second === undefined) return false;
    if (first.tokenType === NumberText) {
      return (
        (first.image === "0" || first.image === "1") &&
        second.tokenType === Name &&
        parseUnit(second.image) === null
      );
    }
    if (!belongs(first.tokenType, Name)) return false;
    if (this.#open.length > 0 && belongs(second.tokenType, AnyArrow)) return true;
    const head = STATEMENT_WORDS.has(first.image) || ELEMENT_WORDS.has(first.image);
    return head && (second.tokenType === Name || (first.image === "use" && second.image.startsWith('"')));
  }
}

const GOES_ON: ReadonlySet<TokenType> = new Set([Comma, DotDot, OneWay, Where, Else, Not]);
const SILENT: ReadonlySet<TokenType> = new Set([LineEnd, CommentToken, Remark]);

function join(before: string | null, text: string): string | null {
  if (text === "") return before;
  return before === null ? text : `${before} ${text}`;
}
