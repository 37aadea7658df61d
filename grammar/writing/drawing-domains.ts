import type { DiagramModel } from "./diagram-model.ts";

/** Ids of what joins two domains: there a reader wants to see which is which. */
export function joinsDomains(model: DiagramModel): ReadonlySet<string> {
  const domains = new Map<string, Set<string>>();
  for (const { from, to, domain } of model.bonds) {
    for (const end of [from, to]) domains.set(end, (domains.get(end) ?? new Set()).add(domain));
  }
  const joining = new Set<string>();
  for (const { id, kind } of model.nodes) {
    if ((domains.get(id)?.size ?? 0) > 1 && kind !== "0" && kind !== "1") joining.add(id);
  }
  return joining;
}

/** By index of a bond: the end at which the domain changes. */
export function domainChanges(model: DiagramModel): ReadonlyMap<number, "from" | "to" | "both"> {
  const joining = joinsDomains(model);
  const changes = new Map<number, "from" | "to" | "both">();
  for (const [i, { from, to }] of model.bonds.entries()) {
    if (joining.has(from)) changes.set(i, joining.has(to) ? "both" : "from");
    else if (joining.has(to)) changes.set(i, "to");
  }
  return changes;
}
