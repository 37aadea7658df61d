import { EmbeddedActionsParser, type IToken, type TokenType } from "chevrotain";
import type { FindingName } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import { parseUnit } from "../units/parse-unit.ts";
import { Chain } from "./chain.ts";
import { LIMITS } from "./limits.ts";
import { EXPECTED, rangeOf } from "./messages.ts";
import type { Mistake } from "./mistake.ts";
import {
  Binary,
  belongs,
  Caret,
  Close,
  CloseIndex,
  Comma,
  Dot,
  Else,
  Equals,
  Minus,
  Name,
  NumberText,
  Open,
  OpenIndex,
  Percent,
  Prefix,
  Slash,
  Star,
  Text,
  UnitHead,
  UnitPart,
  VOCABULARY,
  Where,
} from "./tokens.ts";
import type { Expression, Identifier, IndexedName, Reference, StringLiteral, UnitText } from "./tree.ts";

/**
 * The rules of expressions, names and units. Each rule is run for one line at a time, and the first mistake ends it:
 * the next line is read afresh, so that one slip costs one statement. The rules of statements are added by those who extend this.
 */
export class ExpressionParser extends EmbeddedActionsParser {
  text = "";
  /** Mistakes that leave the grammar's path intact: the statement is read to its end, then refused. */
  slips: Mistake[] = [];
  /** `=` compares only inside brackets and conditions; elsewhere it belongs to the statement. */
  protected equality = 0;
  /** How many brackets and waiting operators stand round what is being read. */
  #depth = 0;

  constructor(validate: boolean) {
    super(VOCABULARY, {
      recoveryEnabled: false,
      maxLookahead: 1,
      errorMessageProvider: EXPECTED,
      skipValidations: !validate,
    });
  }

  /** Makes ready for one line. */
  protected begin(text: string, tokens: IToken[]): void {
    this.text = text;
    this.slips = [];
    this.equality = 0;
    this.#depth = 0;
    this.input = tokens;
  }

  protected slip(name: FindingName, range: Range, message: string, mend?: Mistake["mend"]): void {
    if (!this.RECORDING_PHASE) this.slips.push({ name, range, message, mend });
  }

  protected to(start: number): Range {
    return { start, end: ends(this.LA(0)) };
  }

  readonly expression = this.RULE("expression", (): Expression => {
    let last = this.SUBRULE(this.simple);
    const arms: { readonly value: Expression; readonly condition: Expression }[] = [];
    const outside = this.#depth;
    this.MANY(() => {
      this.CONSUME(Where);
      this.#nest(1);
      this.equality += 1;
      const condition = this.SUBRULE1(this.simple);
      this.equality -= 1;
      this.CONSUME(Else);
      arms.push({ value: last, condition });
      last = this.SUBRULE2(this.simple);
    });
    this.#depth = outside;
    if (this.RECORDING_PHASE) return last;
    for (let arm = arms.pop(); arm !== undefined; arm = arms.pop()) {
      const range = { start: arm.value.range.start, end: last.range.end };
      // biome-ignore lint/suspicious/noThenProperty: the branch is an expression, nothing that could be awaited.
      last = { kind: "where", then: arm.value, condition: arm.condition, otherwise: last, range };
    }
    return last;
  });

  /** Operands joined by operators, without `where`. */
  readonly simple = this.RULE("simple", (): Expression => {
    const chain = new Chain((range) =>
      this.slip(
        "syntax",
        range,
        "Comparisons can't be chained; join two of them with `and`, as in `a < b and b < c`.",
      ),
    );
    const outside = this.#depth;
    this.MANY1(() => chain.prefix(this.CONSUME1(Prefix)));
    this.#nest(chain.depth);
    chain.operand(this.SUBRULE1(this.operand));
    this.MANY2({
      GATE: () => this.equality > 0 || this.LA(1).tokenType !== Equals,
      DEF: () => {
        const joint = this.CONSUME2(Binary);
        this.ACTION(() => chain.binary(joint));
        this.MANY3(() => chain.prefix(this.CONSUME3(Prefix)));
        this.#depth = outside;
        this.#nest(chain.depth);
        chain.operand(this.SUBRULE2(this.operand));
      },
    });
    this.#depth = outside;
    if (this.RECORDING_PHASE) return MISSING;
    const whole = chain.finish();
    if (chain.terms <= LIMITS.terms) return whole;
    const limit = LIMITS.terms.toLocaleString("en");
    this.slip(
      "too-large",
      whole.range,
      `An expression may have ${limit} terms; this one has ${chain.terms.toLocaleString("en")}.`,
    );
    return { kind: "missing", range: whole.range };
  });

  readonly operand = this.RULE(
    "operand",
    (): Expression =>
      this.#bareReference() ??
      this.OR<Expression>([
        { ALT: () => this.SUBRULE(this.quantity) },
        { GATE: () => this.LA(2).tokenType === Open, ALT: () => this.SUBRULE(this.call) },
        { ALT: () => this.SUBRULE(this.reference), IGNORE_AMBIGUITIES: true },
        { ALT: () => this.SUBRULE(this.group) },
        { ALT: () => ({ kind: "string", ...this.SUBRULE(this.quoted) }) },
      ]),
  );

  readonly group = this.RULE("group", (): Expression => {
    const start = this.CONSUME(Open).startOffset;
    this.equality += 1;
    this.#nest(1);
    const inner = this.SUBRULE(this.expression);
    this.#depth -= 1;
    this.equality -= 1;
    this.CONSUME(Close);
    return { kind: "group", inner, range: this.to(start) };
  });

  readonly call = this.RULE("call", (): Expression => {
    const name = identifier(this.CONSUME(Name));
    const list: Expression[] = [];
    this.CONSUME(Open);
    this.equality += 1;
    this.#nest(1);
    this.MANY_SEP({ SEP: Comma, DEF: () => list.push(this.SUBRULE(this.expression)) });
    this.#depth -= 1;
    this.equality -= 1;
    this.CONSUME(Close);
    return { kind: "call", name, arguments: list, range: this.to(name.range.start) };
  });

  readonly quantity = this.RULE("quantity", (): Expression => {
    const number = this.CONSUME(NumberText);
    const unit = this.OPTION({ GATE: () => this.#unitFollows(), DEF: () => this.SUBRULE(this.unit) });
    const text = number.image;
    const value = Number(text);
    const range = this.to(number.startOffset);
    if (unit === undefined) return { kind: "number", value, text, range };
    if (!this.RECORDING_PHASE) this.#judgeUnit(number, unit);
    return { kind: "quantity", value, text, unit, range };
  });

  /** `kN*m/rad^2`, `%`, `1/s`, `1`: a run of signs without blanks. */
  readonly unit = this.RULE("unit", (): UnitText => {
    const first = this.OR([{ ALT: () => this.CONSUME(UnitHead) }, { ALT: () => this.CONSUME(NumberText) }]);
    this.MANY({ GATE: () => this.#unitGoesOn(), DEF: () => this.CONSUME(UnitPart) });
    const range = this.to(first.startOffset);
    return { text: this.text.slice(range.start, range.end), range };
  });

  /** `armature.f`, `cell[i-1].spring.q`. */
  readonly reference = this.RULE("reference", (): Reference => {
    const first = this.#bareName() ?? this.SUBRULE1(this.indexed);
    const path = [first];
    this.MANY(() => {
      this.CONSUME(Dot);
      path.push(this.#bareName() ?? this.SUBRULE2(this.indexed));
    });
    return { kind: "reference", path, range: this.RECORDING_PHASE ? NOWHERE : this.to(first.range.start) };
  });

  readonly indexed = this.RULE("indexed", (): IndexedName => {
    const name = identifier(this.CONSUME(Name));
    const indices: Expression[] = [];
    this.MANY(() => {
      this.CONSUME(OpenIndex);
      this.#nest(1);
      indices.push(this.SUBRULE(this.expression));
      this.#depth -= 1;
      this.CONSUME(CloseIndex);
    });
    return { name, indices, range: indices.length === 0 ? name.range : this.to(name.range.start) };
  });

  readonly quoted = this.RULE("quoted", (): StringLiteral => {
    const token = this.CONSUME(Text);
    return { value: token.image.slice(1, -1), range: rangeOf(token) };
  });

  /** Most operands are a name and nothing more: those are taken at once, not by way of three rules. */
  #bareReference(): Reference | null {
    const after = this.LA(2).tokenType;
    if (after === Open || after === Dot) return null;
    const name = this.#bareName();
    return name === null ? null : { kind: "reference", path: [name], range: name.range };
  }

  /** A name without an index; null while Chevrotain records the grammar, which it must see in full. */
  #bareName(): IndexedName | null {
    if (this.RECORDING_PHASE || this.LA(2).tokenType === OpenIndex) return null;
    if (!belongs(this.LA(1).tokenType, Name)) return null;
    const name = identifier(this.CONSUME(Name));
    return { name, indices: [], range: name.range };
  }

  /** Stops before the call stack can run out, whatever brackets, signs and powers are piled up. */
  #nest(more: number): void {
    this.#depth += more;
    if (this.#depth > LIMITS.depth) throw new TooDeep(this.LA(1));
  }

  /** A unit stands on the line of its number. */
  #unitFollows(): boolean {
    const next = this.LA(1);
    for (let at = ends(this.LA(0)); at < next.startOffset; at += 1) {
      if (this.text[at] === "\n" || this.text[at] === "\r") return false;
    }
    if (next.tokenType === Name || next.tokenType === Percent) return true;
    const [stroke, word] = [this.LA(2), this.LA(3)];
    if (next.image !== "1" || stroke.tokenType !== Slash || stroke.startOffset !== ends(next)) return false;
    return word.startOffset === ends(stroke) && isWord(word);
  }

  #unitGoesOn(): boolean {
    const previous = this.LA(0);
    const next = this.LA(1);
    const after = this.LA(2);
    if (next.startOffset !== ends(previous)) return false;
    if (isJoint(next.tokenType)) return after.startOffset === ends(next) && isWord(after);
    if (next.tokenType === Caret) return after.startOffset === ends(next) && mayBePower(after);
    if (next.tokenType === Minus) return previous.tokenType === Caret;
    if (next.tokenType === NumberText) return previous.tokenType === Caret || previous.tokenType === Minus;
    return isWord(next) && (isJoint(previous.tokenType) || previous.tokenType === Caret);
  }

  /** A unit that is not known is left to the resolver, but for what is plainly a slip of the pen. */
  #judgeUnit(number: IToken, unit: UnitText): void {
    const range = { start: number.startOffset, end: unit.range.end };
    const apart = `${number.image} ${unit.text}`;
    if (unit.range.start === ends(number)) {
      const product = unit.text === "%" ? "" : `, or \`${number.image}*${unit.text}\` for a product`;
      const message = `Put a blank between a number and its unit: \`${apart}\`${product}.`;
      this.slip("syntax", range, message, { range, text: apart });
      return;
    }
    if (parseUnit(unit.text) !== null) return;
    const joints = [...unit.text.matchAll(/[*/^]/g)].reverse();
    const joint = joints.find(({ index }) => parseUnit(unit.text.slice(0, index)) !== null);
    if (joint === undefined) return;
    const message = `\`${unit.text}\` is not a unit; put blanks round \`${joint[0]}\` if a value of that name is meant.`;
    const text = `${unit.text.slice(0, joint.index)} ${joint[0]} ${unit.text.slice(joint.index + 1)}`;
    this.slip("syntax", unit.range, message, { range: unit.range, text });
  }
}

/** Thrown inside a rule and caught by whoever ran it. */
export class TooDeep extends Error {
  readonly token: IToken;
  constructor(token: IToken) {
    super("too deep");
    this.token = token;
  }
}

export const NOWHERE: Range = { start: 0, end: 0 };
/** What the rules hand round while Chevrotain only records their shape. */
const MISSING: Expression = { kind: "missing", range: NOWHERE };

export function identifier(token: IToken): Identifier {
  return { text: token.image, range: rangeOf(token) };
}

function ends(token: IToken): number {
  return token.startOffset + token.image.length;
}

function isJoint(type: TokenType): boolean {
  return type === Star || type === Slash;
}

/** What may stand behind `^` in a unit; that the power is a whole number is the resolver's question. */
function mayBePower(token: IToken): boolean {
  return token.tokenType === NumberText || token.tokenType === Minus || isWord(token);
}

/** Names, words of clauses and `%`. */
function isWord(token: IToken): boolean {
  return token.tokenType === Percent || belongs(token.tokenType, Name);
}
