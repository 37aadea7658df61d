import type { Range } from "../source/span.ts";
import type { SourceText } from "../source/text.ts";
import { align, cell, type Row } from "./format-columns.ts";
import { ExpressionWriter } from "./format-expression.ts";
import { type Plain, StatementWriter } from "./format-statement.ts";
import { parse } from "./parse.ts";
import type { Comment, File, FileItem, Repeat, Statement, System, Trial, TrialStatement } from "./tree.ts";

/**
 * The text of a tree in the one style of the notation:
 * - two blanks a block; line ends are `\n`; at most one empty line in a row, none before a `}`;
 * - statements of one family in adjacent lines are aligned by columns: names, `=`, laws, first arrows, remarks;
 * - `a*b/c^2 + d`, `1 .. 20`, `f(x, y)`, `cell[i-1]`; numbers, brackets and line breaks after an operator or a comma
 *   are their author's, a line that goes on stands four blanks in;
 * - comments stay where they stand; a statement that could not be read, or that holds a comment inside, is printed as
 *   it was written, and a file whose blocks don't match is left alone.
 * Formatting twice changes nothing more, and never what the text means.
 */
export function format(tree: File, source: SourceText): string {
  return tree.balanced ? new Formatter(tree, source.text).run() : source.text;
}

export function formatText(source: SourceText): string {
  return format(parse(source).tree, source);
}

type AnyStatement = FileItem | Statement | TrialStatement;

class Formatter {
  readonly #tree: File;
  readonly #text: string;
  readonly #statements: StatementWriter;
  readonly #comments: readonly Comment[];
  #nextComment = 0;
  /** Finished lines, and rows that may still be aligned with those that follow. */
  readonly #lines: string[] = [];
  #run: Row[] = [];
  /** Where what was printed last ends in the text. */
  #end = 0;

  constructor(tree: File, text: string) {
    this.#tree = tree;
    this.#text = text;
    this.#comments = tree.comments;
    this.#statements = new StatementWriter(new ExpressionWriter(text));
  }

  run(): string {
    const { edition, items } = this.#tree;
    let notation = edition;
    for (const item of items) {
      if (notation !== null && notation.range.start < item.range.start) {
        this.#asWritten(notation.range, 0);
        notation = null;
      }
      this.#statement(item, 0);
    }
    if (notation !== null) this.#asWritten(notation.range, 0);
    this.#commentsBefore(this.#text.length, 0);
    this.#finishRun();
    return this.#lines.length === 0 ? "" : `${this.#lines.join("\n")}\n`;
  }

  #statement(statement: AnyStatement, indent: number): void {
    if (statement.kind === "unreadable") this.#asWritten(statement.range, indent);
    else if ("block" in statement) this.#block(statement, indent);
    else this.#plain(statement, indent);
  }

  #plain(statement: Plain, indent: number): void {
    const { range, remark } = statement;
    this.#commentsBefore(range.start, indent);
    if (this.#holdsComment(range)) {
      this.#goingOn(range, indent);
      return;
    }
    this.#emptyLine(range.start);
    const { family, cells } = this.#statements.write(statement);
    const broken = cells.some(({ text }) => text.includes("\n"));
    this.#end = range.end;
    const tail = this.#tail(remark, "bounds" in statement && statement.bounds !== null);
    if (!broken) {
      this.#add({ indent, family, cells, tail });
      return;
    }
    this.#finishRun();
    const whole = align([{ indent, family, cells, tail: null }])[0].replaceAll(
      "\n",
      `\n${" ".repeat(indent + 4)}`,
    );
    this.#lines.push(tail === null ? whole : `${whole} ${tail.text}`);
  }

  #block(block: System | Trial | Repeat, indent: number): void {
    const headRange = { start: block.range.start, end: block.block.start };
    this.#commentsBefore(headRange.start, indent);
    if (this.#holdsComment(headRange)) {
      this.#goingOn({ start: headRange.start, end: block.block.start + 1 }, indent);
    } else {
      this.#emptyLine(headRange.start);
      this.#end = block.block.start + 1;
      const head = `${this.#statements.head(block)} {`.replaceAll("\n", `\n${" ".repeat(indent + 4)}`);
      this.#add({ indent, family: null, cells: [cell(0, head)], tail: this.#tail(block.remark, false) });
    }
    for (const statement of block.body) this.#statement(statement, indent + 2);
    this.#commentsBefore(block.block.end - 1, indent + 2);
    this.#end = block.block.end;
    this.#add({ indent, family: null, cells: [cell(0, "}")], tail: this.#tail(null, false) });
  }

  /** What could not be read is printed to the letter, and so is the edition but for its blanks. */
  #asWritten(range: Range, indent: number): void {
    this.#commentsBefore(range.start, indent);
    this.#emptyLine(range.start);
    this.#finishRun();
    while (
      this.#nextComment < this.#comments.length &&
      this.#comments[this.#nextComment].range.start < range.end
    ) {
      this.#nextComment += 1;
    }
    this.#end = range.end;
    const written = this.#text.slice(range.start, range.end).replace(/\r\n?/g, "\n");
    const text = range === this.#tree.edition?.range ? written.replace(/\s+/, " ") : written;
    this.#lines.push(" ".repeat(indent) + text + this.#rest());
  }

  /** A statement with comments between its lines keeps its words; only the margin is set. */
  #goingOn(range: Range, indent: number): void {
    this.#emptyLine(range.start);
    this.#finishRun();
    while (
      this.#nextComment < this.#comments.length &&
      this.#comments[this.#nextComment].range.start < range.end
    ) {
      this.#nextComment += 1;
    }
    this.#end = range.end;
    const [first, ...others] = this.#text.slice(range.start, range.end).split(/\r\n?|\n/);
    this.#lines.push(" ".repeat(indent) + first.trimEnd());
    for (const other of others)
      if (other.trim() !== "") this.#lines.push(" ".repeat(indent + 4) + other.trim());
    this.#lines.push((this.#lines.pop() ?? "") + this.#rest());
  }

  /** The remark or comment behind what ends at `#end`, as it was written, blanks and all. */
  #rest(): string {
    const from = this.#end;
    const remark = /[^\S\r\n]*--(?=[\s{}]|$)/y;
    remark.lastIndex = from;
    const isRemark = remark.test(this.#text);
    if (this.#trailingComment() === null && !isRemark) return "";
    let end = from;
    while (end < this.#text.length && this.#text[end] !== "\n" && this.#text[end] !== "\r") end += 1;
    return this.#text.slice(from, end).trimEnd();
  }

  #tail(remark: string | null, loose: boolean): Row["tail"] {
    if (remark !== null) {
      const at = this.#text.indexOf("--", this.#end);
      const near =
        at !== -1 && this.#text.slice(this.#end, at).trim() === "" && this.#breaks(this.#end, at) === 0;
      return { text: `-- ${remark}`, column: near ? this.#column(at) : null, loose };
    }
    const comment = this.#trailingComment();
    if (comment === null) return null;
    return { text: comment.text, column: this.#column(comment.range.start), loose };
  }

  #trailingComment(): Comment | null {
    const comment = this.#comments[this.#nextComment];
    if (comment === undefined) return null;
    const between = this.#text.slice(this.#end, comment.range.start);
    if (between.trim() !== "" || this.#breaks(this.#end, comment.range.start) > 0) return null;
    this.#nextComment += 1;
    this.#end = comment.range.end;
    return comment;
  }

  #commentsBefore(offset: number, indent: number): void {
    for (
      let comment = this.#comments[this.#nextComment];
      comment !== undefined && comment.range.start < offset;
      comment = this.#comments[this.#nextComment]
    ) {
      this.#emptyLine(comment.range.start);
      this.#finishRun();
      this.#lines.push(" ".repeat(indent) + comment.text);
      this.#end = comment.range.end;
      this.#nextComment += 1;
    }
  }

  #holdsComment({ start, end }: Range): boolean {
    const comment = this.#comments[this.#nextComment];
    return comment !== undefined && comment.range.start >= start && comment.range.start < end;
  }

  #emptyLine(before: number): void {
    if (this.#lines.length + this.#run.length === 0 || this.#breaks(this.#end, before) < 2) return;
    this.#finishRun();
    this.#lines.push("");
  }

  #breaks(from: number, to: number): number {
    return this.#text.slice(from, to).match(/\r\n?|\n/g)?.length ?? 0;
  }

  #column(offset: number): number {
    let start = offset;
    while (start > 0 && this.#text[start - 1] !== "\n" && this.#text[start - 1] !== "\r") start -= 1;
    return offset - start;
  }

  #add(row: Row): void {
    const last = this.#run.at(-1);
    if (
      last !== undefined &&
      (row.family === null || last.family !== row.family || last.indent !== row.indent)
    ) {
      this.#finishRun();
    }
    this.#run.push(row);
  }

  #finishRun(): void {
    if (this.#run.length > 0) this.#lines.push(...align(this.#run));
    this.#run = [];
  }
}
