import type { Range } from "../source/span.ts";
import type { InputDeclaration, OutputDeclaration, TrackDeclaration } from "../syntax/tree.ts";
import { isDimensionless, multiply } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Dimension, Unit } from "../units/unit.ts";
import type { Value } from "./draft.ts";
import { numberOf, unitFor } from "./numbers.ts";
import { parameter } from "./parameters.ts";
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
