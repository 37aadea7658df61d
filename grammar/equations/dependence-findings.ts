import { type Fact, type Finding, finding } from "../diagnostics/finding.ts";
import type { Symbol } from "../symbolic/expression.ts";
import { compareNames } from "../symbolic/names.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { Assignments, Store } from "./assignments.ts";
import type { Dependence } from "./dependence.ts";
import { listed } from "./listed.ts";
import type { AlgebraicLoop } from "./model.ts";
import type { SolvedRates } from "./rates.ts";
import { settledBy } from "./settled-by.ts";

/** How far back along its causal path a dependence is followed for the facts of a finding. */
const PATH_LIMIT = 60;

export function dependenceFinding(
  assignments: Assignments,
  store: Store,
  settledBy: ReadonlySet<Symbol>,
): Finding {
  const symbols = [...settledBy];
  const states = named(symbols, "state");
  const inputs = named(symbols, "input");
  const causes = [
    ...(states.length > 0 ? [listed(states)] : []),
    ...(inputs.length > 0 ? [`the input${inputs.length > 1 ? "s" : ""} ${listed(inputs)}`] : []),
  ];
  const cause =
    causes.length > 0 ? causes.join(states.length > 1 ? ", and " : " and ") : "a source that does not change";
  const { span } = assignments.causal.graph.nodes[store.node];
  const message = `\`${store.name}\` can't be integrated on its own: it follows from ${cause}.`;
  return finding("derivative-causality", span, message, { facts: pathFacts(assignments, store) });
}

export function inputRateFinding(
  assignments: Assignments,
  store: Store,
  settledBy: ReadonlySet<Symbol>,
): Finding | null {
  const inputs = named([...settledBy], "input");
  if (inputs.length === 0) return null;
  const { span, name } = assignments.causal.graph.nodes[store.node];
  const message =
    `\`${name}\` is tied to the input${inputs.length > 1 ? "s" : ""} ${listed(inputs)} with nothing between, ` +
    `so the equations need the rate of ${inputs.length > 1 ? "these inputs: a step of one" : "that input: a step of it"} asks for infinite power.`;
  return finding("input-derivative", span, message, { facts: pathFacts(assignments, store) });
}

/** Findings that leave a model without equations, if there are any. */
export function refusedRates(
  assignments: Assignments,
  dependence: Dependence,
  solved: SolvedRates,
  loops: readonly AlgebraicLoop[],
): Finding[] {
  const { nodes } = assignments.causal.graph;
  const findings: Finding[] = [];
  for (const { store, value } of dependence.followers) {
    const unknown = named(
      [...settledBy(value, loops)].filter((symbol) => solved.stuck.has(symbol)),
      "unknown",
    );
    if (unknown.length === 0) continue;
    const message =
      `\`${store.name}\` follows from ${listed(unknown)}, a loop that only a numerical solution gives and that is ` +
      "too large for the rates of its unknowns to be written down; a small compliance or inertia in the loop breaks it.";
    findings.push(
      finding("not-computable", nodes[store.node].span, message, { facts: pathFacts(assignments, store) }),
    );
  }
  const forced = new Map(dependence.forced.map(({ store }) => [store.name, store]));
  for (const names of solved.singular) {
    const store = names.map((name) => forced.get(name)).find((each) => each !== undefined);
    if (store !== undefined) {
      const message =
        `\`${store.name}\` is fixed by the rate of another dependent store, so its own rate would need the second ` +
        "derivative of what drives them; model a compliance or a resistance between them.";
      findings.push(
        finding("not-computable", nodes[store.node].span, message, { facts: pathFacts(assignments, store) }),
      );
      continue;
    }
    const first = assignments.stores.find(({ name }) => names.includes(name));
    const span = first === undefined ? assignments.causal.graph.span : nodes[first.node].span;
    findings.push(
      finding(
        "singular-junctions",
        span,
        `The rates of ${listed(names)} are tied so that nothing settles them.`,
      ),
    );
  }
  return findings;
}

export function implicitRateNotes(assignments: Assignments, solved: SolvedRates): Finding[] {
  return solved.implicit.map(({ names, loop }) => {
    const first = assignments.stores.find(({ name }) => names.includes(name));
    const { nodes, span } = assignments.causal.graph;
    const message =
      `The ${names.length === 1 ? "rate" : "rates"} of ${listed(names)} can't be separated from the laws that hold ` +
      `${names.length === 1 ? "it" : "them"}, so ${listed(loop.variables.map(({ name }) => name))} is found numerically.`;
    return finding("implicit-equation", first === undefined ? span : nodes[first.node].span, message);
  });
}

function named(symbols: readonly Symbol[], role: Symbol["role"]): string[] {
  return symbols
    .filter((symbol) => symbol.role === role)
    .map(({ name }) => name)
    .sort(compareNames);
}

/** The bonds from a dependent store back to what settles it, in the order of the causal path. */
function pathFacts(assignments: Assignments, store: Store): Fact[] {
  const { graph } = assignments.causal;
  const path: number[] = [];
  const seen = new Set<Symbol>();
  let open: Symbol[] = [store.coVariable];
  while (open.length > 0 && path.length < PATH_LIMIT) {
    const next: Symbol[] = [];
    for (const variable of open) {
      if (seen.has(variable)) continue;
      seen.add(variable);
      const assignment = assignments.of.get(variable);
      const bond = assignments.bondOf(variable);
      if (assignment === undefined) continue;
      if (bond !== undefined && !path.includes(bond.index)) path.push(bond.index);
      const expr = assignment.right ?? assignment.residual;
      if (expr !== null) next.push(...symbolsOf(expr));
    }
    open = next;
  }
  if (path.length === 0) return [];
  const shown = path.slice(0, 12).map((index) => `\`${graph.bonds[index].id}\``);
  const more = path.length > shown.length ? ", …" : "";
  return [
    {
      message: `the path between them: ${shown.join(", ")}${more}`,
      span: graph.bonds[path[path.length - 1]].span,
    },
  ];
}
