import type { IToken } from "chevrotain";
import type { Finding, Fix } from "../diagnostics/finding.ts";
import { finding } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import type { SourceText } from "../source/text.ts";
import { LIMITS } from "./limits.ts";
import type { Line } from "./lines.ts";
import { toFinding } from "./mistake.ts";
import { type Place, StatementReader } from "./statement-reader.ts";
import type { File, FileItem, Repeat, Statement, System, Trial, TrialStatement, Unreadable } from "./tree.ts";

type AnyStatement = FileItem | Statement | TrialStatement;
type BlockHead =
  | Omit<System, "block" | "body">
  | Omit<Trial, "block" | "body">
  | Omit<Repeat, "block" | "body">
  | Unreadable;

interface Block {
  readonly place: Place;
  readonly head: BlockHead | null;
  readonly line: Line | null;
  readonly body: AnyStatement[];
}

export interface Outline {
  readonly items: readonly FileItem[];
  readonly edition: File["edition"];
  readonly balanced: boolean;
}

/**
 * Blocks within blocks, read in one loop. Braces that don't match are laid at the door of the line where a reader
 * would look: the next statement that only a file can hold, or the brace that stands at another block's margin.
 */
export class OutlineReader {
  readonly #source: SourceText;
  readonly #findings: Finding[];
  readonly #reader: StatementReader;
  readonly #blocks: Block[] = [{ place: "file", head: null, line: null, body: [] }];
  /** How many more braces open than close: 0 in a sound file. */
  #missing = 0;
  #balanced = true;
  #tooDeep = false;

  constructor(source: SourceText, findings: Finding[]) {
    this.#source = source;
    this.#findings = findings;
    this.#reader = new StatementReader(source, findings);
  }

  read(lines: readonly Line[]): Outline {
    for (const { opens, closes } of lines)
      this.#missing += (opens === null ? 0 : 1) - (closes === null ? 0 : 1);
    for (const line of this.#withBraces(lines)) {
      if (line.closes !== null) this.#closeAt(line.closes);
      else this.#statement(line);
    }
    while (this.#blocks.length > 1) this.#leaveOpen(null);
    return {
      items: this.#blocks[0].body as FileItem[],
      edition: this.#reader.edition,
      balanced: this.#balanced,
    };
  }

  /** A head without its brace is one slip: the brace of the next line is taken, or one is thought of where a `}` waits. */
  #withBraces(lines: readonly Line[]): readonly Line[] {
    const braced: Line[] = [];
    const lastClose = lines.findLastIndex(({ closes }) => closes !== null);
    for (let i = 0; i < lines.length; i += 1) {
      const line = lines[i];
      const next = lines.at(i + 1);
      const alone = next !== undefined && next.tokens.length === 0 && next.opens !== null;
      const closedLater = this.#missing < 0 && i < lastClose;
      if (!this.#reader.wantsBrace(line) || !(alone || closedLater)) {
        braced.push(line);
        continue;
      }
      const last = line.tokens[line.tokens.length - 1];
      const at = last.startOffset + last.image.length;
      const opens = alone ? next.opens : { ...last, image: "", startOffset: at };
      const end = alone ? (next.opens as IToken).startOffset + 1 : at;
      const message = `The \`{\` of \`${line.tokens[0].image}\` stands at the end of its line; it is missing there.`;
      const mend = { range: { start: at, end }, text: " {" };
      this.#report(toFinding({ name: "syntax", range: extent(last), message, mend }, this.#source.path));
      this.#balanced = false;
      if (alone) i += 1;
      else this.#missing += 1;
      braced.push({ ...line, opens });
    }
    return braced;
  }

  #statement(line: Line): void {
    if (this.#missing > 0 && this.#blocks.length > 1 && this.#reader.belongsToFile(line)) {
      while (this.#blocks.length > 1) this.#leaveOpen(line);
    }
    const block = this.#blocks.at(-1) as Block;
    const statement = this.#reader.read(line, block.place);
    if (line.opens === null) {
      if (statement !== null) block.body.push(statement as AnyStatement);
      return;
    }
    if (this.#blocks.length > LIMITS.depth && !this.#tooDeep) {
      this.#tooDeep = true;
      const range = extent(line.opens);
      this.#report(
        finding(
          "too-large",
          { file: this.#source.path, ...range },
          `Blocks may stand ${LIMITS.depth} deep within each other.`,
        ),
      );
    }
    const head = statement as BlockHead | null;
    const place =
      head?.kind === "system" || head?.kind === "trial"
        ? head.kind
        : block.place === "file"
          ? this.#guess(line)
          : block.place;
    this.#blocks.push({ place, head, line, body: [] });
  }

  /** Where the head of a block can't be read, its body still is: as a trial if it speaks of one. */
  #guess(line: Line): Place {
    return line.tokens.some(({ image }) => image === "trial" || image === "of") ? "trial" : "system";
  }

  #closeAt(brace: IToken): void {
    const margin = this.#margin(brace.startOffset);
    if (this.#missing > 0 && margin !== null) {
      const owner = this.#blocks.findLastIndex(
        (block) => block.line !== null && this.#marginOf(block.line) === margin,
      );
      if (owner !== -1) while (this.#blocks.length - 1 > owner) this.#leaveOpen({ tokens: [brace] });
    }
    const inner = this.#blocks.length - 1;
    const stray =
      inner === 0 ||
      (this.#missing < 0 && margin !== null && margin !== this.#marginOf(this.#blocks[inner].line as Line));
    if (!stray) {
      this.#close(brace.startOffset + 1);
      return;
    }
    this.#missing += 1;
    this.#balanced = false;
    const range = extent(brace);
    const span = { file: this.#source.path, ...range };
    const fix: Fix = { title: "Take the `}` away", edits: [{ span, text: "" }] };
    this.#report(finding("syntax", span, "This `}` closes nothing.", { fix }));
    const block = this.#blocks.at(-1) as Block;
    block.body.push({ kind: "unreadable", range, declares: null, description: null, remark: null });
  }

  #close(end: number): void {
    const { head, line, body } = this.#blocks.pop() as Block;
    const into = (this.#blocks.at(-1) as Block).body;
    if (line === null) return;
    const opens = line.opens as IToken;
    const range = { start: (line.tokens[0] ?? opens).startOffset, end };
    const block = { start: opens.startOffset, end };
    if (head === null || head.kind === "unreadable" || this.#blocks.length > LIMITS.depth) {
      const declares = head?.kind === "unreadable" ? head.declares : null;
      into.push({ kind: "unreadable", range, declares, description: line.description, remark: null });
    } else {
      into.push({ ...head, range, block, body } as System | Trial | Repeat);
    }
  }

  /** The innermost block has no `}`; `before` is the line that can't stand in it, null for the end of the file. */
  #leaveOpen(before: Pick<Line, "tokens"> | null): void {
    const { line, body } = this.#blocks.at(-1) as Block;
    const opener = line as Line;
    const headRange = {
      start: (opener.tokens[0] ?? opener.opens).startOffset,
      end: (opener.opens as IToken).startOffset + 1,
    };
    const head = this.#source.text
      .slice(headRange.start, headRange.end - 1)
      .trim()
      .split(/\s+/)
      .slice(0, 2)
      .join(" ");
    const file = this.#source.path;
    const headSpan = { file, ...headRange };
    const last = body.at(-1)?.range.end ?? headRange.end;
    const margin = " ".repeat(this.#marginOf(opener) ?? 0);
    const fix: Fix = {
      title: "Close the block",
      edits: [{ span: { file, start: last, end: last }, text: `\n${margin}}` }],
    };
    if (before === null) {
      this.#report(
        finding("syntax", headSpan, `\`${head}\` is never closed; its \`}\` is missing.`, { fix }),
      );
    } else {
      const span = { file, ...extent(before.tokens[0]) };
      const facts = [{ message: `\`${head}\` is opened here`, span: headSpan }];
      const what = `\`${before.tokens[0].image}\``;
      this.#report(
        finding("syntax", span, `A \`}\` is missing before ${what}: \`${head}\` is still open.`, {
          facts,
          fix,
        }),
      );
    }
    this.#missing -= 1;
    this.#balanced = false;
    this.#close(Math.max(last, headRange.end));
  }

  #report(found: Finding): void {
    if (this.#findings.length < LIMITS.syntaxFindings) this.#findings.push(found);
  }

  #marginOf(line: Line): number | null {
    const first = line.tokens[0] ?? line.opens;
    return first === null || first === undefined ? null : this.#margin(first.startOffset);
  }

  /** How many blanks stand before what begins its line; null where something else does. */
  #margin(offset: number): number | null {
    let at = offset;
    while (at > 0 && (this.#source.text[at - 1] === " " || this.#source.text[at - 1] === "\t")) at -= 1;
    const begins = at === 0 || this.#source.text[at - 1] === "\n" || this.#source.text[at - 1] === "\r";
    return begins ? offset - at : null;
  }
}

function extent(token: IToken): Range {
  return { start: token.startOffset, end: token.startOffset + token.image.length };
}
