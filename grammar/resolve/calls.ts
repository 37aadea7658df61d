import type { FunctionName } from "../symbolic/expression.ts";
import { FUNCTION_NAMES } from "../syntax/words.ts";
import { DIMENSIONLESS, isDimensionless, power } from "../units/dimension.ts";
import { translateCurve } from "./curves.ts";
import { NO_INDICES } from "./draft.ts";
import { spanIn } from "./files.ts";
import { plainScope, type Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import type { Call } from "./tree-walk.ts";
import { isDimension, isIn, type Typed } from "./typed.ts";

export function translateCall(translator: Translator, tree: Call, scope: Scope): Typed {
  const name = tree.name.text;
  if (FUNCTION_NAMES.has(name)) return builtIn(translator, name as FunctionName, tree, scope);
  const placed = scope.file.visible.values.get(name);
  if (placed?.item.kind === "function") return written(translator, tree, scope);
  if (placed?.item.kind === "curve") {
    return translateCurve(translator, tree, { file: placed.file, item: placed.item }, scope);
  }
  if (scope.file.missing === true || scope.file.missing.has(name)) return translator.unknown;
  const meant = translator.draft.guess(name, () => {
    const known = [...FUNCTION_NAMES];
    for (const [other, { item }] of scope.file.visible.values) if (item.kind !== "const") known.push(other);
    return known;
  });
  const isValue = scope.instance?.values.has(name) === true || placed !== undefined;
  const message = isValue
    ? `\`${name}\` is a value, not a function; write \`${name}*( … )\` for a product.`
    : `There is no function \`${name}\`.${meant === null ? "" : ` Is \`${meant}\` meant?`}`;
  const fix =
    meant === null || isValue
      ? undefined
      : { title: `Write ${meant}`, edits: [{ span: spanIn(scope.file, tree.name.range), text: meant }] };
  return translator.refuse("unknown-name", tree.name.range, scope, message, { fix });
}

const TWO = new Set<string>(["atan2"]);
const SEVERAL = new Set<string>(["min", "max"]);
/** What may have any unit and keeps it, loses it, or has its root drawn; all others take plain numbers. */
const KEEPS = new Set<string>(["abs", "min", "max"]);
const DROPS = new Set<string>(["sign", "atan2"]);

function builtIn(translator: Translator, name: FunctionName, tree: Call, scope: Scope): Typed {
  const count = tree.arguments.length;
  const right = TWO.has(name) ? count === 2 : SEVERAL.has(name) ? count >= 2 : count === 1;
  if (!right) {
    const wanted = TWO.has(name) ? "two values" : SEVERAL.has(name) ? "two values or more" : "one value";
    return translator.refuse(
      "syntax",
      tree.range,
      scope,
      `\`${name}\` takes ${wanted}, here it is given ${count}.`,
    );
  }
  const given = translator.alike(tree.arguments, scope, `What \`${name}\` compares`);
  if (given.some(({ measure }) => measure === "unknown")) return translator.unknown;
  const [first] = given;
  const measure = given.find((one) => isDimension(one.measure))?.measure ?? "any";
  const expr = translator.draft.pool.call(name, ...given.map((one) => one.expr));
  if (KEEPS.has(name)) return { expr, measure, shown: first.shown };
  if (DROPS.has(name)) return { expr, measure: DIMENSIONLESS, shown: null };
  if (name === "sqrt") {
    return { expr, measure: isDimension(measure) ? power(measure, 0.5) : measure, shown: null };
  }
  if (isDimension(measure) && !isDimensionless(measure)) {
    return translator.mismatch(
      tree.arguments[0].range,
      scope,
      `\`${name}\` takes a plain number or an angle, this is ${isIn(measure, first.shown)}.`,
    );
  }
  return { expr, measure: DIMENSIONLESS, shown: null };
}

/** A function of the text is written out where it is called, with the units it is called with. */
function written(translator: Translator, tree: Call, scope: Scope): Typed {
  const name = tree.name.text;
  const placed = scope.file.visible.values.get(name);
  if (placed?.item.kind !== "function") return translator.unknown;
  const { file, item } = placed;
  if (tree.arguments.length !== item.parameters.length) {
    return translator.refuse(
      "syntax",
      tree.range,
      scope,
      `\`${name}\` takes ${item.parameters.length === 1 ? "one value" : `${item.parameters.length} values`}, here it is given ${tree.arguments.length}.`,
    );
  }
  if (translator.calls.some((call) => call.name === name)) {
    return translator.refuse(
      "signal-circle",
      tree.range,
      scope,
      `\`${name}\` calls itself: ${[...translator.calls.map((call) => call.name), name].join(" → ")}.`,
    );
  }
  const given = tree.arguments.map((argument) => translator.number(argument, scope));
  const bound = new Map(item.parameters.map(({ text }, i) => [text, given[i]]));
  const outermost = translator.calls[0];
  translator.calls.push({ name, at: outermost?.at ?? tree.range, file: outermost?.file ?? scope.file });
  const typed = translator.translate(item.body, { ...plainScope(file, null, NO_INDICES, false), bound });
  translator.calls.pop();
  return typed;
}
