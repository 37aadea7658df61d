import type { IToken } from "chevrotain";
import { Arrow, Close, Colon, Comma, clauseToken, Equals, Name, NumberText, Open } from "./tokens.ts";
import type {
  CurveDeclaration,
  DomainDeclaration,
  FunctionDeclaration,
  Identifier,
  StringLiteral,
  System,
  Use,
} from "./tree.ts";
import { TrialStatements } from "./trial-statements.ts";
import type { Head, LineFacts } from "./value-statements.ts";

const FromWord = clauseToken("from");
const PseudoWord = clauseToken("pseudo");
const EffortWord = clauseToken("effort");
const FlowWord = clauseToken("flow");
const ColumnsWord = clauseToken("columns");
const LinearWord = clauseToken("linear");
const SmoothWord = clauseToken("smooth");

/** The whole grammar of edition 1: a rule a statement, run for one line at a time. */
export class NotationParser extends TrialStatements {
  /** `validate` has Chevrotain look for ambiguities in the grammar, which takes its time: for the tests. */
  constructor(validate = false) {
    super(validate);
    this.performSelfAnalysis();
  }

  /** Makes ready for one line; the rule to run is the caller's choice by the head of the line. */
  take(text: string, tokens: IToken[], line: LineFacts): void {
    this.begin(text, tokens);
    this.line = line;
    this.declares = null;
  }

  readonly notation = this.RULE("notation", () => {
    this.CONSUME(Name);
    return this.CONSUME(NumberText);
  });

  readonly use = this.RULE("use", (): Use => {
    this.CONSUME(Name);
    const names = this.OPTION(() => {
      const list: Identifier[] = [];
      this.AT_LEAST_ONE_SEP({ SEP: Comma, DEF: () => list.push(this.SUBRULE(this.newName)) });
      this.CONSUME(FromWord);
      return list;
    });
    return { kind: "use", ...this.line, names: names ?? null, path: this.SUBRULE(this.quoted) };
  });

  readonly domain = this.RULE("domain", (): DomainDeclaration => {
    this.CONSUME(Name);
    const name = this.SUBRULE(this.fileName);
    const pseudo = this.OPTION(() => this.CONSUME(PseudoWord)) !== undefined;
    this.CONSUME(EffortWord);
    const effort = this.SUBRULE1(this.unit);
    this.CONSUME(FlowWord);
    const flow = this.SUBRULE2(this.unit);
    return { kind: "domain", ...this.line, name, pseudo, effort, flow };
  });

  readonly function = this.RULE("function", (): FunctionDeclaration => {
    this.CONSUME(Name);
    const name = this.SUBRULE(this.fileName);
    const parameters: Identifier[] = [];
    this.CONSUME(Open);
    this.AT_LEAST_ONE_SEP({ SEP: Comma, DEF: () => parameters.push(this.SUBRULE(this.newName)) });
    this.CONSUME(Close);
    this.CONSUME(Equals);
    const body = this.SUBRULE(this.expression);
    if (!this.RECORDING_PHASE) for (const parameter of parameters) this.refuseReserved(parameter);
    return { kind: "function", ...this.line, name, parameters, body };
  });

  readonly curve = this.RULE("curve", (): CurveDeclaration => {
    this.CONSUME(Name);
    const name = this.SUBRULE(this.fileName);
    this.CONSUME(Colon);
    const from = this.SUBRULE1(this.unit);
    this.CONSUME(Arrow);
    const to = this.SUBRULE2(this.unit);
    const source = this.OR1<CurveDeclaration["source"]>([
      { ALT: () => this.SUBRULE(this.curvePoints) },
      { ALT: () => this.SUBRULE(this.curveFile) },
    ]);
    const word = this.OPTION(() =>
      this.OR2<IToken>([{ ALT: () => this.CONSUME(LinearWord) }, { ALT: () => this.CONSUME(SmoothWord) }]),
    );
    const interpolation = word?.image === "smooth" ? "smooth" : "linear";
    return { kind: "curve", ...this.line, name, from, to, source, interpolation };
  });

  protected readonly curvePoints = this.RULE("curvePoints", (): CurveDeclaration["source"] => {
    const points: CurvePoint[] = [];
    this.CONSUME(Equals);
    this.AT_LEAST_ONE(() => {
      const start = this.CONSUME(Open).startOffset;
      const x = this.SUBRULE1(this.expression);
      this.CONSUME(Comma);
      const y = this.SUBRULE2(this.expression);
      this.CONSUME(Close);
      points.push({ x, y, range: this.to(start) });
    });
    return { kind: "points", points };
  });

  protected readonly curveFile = this.RULE("curveFile", (): CurveDeclaration["source"] => {
    this.CONSUME(FromWord);
    const path = this.SUBRULE1(this.quoted);
    const columns: StringLiteral[] = [];
    this.OPTION(() => {
      this.CONSUME(ColumnsWord);
      this.AT_LEAST_ONE_SEP({ SEP: Comma, DEF: () => columns.push(this.SUBRULE2(this.quoted)) });
    });
    return { kind: "file", path, columns };
  });

  readonly system = this.RULE("system", (): Head<System> => {
    this.CONSUME(Name);
    return { kind: "system", ...this.line, name: this.SUBRULE(this.fileName) };
  });

  protected readonly fileName = this.RULE("fileName", (): Identifier => {
    const name = this.SUBRULE(this.newName);
    if (!this.RECORDING_PHASE) this.declare(name, "file");
    return name;
  });
}

type CurvePoint = Extract<CurveDeclaration["source"], { kind: "points" }>["points"][number];

let parser: NotationParser | null = null;

/** One parser for all files, built on first use. */
export function notationParser(): NotationParser {
  parser ??= new NotationParser();
  return parser;
}
