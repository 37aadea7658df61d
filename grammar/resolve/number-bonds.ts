import { finding } from "../diagnostics/finding.ts";
import type { Draft, DraftBond, DraftNode } from "./draft.ts";

/** Gives bonds their ids (`coil_loop->coils.a`, `a->b#2`) and the symbols of their effort and flow. */
export function numberBonds(draft: Draft): void {
  const { pool } = draft;
  const seen = new Map<string, number>();
  const pairs = new Map<string, DraftBond>();
  const isInner = ({ type, instance }: DraftNode) => type === "port" && instance.parent !== null;
  draft.ports = draft.nodes.filter(isInner);
  draft.nodes = draft.nodes.filter((node) => !isInner(node));
  draft.nodes.forEach((node, index) => {
    node.index = index;
  });
  draft.bonds.forEach((bond, index) => {
    bond.index = index;
    const from = bond.fromPort === "" ? bond.from.name : `${bond.from.name}.${bond.fromPort}`;
    const to = bond.toPort === "" ? bond.to.name : `${bond.to.name}.${bond.toPort}`;
    const id = `${from}->${to}`;
    const count = (seen.get(id) ?? 0) + 1;
    seen.set(id, count);
    bond.id = count === 1 ? id : `${id}#${count}`;
    bond.effort = pool.symbol("effort", bond.id);
    bond.flow = pool.symbol("flow", bond.id);
    if (isJunction(bond.from.type) && isJunction(bond.to.type)) {
      const a = Math.min(bond.from.index, bond.to.index);
      const pair = `${a} ${bond.from.index + bond.to.index - a}`;
      const other = pairs.get(pair);
      if (other === undefined) pairs.set(pair, bond);
      else {
        draft.report(
          finding(
            "repeated-bond",
            bond.span,
            `\`${bond.from.local}\` and \`${bond.to.local}\` are joined by a bond already.`,
            {
              facts: [{ message: "the other bond", span: other.span }],
            },
          ),
        );
      }
    }
  });
}

export function isJunction(type: string): boolean {
  return type === "0" || type === "1";
}
