import { finding } from "../diagnostics/finding.ts";
import type { ElementDeclaration, Expression } from "../syntax/tree.ts";
import { divide, equal } from "../units/dimension.ts";
import type { Dimension } from "../units/unit.ts";
import { unitText } from "../units/unit-text.ts";
import { unitOfVariable } from "./domains.ts";
import { type DraftNode, spanOf } from "./draft.ts";
import type { FlatLaw } from "./graph.ts";
import { declarationSpan, endOf } from "./law-scope.ts";
import { bondVariable, finalBond, storeVariable } from "./port-variables.ts";
import type { Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import { isDimension, isIn } from "./typed.ts";

/** The two forms of a linear law: `left = value*right`, or with the sides changed `right = value*left`. */
const FORMS = {
  R: { left: "e", right: "f" },
  RS: { left: "e", right: "f" },
  C: { left: "e", right: "q" },
  I: { left: "p", right: "f" },
} as const;

/**
 * The law of an element that writes none: its linear parameter is the value of its own name, or the one after
 * `=`, and its dimension tells which way round it stands (ohm or siemens, N/m or m/N, kg).
 */
export function linearLaw(
  translator: Translator,
  node: DraftNode,
  declaration: ElementDeclaration,
  scope: Scope,
): FlatLaw | null {
  const form = FORMS[node.type as keyof typeof FORMS];
  if (form === undefined || declaration.ports !== null) {
    if (!translator.trying)
      translator.draft.report(
        finding("law-missing", declarationSpan(node), `${node.type} ${node.local} has no law.`),
      );
    return null;
  }
  const tree = declaration.valueOf ?? ownName(translator, node, declaration);
  if (tree === null) return null;
  const value = translator.whole(tree, { ...scope, self: null });
  const bond = finalBond(endOf(node, node.type === "RS" ? "in" : "")?.bond ?? node.ends[0].bond);
  if (value.measure === "unknown" || bond.domain === null) return null;
  const left = unitOfVariable(bond.domain, form.left).dimension;
  const right = unitOfVariable(bond.domain, form.right).dimension;
  const measure: Dimension | null = isDimension(value.measure) ? value.measure : null;
  const straight = measure === null || equal(measure, divide(left, right));
  if (!straight && !equal(measure, divide(right, left))) {
    const units = [divide(left, right), divide(right, left)].map((dimension) => unitText(dimension));
    translator.mismatch(
      tree.range,
      scope,
      `The linear parameter of ${node.type} ${node.local} is ${isIn(value.measure, value.shown)}; in ${bond.domain.name} it is in ${units[0]} (\`${form.left} = value*${form.right}\`) or in ${units[1]} (\`${form.right} = value*${form.left}\`).`,
    );
    return null;
  }
  // The state stays on the right, so that the law is read as it is used in integral causality.
  const { pool } = translator.draft;
  const variable = node.type === "I" ? "f" : node.type === "C" ? "e" : straight ? "e" : "f";
  const other = variable === form.left ? form.right : form.left;
  const partner =
    other === "e" || other === "f"
      ? bondVariable(translator, bond, other)
      : storeVariable(translator, node, "", bond, other);
  const multiplies = straight === (variable === form.left);
  const expr = multiplies ? pool.product(value.expr, partner.expr) : pool.divide(partner.expr, value.expr);
  return {
    kind: "relation",
    port: 0,
    variable,
    right: expr,
    oneWay: false,
    span: spanOf(node.instance, declaration.range),
  };
}

function ownName(
  translator: Translator,
  node: DraftNode,
  declaration: ElementDeclaration,
): Expression | null {
  const { name } = declaration.name;
  const { instance } = node;
  if (instance.unread.has(name.text)) {
    translator.draft.incomplete = true;
    return null;
  }
  if (
    instance.values.has(name.text) ||
    instance.file.visible.values.has(name.text) ||
    node.indices.has(name.text)
  ) {
    return { kind: "reference", path: [{ name, indices: [], range: name.range }], range: name.range };
  }
  const indexed = declaration.name.indices.length > 0 && instance.values.has(node.local);
  if (indexed) return { kind: "reference", path: [declaration.name], range: declaration.name.range };
  if (translator.trying) return null;
  translator.draft.incomplete = true;
  if (instance.file.missing === true || instance.file.missing.has(name.text)) return null;
  translator.draft.report(
    finding(
      "law-missing",
      declarationSpan(node),
      `${node.type} ${node.local} has no law, and there is no value \`${name.text}\` to take it from.`,
    ),
  );
  return null;
}
