import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Reference } from "../syntax/tree.ts";
import type { Unit } from "../units/unit.ts";
import { type Draft, type Instance, type PlacedStart, spanOf } from "./draft.ts";
import type { FlatStart } from "./graph.ts";
import { fixedNumber } from "./numbers.ts";
import { translateReference } from "./references.ts";
import { plainScope, type Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import type { Measure } from "./typed.ts";

/** Initial values by the symbol they set. A system that uses a part may start it otherwise than the part does. */
export function flatStarts(translator: Translator): FlatStart[] {
  const { draft } = translator;
  if (draft.starts.length === 0) return [];
  const startable = startableVariables(draft);
  const found = new Map<Symbol, { readonly start: FlatStart; readonly by: Instance }>();
  for (const placed of [...draft.starts].sort((a, b) => depth(a.instance) - depth(b.instance))) {
    const target = targetOf(translator, placed, startable);
    if (target === null) continue;
    const { symbol, range } = target;
    const other = found.get(symbol);
    if (other !== undefined) {
      if (other.by === placed.instance) {
        translator.refuse("duplicate-name", range, target.scope, "This start is given already.");
      }
      continue;
    }
    const number = fixedNumber(
      translator,
      target.value,
      target.scope,
      target.measure,
      target.shown,
      "The start value",
      "this state",
    );
    if (number === null) continue;
    const span = spanOf(placed.instance, placed.statement.range);
    found.set(symbol, { start: { target: symbol, value: number, span }, by: placed.instance });
  }
  return [...found.values()].map(({ start }) => start);
}

function targetOf(translator: Translator, placed: PlacedStart, startable: ReadonlySet<Expr>) {
  const { statement, instance, indices } = placed;
  const scope = plainScope(instance.file, instance, indices, true);
  const { target, value } = statement;
  if (target === null || value === null) {
    const message = "`start steady` belongs in a trial; here a state gets a value: `start spring.q = 4 mm`.";
    translator.refuse("syntax", statement.range, scope, message);
    return null;
  }
  const found = startTarget(translator, target, scope, startable);
  return found === null ? null : { ...found, value, scope, range: target.range };
}

/** What a start names: the state of a store or track, or a store's effort or flow; null where it is refused. */
export function startTarget(
  translator: Translator,
  target: Reference,
  scope: Scope,
  startable: ReadonlySet<Expr> = startableVariables(translator.draft),
): { symbol: Symbol; measure: Measure; shown: Unit | null } | null {
  const { expr, measure, shown } = translateReference(translator, target, { ...scope, fixed: false });
  if (measure === "unknown") return null;
  const symbol = expr as Symbol;
  if (symbol.op !== "symbol" || (symbol.role !== "state" && !startable.has(symbol))) {
    const message =
      "Only what a store or a track holds can be given a start: its p or q, or its effort or flow.";
    translator.refuse("unknown-variable", target.range, scope, message);
    return null;
  }
  return { symbol, measure, shown };
}

/** Efforts and flows of stores, which are solved back through the law. */
function startableVariables(draft: Draft): ReadonlySet<Expr> {
  const startable = new Set<Expr>();
  for (const node of draft.nodes) {
    if (node.type !== "C" && node.type !== "I" && node.type !== "IC") continue;
    for (const { bond } of node.ends) {
      if (bond.effort !== null) startable.add(bond.effort);
      if (bond.flow !== null) startable.add(bond.flow);
    }
  }
  return startable;
}

function depth(instance: Instance): number {
  let count = 0;
  for (let at = instance.parent; at !== null; at = at.parent) count += 1;
  return count;
}
