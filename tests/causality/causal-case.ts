import { readdirSync, readFileSync } from "node:fs";
import { assignCausality } from "../../grammar/causality/assign.ts";
import type { CausalGraph } from "../../grammar/causality/strokes.ts";
import type { Finding } from "../../grammar/diagnostics/finding.ts";
import { resolve } from "../../grammar/resolve/resolve.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { parse } from "../../grammar/syntax/parse.ts";

const FOLDER = new URL("../cases/causality/", import.meta.url);

/**
 * A case is a model with comments that say what is expected:
 * `#: a->|b b|->c` strokes, of all bonds where there are any; `#: chosen a->b`, `#: derivative store.p` likewise;
 * `#! name message` under the line that a finding stands on, `#- text` for facts of it (both without backquotes).
 */
export function caseNames(): string[] {
  return readdirSync(FOLDER).filter((name) => name.endsWith(".wright"));
}

export function caseText(name: string): string {
  return readFileSync(new URL(name, FOLDER), "utf8");
}

/** The causal graph of the last system in a text; the text itself must be without errors. */
export function causalityOf(text: string): { causal: CausalGraph; findings: Finding[] } {
  const resolved = resolve(fileSet([["case.wright", text]]), "case.wright", parse);
  const system = resolved.systems.at(-1);
  const errors = [...resolved.findings, ...(system?.findings ?? [])].filter(
    ({ severity }) => severity === "error",
  );
  if (errors.length > 0 || system?.graph == null)
    throw new Error(errors.map(({ message }) => message).join("\n"));
  return assignCausality(system.graph);
}

/** Strokes as they are drawn: `a->|b` where the stroke is at b. */
export function drawn({ graph, strokes }: CausalGraph): string[] {
  return graph.bonds.map(({ id, index }) =>
    id.replace("->", strokes[index] === "to" ? "->|" : strokes[index] === "from" ? "|->" : "-?>"),
  );
}

/** The places where the one law of each junction and two-port is broken. */
export function broken({ graph, strokes }: CausalGraph): string[] {
  return graph.nodes.flatMap(({ kind, name, ports }) => {
    const here = ports.filter(({ bond, end }) => strokes[bond] === end).length;
    if (ports.some(({ bond }) => strokes[bond] === null)) return [`${name} is open`];
    if (kind === "0") return here === 1 ? [] : [name];
    if (kind === "1") return here === ports.length - 1 ? [] : [name];
    if (kind === "TF") return here === 1 ? [] : [name];
    if (kind === "GY") return here === 1 ? [name] : [];
    if (kind === "Se") return here === 0 ? [] : [name];
    if (kind === "Sf") return here === 1 ? [] : [name];
    return [];
  });
}
