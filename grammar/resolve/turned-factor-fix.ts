import type { Fix } from "../diagnostics/finding.ts";
import type { Expression } from "../syntax/tree.ts";
import { divide, equal, multiply } from "../units/dimension.ts";
import { spanIn } from "./files.ts";
import type { Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import { isDimension, type Measure } from "./typed.ts";

const OWN = /(^|\.)[efpq]$/;

/**
 * A linear law whose parameter is the inverse of the one that the form wants, as a compliance where the law has a
 * stiffness: `e = k*q` with k in m/N becomes `e = q/k`, and the other way round.
 */
export function turnedFactorFix(
  translator: Translator,
  tree: Expression,
  wanted: Measure,
  scope: Scope,
): Fix | undefined {
  if (translator.trying || tree.kind !== "binary" || (tree.operator !== "*" && tree.operator !== "/"))
    return undefined;
  const { text } = scope.file.source;
  const sides = [tree.left, tree.right].map((side) => ({
    text: text.slice(side.range.start, side.range.end),
    plain: side.kind === "reference",
    measure: translator.translate(side, scope).measure,
  }));
  const variable = sides.findIndex(({ text: side, plain }) => plain && OWN.test(side));
  if (variable === -1 || (tree.operator === "/" && variable === 1)) return undefined;
  const [own, parameter] = [sides[variable], sides[1 - variable]];
  if (!isDimension(own.measure) || !isDimension(parameter.measure) || !isDimension(wanted)) return undefined;
  if (!parameter.plain) return undefined;
  const product = tree.operator === "*";
  const turned = product ? divide(own.measure, parameter.measure) : multiply(own.measure, parameter.measure);
  if (!equal(turned, wanted)) return undefined;
  const written = product ? `${own.text}/${parameter.text}` : `${parameter.text}*${own.text}`;
  return { title: `Write ${written}`, edits: [{ span: spanIn(scope.file, tree.range), text: written }] };
}
