import { derivative } from "../symbolic/derivative.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { substitute } from "../symbolic/substitute.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { ElementDeclaration } from "../syntax/tree.ts";
import { equal, multiply } from "../units/dimension.ts";
import { unitText } from "../units/unit-text.ts";
import { type DraftNode, spanOf } from "./draft.ts";
import type { FlatLaw } from "./graph.ts";
import { endOf, type OwnVariable, ownVariable } from "./law-scope.ts";
import { finalBond } from "./port-variables.ts";
import type { Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";

/** Left side → the partner on the right, and whether the factor is the ratio itself or one over it. */
const FORMS: Readonly<Record<string, readonly [partner: string, inverse: boolean]>> = {
  "TF out.f": ["in.f", false],
  "TF in.e": ["out.e", false],
  "TF in.f": ["out.f", true],
  "TF out.e": ["in.e", true],
  "GY out.e": ["in.f", false],
  "GY in.e": ["out.f", false],
  "GY in.f": ["out.e", true],
  "GY out.f": ["in.e", true],
};

/**
 * The one law of a transformer or gyrator as its ratio: TF out.f = ratio*in.f, in.e = ratio*out.e;
 * GY out.e = ratio*in.f, in.e = ratio*out.f. The second relation follows from power conservation.
 */
export function twoPortLaw(
  translator: Translator,
  node: DraftNode,
  declaration: ElementDeclaration,
  scope: Scope,
  used: OwnVariable[],
): FlatLaw | null {
  const [law, second] = declaration.laws;
  const refuse = (range: { start: number; end: number }, message: string) => {
    translator.refuse("law-form", range, scope, message);
    return null;
  };
  if (second !== undefined)
    return refuse(
      second.range,
      `${node.type} ${node.local} has one law; its other relation follows from power conservation.`,
    );
  if (law.oneWay)
    return refuse(
      law.range,
      `${node.type} ${node.local} conserves power both ways; write \`=\` for its law.`,
    );
  const left = ownVariable(translator, node, law.left);
  const form = left === null ? undefined : FORMS[`${node.type} ${left.port}.${left.variable}`];
  if (left !== null && left.typed.measure === "unknown" && form === undefined) return null;
  if (left === null || form === undefined) return refuse(law.range, formOf(node));
  const [partner, inverse] = form;
  used.length = 0;
  const right = translator.whole(law.right, scope);
  if (right.measure === "unknown" && !translator.trying) return null;
  const other = used.find((own) => `${own.port}.${own.variable}` === partner);
  if (other === undefined || used.some((own) => `${own.port}.${own.variable}` !== partner)) {
    return right.measure === "unknown" && used.some(({ typed }) => typed.measure === "unknown")
      ? null
      : refuse(law.range, formOf(node));
  }
  const typed = translator.wanted(
    right,
    left.typed.measure,
    left.typed.shown,
    law.right.range,
    scope,
    "The right side",
    "the left side",
  );
  if (typed.measure === "unknown" || left.typed.measure === "unknown") return null;
  if (!samePower(translator, node, law.range, scope)) return null;
  const factor = factorOf(translator, typed.expr, other.typed.expr as Symbol);
  if (factor === null) return refuse(law.range, formOf(node));
  const { pool } = translator.draft;
  const ratio = inverse ? pool.divide(pool.one, factor) : factor;
  return { kind: "ratio", ratio, span: spanOf(node.instance, law.range) };
}

/** right = factor*partner with a factor that is free of the partner; null where it isn't so. */
function factorOf(translator: Translator, right: Expr, partner: Symbol): Expr | null {
  const { pool } = translator.draft;
  const quotient = pool.divide(right, partner);
  if (!symbolsOf(quotient).has(partner)) return quotient;
  const slope = derivative(pool, right, partner);
  if (symbolsOf(slope).has(partner)) return null;
  // Affine in the partner, so that it is proportional where it vanishes with it.
  return substitute(pool, right, new Map([[partner, pool.zero]])) === pool.zero ? slope : null;
}

/** Power conservation joins two ports only where both products of effort and flow measure the same. */
function samePower(
  translator: Translator,
  node: DraftNode,
  range: { start: number; end: number },
  scope: Scope,
): boolean {
  const [into, out] = ["in", "out"]
    .map((port) => endOf(node, port))
    .map((end) => (end === undefined ? null : finalBond(end.bond).domain));
  if (into === null || out === null) return true;
  const [a, b] = [into, out].map(({ effort, flow }) => multiply(effort.dimension, flow.dimension));
  if (equal(a, b)) return true;
  translator.mismatch(
    range,
    scope,
    `${node.type} ${node.local} conserves power, but effort times flow is in ${unitText(a)} in ${into.name} and in ${unitText(b)} in ${out.name}.`,
  );
  return false;
}

function formOf(node: DraftNode): string {
  return node.type === "TF"
    ? `The law of TF ${node.local} is a factor between like variables of its two sides: \`out.f = n*in.f\` or \`in.e = n*out.e\`, or either turned round.`
    : `The law of GY ${node.local} is a factor across: \`out.e = r*in.f\` or \`in.e = r*out.f\`, or either turned round.`;
}
