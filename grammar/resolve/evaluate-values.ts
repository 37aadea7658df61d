import { finding } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Expr } from "../symbolic/expression.ts";
import type {
  CurveDeclaration,
  Expression,
  FunctionDeclaration,
  InputDeclaration,
  OutputDeclaration,
  TrackDeclaration,
  ValueDeclaration,
} from "../syntax/tree.ts";
import { DIMENSIONLESS, equal, isDimensionless, multiply } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Dimension, Unit } from "../units/unit.ts";
import { quantityText, unitOf } from "../units/unit-text.ts";
import { NO_INDICES, type Value } from "./draft.ts";
import type { Placed } from "./files.ts";
import { spanIn } from "./files.ts";
import { plainScope, type Scope } from "./scope.ts";
import { type Translator, unknownUnit } from "./translate.ts";
import { isDimension, type Measure, type Typed } from "./typed.ts";

const SECOND: Dimension = [0, 0, 1, 0, 0, 0, 0];
const RADIAN = parseUnit("rad") as Unit;
const DEEPEST = 200;

/** What a reference to a value stands for: a symbol of a param, input or track, the whole of a let or output. */
export function valueOf(translator: Translator, value: Value, from: Scope, range: Range): Typed {
  const { kind } = value.statement;
  const fixed = kind === "param" || kind === "const";
  if (from.fixed && !fixed) {
    return translator.refuse(
      "unknown-variable",
      range,
      from,
      `\`${value.local}\` is ${kind === "input" || kind === "output" ? "an" : "a"} ${kind}; only params and consts can stand here.`,
    );
  }
  if (translator.trying && !fixed && kind !== "input") {
    translator.signal = true;
    return translator.unknown;
  }
  if (value.state === "open") {
    if (value.typed !== null) {
      translator.signal = true;
      return value.typed;
    }
    return circle(translator, value);
  }
  if (value.state === "new") workOut(translator, value);
  if (value.signal) translator.signal = true;
  return value.typed ?? translator.unknown;
}

export function workOut(translator: Translator, value: Value): void {
  if (value.state !== "new") return;
  const { statement } = value;
  const scope = scopeOf(value);
  if (translator.open.length > DEEPEST) {
    value.state = "done";
    value.typed = translator.refuse(
      "too-large",
      statement.name.range,
      scope,
      "Signals depend on each other through too many steps to be worked out.",
    );
    return;
  }
  const outer = { signal: translator.signal, trying: translator.trying };
  translator.signal = false;
  translator.trying = false;
  value.state = "open";
  translator.open.push(value);
  switch (statement.kind) {
    case "param":
    case "const":
      value.typed = parameter(translator, value, statement, scope);
      break;
    case "input":
      value.typed = input(translator, value, statement, scope);
      break;
    case "output":
      value.typed = output(translator, value, statement, scope);
      break;
    case "let":
      value.typed = translator.whole(statement.value, scope);
      break;
    case "track":
      value.typed = track(translator, value, statement, scope);
      break;
  }
  translator.open.pop();
  value.state = "done";
  value.signal = translator.signal || statement.kind === "input" || statement.kind === "track";
  translator.signal = outer.signal;
  translator.trying = outer.trying;
}

function scopeOf(value: Value): Scope {
  const { kind } = value.statement;
  const fixed = kind === "param" || kind === "const" || kind === "input";
  return plainScope(value.instance.file, value.instance, value.indices, fixed);
}

function circle(translator: Translator, value: Value): Typed {
  const names = translator.open.slice(translator.open.indexOf(value)).map(({ local }) => local);
  return translator.refuse(
    "signal-circle",
    value.statement.name.range,
    scopeOf(value),
    `\`${value.local}\` is computed from itself: ${[...names, value.local].join(" → ")}.`,
  );
}

function parameter(translator: Translator, value: Value, statement: ValueDeclaration, scope: Scope): Typed {
  const { draft } = translator;
  const written = translator.whole(statement.value, scope);
  let typed = written;
  let range = statement.value.range;
  let standing = scope;
  const { override } = value;
  if (override !== null) {
    range = override.value.range;
    standing = plainScope(override.instance.file, override.instance, override.indices, true);
    typed = translator.whole(override.value, standing);
    typed = translator.wanted(
      typed,
      written.measure,
      written.shown,
      range,
      standing,
      "This value",
      `\`${value.local}\``,
    );
  }
  const symbol = draft.pool.symbol("parameter", value.name);
  if (typed.measure === "unknown") return typed;
  if (typed.measure === "truth")
    return translator.mismatch(range, standing, "A condition is no value of a param.");
  const measure: Measure = typed.measure === "any" ? written.measure : typed.measure;
  const number = numberOf(translator, typed.expr);
  if (!Number.isFinite(number)) {
    return translator.refuse(
      "not-computable",
      range,
      standing,
      `The value of \`${value.local}\` could not be computed: it is ${Number.isNaN(number) ? "not a number" : "infinite"}.`,
    );
  }
  draft.numbers.set(symbol, number);
  const shown = typed.shown ?? written.shown;
  const unit = unitFor(measure, shown);
  value.parameter = {
    definition: typed.expr,
    number,
    unit,
    range: bounds(
      translator,
      statement,
      measure,
      shown,
      number,
      unit,
      value.local,
      scope,
      spanIn(standing.file, range),
    ),
  };
  return { expr: symbol, measure, shown };
}

function bounds(
  translator: Translator,
  statement: ValueDeclaration,
  measure: Measure,
  shown: Unit | null,
  number: number,
  unit: Unit,
  name: string,
  scope: Scope,
  span: ReturnType<typeof spanIn>,
): { low: number; high: number } | null {
  if (statement.bounds === null) return null;
  const ends = [statement.bounds.low, statement.bounds.high].map((tree) =>
    translator.wanted(
      translator.whole(tree, scope),
      measure,
      shown,
      tree.range,
      scope,
      "This bound",
      `\`${name}\``,
    ),
  );
  if (ends.some((end) => end.measure === "unknown")) return null;
  const [low, high] = ends.map((end) => numberOf(translator, end.expr));
  const slack = 1e-12 * Math.max(Math.abs(low), Math.abs(high));
  if (number < low - slack || number > high + slack) {
    translator.draft.report(
      finding(
        "out-of-range",
        span,
        `\`${name}\` is ${quantityText(number, unit, 6)}, outside its range ${quantityText(low, unit, 6)} .. ${quantityText(high, unit, 6)}.`,
        {
          facts: [
            { message: "the range is declared here", span: spanIn(scope.file, statement.bounds.range) },
          ],
        },
      ),
    );
  }
  return { low, high };
}

function input(translator: Translator, value: Value, statement: InputDeclaration, scope: Scope): Typed {
  const unit = parseUnit(statement.unit.text);
  if (unit === null)
    return translator.refuse("unknown-unit", statement.unit.range, scope, unknownUnit(statement.unit.text));
  const { override } = value;
  if (override !== null) {
    const outside = plainScope(override.instance.file, override.instance, override.indices, false);
    const given = translator.whole(override.value, outside);
    return translator.wanted(
      given,
      unit.dimension,
      unit,
      override.value.range,
      outside,
      "This value",
      `\`${value.local}\``,
    );
  }
  let nominal = 0;
  if (statement.nominal !== null) {
    const typed = translator.whole(statement.nominal, scope);
    const fit = translator.wanted(
      typed,
      unit.dimension,
      unit,
      statement.nominal.range,
      scope,
      "The nominal value",
      `\`${value.local}\``,
    );
    if (fit.measure !== "unknown") nominal = numberOf(translator, fit.expr);
    if (!Number.isFinite(nominal)) {
      return translator.refuse(
        "not-computable",
        statement.nominal.range,
        scope,
        `The nominal value of \`${value.local}\` could not be computed.`,
      );
    }
  }
  value.input = { unit, nominal };
  return { expr: translator.draft.pool.symbol("input", value.name), measure: unit.dimension, shown: unit };
}

function output(translator: Translator, value: Value, statement: OutputDeclaration, scope: Scope): Typed {
  const typed = translator.whole(statement.value, scope);
  if (typed.measure === "truth")
    return translator.mismatch(
      statement.value.range,
      scope,
      "A condition is no output; write `1 where condition else 0`.",
    );
  if (statement.unit === null) {
    value.unit = unitFor(typed.measure, typed.shown?.factor === 1 ? typed.shown : null);
    return typed;
  }
  const unit = parseUnit(statement.unit.text);
  if (unit === null)
    return translator.refuse("unknown-unit", statement.unit.range, scope, unknownUnit(statement.unit.text));
  value.unit = unit;
  return translator.wanted(
    typed,
    unit.dimension,
    unit,
    statement.unit.range,
    scope,
    "The output",
    `\`as ${unit.text}\``,
  );
}

function track(translator: Translator, value: Value, statement: TrackDeclaration, scope: Scope): Typed {
  const symbol = translator.draft.pool.symbol("state", value.name);
  let from: Typed | null = null;
  if (statement.from !== null) {
    from = translator.whole(statement.from, { ...scope, fixed: true, warnsOfUnits: false });
    // A track's rate may depend on the track itself, whose unit the start value tells.
    if (isDimension(from.measure)) value.typed = { expr: symbol, measure: from.measure, shown: from.shown };
  }
  const rate = translator.whole(statement.rate, scope);
  value.typed = null;
  if (rate.measure === "unknown" || from?.measure === "unknown") return translator.unknown;
  if (rate.measure === "truth")
    return translator.mismatch(statement.rate.range, scope, "A condition is no rate.");
  const measure: Measure = rate.measure === "any" ? (from?.measure ?? "any") : multiply(rate.measure, SECOND);
  const angle = isDimension(measure) && isDimensionless(measure) && rate.shown?.angular === true;
  let shown = angle ? RADIAN : null;
  if (from !== null && statement.from !== null) {
    from = translator.wanted(
      from,
      measure,
      shown,
      statement.from.range,
      scope,
      "The start value",
      `\`${value.local}\``,
    );
    if (from.measure === "unknown") return from;
    shown = from.shown ?? shown;
  }
  value.track = {
    rate: rate.expr,
    unit: unitFor(measure, shown),
    from: from === null ? 0 : numberOf(translator, from.expr),
  };
  return { expr: symbol, measure, shown };
}

/** A const of a file, worked out on first use; a param of the same name may stand beside it. */
export function fileConst(
  translator: Translator,
  placed: Placed<ValueDeclaration | FunctionDeclaration | CurveDeclaration>,
  from: Scope,
  range: Range,
): Typed {
  const { draft } = translator;
  const { item, file } = placed;
  if (item.kind !== "const" && item.kind !== "param") return translator.unknown;
  const known = draft.consts.get(item);
  if (known === "open") {
    return translator.refuse(
      "signal-circle",
      item.name.range,
      { ...from, file },
      `\`${item.name.text}\` is computed from itself.`,
    );
  }
  if (known !== undefined) return known.typed;
  draft.consts.set(item, "open");
  const scope = plainScope(file, null, NO_INDICES, true);
  const written =
    translator.draft.consts.size > 5 * DEEPEST
      ? translator.refuse("too-large", range, from, "Consts depend on each other through too many steps.")
      : translator.whole(item.value, scope);
  const taken =
    draft.instances[0]?.values.has(item.name.text) ||
    [...draft.consts.values()].some((one) => one !== "open" && one.name === item.name.text);
  const name = taken ? `${item.name.text}@${file.path}` : item.name.text;
  const number = written.measure === "unknown" ? 0 : numberOf(translator, written.expr);
  const expr = draft.pool.symbol("parameter", name);
  draft.numbers.set(expr, number);
  const typed: Typed =
    written.measure === "unknown" ? written : { expr, measure: written.measure, shown: written.shown };
  draft.consts.set(item, {
    name,
    typed,
    item,
    file,
    parameter: {
      definition: written.expr,
      number,
      unit: unitFor(written.measure, written.shown),
      range: null,
    },
  });
  return typed;
}

export function numberOf(translator: Translator, expr: Expr): number {
  if (expr.op === "number") return expr.value;
  return evaluate(
    expr,
    (symbol) => translator.draft.numbers.get(symbol) ?? CONSTANTS.get(symbol.name) ?? Number.NaN,
  );
}

/** Standard gravity: 3rd General Conference on Weights and Measures, 1901. */
const CONSTANTS: ReadonlyMap<string, number> = new Map([
  ["pi", Math.PI],
  ["g0", 9.80665],
]);

/** The unit a value is shown in: as the text has it, else a coherent one. */
export function unitFor(measure: Measure, shown: Unit | null): Unit {
  const dimension = isDimension(measure) ? measure : DIMENSIONLESS;
  return shown !== null && equal(shown.dimension, dimension) ? shown : unitOf(dimension);
}

/** Translates an expression that must be a number when the model is built, and gives that number. */
export function fixedNumber(
  translator: Translator,
  tree: Expression,
  scope: Scope,
  measure: Measure,
  shown: Unit | null,
  what: string,
  by: string,
): number | null {
  const typed = translator.wanted(translator.whole(tree, scope), measure, shown, tree.range, scope, what, by);
  return typed.measure === "unknown" ? null : numberOf(translator, typed.expr);
}
