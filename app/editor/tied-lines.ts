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

  const body = bodyOf(tree, system);
  const named = new Set(graph.nodes.map(({ name }) => name));
  const given = new Set([...graph.parameters, ...graph.inputs].map(({ name }) => name));
  // Signals are substituted away: their lines are tied to what they are made of.
  for (const { range } of only(body, ["let", "track"])) {
    const tied = at({ start: range.start });
    for (const [word] of source.text.slice(range.start, range.end).matchAll(/[\p{L}_][\p{L}\p{N}_]*/gu)) {
      if (named.has(word)) tied.nodes.add(word);
      if (given.has(word)) tied.values.add(word);
    }
  }

  for (const sub of only(body, ["sub"])) {
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

function bodyOf(tree: File, system: string): readonly Statement[] {
  const shown = tree.items.find((item) => item.kind === "system" && item.name.text === system);
  return shown?.kind === "system" ? shown.body : [];
}

/** Statements of some kinds, those within a `repeat` too. */
function only<K extends Statement["kind"]>(
  body: readonly Statement[],
  kinds: readonly K[],
): (Statement & { kind: K })[] {
  const wanted = (statement: Statement): statement is Statement & { kind: K } =>
    (kinds as readonly string[]).includes(statement.kind);
  return body.flatMap((statement) => {
    if (wanted(statement)) return [statement];
    return statement.kind === "repeat" ? only(statement.body, kinds) : [];
  });
}
