import { EOF, type IToken } from "chevrotain";
import type { Finding, FindingName } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import type { SourceText } from "../source/text.ts";
import { TooDeep } from "./expressions.ts";
import { type NotationParser, notationParser } from "./grammar.ts";
import { LIMITS } from "./limits.ts";
import type { Line } from "./lines.ts";
import { explain, explainSign, rangeOf, show } from "./messages.ts";
import { type Mistake, toFinding } from "./mistake.ts";
import { AnyArrow, belongs, Comma, Dot, Name, NumberText, OpenIndex, Text } from "./tokens.ts";
import type { File, Unreadable } from "./tree.ts";
import { explainHead } from "./unknown-head.ts";
import type { Declared, LineFacts } from "./value-statements.ts";
import { ELEMENT_WORDS, FILE_WORDS, STATEMENT_WORDS, SYSTEM_WORDS, TRIAL_WORDS } from "./words.ts";

export type Place = "file" | "system" | "trial";

/** A statement, or the head of a block; what comes of it is the business of whoever knows the line's brace. */
type Read = { readonly kind: string };

type Rule = (parser: NotationParser) => Read;

/** The rule behind each head word. */
const RULES: ReadonlyMap<string, Rule> = new Map<string, Rule>([
  ["use", (parser) => parser.use()],
  ["domain", (parser) => parser.domain()],
  ["function", (parser) => parser.function()],
  ["curve", (parser) => parser.curve()],
  ["system", (parser) => parser.system()],
  ["trial", (parser) => parser.trial()],
  ["param", (parser) => parser.param()],
  ["const", (parser) => parser.param()],
  ["input", (parser) => parser.inputStatement()],
  ["output", (parser) => parser.output()],
  ["let", (parser) => parser.let()],
  ["track", (parser) => parser.track()],
  ["junction", (parser) => parser.junction()],
  ["element", (parser) => parser.element()],
  ["sub", (parser) => parser.sub()],
  ["port", (parser) => parser.port()],
  ["wiring", (parser) => parser.wiring()],
  ["start", (parser) => parser.start()],
  ["repeat", (parser) => parser.repeat()],
  ["expect", (parser) => parser.expect()],
  ["set", (parser) => parser.set()],
  ["drive", (parser) => parser.drive()],
  ["run", (parser) => parser.run()],
  ["record", (parser) => parser.record()],
  ["vary", (parser) => parser.vary()],
  ["scatter", (parser) => parser.scatter()],
  ["compare", (parser) => parser.compare()],
]);

const WORDS: Record<Place, ReadonlySet<string>> = {
  file: new Set(FILE_WORDS),
  system: new Set([...SYSTEM_WORDS, "junction", "element", "wiring"]),
  trial: new Set(TRIAL_WORDS),
};

const BLOCKS: ReadonlySet<string> = new Set(["system", "trial", "repeat"]);

/** Reads one line at a time: finds its form by its head, runs the rule, and says what went wrong. */
export class StatementReader {
  readonly #source: SourceText;
  readonly #findings: Finding[];
  readonly #parser = notationParser();
  edition: File["edition"] = null;
  #begun = false;
  #full = false;
  /** The place of the last statement that stood in the wrong one: a run of them is told once. */
  #misplaced: string | null = null;

  constructor(source: SourceText, findings: Finding[]) {
    this.#source = source;
    this.#findings = findings;
  }

  /** Can this line only stand at file level? */
  belongsToFile(line: Line): boolean {
    const [first, second] = line.tokens;
    if (first?.tokenType !== Name || second === undefined || first.image === "const") return false;
    if (!WORDS.file.has(first.image)) return false;
    return isWord(second) || (first.image === "use" && second.tokenType === Text);
  }

  /** Is this the head of a block, without its brace? */
  wantsBrace({ tokens: [first, second], opens }: Line): boolean {
    return (
      opens === null && first?.tokenType === Name && BLOCKS.has(first.image) && second?.tokenType === Name
    );
  }

  /** null for `notation`, which is no item of the file. */
  read(line: Line, place: Place): Read | null {
    const range = extent(line);
    const facts: LineFacts = { range, description: line.description, remark: line.remark };
    if (this.#findings.length >= LIMITS.syntaxFindings) {
      if (!this.#full)
        this.#report("syntax", range, "From here on the file was not read: too many statements can't be.");
      this.#full = true;
      return unreadable(facts, null);
    }
    if (line.tokens.length === 0) {
      this.#report("syntax", range, "A `{` follows the head of a block, as in `system NAME {`.");
      return unreadable(facts, null);
    }
    if (line.tooDeep !== null) {
      this.#report(
        "too-large",
        rangeOf(line.tooDeep),
        `Brackets may stand ${LIMITS.depth} deep within each other.`,
      );
      return unreadable(facts, null);
    }
    const form = this.#form(line, place);
    if (form === "notation") return this.#notation(line, facts, place);
    this.#begun = true;
    if (form === null) return unreadable(facts, null);
    if (!WORDS[place].has(form)) return this.#refuse(form, line, place, facts);
    this.#misplaced = null;
    return this.#run(form, line, facts);
  }

  #run(form: string, line: Line, facts: LineFacts): Read {
    const before = this.#findings.length;
    const parser = this.#parser;
    parser.take(this.#source.text, line.tokens, facts);
    const rule = RULES.get(form) as Rule;
    let statement: Read | undefined;
    let deep: TooDeep | null = null;
    try {
      statement = rule(parser);
    } catch (thrown) {
      if (!(thrown instanceof TooDeep)) throw thrown;
      deep = thrown;
    }
    if (line.stray !== null) this.#tell(explainSign(line.stray));
    else if (deep !== null) {
      const at = deep.token.tokenType === EOF ? facts.range : rangeOf(deep.token);
      this.#report(
        "too-large",
        at,
        `Brackets, signs and powers may stand ${LIMITS.depth} deep within each other.`,
      );
    } else if (parser.errors.length > 0) {
      // `300 K*exp(x)` fails at its bracket, because `K*exp` was taken for a unit.
      const [error] = parser.errors;
      const cause = parser.slips.find(({ range }) => range.end === error.token.startOffset);
      this.#tell(cause ?? explain(error, form, line.tokens));
    } else {
      for (const slip of parser.slips) this.#tell(slip);
      if (this.#findings.length === before) this.#judgeBrace(form, line);
    }
    const bad = this.#findings.length > before || statement === undefined;
    return bad ? unreadable(facts, parser.declares) : (statement as Read);
  }

  #judgeBrace(form: string, line: Line): void {
    if (BLOCKS.has(form) && line.opens === null) {
      const range = rangeOf(line.tokens.at(-1) as IToken);
      this.#report(
        "syntax",
        range,
        `A \`{\` is missing at the end of the line: \`${form}\` holds statements up to its \`}\`.`,
        { range: { start: range.end, end: range.end }, text: " {" },
      );
    } else if (!BLOCKS.has(form) && line.opens !== null) {
      this.#report(
        "syntax",
        rangeOf(line.opens),
        "Only `system`, `trial` and `repeat` hold a block in `{ }`.",
      );
    }
  }

  #form(line: Line, place: Place): string | null {
    const [head, next] = line.tokens;
    const word = head.image;
    if (head.tokenType === NumberText) {
      if (word === "0" || word === "1") return "junction";
      this.#report(
        "syntax",
        rangeOf(head),
        `A statement can't begin with ${show(head)}; junctions are \`0\` and \`1\`.`,
      );
      return null;
    }
    const type = next?.tokenType;
    const wired =
      type === Comma || type === Dot || type === OpenIndex || (type !== undefined && belongs(type, AnyArrow));
    if (isWord(head) && wired) return "wiring";
    if (WORDS[place].has(word) && RULES.has(word)) return word;
    if (word === "notation") return word;
    if (ELEMENT_WORDS.has(word)) return "element";
    if (STATEMENT_WORDS.has(word)) return word;
    if (line.tokens.some(({ tokenType }) => belongs(tokenType, AnyArrow))) return "wiring";
    const kinds = place === "system" ? [...ELEMENT_WORDS.keys()] : [];
    this.#tell(explainHead(line.tokens, line.stray, place, [...WORDS[place], ...kinds]));
    return null;
  }

  /** A statement that is known, but not here. */
  #refuse(form: string, line: Line, place: Place, facts: LineFacts): Read {
    const home = WORDS.system.has(form) ? "system" : WORDS.trial.has(form) ? "trial" : "file";
    if (this.#misplaced !== `${home} ${place}`) {
      this.#misplaced = `${home} ${place}`;
      const what =
        form === "wiring" || form === "junction" || form === "element" ? WHAT[form] : `\`${form}\``;
      const where = home === "file" ? "at file level, outside every block" : `in a \`${home}\``;
      this.#report(
        "syntax",
        rangeOf(line.tokens[0]),
        `${what} belongs ${where}${place === "file" ? "" : `, not in a ${place}`}.`,
      );
    }
    return unreadable(facts, null);
  }

  #notation(line: Line, facts: LineFacts, place: Place): Read | null {
    const parser = this.#parser;
    parser.take(this.#source.text, line.tokens, facts);
    const number = parser.notation();
    if (parser.errors.length > 0 || line.stray !== null || line.opens !== null) {
      this.#report("syntax", facts.range, "The first line says the edition: `notation 1`.");
      return unreadable(facts, null);
    }
    if (place !== "file" || this.edition !== null || this.#begun) {
      const message =
        this.edition === null
          ? "`notation 1` stands on the first line of a file."
          : "The edition is said already; take this line away.";
      this.#report("syntax", facts.range, message);
      if (place !== "file" || this.edition !== null) return unreadable(facts, null);
    } else if (number.image !== "1") {
      this.#report(
        "syntax",
        rangeOf(number),
        `This is edition ${show(number)} of the notation; only edition 1 can be read here.`,
      );
    }
    this.edition = { number: Number(number.image), range: facts.range };
    return null;
  }

  #report(name: FindingName, range: Range, message: string, mend?: Mistake["mend"]): void {
    this.#tell({ name, range, message, mend });
  }

  #tell(mistake: Mistake): void {
    this.#findings.push(toFinding(mistake, this.#source.path));
  }
}

const WHAT = { wiring: "Wiring", junction: "A junction", element: "An element" } as const;

function unreadable(facts: LineFacts, declares: Declared | null): Unreadable {
  return { kind: "unreadable", ...facts, declares };
}

function extent(line: Line): Range {
  const first = line.tokens[0] ?? line.opens;
  const last = line.tokens.at(-1) ?? line.opens;
  return {
    start: (first as IToken).startOffset,
    end: (last as IToken).startOffset + (last as IToken).image.length,
  };
}

function isWord(token: IToken): boolean {
  return belongs(token.tokenType, Name);
}
