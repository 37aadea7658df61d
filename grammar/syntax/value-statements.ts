import type { Range } from "../source/span.ts";
import { ExpressionParser, identifier, NOWHERE } from "./expressions.ts";
import { Colon, clauseToken, DotDot, Equals, Name } from "./tokens.ts";
import type {
  Expression,
  Identifier,
  IndexedName,
  InputDeclaration,
  LetDeclaration,
  OutputDeclaration,
  TrackDeclaration,
  ValueDeclaration,
} from "./tree.ts";
import { RESERVED_NAMES } from "./words.ts";

const RangeWord = clauseToken("range");
const AsWord = clauseToken("as");
const FromWord = clauseToken("from");

/** What a line brings along beside its tokens. */
export interface LineFacts {
  readonly range: Range;
  readonly description: string | null;
  readonly remark: string | null;
}

export type Declared = { readonly name: Identifier; readonly space: "node" | "value" | "file" };

/** The head of a block: the outline adds what stands between the braces. */
export type Head<Block> = Omit<Block, "block" | "body">;

/** The rules that declare values. Every statement begins with its own head word, which the caller has looked at. */
export class ValueStatements extends ExpressionParser {
  protected line: LineFacts = { range: NOWHERE, description: null, remark: null };
  /** What the line declares, as soon as its name has been read. */
  declares: Declared | null = null;

  protected declare(name: Identifier, space: Declared["space"]): void {
    if (this.RECORDING_PHASE) return;
    this.declares = { name, space };
    this.refuseReserved(name);
  }

  protected refuseReserved(name: Identifier): void {
    if (!RESERVED_NAMES.has(name.text)) return;
    this.slip(
      "reserved-name",
      name.range,
      `\`${name.text}\` is reserved and can't be declared; choose another name.`,
    );
  }

  protected readonly newName = this.RULE("newName", (): Identifier => identifier(this.CONSUME(Name)));

  readonly param = this.RULE("param", (): ValueDeclaration => {
    const { text } = identifier(this.CONSUME(Name));
    const { name, indices } = this.SUBRULE(this.valueName);
    this.CONSUME(Equals);
    const value = this.SUBRULE(this.expression);
    const bounds = this.OPTION(() => {
      const { startOffset } = this.CONSUME(RangeWord);
      return { ...this.SUBRULE(this.interval), range: this.to(startOffset) };
    });
    return { kind: text as "param" | "const", ...this.line, name, indices, value, bounds: bounds ?? null };
  });

  /** `lo .. hi`. */
  protected readonly interval = this.RULE("interval", (): { low: Expression; high: Expression } => {
    const low = this.SUBRULE1(this.expression);
    this.CONSUME(DotDot);
    const high = this.SUBRULE2(this.expression);
    return { low, high };
  });

  protected readonly valueName = this.RULE("valueName", (): IndexedName => {
    const name = this.SUBRULE(this.indexed);
    if (!this.RECORDING_PHASE) this.declare(name.name, "value");
    return name;
  });

  protected readonly nodeName = this.RULE("nodeName", (): IndexedName => {
    const name = this.SUBRULE(this.indexed);
    if (!this.RECORDING_PHASE) this.declare(name.name, "node");
    return name;
  });

  readonly inputStatement = this.RULE("inputStatement", (): InputDeclaration => {
    this.CONSUME(Name);
    const { name, indices } = this.SUBRULE(this.valueName);
    this.CONSUME(Colon);
    const unit = this.SUBRULE(this.unit);
    const nominal = this.OPTION(() => {
      this.CONSUME(Equals);
      return this.SUBRULE(this.expression);
    });
    return { kind: "input", ...this.line, name, indices, unit, nominal: nominal ?? null };
  });

  readonly output = this.RULE("output", (): OutputDeclaration => {
    this.CONSUME(Name);
    const { name, indices } = this.SUBRULE(this.valueName);
    this.CONSUME(Equals);
    const value = this.SUBRULE(this.expression);
    const unit = this.OPTION(() => {
      this.CONSUME(AsWord);
      return this.SUBRULE(this.unit);
    });
    return { kind: "output", ...this.line, name, indices, value, unit: unit ?? null };
  });

  readonly let = this.RULE("let", (): LetDeclaration => {
    this.CONSUME(Name);
    const { name, indices } = this.SUBRULE(this.valueName);
    this.CONSUME(Equals);
    const value = this.SUBRULE(this.expression);
    return { kind: "let", ...this.line, name, indices, value };
  });

  readonly track = this.RULE("track", (): TrackDeclaration => {
    this.CONSUME(Name);
    const { name, indices } = this.SUBRULE(this.valueName);
    this.CONSUME(Equals);
    const rate = this.SUBRULE1(this.expression);
    const from = this.OPTION(() => {
      this.CONSUME(FromWord);
      return this.SUBRULE2(this.expression);
    });
    return { kind: "track", ...this.line, name, indices, rate, from: from ?? null };
  });
}
