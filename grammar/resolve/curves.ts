import { finding } from "../diagnostics/finding.ts";
import { nearest } from "../diagnostics/nearest.ts";
import { pathFrom } from "../source/released.ts";
import type { Span } from "../source/span.ts";
import { type Columns, readColumns, type TableSlip } from "../source/table.ts";
import { type Curve, linearCurve, smoothCurve } from "../symbolic/curve.ts";
import type { CurveDeclaration, Expression, StringLiteral, UnitText } from "../syntax/tree.ts";
import { toSI } from "../units/convert.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Unit } from "../units/unit.ts";
import { quantityText } from "../units/unit-text.ts";
import { NO_INDICES } from "./draft.ts";
import { type Placed, type SourceFile, spanIn } from "./files.ts";
import { missingFile } from "./missing-file.ts";
import { numberOf } from "./numbers.ts";
import { plainScope, type Scope } from "./scope.ts";
import { type Translator, unknownUnit } from "./translate.ts";
import type { Call } from "./tree-walk.ts";
import type { Typed } from "./typed.ts";

/** A curve that was worked out: from and to in SI. */
export interface CurveInUse {
  readonly curve: Curve;
  readonly from: Unit;
  readonly to: Unit;
}

const MOST_POINTS = 100_000;

/** `pump(line.e)` */
export function translateCurve(
  translator: Translator,
  tree: Call,
  placed: Placed<CurveDeclaration>,
  scope: Scope,
): Typed {
  const name = tree.name.text;
  if (tree.arguments.length !== 1) {
    const message = `\`${name}\` is a curve and takes one value, here it is given ${tree.arguments.length}.`;
    return translator.refuse("syntax", tree.range, scope, message);
  }
  const [argument] = tree.arguments;
  const inUse = curveOf(translator, placed);
  const given = translator.number(argument, scope);
  if (inUse === null || given.measure === "unknown") return translator.unknown;
  const { curve, from, to } = inUse;
  const x = translator.wanted(
    given,
    from.dimension,
    from,
    argument.range,
    scope,
    "This value",
    `\`${name}\``,
  );
  if (x.measure === "unknown") return x;
  return { expr: translator.draft.pool.curve(curve, x.expr), measure: to.dimension, shown: to };
}

/** The points of a curve in SI, worked out once; null where its declaration is at fault, which is reported. */
export function curveOf(translator: Translator, placed: Placed<CurveDeclaration>): CurveInUse | null {
  const { draft } = translator;
  const known = draft.curves.get(placed.item);
  if (known !== undefined) return known;
  draft.curves.set(placed.item, null);
  const worked = workedOut(translator, placed);
  draft.curves.set(placed.item, worked);
  return worked;
}

function workedOut(translator: Translator, { file, item }: Placed<CurveDeclaration>): CurveInUse | null {
  const from = unitOf(translator, file, item.from);
  const to = unitOf(translator, file, item.to);
  if (from === null || to === null) return null;
  const points =
    item.source.kind === "points"
      ? givenPoints(translator, file, item.source.points, from, to)
      : filedPoints(translator, file, item.source.path, item.source.columns, from, to);
  if (points === null) return null;
  const { x, y, spans } = points;
  const name = item.name.text;
  if (x.length < 2) {
    const span = spans[0] ?? spanIn(file, item.range);
    translator.draft.report(finding("law-form", span, `Curve \`${name}\` needs two points at least.`));
    return null;
  }
  const fallen = x.findIndex((value, i) => i > 0 && !(value > x[i - 1]));
  if (fallen !== -1) {
    const [before, here] = [x[fallen - 1], x[fallen]].map((value) => quantityText(value, from, 6));
    const message = `The points of curve \`${name}\` must rise in their first value, but ${here} follows on ${before}.`;
    const inData = spans[fallen].file !== file.path && item.source.kind === "file";
    const facts = inData ? [{ message: "this row", span: spans[fallen] }] : [];
    const span = inData ? spanIn(file, item.range) : spans[fallen];
    translator.draft.report(finding("law-form", span, message, { facts }));
    return null;
  }
  const make = item.interpolation === "smooth" ? smoothCurve : linearCurve;
  return { curve: make(name, x, y), from, to };
}

interface Points {
  readonly x: readonly number[];
  readonly y: readonly number[];
  readonly spans: readonly Span[];
}

function unitOf({ draft }: Translator, file: SourceFile, written: UnitText): Unit | null {
  const unit = parseUnit(written.text);
  if (unit === null)
    draft.report(finding("unknown-unit", spanIn(file, written.range), unknownUnit(written.text)));
  return unit;
}

function givenPoints(
  translator: Translator,
  file: SourceFile,
  points: Extract<CurveDeclaration["source"], { kind: "points" }>["points"],
  from: Unit,
  to: Unit,
): Points | null {
  if (points.length > MOST_POINTS) {
    const [first] = points;
    const message = `A curve may have ${MOST_POINTS.toLocaleString("en")} points, this one has more.`;
    translator.draft.report(finding("too-large", spanIn(file, first.range), message));
    return null;
  }
  const scope = plainScope(file, null, NO_INDICES, true);
  let complete = true;
  const value = (tree: Expression, unit: Unit): number => {
    const typed = translator.whole(tree, scope);
    const fitting = translator.wanted(
      typed,
      unit.dimension,
      unit,
      tree.range,
      scope,
      "This value",
      "the curve",
    );
    const number = fitting.measure === "unknown" ? Number.NaN : numberOf(translator, fitting.expr);
    if (Number.isFinite(number)) return number;
    complete = false;
    if (fitting.measure !== "unknown")
      translator.refuse("not-computable", tree.range, scope, "This value of the curve is no finite number.");
    return Number.NaN;
  };
  const x = points.map((point) => value(point.x, from));
  const y = points.map((point) => value(point.y, to));
  return complete ? { x, y, spans: points.map(({ range }) => spanIn(file, range)) } : null;
}

function filedPoints(
  { draft }: Translator,
  file: SourceFile,
  path: StringLiteral,
  columns: readonly StringLiteral[],
  from: Unit,
  to: Unit,
): Points | null {
  const source = file.set.get(pathFrom(file.path, path.value));
  const span = spanIn(file, path.range);
  if (source === undefined) {
    draft.report(missingFile(file.set, file.path, path.value, span));
    return null;
  }
  if (columns.length !== 0 && columns.length !== 2) {
    const message = `A curve is read from two columns, one for each axis; here ${columns.length === 1 ? "one is" : `${columns.length} are`} named.`;
    draft.report(finding("syntax", spanIn(file, columns[0].range), message));
    return null;
  }
  const read: Columns = readColumns(
    source,
    columns.map(({ value }) => value),
    2,
    MOST_POINTS,
  );
  if (read.kind !== "columns") {
    draft.report(slipFinding(read, path.value, source.path, columns, file, span));
    return null;
  }
  const [x, y] = read.values;
  return {
    x: x.map((value) => toSI(value, from)),
    y: y.map((value) => toSI(value, to)),
    spans: read.ranges.map(({ start, end }) => ({ file: source.path, start, end })),
  };
}

function slipFinding(
  slip: TableSlip,
  written: string,
  path: string,
  columns: readonly StringLiteral[],
  file: SourceFile,
  span: Span,
) {
  switch (slip.kind) {
    case "no-column": {
      const literal = columns.find(({ value }) => value === slip.wanted);
      const at = literal === undefined ? span : spanIn(file, literal.range);
      const meant = nearest(slip.wanted, slip.known);
      const message = `\`${written}\` has no column \`${slip.wanted}\`.${meant === null ? "" : ` Is \`${meant}\` meant?`}`;
      const columnList = slip.known
        .slice(0, 12)
        .map((name) => `\`${name}\``)
        .join(", ");
      return finding("unknown-name", at, message, {
        facts: [{ message: `its columns are ${columnList}`, span: { file: path, start: 0, end: 0 } }],
        fix:
          meant === null
            ? undefined
            : { title: `Use ${meant}`, edits: [{ span: at, text: JSON.stringify(meant) }] },
      });
    }
    case "no-number": {
      const shown = slip.text.trim().slice(0, 30);
      const what = shown === "" ? "a cell is empty" : `\`${shown}\` is no number`;
      return finding("not-computable", span, `\`${written}\` can't be read as a curve: ${what}.`, {
        facts: [{ message: "this cell", span: { file: path, ...slip.range } }],
      });
    }
    case "too-long": {
      const most = slip.rows.toLocaleString("en");
      return finding(
        "too-large",
        span,
        `\`${written}\` has over ${most} rows, more than a curve may have points.`,
      );
    }
  }
}
