import type { Finding } from "../diagnostics/finding.ts";
import { ById } from "../symbolic/by-id.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { substitution } from "../symbolic/substitute.ts";
import { eachSymbol } from "../symbolic/symbols.ts";
import type { Assignment, Assignments } from "./assignments.ts";
import { connectedGroups } from "./dependency.ts";
import { solveLoop } from "./loops.ts";
import type { AlgebraicLoop } from "./model.ts";
import { type SingularLoop, singularFindings } from "./singular-loop.ts";

/** What variables have been settled to. */
export interface Values {
  get(variable: Expr): Expr | undefined;
}

/**
 * Every variable followed along its causal paths, till only states, inputs, parameters, time, the rates of dependent
 * stores and what loops leave unknown are left.
 */
export interface Followed {
  readonly values: Values;
  readonly loops: readonly AlgebraicLoop[];
  readonly findings: readonly Finding[];
  /** A singular loop: there are no equations. */
  readonly refused: boolean;
}

export function followPaths(assignments: Assignments): Followed {
  const { graph } = assignments.causal;
  const { pool } = graph;
  const { list } = assignments;
  const index = new ById<number>();
  for (let i = 0; i < list.length; i += 1) index.set(list[i].variable, i);
  const edges = list.map((assignment) => dependenciesOf(assignment, index));
  const values = new ById<Expr>();
  const settle = substitution(pool, values, undefined, new ById());
  const loops: AlgebraicLoop[] = [];
  const findings: Finding[] = [];
  const singular: SingularLoop[] = [];

  for (const group of connectedGroups(list.length, (i) => edges[i])) {
    const [first] = group;
    const assignment = list[first];
    if (group.length === 1 && assignment.right !== null && !edges[first].includes(first)) {
      const { right } = assignment;
      values.set(assignment.variable, values.get(right) ?? settle(right));
      continue;
    }
    const solution = solveLoop(
      assignments,
      group.map((i) => list[i]),
      values,
    );
    for (const [variable, value] of solution.values) values.set(variable, value);
    if (solution.loop !== null) loops.push(solution.loop);
    findings.push(...solution.findings);
    if (solution.singular !== null) singular.push(solution.singular);
  }
  findings.push(...singularFindings(assignments, singular));
  const refused = singular.length > 0;
  return { values, loops, findings, refused };
}

function dependenciesOf({ right, residual }: Assignment, index: ById<number>): number[] {
  const expr = (right ?? residual) as Expr;
  // Most rights are one variable or a short sum of them.
  if (expr.op === "symbol") {
    const at = index.get(expr as Symbol);
    return at === undefined ? [] : [at];
  }
  const found: number[] = [];
  eachSymbol(expr, (symbol) => {
    const at = index.get(symbol);
    if (at !== undefined) found.push(at);
  });
  return found;
}
