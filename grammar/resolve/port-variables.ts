import { unitOfVariable } from "./domains.ts";
import type { DraftBond, DraftNode } from "./draft.ts";
import type { Translator } from "./translate.ts";
import type { Typed } from "./typed.ts";

/** The bond that a bond became when ports were joined. */
export function finalBond(bond: DraftBond): DraftBond {
  let final = bond;
  while (final.into !== null) final = final.into;
  return final;
}

export function bondVariable(translator: Translator, bond: DraftBond, variable: "e" | "f"): Typed {
  const expr = variable === "e" ? bond.effort : bond.flow;
  if (expr === null || bond.domain === null) return translator.unknown;
  const unit = unitOfVariable(bond.domain, variable);
  return { expr, measure: unit.dimension, shown: unit };
}

export function storeVariable(
  translator: Translator,
  node: DraftNode,
  port: string,
  bond: DraftBond,
  variable: "p" | "q",
): Typed {
  if (bond.domain === null) return translator.unknown;
  const unit = unitOfVariable(bond.domain, variable);
  const name = `${node.name}${port === "" ? "" : `.${port}`}.${variable}`;
  return { expr: translator.draft.pool.symbol("state", name), measure: unit.dimension, shown: unit };
}

/** Names of the ports by which a node is asked; null where it is asked directly. */
export function portNames(node: DraftNode): readonly string[] | null {
  if (node.declaration.kind === "element" && node.declaration.ports !== null) {
    return node.declaration.ports.map(({ name }) => name.text);
  }
  return node.type === "TF" || node.type === "GY" || node.type === "RS" ? ["in", "out"] : null;
}
