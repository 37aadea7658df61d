import { type FindingName, type Fix, finding } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import type { Expr } from "../symbolic/expression.ts";
import type { Expression } from "../syntax/tree.ts";
import { toSI } from "../units/convert.ts";
import { DIMENSIONLESS, divide, isDimensionless, multiply, power } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Unit } from "../units/unit.ts";
import { translateCall } from "./calls.ts";
import type { Draft, Value } from "./draft.ts";
import { type SourceFile, spanIn } from "./files.ts";
import { translateReference } from "./references.ts";
import type { Scope } from "./scope.ts";
import { cyclesForAngle, fits, isDimension, isIn, type Measure, measureText, type Typed } from "./typed.ts";

type Binary = Extract<Expression, { kind: "binary" }>;

const DEEPEST = 1000;
/** Of one statement, with the bodies of the functions it calls. */
const MOST_TERMS = 100_000;

/** Turns expressions as written into expressions in SI, and checks dimensions through every step. */
export class Translator {
  readonly draft: Draft;
  /** Something that changes with time was met since this was last set to false. */
  signal = false;
  /** Laws tried out to learn a domain: nothing is reported, `mismatched` tells that something would have been. */
  trying = false;
  mismatched = false;
  /** Function bodies that are being written out, outermost first, with the place of the outermost call. */
  readonly calls: { readonly name: string; readonly at: Range; readonly file: SourceFile }[] = [];
  /** Values that are being worked out, outermost first: a circle shows when one of them is met again. */
  readonly open: Value[] = [];
  /** Forms that only the statement at hand knows, such as the measures of a trial; null for what it leaves alone. */
  special: ((tree: Expression, scope: Scope) => Typed | null) | null = null;
  readonly #unknown: Typed;
  #depth = 0;
  #work = 0;

  constructor(draft: Draft) {
    this.draft = draft;
    this.#unknown = { expr: draft.pool.symbol("unknown", "?"), measure: "unknown", shown: null };
  }

  /** What no finding follows from; the system that holds it is not complete. */
  get unknown(): Typed {
    if (!this.trying) this.draft.incomplete = true;
    return this.#unknown;
  }

  /** An expression of a statement, from the top. */
  whole(tree: Expression, scope: Scope): Typed {
    const before = this.#work;
    this.#work = 0;
    const typed = this.translate(tree, scope);
    this.#work = before;
    return typed;
  }

  translate(tree: Expression, scope: Scope): Typed {
    this.#work += 1;
    if (this.#depth > DEEPEST || this.#work > MOST_TERMS) {
      return this.refuse(
        "too-large",
        tree.range,
        scope,
        "This expression, with the functions it calls, is too large to be worked out.",
      );
    }
    this.#depth += 1;
    try {
      return this.#translate(tree, scope);
    } finally {
      this.#depth -= 1;
    }
  }

  /** Reports at the range, and gives what no further finding follows from. */
  refuse(
    name: FindingName,
    range: Range,
    scope: Scope,
    message: string,
    more: Parameters<typeof finding>[3] = {},
  ): Typed {
    if (this.trying) this.mismatched = true;
    else this.draft.report(finding(name, spanIn(scope.file, range), message, more));
    return this.unknown;
  }

  /** A mismatch in a function's body is told where the function is called: there the units came from. */
  mismatch(range: Range, scope: Scope, message: string, fix?: Fix): Typed {
    const call = this.calls[0];
    if (call === undefined || this.trying)
      return this.refuse("unit-mismatch", range, scope, message, { fix });
    const facts = [{ message, span: spanIn(scope.file, range) }];
    const inner = this.calls[this.calls.length - 1].name;
    this.draft.report(
      finding(
        "unit-mismatch",
        spanIn(call.file, call.at),
        `Called with these units, \`${inner}\` does not work out: ${message}`,
        { facts },
      ),
    );
    return this.unknown;
  }

  /** The value where it must measure what `wanted` says: the right side of a law, an override, a nominal value. */
  wanted(
    typed: Typed,
    measure: Measure,
    shown: Unit | null,
    range: Range,
    scope: Scope,
    what: string,
    by: string,
    fix: () => Fix | undefined = () => undefined,
  ): Typed {
    if (!fits(typed.measure, measure)) {
      const given = isIn(typed.measure, typed.shown);
      const message = `${what} is ${given}, ${by} wants ${measureText(measure, shown)}.`;
      return this.mismatch(range, scope, message, fix());
    }
    if (cyclesForAngle(shown, typed.shown)) {
      return this.mismatch(
        range,
        scope,
        `${what} is in Hz, which counts cycles; ${by} wants an angular speed. Write \`2*pi*…\` or use rad/s or rpm.`,
      );
    }
    return typed;
  }

  #translate(tree: Expression, scope: Scope): Typed {
    const special = this.special?.(tree, scope) ?? null;
    if (special !== null) return special;
    const { pool } = this.draft;
    switch (tree.kind) {
      case "number":
        return {
          expr: pool.number(tree.value),
          measure: tree.value === 0 ? "any" : DIMENSIONLESS,
          shown: null,
        };
      case "quantity":
        return this.#quantity(tree, 1, scope);
      case "string":
        return this.refuse("law-form", tree.range, scope, "A text in quotes has no value here.");
      case "reference":
        return translateReference(this, tree, scope);
      case "unary":
        return this.#unary(tree, scope);
      case "binary":
        return this.#binary(tree, scope);
      case "call":
        return translateCall(this, tree, scope);
      case "group":
        return this.translate(tree.inner, scope);
      case "where": {
        const condition = this.truth(tree.condition, scope);
        const [then, otherwise] = this.alike([tree.then, tree.otherwise], scope, "The two cases of `where`");
        if (then.measure === "unknown" || otherwise.measure === "unknown") return this.unknown;
        return {
          expr: pool.where(condition, then.expr, otherwise.expr),
          measure: joint(then, otherwise),
          shown: then.shown ?? otherwise.shown,
        };
      }
      case "missing":
        return this.unknown;
    }
  }

  #quantity(tree: Extract<Expression, { kind: "quantity" }>, sign: number, scope: Scope): Typed {
    const unit = parseUnit(tree.unit.text);
    if (unit === null)
      return this.refuse("unknown-unit", tree.unit.range, scope, unknownUnit(tree.unit.text));
    if (scope.warnsOfUnits && scope.instance?.values.has(unit.text)) {
      const span = spanIn(scope.file, { start: tree.range.start, end: tree.range.end });
      this.draft.report(
        finding(
          "unit-or-name",
          span,
          `\`${tree.text} ${unit.text}\` is read as a quantity in ${unit.text}, but a value \`${unit.text}\` is declared too; write \`${tree.text}*${unit.text}\` if that is meant.`,
          {
            fix: {
              title: `Write ${tree.text}*${unit.text}`,
              edits: [{ span, text: `${tree.text}*${unit.text}` }],
            },
          },
        ),
      );
    }
    return {
      expr: this.draft.pool.number(toSI(sign * tree.value, unit)),
      measure: unit.dimension,
      shown: unit,
    };
  }

  #unary(tree: Extract<Expression, { kind: "unary" }>, scope: Scope): Typed {
    const { pool } = this.draft;
    if (tree.operator === "not") {
      return { expr: pool.not(this.truth(tree.operand, scope)), measure: "truth", shown: null };
    }
    // -5 degC is five below zero, not minus 278.15 K.
    if (tree.operand.kind === "quantity")
      return this.#quantity(tree.operand, tree.operator === "-" ? -1 : 1, scope);
    const operand = this.number(tree.operand, scope);
    return tree.operator === "-" ? { ...operand, expr: pool.negate(operand.expr) } : operand;
  }

  #binary(tree: Binary, scope: Scope): Typed {
    const { pool } = this.draft;
    switch (tree.operator) {
      case "+":
      case "-":
        return this.#sum(tree, scope);
      case "*":
      case "/":
        return this.#product(tree, scope);
      case "^":
        return this.#power(tree, scope);
      case "and":
      case "or": {
        const parts = leftSpine(tree, [tree.operator]).map(({ part }) => this.truth(part, scope));
        return {
          expr: tree.operator === "and" ? pool.and(...parts) : pool.or(...parts),
          measure: "truth",
          shown: null,
        };
      }
      case "=":
        return this.refuse(
          "law-form",
          tree.range,
          scope,
          "`=` compares only in `expect`; two computed numbers are hardly ever equal.",
        );
      default: {
        const [left, right] = this.alike([tree.left, tree.right], scope, "What is compared");
        return { expr: pool.compare(tree.operator, left.expr, right.expr), measure: "truth", shown: null };
      }
    }
  }

  #sum(tree: Binary, scope: Scope): Typed {
    const parts = leftSpine(tree, ["+", "-"]);
    const terms = this.alike(
      parts.map(({ part }) => part),
      scope,
      "What is added",
    );
    let measure: Measure = "any";
    let shown: Unit | null = null;
    for (const term of terms) {
      if (term.measure === "unknown") return this.unknown;
      if (measure === "any") measure = term.measure;
      shown ??= term.shown;
    }
    const { pool } = this.draft;
    const exprs = terms.map(({ expr }, i) => (parts[i].operator === "-" ? pool.negate(expr) : expr));
    return { expr: pool.sum(exprs), measure, shown };
  }

  #product(tree: Binary, scope: Scope): Typed {
    const { pool } = this.draft;
    const factors: Expr[] = [];
    let dimension = DIMENSIONLESS;
    let shown: Unit | null = null;
    let unknown = false;
    for (const { part, operator } of leftSpine(tree, ["*", "/"])) {
      const factor = this.number(part, scope);
      if (factor.measure === "unknown") unknown = true;
      const own = isDimension(factor.measure) ? factor.measure : DIMENSIONLESS;
      const divides = operator === "/";
      factors.push(divides ? pool.power(factor.expr, pool.minusOne) : factor.expr);
      if (own === DIMENSIONLESS || (isDimensionless(own) && factor.shown?.angular !== true)) continue;
      // A number times x is still spoken of in the unit of x; Hz times 2*pi is no longer in Hz.
      shown =
        isDimensionless(dimension) && shown === null && !divides && factor.shown?.cycles !== true
          ? factor.shown
          : null;
      dimension = divides ? divide(dimension, own) : multiply(dimension, own);
    }
    if (unknown) return this.unknown;
    return { expr: pool.product(factors), measure: dimension, shown };
  }

  #power(tree: Binary, scope: Scope): Typed {
    const base = this.number(tree.left, scope);
    const exponent = this.number(tree.right, scope);
    if (base.measure === "unknown" || exponent.measure === "unknown") return this.unknown;
    if (isDimension(exponent.measure) && !isDimensionless(exponent.measure)) {
      return this.mismatch(
        tree.right.range,
        scope,
        `An exponent is a plain number, this one is ${isIn(exponent.measure, exponent.shown)}.`,
      );
    }
    const expr = this.draft.pool.power(base.expr, exponent.expr);
    if (!isDimension(base.measure) || isDimensionless(base.measure))
      return { expr, measure: base.measure, shown: null };
    const plain = exponent.expr.op === "number" ? exponent.expr.value : null;
    const dimension = plain === null ? null : power(base.measure, plain);
    if (dimension === null || dimension.some((x) => !Number.isInteger(2 * x))) {
      return this.mismatch(
        tree.range,
        scope,
        `What is raised is ${isIn(base.measure, base.shown)}: only a whole or half power, written as a number, has a unit.`,
      );
    }
    return { expr, measure: dimension, shown: null };
  }

  /** An operand that must be a quantity. */
  number(tree: Expression, scope: Scope): Typed {
    const typed = this.translate(tree, scope);
    return typed.measure === "truth"
      ? this.mismatch(tree.range, scope, "A condition is no quantity; write `a where condition else b`.")
      : typed;
  }

  truth(tree: Expression, scope: Scope): Expr {
    const typed = this.translate(tree, scope);
    if (typed.measure !== "truth" && typed.measure !== "unknown") {
      return this.mismatch(tree.range, scope, "A condition is wanted here, such as `x > 0`.").expr;
    }
    return typed.expr;
  }

  /** Quantities that must be of one kind: summands, cases, what is compared. */
  alike(trees: readonly Expression[], scope: Scope, what: string): Typed[] {
    const typed = trees.map((tree) => this.number(tree, scope));
    let first: Typed | null = null;
    for (let i = 0; i < typed.length; i += 1) {
      if (!isDimension(typed[i].measure)) continue;
      first ??= typed[i];
      if (!fits(first.measure, typed[i].measure)) {
        typed[i] = this.mismatch(
          trees[i].range,
          scope,
          `${what} must be in one unit: this is ${isIn(typed[i].measure, typed[i].shown)}, the first ${isIn(first.measure, first.shown)}.`,
        );
      } else if (cyclesForAngle(first.shown, typed[i].shown) || cyclesForAngle(typed[i].shown, first.shown)) {
        typed[i] = this.mismatch(
          trees[i].range,
          scope,
          `${what} must be in one unit: Hz counts cycles, the other is an angular speed.`,
        );
      }
    }
    return typed;
  }
}

function joint(a: Typed, b: Typed): Measure {
  return a.measure === "any" ? b.measure : a.measure;
}

/** The operands of `a + b - c …`, which leans to the left however long it is. */
function leftSpine(tree: Binary, operators: readonly string[]): { part: Expression; operator: string }[] {
  const parts: { part: Expression; operator: string }[] = [];
  let rest: Expression = tree;
  while (rest.kind === "binary" && operators.includes(rest.operator)) {
    parts.push({ part: rest.right, operator: rest.operator });
    rest = rest.left;
  }
  parts.push({ part: rest, operator: "" });
  return parts.reverse();
}

export function unknownUnit(text: string): string {
  const product = /[*/^]/.test(text) && parseUnit(text.split(/[*/^]/)[0]) !== null;
  return `\`${text}\` is not a unit${product ? "; put blanks round `*` where a value follows" : ""}.`;
}
