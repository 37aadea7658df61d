import { finding } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import type { CurveDeclaration, Expression, FunctionDeclaration, ValueDeclaration } from "../syntax/tree.ts";
import type { Unit } from "../units/unit.ts";
import { quantityText } from "../units/unit-text.ts";
import { NO_INDICES, type Value } from "./draft.ts";
import type { Placed } from "./files.ts";
import { spanIn } from "./files.ts";
import { numberOf, unitFor } from "./numbers.ts";
import { plainScope, type Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import type { Measure, Typed } from "./typed.ts";

const DEEPEST = 200;

/** A param or const: a symbol with its definition and its number; an override is read in the system outside. */
export function parameter(
  translator: Translator,
  value: Value,
  statement: ValueDeclaration,
  scope: Scope,
): Typed {
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
  const written = ({ range }: Expression) => scope.file.source.text.slice(range.start, range.end);
  const slack = 1e-12 * Math.max(Math.abs(low), Math.abs(high));
  if (number < low - slack || number > high + slack) {
    translator.draft.report(
      finding(
        "out-of-range",
        span,
        `\`${name}\` is ${quantityText(number, unit, 6)}, outside its range ${written(statement.bounds.low)} .. ${written(statement.bounds.high)}.`,
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
