import { finding } from "../diagnostics/finding.ts";
import type { Span } from "../source/span.ts";
import type { Identifier } from "../syntax/tree.ts";
import { DOMAINS, sameDomain } from "./domains.ts";
import { type Draft, type DraftBond, type DraftNode, spanOf } from "./draft.ts";
import type { Domain } from "./graph.ts";
import { declarationSpan } from "./law-scope.ts";
import { lawsFit } from "./laws.ts";
import { unknownName } from "./names.ts";
import { isJunction } from "./number-bonds.ts";
import { finalBond } from "./port-variables.ts";
import type { Translator } from "./translate.ts";

/** Bonds that junctions tie together: all of one domain. */
export interface Group {
  readonly bonds: DraftBond[];
  domain: Domain | null;
  /** Who settled it, for the finding when another disagrees. */
  by: { readonly text: string; readonly span: Span; readonly node: DraftNode } | null;
  /** Reported already, or not to be reported. */
  silent: boolean;
  candidates: readonly Domain[] | null;
}

/**
 * Gives every bond its domain: as declared anywhere in its group; else the one domain in which the laws of the
 * elements at it work out; transformers, gyrators and fields carry it on to the next group.
 */
export function inferDomains(translator: Translator): readonly Group[] {
  const { draft } = translator;
  const groups = groupBonds(draft);
  declare(draft);
  new Inference(translator, groups).settleByLaws();
  if (groups.some(({ domain }) => domain === null)) draft.broken = true;
  return groups;
}

function groupBonds(draft: Draft): Group[] {
  const parent = new Int32Array(draft.bonds.length).map((_, i) => i);
  const rootOf = (i: number) => {
    let root = i;
    while (parent[root] !== root) {
      parent[root] = parent[parent[root]];
      root = parent[root];
    }
    return root;
  };
  for (const node of draft.nodes) {
    if (!isJunction(node.type)) continue;
    for (const end of node.ends) parent[rootOf(end.bond.index)] = rootOf(node.ends[0].bond.index);
  }
  const groups = new Map<number, Group>();
  for (const bond of draft.bonds) {
    const root = rootOf(bond.index);
    let group = groups.get(root);
    if (group === undefined) {
      group = { bonds: [], domain: null, by: null, silent: false, candidates: null };
      groups.set(root, group);
    }
    group.bonds.push(bond);
    bond.group = group;
  }
  return [...groups.values()];
}

function elementsOf(group: Group): DraftNode[] {
  const elements = new Set<DraftNode>();
  for (const { from, to } of group.bonds) {
    if (from.declaration.kind === "element") elements.add(from);
    if (to.declaration.kind === "element") elements.add(to);
  }
  return [...elements];
}

function declare(draft: Draft): void {
  for (const nodes of [draft.nodes, draft.ports]) {
    for (const node of nodes) {
      const { declaration } = node;
      const { domain } = declaration;
      const ports = declaration.kind === "element" ? declaration.ports : null;
      if (domain === null && ports === null) continue;
      for (const end of node.ends) {
        const own = ports?.find(({ name }) => name.text === end.port)?.domain ?? domain;
        const { group } = finalBond(end.bond);
        if (own !== null && group !== null) settle(draft, group, node, own);
        if (isJunction(node.type)) break;
      }
    }
  }
  // Where two declarations disagree, neither is taken: what follows from either would be a guess.
  for (const bond of draft.bonds) if (bond.group?.silent === true) bond.group.domain = null;
  for (const bond of draft.bonds) bond.domain = bond.group?.domain ?? null;
}

function settle(draft: Draft, group: Group, node: DraftNode, name: Identifier): void {
  const { file } = node.instance;
  const domain = DOMAINS.get(name.text) ?? file.visible.domains.get(name.text);
  if (domain === undefined) {
    group.silent = true;
    if (file.missing === true || file.missing.has(name.text)) return;
    const known = [...DOMAINS.keys(), ...file.visible.domains.keys()];
    draft.report(
      unknownName(node.instance, name.range, `There is no domain \`${name.text}\`.`, name.text, known),
    );
    return;
  }
  const by = {
    text: `\`${node.local}\` is declared ${name.text}`,
    span: spanOf(node.instance, name.range),
    node,
  };
  if (group.domain === null) {
    group.domain = domain;
    group.by = by;
  } else if (!sameDomain(group.domain, domain) && group.by !== null) {
    reportConflict(
      draft,
      group,
      by,
      `${by.text}, but ${group.by.text}, and bonds join them with no transformer or gyrator between.`,
    );
  }
}

function reportConflict(draft: Draft, group: Group, by: NonNullable<Group["by"]>, message: string): void {
  const first = group.by as NonNullable<Group["by"]>;
  const direct = group.bonds.find(
    ({ from, to }) => (from === first.node && to === by.node) || (from === by.node && to === first.node),
  );
  group.silent = true;
  draft.broken = true;
  draft.report(
    finding("domain-conflict", direct?.span ?? by.span, message, {
      facts: [
        { message: first.text, span: first.span },
        { message: by.text, span: by.span },
      ],
    }),
  );
}

function setDomain(group: Group, domain: Domain | null): void {
  group.domain = domain;
  for (const bond of group.bonds) bond.domain = domain;
}

class Inference {
  readonly #translator: Translator;
  readonly #groups: readonly Group[];

  constructor(translator: Translator, groups: readonly Group[]) {
    this.#translator = translator;
    this.#groups = groups;
  }

  settleByLaws(): void {
    const open = this.#groups.filter(({ domain, silent }) => domain === null && !silent);
    if (open.length === 0) return;
    const work = open.flatMap(elementsOf);
    this.#spread(work);
    for (const node of work) if (this.#tryPair(node)) this.#spread(this.#neighbours(node));
  }

  /** Narrows the one group that an element leaves open; what settles goes on to the elements at it. */
  #spread(nodes: readonly DraftNode[]): void {
    const work = [...nodes];
    for (let next = 0; next < work.length; next += 1) {
      const node = work[next];
      const open = this.#openGroups(node);
      if (open.length !== 1) continue;
      const [group] = open;
      const fitting = (group.candidates ?? this.#all(node)).filter((domain) =>
        this.#fits(node, [group], [domain]),
      );
      // Laws that work out in no domain have a slip of their own, which is reported when they are read.
      if (fitting.length === 0) {
        if (group.candidates !== null && group.by !== null) this.#disagree(group, node);
        continue;
      }
      if (fitting.length < (group.candidates ?? this.#all(node)).length) {
        group.by = {
          text: `the law of \`${node.local}\` makes it ${fitting.map(({ name }) => name).join(" or ")}`,
          span: declarationSpan(node),
          node,
        };
      }
      group.candidates = fitting;
      if (fitting.length === 1 && group.by !== null) {
        setDomain(group, fitting[0]);
        for (const other of elementsOf(group))
          if (other !== node && this.#openGroups(other).length === 0) this.#check(group, other);
        for (const other of elementsOf(group)) work.push(other);
      }
    }
  }

  #neighbours(node: DraftNode): DraftNode[] {
    return node.ends.flatMap((end) => elementsOf(finalBond(end.bond).group as Group));
  }

  /** A transformer or gyrator between two open groups settles both where one pair of domains alone works out. */
  #tryPair(node: DraftNode): boolean {
    const open = this.#openGroups(node);
    if (open.length !== 2) return false;
    const [a, b] = open;
    const pairs: [Domain, Domain][] = [];
    for (const first of a.candidates ?? this.#all(node)) {
      for (const second of b.candidates ?? this.#all(node)) {
        if (this.#fits(node, open, [first, second])) pairs.push([first, second]);
      }
    }
    if (pairs.length !== 1) return false;
    setDomain(a, pairs[0][0]);
    setDomain(b, pairs[0][1]);
    return true;
  }

  /** An element at a settled group whose law works out in another domain only. */
  #check(group: Group, node: DraftNode): void {
    if (node.ends.length !== 1 || lawsFit(this.#translator, node)) return;
    this.#disagree(group, node);
  }

  #disagree(group: Group, node: DraftNode): void {
    if (group.by === null || node.ends.length !== 1) return;
    const fitting = this.#all(node).filter((one) => this.#fits(node, [group], [one]));
    if (fitting.length === 0) return;
    const by = {
      text: `the law of \`${node.local}\` makes it ${fitting.map(({ name }) => name).join(" or ")}`,
      span: declarationSpan(node),
      node,
    };
    const message = `Bonds join \`${group.by.node.local}\` and \`${node.local}\`, but ${group.by.text} and ${by.text}.`;
    reportConflict(this.#translator.draft, group, by, message);
    setDomain(group, null);
  }

  #openGroups(node: DraftNode): Group[] {
    const open = new Set<Group>();
    for (const end of node.ends) {
      const { group } = finalBond(end.bond);
      if (group !== null && group.domain === null && !group.silent) open.add(group);
    }
    return [...open];
  }

  #all(node: DraftNode): readonly Domain[] {
    return [...DOMAINS.values(), ...node.instance.file.visible.domains.values()];
  }

  /** Tries domains on the bonds of this one element, so that a trial costs what the element costs. */
  #fits(node: DraftNode, groups: readonly Group[], domains: readonly Domain[]): boolean {
    const bonds = node.ends.map((end) => finalBond(end.bond));
    for (const bond of bonds) {
      const at = groups.indexOf(bond.group as Group);
      if (at !== -1) bond.domain = domains[at];
    }
    const fits = lawsFit(this.#translator, node);
    for (const bond of bonds) bond.domain = bond.group?.domain ?? null;
    return fits;
  }
}

/** Said last: a slip in a law or a value may be why the laws tell nothing, and is mended first. */
export function reportUnknownDomains(draft: Draft, groups: readonly Group[]): void {
  if (draft.unread || draft.findings.some(({ severity }) => severity === "error")) return;
  for (const group of groups) if (group.domain === null && !group.silent) reportUnknown(draft, group);
}

function reportUnknown(draft: Draft, group: Group): void {
  const nodes = group.bonds.flatMap(({ from, to }) => [from, to]);
  const node = nodes.find(({ type }) => isJunction(type)) ?? nodes[0];
  const some =
    group.candidates !== null && group.candidates.length < DOMAINS.size
      ? group.candidates.map(({ name }) => name)
      : [];
  const message =
    some.length > 0
      ? `The domain of \`${node.local}\` is not settled: its laws fit ${some.join(" and ")}. Declare it, as in \`${node.local} : ${some[0]}\`.`
      : `Neither a declaration nor a neighbour nor a law settles the domain of \`${node.local}\`.`;
  draft.report(finding("domain-unknown", declarationSpan(node), message));
}
