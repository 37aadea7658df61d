import { pathFrom } from "../source/released.ts";
import { readColumns } from "../source/table.ts";
import { linearCurve } from "../symbolic/curve.ts";
import type { Expr } from "../symbolic/expression.ts";
import type { Expression } from "../syntax/tree.ts";
import { toSI } from "../units/convert.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Unit } from "../units/unit.ts";
import type { Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import type { Call } from "./tree-walk.ts";
import { isDimension, type Typed } from "./typed.ts";

const SECOND = parseUnit("s") as Unit;
const HERTZ = parseUnit("Hz") as Unit;

/** What a `drive` may call beside the functions of any expression, with how many values each takes. */
const COUNTS: Readonly<Record<string, readonly number[]>> = {
  step: [2, 3],
  ramp: [3],
  pulse: [3],
  sine: [2],
  sweep_sine: [4],
  recorded: [3],
};

const MOST_ROWS = 100_000;

export interface DriveContext {
  /** The unit of the input: what a file's values are in. */
  readonly unit: Unit;
  /** Filled with the times at which the drive steps. */
  readonly steps: Expr[];
}

/** A drive helper as an expression in time; null for any other call. */
export function driveHelper(
  translator: Translator,
  tree: Call,
  scope: Scope,
  context: DriveContext,
): Typed | null {
  const name = tree.name.text;
  if (!Object.hasOwn(COUNTS, name)) return null;
  const args = tree.arguments;
  if (!COUNTS[name].includes(args.length)) {
    const wanted = COUNTS[name].join(" or ");
    return translator.refuse(
      "syntax",
      tree.range,
      scope,
      `\`${name}\` takes ${wanted} values, here ${args.length}.`,
    );
  }
  if (name === "recorded") return recorded(translator, tree, scope, context);
  const { pool } = translator.draft;
  const time = pool.symbol("time", "time");
  const seconds = (arg: Expression) => inUnit(translator, arg, scope, SECOND, name);
  const before = (at: Expr) => pool.compare("<", time, at);
  const shaped = (like: Typed, expr: Expr): Typed =>
    like.measure === "unknown" ? like : { expr, measure: like.measure, shown: like.shown };
  switch (name) {
    case "step": {
      const at = seconds(args[0]);
      const values = translator.alike(args.slice(1), scope, "The values of `step`");
      context.steps.push(at);
      const like = values.find(({ measure }) => isDimension(measure)) ?? values[0];
      const [from, to] = values.length === 1 ? [pool.zero, values[0].expr] : [values[0].expr, values[1].expr];
      return shaped(like, pool.where(before(at), from, to));
    }
    case "ramp": {
      const [from, to, y] = [seconds(args[0]), seconds(args[1]), translator.number(args[2], scope)];
      const share = pool.divide(pool.subtract(time, from), pool.subtract(to, from));
      const rising = pool.where(before(to), pool.product(y.expr, share), y.expr);
      return shaped(y, pool.where(before(from), pool.zero, rising));
    }
    case "pulse": {
      const [from, to, y] = [seconds(args[0]), seconds(args[1]), translator.number(args[2], scope)];
      context.steps.push(from, to);
      return shaped(y, pool.where(before(from), pool.zero, pool.where(before(to), y.expr, pool.zero)));
    }
    case "sine": {
      const [y, turn] = [translator.number(args[0], scope), turns(translator, args[1], scope)];
      return shaped(y, pool.product(y.expr, pool.call("sin", pool.product(turn, time))));
    }
    default: {
      const y = translator.number(args[0], scope);
      const [first, last] = [turns(translator, args[1], scope), turns(translator, args[2], scope)];
      const length = seconds(args[3]);
      const growth = pool.divide(pool.subtract(last, first), pool.product(pool.number(2), length));
      const angle = pool.sum(pool.product(first, time), pool.product(growth, time, time));
      return shaped(y, pool.product(y.expr, pool.call("sin", angle)));
    }
  }
}

function inUnit(translator: Translator, tree: Expression, scope: Scope, unit: Unit, name: string): Expr {
  const typed = translator.number(tree, scope);
  return translator.wanted(typed, unit.dimension, unit, tree.range, scope, "This value", `\`${name}\``).expr;
}

/** An angular speed: from a frequency in cycles, or as it is where the text speaks of angles. */
function turns(translator: Translator, tree: Expression, scope: Scope): Expr {
  const { pool } = translator.draft;
  const typed = translator.number(tree, scope);
  const { expr } = translator.wanted(
    typed,
    HERTZ.dimension,
    HERTZ,
    tree.range,
    scope,
    "This frequency",
    "a sine",
  );
  return typed.shown?.angular === true
    ? expr
    : pool.product(pool.number(2), pool.symbol("constant", "pi"), expr);
}

function recorded(translator: Translator, tree: Call, scope: Scope, { unit }: DriveContext): Typed {
  const texts = tree.arguments.map((arg) => (arg.kind === "string" ? arg.value : null));
  const [path, ...columns] = texts;
  if (path === null || columns.includes(null)) {
    const message = '`recorded` names a file and two of its columns: `recorded("data/run7.csv", "t", "u")`.';
    return translator.refuse("syntax", tree.range, scope, message);
  }
  const points = measuredPoints(translator, tree.range, scope, path, columns as string[], unit);
  if (points === null) return translator.unknown;
  const { pool } = translator.draft;
  const curve = linearCurve(path, points.times, points.values);
  const expr = pool.curve(curve, pool.symbol("time", "time"));
  return { expr, measure: unit.dimension, shown: unit };
}

/** Times in s and values from a file's columns, which are in `unit`; null where they cannot be read, which is said. */
export function measuredPoints(
  translator: Translator,
  range: Call["range"],
  scope: Scope,
  path: string,
  columns: readonly string[],
  unit: Unit,
): { times: number[]; values: number[] } | null {
  const source = scope.file.set.get(pathFrom(scope.file.path, path));
  if (source === undefined) {
    translator.refuse("file-missing", range, scope, `There is no file \`${path}\` in the set.`);
    return null;
  }
  const read = readColumns(source, columns, 2, MOST_ROWS);
  if (read.kind !== "columns") {
    const why =
      read.kind === "no-column"
        ? `it has no column \`${read.wanted}\``
        : read.kind === "no-number"
          ? "a cell holds no number"
          : `it has over ${MOST_ROWS.toLocaleString("en")} rows`;
    translator.refuse("not-computable", range, scope, `\`${path}\` can't be read: ${why}.`);
    return null;
  }
  const [times, given] = read.values;
  if (times.length < 2 || times.some((time, i) => i > 0 && !(time > times[i - 1]))) {
    translator.refuse(
      "not-computable",
      range,
      scope,
      `The times in \`${path}\` do not rise from row to row.`,
    );
    return null;
  }
  return { times: [...times], values: given.map((value) => toSI(value, unit)) };
}
