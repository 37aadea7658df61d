import type { Finding } from "../diagnostics/finding.ts";
import type { FileSet } from "../source/text.ts";
import type { System } from "../syntax/tree.ts";
import { assemble, workOutParameters, workOutSignals } from "./assemble.ts";
import { checkDeclarations } from "./declarations.ts";
import { Draft } from "./draft.ts";
import { checkElements } from "./elements.ts";
import { expand, type FindSystem } from "./expand.ts";
import { Library, type Parse, type SourceFile } from "./files.ts";
import type { FlatTrial } from "./flat-trial.ts";
import type { FlatGraph } from "./graph.ts";
import { inferDomains, reportUnknownDomains } from "./infer-domains.ts";
import { joinPorts } from "./join-ports.ts";
import { systemNotes, unusedFunctions } from "./notes.ts";
import { numberBonds } from "./number-bonds.ts";
import { fitsLimits } from "./size.ts";
import { Translator } from "./translate.ts";
import { type RunnableSystem, resolveTrials } from "./trials.ts";

export interface Resolved {
  /** Of the file itself: its `use` lines, functions, trials. */
  readonly findings: readonly Finding[];
  readonly systems: readonly ResolvedSystem[];
  readonly trials: readonly FlatTrial[];
}

export interface ResolvedSystem {
  readonly name: string;
  /** null where the structure is at fault; where only a law is, the graph stands without it. */
  readonly graph: FlatGraph | null;
  readonly findings: readonly Finding[];
}

/** From syntax trees to flat bond graphs: each system of the file at `path`, with all that it uses. */
export function resolve(files: FileSet, path: string, parse: Parse): Resolved {
  const findings: Finding[] = [];
  const library = new Library(files, parse, (found) => findings.push(found));
  const file = library.open(path);
  if (file === null) throw new Error(`resolve was asked for ${path}, which is not in the set`);
  const findSystem = systemFinder(files, path);
  // From the last to the first, since parts stand before what is made of them.
  const refused = new Set<System>();
  const systems = file.tree.items
    .filter((item) => item.kind === "system")
    .reverse()
    .map((system) => ({ system, ...resolveSystem(system, file, findSystem, refused) }))
    .reverse();
  const runnable = new Map<System, RunnableSystem>(systems.map((one) => [one.system, one]));
  const { trials, findings: trialFindings } = resolveTrials(file, (name) => {
    const placed = file.visible.systems.get(name);
    if (placed === undefined) return null;
    let known = runnable.get(placed.item);
    // A system of another file has its findings there.
    if (known === undefined) {
      known = resolveSystem(placed.item, placed.file, findSystem, refused);
      runnable.set(placed.item, known);
    }
    return known;
  });
  return {
    findings: [...findings, ...checkDeclarations(file), ...unusedFunctions(file), ...trialFindings],
    systems: systems.map(({ name, graph, findings: found }) => ({ name, graph, findings: found })),
    trials,
  };
}

function resolveSystem(
  system: System,
  file: SourceFile,
  findSystem: FindSystem,
  refused: Set<System>,
): ResolvedSystem & RunnableSystem {
  const draft = new Draft(file);
  const name = system.name.text;
  if (!fitsLimits(draft, system, file, refused))
    return { name, graph: null, findings: draft.findings, translator: null };
  expand(draft, system, file, findSystem);
  joinPorts(draft);
  checkElements(draft);
  numberBonds(draft);
  const translator = new Translator(draft);
  workOutParameters(translator);
  const groups = inferDomains(translator);
  workOutSignals(translator);
  const graph = assemble(translator);
  reportUnknownDomains(draft, groups);
  systemNotes(draft, system, file);
  return { name, graph, findings: draft.findings, translator };
}

/** Looks through the text of the other files of the set, which are not parsed for a suggestion's sake. */
function systemFinder(files: FileSet, own: string): FindSystem {
  return (name) => {
    for (const [path, source] of files) {
      if (path === own || !path.endsWith(".wright") || !source.text.includes(name)) continue;
      for (const line of source.text.split("\n")) {
        const [word, declared] = line.trim().split(/[\s{]+/, 2);
        if (word === "system" && declared === name) return path;
      }
    }
    return null;
  };
}
