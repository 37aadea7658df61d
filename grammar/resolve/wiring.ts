import { finding } from "../diagnostics/finding.ts";
import type { Range } from "../source/span.ts";
import type { Reference, Wiring } from "../syntax/tree.ts";
import { type Draft, type DraftBond, type DraftNode, type Indices, type Instance, spanOf } from "./draft.ts";
import { fullName, lookUp, unknownName } from "./names.ts";

interface Place {
  readonly node: DraftNode;
  readonly port: string;
  readonly range: Range;
}

/** Draws the bonds of one line: chains, fans at either end, demanded strokes, and a name where one is given. */
export function wire(draft: Draft, instance: Instance, wiring: Wiring, indices: Indices): void {
  const groups = wiring.groups.map((group) => group.map((end) => place(draft, instance, end, indices)));
  let drawn: DraftBond | null = null;
  let count = 0;
  for (let i = 1; i < groups.length; i += 1) {
    const { stroke, range } = wiring.arrows[i - 1];
    for (const from of groups[i - 1]) {
      for (const to of groups[i]) {
        count += 1;
        if (from === null || to === null) {
          draft.broken = true;
          if (from !== null) from.node.suspect = true;
          if (to !== null) to.node.suspect = true;
          continue;
        }
        const fan = groups[i].length > 1 ? to.range : groups[i - 1].length > 1 ? from.range : null;
        const span = fan ?? { start: from.range.start, end: to.range.end };
        if (from.node === to.node) {
          selfBond(draft, instance, from.node, span);
          continue;
        }
        drawn = {
          from: from.node,
          fromPort: from.port,
          to: to.node,
          toPort: to.port,
          demanded: stroke === null ? null : { end: stroke, span: spanOf(instance, range) },
          span: spanOf(instance, span),
          instance,
          wiring,
          into: null,
          index: -1,
          id: "",
          effort: null,
          flow: null,
          domain: null,
          group: null,
        };
        draft.bonds.push(drawn);
        from.node.ends.push({ bond: drawn, instance, side: "from", port: from.port, range: from.range });
        to.node.ends.push({ bond: drawn, instance, side: "to", port: to.port, range: to.range });
      }
    }
  }
  if (wiring.as !== null) nameBond(draft, instance, wiring, indices, count, drawn);
}

function place(draft: Draft, instance: Instance, end: Reference, indices: Indices): Place | null {
  const [first, second] = end.path;
  const named = lookUp(draft, first, instance, instance, indices);
  if (named === null || named.kind === "broken") return null;
  const refuse = (name: "unknown-name" | "port-direction", message: string) => {
    draft.report(finding(name, spanOf(instance, end.range), message));
    return null;
  };
  if (named.kind === "bond")
    return refuse("unknown-name", `\`${first.name.text}\` is the name of a bond; bonds join nodes.`);
  if (named.kind === "sub") {
    const ports = [...named.nodes.values()].filter(
      (node) => node.kind === "node" && node.type === "port",
    ) as DraftNode[];
    const list = ports.map(({ local }) => `\`${first.name.text}.${local}\``).join(", ");
    if (
      second === undefined ||
      end.path.length > 2 ||
      !ports.some(({ local }) => local === second.name.text)
    ) {
      // One of its ports was meant, so that none is called unwired on top.
      for (const port of ports) port.suspect = true;
    }
    if (second === undefined) {
      return refuse(
        "unknown-name",
        `\`${first.name.text}\` is a sub; a bond ends at one of its ports${list === "" ? ", and it has none" : `: ${list}`}.`,
      );
    }
    const name = fullName(draft, second, instance, indices);
    if (name === null) return null;
    const port = named.nodes.get(name);
    if (port?.kind === "node" && port.type === "port" && end.path.length === 2)
      return { node: port, port: "", range: end.range };
    if (port !== undefined) {
      return refuse(
        "unknown-name",
        `\`${name}\` is inside ${named.template.system.name.text}; a bond from outside ends at a port${list === "" ? ", and it has none" : `: ${list}`}.`,
      );
    }
    const system = named.template.system.name.text;
    draft.report(
      unknownName(
        instance,
        second.range,
        `${system} has no port \`${name}\`.`,
        name,
        ports.map(({ local }) => local),
      ),
    );
    return null;
  }
  return fieldPort(draft, instance, end, named);
}

function fieldPort(draft: Draft, instance: Instance, end: Reference, node: DraftNode): Place | null {
  const second = end.path[1];
  const ports = node.declaration.kind === "element" ? node.declaration.ports : null;
  const refuse = (message: string) => {
    draft.report(finding("unknown-name", spanOf(instance, end.range), message));
    node.suspect = true;
    return null;
  };
  if (ports === null) {
    if (end.path.length > 1)
      return refuse(`${node.local} has no ports with names; a bond ends at \`${node.local}\` itself.`);
    return { node, port: "", range: end.range };
  }
  const list = ports.map(({ name }) => `\`${node.local}.${name.text}\``).join(", ");
  if (second === undefined || end.path.length > 2)
    return refuse(`${node.local} has ports with names; a bond ends at one of them: ${list}.`);
  const port = ports.find(({ name }) => name.text === second.name.text);
  if (port === undefined) {
    node.suspect = true;
    const names = ports.map(({ name }) => name.text);
    draft.report(
      unknownName(
        instance,
        second.range,
        `${node.local} has no port \`${second.name.text}\`.`,
        second.name.text,
        names,
      ),
    );
    return null;
  }
  return { node, port: port.name.text, range: end.range };
}

function selfBond(draft: Draft, instance: Instance, node: DraftNode, range: Range): void {
  node.suspect = true;
  draft.broken = true;
  draft.report(
    finding(
      "wrong-port-count",
      spanOf(instance, range),
      `A bond joins two nodes; this one leads from \`${node.local}\` to itself.`,
    ),
  );
}

function nameBond(
  draft: Draft,
  instance: Instance,
  wiring: Wiring,
  indices: Indices,
  count: number,
  bond: DraftBond | null,
): void {
  if (wiring.as === null) return;
  const name = fullName(draft, wiring.as, instance, indices);
  if (name === null) return;
  const span = spanOf(instance, wiring.as.range);
  if (count !== 1) {
    draft.report(finding("syntax", span, `\`as\` names one bond, but this line draws ${count}.`));
    instance.nodes.set(name, { kind: "broken" });
    return;
  }
  if (instance.nodes.has(name)) {
    draft.report(finding("duplicate-name", span, `\`${name}\` is declared already as a node.`));
    return;
  }
  instance.nodes.set(name, bond === null ? { kind: "broken" } : { kind: "bond", bond, span });
}
