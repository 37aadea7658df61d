import { identifier, NOWHERE } from "./expressions.ts";
import { rangeOf } from "./messages.ts";
import {
  AnyArrow,
  Close,
  Colon,
  Comma,
  clauseToken,
  DemandFrom,
  Equals,
  Name,
  NumberText,
  OneWay,
  Open,
} from "./tokens.ts";
import type {
  Arrow,
  ElementDeclaration,
  Expression,
  FieldPort,
  Identifier,
  IndexedName,
  JunctionDeclaration,
  Law,
  PortDeclaration,
  Reference,
  Repeat,
  SubDeclaration,
  Wiring,
} from "./tree.ts";
import { type Head, ValueStatements } from "./value-statements.ts";
import { ELEMENT_WORDS, RESERVED_NAMES } from "./words.ts";

const AsWord = clauseToken("as");
const TakesWord = clauseToken("takes");
const GivesWord = clauseToken("gives");

/** The rules of nodes, of the bonds between them, and of their repetition. */
export class NodeStatements extends ValueStatements {
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
    if (domain !== undefined && RESERVED_NAMES.has(domain.text)) {
      this.slip(
        "syntax",
        domain.range,
        `\`${domain.text}\` is no domain; after \`:\` stands one, as in \`: rotation\`.`,
      );
    }
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

  readonly repeat = this.RULE("repeat", (): Head<Repeat> => {
    this.CONSUME(Name);
    const index = this.SUBRULE(this.newName);
    if (!this.RECORDING_PHASE) this.declare(index, "value");
    this.CONSUME(Equals);
    const { low, high } = this.SUBRULE(this.interval);
    return { kind: "repeat", ...this.line, index, low, high };
  });
}
