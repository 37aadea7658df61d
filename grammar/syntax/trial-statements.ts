import type { IToken } from "chevrotain";
import { identifier } from "./expressions.ts";
import { type Head, SystemStatements } from "./statements.ts";
import { Comma, clauseToken, DotDot, Equals, Less, LessEqual, Name } from "./tokens.ts";
import type {
  Compare,
  Drive,
  Expression,
  RecordSignals,
  Run,
  Scatter,
  SetValue,
  Trial,
  Vary,
} from "./tree.ts";

const OfWord = clauseToken("of");
const ForWord = clauseToken("for");
const ToleranceWord = clauseToken("tolerance");
const EveryWord = clauseToken("every");
const OverWord = clauseToken("over");
const StepsWord = clauseToken("steps");
const WithWord = clauseToken("with");
const ColumnsWord = clauseToken("columns");

/** The rules of a trial and of the statements in it; `start` and `expect` are those of a system. */
export class TrialStatements extends SystemStatements {
  readonly trial = this.RULE("trial", (): Head<Trial> => {
    this.CONSUME(Name);
    const name = this.SUBRULE1(this.newName);
    if (!this.RECORDING_PHASE) this.declare(name, "file");
    this.CONSUME(OfWord);
    const system = this.SUBRULE2(this.newName);
    return { kind: "trial", ...this.line, name, system };
  });

  readonly set = this.RULE("set", (): SetValue => {
    this.CONSUME(Name);
    const name = this.SUBRULE(this.reference);
    this.CONSUME(Equals);
    const value = this.SUBRULE(this.expression);
    return { kind: "set", ...this.line, name, value };
  });

  readonly drive = this.RULE("drive", (): Drive => {
    this.CONSUME(Name);
    const input = this.SUBRULE(this.reference);
    this.CONSUME(Equals);
    const value = this.SUBRULE(this.expression);
    return { kind: "drive", ...this.line, input, value };
  });

  readonly run = this.RULE("run", (): Run => {
    this.CONSUME(Name);
    this.CONSUME(ForWord);
    const duration = this.SUBRULE1(this.expression);
    let tolerance: Expression | null = null;
    let every: Expression | null = null;
    this.MANY(() =>
      this.OR([
        {
          GATE: () => tolerance === null,
          ALT: () => {
            this.CONSUME(ToleranceWord);
            tolerance = this.SUBRULE2(this.expression);
          },
        },
        {
          GATE: () => every === null,
          ALT: () => {
            this.CONSUME(EveryWord);
            every = this.SUBRULE3(this.expression);
          },
        },
      ]),
    );
    return { kind: "run", ...this.line, duration, tolerance, every };
  });

  readonly record = this.RULE("record", (): RecordSignals => {
    const signals: Expression[] = [];
    this.CONSUME(Name);
    this.AT_LEAST_ONE_SEP({ SEP: Comma, DEF: () => signals.push(this.SUBRULE(this.expression)) });
    return { kind: "record", ...this.line, signals };
  });

  readonly vary = this.RULE("vary", (): Vary => {
    this.CONSUME(Name);
    const name = this.SUBRULE(this.reference);
    this.CONSUME(OverWord);
    const low = this.SUBRULE1(this.expression);
    this.CONSUME(DotDot);
    const high = this.SUBRULE2(this.expression);
    this.CONSUME(StepsWord);
    const steps = this.SUBRULE3(this.expression);
    return { kind: "vary", ...this.line, name, low, high, steps };
  });

  readonly scatter = this.RULE("scatter", (): Scatter => {
    this.CONSUME(Name);
    return { kind: "scatter", ...this.line, count: this.SUBRULE(this.expression) };
  });

  readonly compare = this.RULE("compare", (): Compare => {
    this.CONSUME1(Name);
    const signal = this.SUBRULE1(this.expression);
    this.CONSUME(WithWord);
    const path = this.SUBRULE1(this.quoted);
    const columns: Compare["columns"][number][] = [];
    this.OPTION1(() => {
      this.CONSUME(ColumnsWord);
      this.AT_LEAST_ONE_SEP({ SEP: Comma, DEF: () => columns.push(this.SUBRULE2(this.quoted)) });
    });
    const limit = this.OPTION2(() => {
      const measure = identifier(this.CONSUME2(Name));
      const sign = this.OR<IToken>([
        { ALT: () => this.CONSUME(Less) },
        { ALT: () => this.CONSUME(LessEqual) },
      ]);
      return { measure, operator: sign.image as "<" | "<=", value: this.SUBRULE2(this.expression) };
    });
    return { kind: "compare", ...this.line, signal, path, columns, limit: limit ?? null };
  });
}
