import type { FlatGraph } from "../../grammar/resolve/graph.ts";
import type { Span } from "../../grammar/source/span.ts";
import type { FileSet } from "../../grammar/source/text.ts";
import type { File, Statement } from "../../grammar/syntax/tree.ts";
import type { TiedLine } from "./light.ts";

/**
 * Which lines of the file what follows from: a declaration lights its node, a wiring its bonds, a value the terms
 * it occurs in, and a `sub` all that came out of it, whichever file that is written in.
 */
export function tiedLines(graph: FlatGraph, tree: File, system: string, files: FileSet): TiedLine[] {
  const source = files.get(tree.path);
  if (source === undefined) return [];
  const lines = new Map<number, { nodes: Set<string>; bonds: Set<string>; values: Set<string> }>();
  const at = (span: Span | { start: number; file?: undefined }) => {
    const line = source.position(span.start).line;
    let known = lines.get(line);
    if (known === undefined) {
      known = { nodes: new Set(), bonds: new Set(), values: new Set() };
      lines.set(line, known);
    }
    return known;
  };
  const here = (span: Span) => span.file === tree.path;

  for (const node of graph.nodes) if (here(node.span)) at(node.span).nodes.add(node.name);
  for (const bond of graph.bonds) if (here(bond.span)) at(bond.span).bonds.add(bond.id);
  for (const value of [...graph.parameters, ...graph.inputs, ...graph.outputs]) {
    if (here(value.span)) at(value.span).values.add(value.name);
  }

  const shown = tree.items.find((item) => item.kind === "system" && item.name.text === system);
  for (const sub of shown?.kind === "system" ? subsOf(shown.body) : []) {
    const inside = new RegExp(`^${sub.name.name.text}(\\[[^.]*\\])?\\.`, "u");
    const tied = at({ start: sub.range.start });
    for (const node of graph.nodes) if (inside.test(node.name)) tied.nodes.add(node.name);
    for (const bond of graph.bonds) {
      if (inside.test(graph.nodes[bond.from].name) && inside.test(graph.nodes[bond.to].name))
        tied.bonds.add(bond.id);
    }
    for (const parameter of graph.parameters)
      if (inside.test(parameter.name)) tied.values.add(parameter.name);
  }

  return [...lines]
    .sort(([a], [b]) => a - b)
    .map(([line, { nodes, bonds, values }]) => ({
      line,
      nodes: [...nodes],
      bonds: [...bonds],
      values: [...values],
    }));
}

function subsOf(body: readonly Statement[]): (Statement & { kind: "sub" })[] {
  return body.flatMap((statement) => {
    if (statement.kind === "sub") return [statement];
    return statement.kind === "repeat" ? subsOf(statement.body) : [];
  });
}
