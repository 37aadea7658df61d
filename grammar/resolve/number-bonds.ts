import { finding } from "../diagnostics/finding.ts";
import type { Draft, DraftBond, DraftNode } from "./draft.ts";

/** Gives bonds their ids (`coil_loop->coils.a`, `a->b#2`) and the symbols of their effort and flow. */
export function numberBonds(draft: Draft): void {
  const { pool } = draft;
  // Only junctions can have two bonds to one neighbour: every other port takes one bond.
  const seen = new Map<string, number>();
  const pairs = new Map<string, DraftBond>();
  const isInner = ({ type, instance }: DraftNode) => type === "port" && instance.parent !== null;
  draft.ports = draft.nodes.filter(isInner);
  if (draft.ports.length > 0) draft.nodes = draft.nodes.filter((node) => !isInner(node));
  for (let index = 0; index < draft.nodes.length; index += 1) draft.nodes[index].index = index;
  for (let index = 0; index < draft.bonds.length; index += 1) {
    const bond = draft.bonds[index];
    bond.index = index;
    const from = bond.fromPort === "" ? bond.from.name : `${bond.from.name}.${bond.fromPort}`;
    const to = bond.toPort === "" ? bond.to.name : `${bond.to.name}.${bond.toPort}`;
    bond.id = `${from}->${to}`;
    if (isJunction(bond.from.type) && isJunction(bond.to.type)) {
      const count = (seen.get(bond.id) ?? 0) + 1;
      seen.set(bond.id, count);
      if (count > 1) bond.id = `${bond.id}#${count}`;
      reportRepeated(draft, pairs, bond);
    }
    bond.effort = pool.symbol("effort", bond.id);
    bond.flow = pool.symbol("flow", bond.id);
  }
}

function reportRepeated(draft: Draft, pairs: Map<string, DraftBond>, bond: DraftBond): void {
  const { from, to } = bond;
  const pair = from.index < to.index ? `${from.index} ${to.index}` : `${to.index} ${from.index}`;
  const other = pairs.get(pair);
  if (other === undefined) {
    pairs.set(pair, bond);
    return;
  }
  draft.report(
    finding(
      "repeated-bond",
      bond.span,
      `\`${from.local}\` and \`${to.local}\` are joined by a bond already.`,
      {
        facts: [{ message: "the other bond", span: other.span }],
      },
    ),
  );
}

export function isJunction(type: string): boolean {
  return type === "0" || type === "1";
}
