import { finding } from "../diagnostics/finding.ts";
import type { PortDeclaration } from "../syntax/tree.ts";
import { type Draft, type DraftBond, type DraftNode, type End, type Instance, spanOf } from "./draft.ts";

/**
 * Outside and inside of a sub's port are one bond, named by its real ends. Ports of the system itself stay as
 * nodes: the world is at their other side.
 */
export function joinPorts(draft: Draft): void {
  let whole = true;
  for (const node of draft.nodes) if (node.type === "port") whole = checkPort(draft, node) && whole;
  if (!whole) {
    draft.broken = true;
    return;
  }
  const joined: DraftBond[] = [];
  for (const bond of draft.bonds) {
    if (isInner(bond.from)) continue;
    joined.push(bond);
    let last = bond;
    while (isInner(last.to)) {
      const next = other(last.to, last);
      next.into = bond;
      join(draft, bond, next);
      last = next;
    }
    if (last === bond) continue;
    bond.to = last.to;
    bond.toPort = last.toPort;
    const end = bond.to.ends.find((one) => one.bond === last) as End;
    end.bond = bond;
  }
  for (const bond of draft.bonds) {
    if (bond.into === null && isInner(bond.from)) {
      draft.broken = true;
      draft.report(
        finding("unconnected", bond.span, "This bond leads through ports only and joins no nodes."),
      );
    }
  }
  draft.bonds = joined;
}

function isInner(node: DraftNode): boolean {
  return node.type === "port" && node.instance.parent !== null;
}

function other(port: DraftNode, bond: DraftBond): DraftBond {
  return (port.ends[0].bond === bond ? port.ends[1] : port.ends[0]).bond;
}

function join(draft: Draft, bond: DraftBond, part: DraftBond): void {
  // The line nearest to the root is the one its reader has before them.
  if (depth(part.instance) < depth(bond.instance)) bond.span = part.span;
  if (part.demanded === null) return;
  if (bond.demanded !== null && bond.demanded.end !== part.demanded.end) {
    draft.report(
      finding(
        "stroke-refused",
        part.demanded.span,
        "The stroke is demanded at the other end on the other side of the port.",
        {
          facts: [{ message: "demanded here", span: bond.demanded.span }],
        },
      ),
    );
  }
  bond.demanded ??= part.demanded;
}

function depth(instance: Instance): number {
  let count = 0;
  for (let at = instance.parent; at !== null; at = at.parent) count += 1;
  return count;
}

/** Exactly one bond on each side, each in the declared direction. */
function checkPort(draft: Draft, node: DraftNode): boolean {
  const { instance } = node;
  const gives = (node.declaration as PortDeclaration).gives;
  const inside = node.ends.filter(({ bond }) => bond.instance === instance);
  const outside = node.ends.filter(({ bond }) => bond.instance !== instance);
  const declared = spanOf(instance, node.declaration.name.range);
  const right = checkSide(draft, node, inside, gives ? "to" : "from", "inside", declared);
  if (instance.parent === null) return right;
  const sub = spanOf(instance.parent, instance.declaration?.name.range ?? node.declaration.name.range);
  return checkSide(draft, node, outside, gives ? "from" : "to", "outside", sub) && right;
}

function checkSide(
  draft: Draft,
  node: DraftNode,
  ends: readonly End[],
  side: "from" | "to",
  where: "inside" | "outside",
  span: ReturnType<typeof spanOf>,
): boolean {
  const gives = (node.declaration as PortDeclaration).gives;
  const sub = node.instance.declaration?.name.name.text;
  const name = where === "outside" ? `${sub}.${node.local}` : node.local;
  if (ends.length === 0) {
    if (!node.suspect) draft.report(finding("unconnected", span, `The port ${name} has no bond ${where}.`));
    return false;
  }
  if (ends.length > 1) {
    draft.report(
      finding(
        "wrong-port-count",
        spanOf(ends[1].instance, ends[1].range),
        `The port ${name} has ${ends.length} bonds ${where}; a port has one on each side. A junction joins more.`,
      ),
    );
    return false;
  }
  if (ends[0].side === side) return true;
  const verb = gives ? "gives" : "takes";
  const wanted = side === "from" ? "starts at it" : "ends at it";
  draft.report(
    finding(
      "port-direction",
      spanOf(ends[0].instance, ends[0].range),
      `The port ${name} ${verb} power, so its bond ${where} ${wanted}; here the arrow points the other way.`,
      {
        facts: [
          { message: `declared with \`${verb}\``, span: spanOf(node.instance, node.declaration.range) },
        ],
      },
    ),
  );
  return false;
}
