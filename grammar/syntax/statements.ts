import type { Range } from "../source/span.ts";
import { isComparison } from "./chain.ts";
import { ExpressionParser, identifier, NOWHERE, rangeOf } from "./expressions.ts";
import {
  AnyArrow,
  Close,
  Colon,
  Comma,
  clauseToken,
  DemandFrom,
  DotDot,
  Equals,
  Name,
  NumberText,
  OneWay,
  Open,
} from "./tokens.ts";
import type {
  Arrow,
  Condition,
  ElementDeclaration,
  Expect,
  Expression,
  FieldPort,
  Identifier,
  IndexedName,
  InputDeclaration,
  JunctionDeclaration,
  Law,
  LetDeclaration,
  OutputDeclaration,
  PortDeclaration,
  Reference,
  Repeat,
  Start,
  SubDeclaration,
  TrackDeclaration,
  ValueDeclaration,
  Wiring,
} from "./tree.ts";
import { ELEMENT_WORDS, RESERVED_NAMES } from "./words.ts";

const RangeWord = clauseToken("range");
const AsWord = clauseToken("as");
const FromWord = clauseToken("from");
const TakesWord = clauseToken("takes");
const GivesWord = clauseToken("gives");
const WithinWord = clauseToken("within");
const BetweenWord = clauseToken("between");
const SteadyWord = clauseToken("steady");

/** What a line brings along beside its tokens. */
export interface LineFacts {
  readonly range: Range;
  readonly description: string | null;
  readonly remark: string | null;
}

export type Declared = { readonly name: Identifier; readonly space: "node" | "value" | "file" };

/** The head of a block: the outline adds what stands between the braces. */
export type Head<Block> = Omit<Block, "block" | "body">;

/** The rules of the statements in a system. Each begins with its own head word, which the caller has looked at. */
export class SystemStatements extends ExpressionParser {
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

  readonly junction = this.RULE("junction", (): JunctionDeclaration => {
    const junction = this.CONSUME(NumberText).image as "0" | "1";
    const name = this.SUBRULE(this.nodeName);
    const domain = this.SUBRULE(this.domainClause);
    return { kind: "junction", ...this.line, junction, name, domain };
  });

  /** `[: domain]`. */
  protected readonly domainClause = this.RULE("domainClause", (): Identifier | null => {
    const domain = this.OPTION(() => {
      this.CONSUME(Colon);
      return identifier(this.CONSUME(Name));
    });
    return domain ?? null;
  });

  readonly element = this.RULE("element", (): ElementDeclaration => {
    const word = identifier(this.CONSUME(Name));
    const name = this.SUBRULE(this.nodeName);
    const ports = this.OPTION1(() => {
      const list: FieldPort[] = [];
      this.CONSUME(Open);
      this.AT_LEAST_ONE_SEP1({ SEP: Comma, DEF: () => list.push(this.SUBRULE(this.fieldPort)) });
      this.CONSUME(Close);
      return list;
    });
    const domain = this.SUBRULE(this.domainClause);
    const laws: Law[] = [];
    const valueOf = this.OPTION2(() =>
      this.OR<Expression | null>([
        {
          ALT: () => {
            this.CONSUME(Equals);
            return this.SUBRULE(this.expression);
          },
        },
        {
          ALT: () => {
            this.AT_LEAST_ONE_SEP2({ SEP: Comma, DEF: () => laws.push(this.SUBRULE(this.law)) });
            return null;
          },
        },
      ]),
    );
    const element = ELEMENT_WORDS.get(word.text) ?? "R";
    const rest = { element, word, name, ports: ports ?? null, domain, valueOf: valueOf ?? null, laws };
    return { kind: "element", ...this.line, ...rest };
  });

  protected readonly fieldPort = this.RULE("fieldPort", (): FieldPort => {
    const start = this.LA(1).startOffset;
    const gives = this.OPTION({
      GATE: () =>
        this.LA(2).tokenType !== Comma && this.LA(2).tokenType !== Close && this.LA(2).tokenType !== Colon,
      DEF: () => this.CONSUME(GivesWord),
    });
    const name = this.SUBRULE(this.newName);
    const domain = this.SUBRULE(this.domainClause);
    return { name, gives: gives !== undefined, domain, range: this.to(start) };
  });

  protected readonly law = this.RULE("law", (): Law => {
    const left = this.SUBRULE(this.reference);
    const oneWay = this.OR([
      {
        ALT: () => {
          this.CONSUME(Equals);
          return false;
        },
      },
      {
        ALT: () => {
          this.CONSUME(OneWay);
          return true;
        },
      },
    ]);
    const right = this.SUBRULE(this.expression);
    return { left, oneWay, right, range: this.RECORDING_PHASE ? NOWHERE : this.to(left.range.start) };
  });

  readonly sub = this.RULE("sub", (): SubDeclaration => {
    this.CONSUME1(Name);
    const name = this.SUBRULE(this.nodeName);
    this.CONSUME(Equals);
    const system = identifier(this.CONSUME2(Name));
    const overrides: SubDeclaration["overrides"][number][] = [];
    this.OPTION(() => {
      this.CONSUME(Open);
      this.MANY_SEP({ SEP: Comma, DEF: () => overrides.push(this.SUBRULE(this.override)) });
      this.CONSUME(Close);
    });
    return { kind: "sub", ...this.line, name, system, overrides };
  });

  protected readonly override = this.RULE("override", (): SubDeclaration["overrides"][number] => {
    const name = this.SUBRULE(this.newName);
    this.CONSUME(Equals);
    const value = this.SUBRULE(this.expression);
    return { name, value, range: this.RECORDING_PHASE ? NOWHERE : this.to(name.range.start) };
  });

  readonly port = this.RULE("port", (): PortDeclaration => {
    this.CONSUME(Name);
    const name = this.SUBRULE(this.nodeName);
    const gives = this.OR([
      {
        ALT: () => {
          this.CONSUME(TakesWord);
          return false;
        },
      },
      {
        ALT: () => {
          this.CONSUME(GivesWord);
          return true;
        },
      },
    ]);
    const domain = this.OPTION(() => this.SUBRULE(this.newName));
    return { kind: "port", ...this.line, name, gives, domain: domain ?? null };
  });

  readonly wiring = this.RULE("wiring", (): Wiring => {
    const groups: Reference[][] = [this.SUBRULE1(this.ends)];
    const arrows: Arrow[] = [];
    this.AT_LEAST_ONE(() => {
      const arrow = this.CONSUME(AnyArrow);
      const stroke = arrow.image === "->" ? null : arrow.tokenType === DemandFrom ? "from" : "to";
      arrows.push({ range: rangeOf(arrow), stroke });
      groups.push(this.SUBRULE2(this.ends));
    });
    const named = this.OPTION(() => {
      this.CONSUME(AsWord);
      return this.SUBRULE(this.nodeName);
    });
    const as = named ?? null;
    if (!this.RECORDING_PHASE) this.#judgeWiring(groups, as);
    return { kind: "wiring", ...this.line, groups, arrows, as };
  });

  protected readonly ends = this.RULE("ends", (): Reference[] => {
    const ends: Reference[] = [];
    this.AT_LEAST_ONE_SEP({ SEP: Comma, DEF: () => ends.push(this.SUBRULE(this.reference)) });
    return ends;
  });

  #judgeWiring(groups: readonly Reference[][], as: IndexedName | null): void {
    const many = groups.findIndex((group, i) => group.length > 1 && i > 0 && i < groups.length - 1);
    if (many !== -1) {
      const range = { start: groups[many][0].range.start, end: (groups[many].at(-1) as Reference).range.end };
      this.slip(
        "syntax",
        range,
        "Commas stand before the first arrow or after the last; write a line for each branch.",
      );
    } else if (groups.length === 2 && groups[0].length > 1 && groups[1].length > 1) {
      this.slip(
        "syntax",
        this.line.range,
        "An arrow joins many to one or one to many; write a line for each bond.",
      );
    } else if (as !== null && (groups.length > 2 || groups.some((group) => group.length > 1))) {
      this.slip(
        "syntax",
        as.range,
        "`as` names one bond; write the bond that it names on a line of its own.",
      );
    }
  }

  readonly start = this.RULE("start", (): Start => {
    this.CONSUME(Name);
    const { target, value } = this.OR<Pick<Start, "target" | "value">>([
      {
        GATE: () => this.LA(2).tokenType !== Equals,
        ALT: () => {
          this.CONSUME(SteadyWord);
          return { target: null, value: null };
        },
      },
      {
        ALT: () => {
          const target = this.SUBRULE(this.reference);
          this.CONSUME(Equals);
          return { target, value: this.SUBRULE(this.expression) };
        },
        IGNORE_AMBIGUITIES: true,
      },
    ]);
    return { kind: "start", ...this.line, target, value };
  });

  readonly repeat = this.RULE("repeat", (): Head<Repeat> => {
    this.CONSUME(Name);
    const index = this.SUBRULE(this.newName);
    if (!this.RECORDING_PHASE) this.declare(index, "value");
    this.CONSUME(Equals);
    const { low, high } = this.SUBRULE(this.interval);
    return { kind: "repeat", ...this.line, index, low, high };
  });

  readonly expect = this.RULE("expect", (): Expect => {
    this.CONSUME(Name);
    const measure = this.SUBRULE1(this.simple);
    const relation = this.OPTION1(() =>
      this.OR<Condition>([
        {
          ALT: () => {
            this.CONSUME(Equals);
            const right = this.SUBRULE2(this.simple);
            return { kind: "comparison", left: measure, operator: "=", right, within: null, range: NOWHERE };
          },
        },
        {
          ALT: () => {
            this.CONSUME(BetweenWord);
            return this.#between(measure, this.SUBRULE3(this.simple));
          },
        },
      ]),
    );
    const within = this.OPTION2(() => {
      this.CONSUME(WithinWord);
      return this.SUBRULE4(this.simple);
    });
    const condition = relation ?? { kind: "fact", measure, within: null, range: NOWHERE };
    if (this.RECORDING_PHASE) return { kind: "expect", ...this.line, condition };
    const range = this.to(measure.range.start);
    return { kind: "expect", ...this.line, condition: this.#settle(condition, within ?? null, range) };
  });

  /** `b and c` after `between` was read as one expression. */
  #between(measure: Expression, bounds: Expression): Condition {
    if (bounds.kind === "binary" && bounds.operator === "and") {
      return { kind: "between", measure, low: bounds.left, high: bounds.right, range: NOWHERE };
    }
    this.slip("syntax", bounds.range, "`between` wants two bounds, as in `between 2 and 3`.");
    return { kind: "between", measure, low: bounds, high: bounds, range: NOWHERE };
  }

  #settle(condition: Condition, within: Expression | null, range: Range): Condition {
    if (condition.kind === "fact" && condition.measure.kind === "binary" && isComparison(condition.measure)) {
      const { left, right, operator } = condition.measure;
      return {
        kind: "comparison",
        left,
        operator: operator as "<" | "<=" | ">" | ">=",
        right,
        within,
        range,
      };
    }
    if (condition.kind === "between") {
      if (within !== null)
        this.slip("syntax", within.range, "`between` has its own bounds; leave `within` out.");
      return { ...condition, range };
    }
    return { ...condition, within, range };
  }
}
