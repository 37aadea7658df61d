import type { IToken } from "chevrotain";
import type { Range } from "../source/span.ts";
import { isComparison } from "./chain.ts";
import { identifier, NOWHERE } from "./expressions.ts";
import { NodeStatements } from "./node-statements.ts";
import { Comma, clauseToken, DotDot, Equals, Less, LessEqual, Name } from "./tokens.ts";
import type {
  Compare,
  Condition,
  Drive,
  Expect,
  Expression,
  RecordSignals,
  Run,
  Scatter,
  SetValue,
  Start,
  Trial,
  Vary,
} from "./tree.ts";
import type { Head } from "./value-statements.ts";

const OfWord = clauseToken("of");
const ForWord = clauseToken("for");
const ToleranceWord = clauseToken("tolerance");
const EveryWord = clauseToken("every");
const OverWord = clauseToken("over");
const StepsWord = clauseToken("steps");
const WithWord = clauseToken("with");
const ColumnsWord = clauseToken("columns");
const WithinWord = clauseToken("within");
const BetweenWord = clauseToken("between");
const SteadyWord = clauseToken("steady");

/** The rules of trials, with `start` and `expect`, which a system has too. */
export class TrialStatements extends NodeStatements {
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
