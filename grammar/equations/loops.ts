import type { Finding } from "../diagnostics/finding.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { linearForms, linearityIn } from "../symbolic/linear.ts";
import { compareNames } from "../symbolic/names.ts";
import { numeratorOf } from "../symbolic/rational-form.ts";
import { type LinearSolution, solveLinearSystem } from "../symbolic/solve-linear.ts";
import { substitution } from "../symbolic/substitute.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { turnRound } from "../symbolic/turn.ts";
import type { Assignment, Assignments } from "./assignments.ts";
import { implicitNote, loopFinding } from "./loop-findings.ts";
import type { AlgebraicLoop } from "./model.ts";
import type { Values } from "./paths.ts";
import { deficiencyOf } from "./rank.ts";
import type { SingularLoop } from "./singular-loop.ts";
import { tearLoop } from "./tear.ts";
import { collected } from "./tidy.ts";

export interface LoopSolution {
  readonly values: ReadonlyMap<Symbol, Expr>;
  readonly loop: AlgebraicLoop | null;
  readonly findings: readonly Finding[];
  /** There is no one solution. */
  readonly singular: SingularLoop | null;
}

/** Up to this many torn variables a closed form is tried; beyond it, numbers serve better than formulas. */
const CLOSED_FORM_UP_TO = 12;

/**
 * A group of variables that depend on each other: some are torn (taken as unknown), the others follow from them, and
 * each torn one has to agree with what its own assignment then gives.
 */
export function solveLoop(
  assignments: Assignments,
  members: readonly Assignment[],
  settled: Values,
): LoopSolution {
  const { pool } = assignments.causal.graph;
  const { torn, ordered } = tearLoop(assignments, members);
  const unknownOf = new Map<Symbol, Symbol>();
  for (const { variable } of torn)
    unknownOf.set(variable, pool.symbol("unknown", variableName(assignments, variable)));

  const values = new Map<Symbol, Expr>(unknownOf);
  const settle = substitution(pool, {
    get: (key) => values.get(key as Symbol) ?? settled.get(key),
  });
  for (const { variable, right } of ordered) values.set(variable, settle(right as Expr));
  const given = torn.map(({ right }) => (right === null ? null : settle(right)));
  const residuals = torn.map(({ variable, residual }, i) => {
    const side = given[i];
    return side === null ? settle(residual as Expr) : pool.subtract(side, unknownOf.get(variable) as Symbol);
  });

  const unknowns = [...unknownOf.values()];
  const degree = linearityIn(new Set(unknowns));
  const linear = residuals.every((residual) => degree(residual) !== "nonlinear");
  const solution = linear
    ? solveLinearResiduals(assignments, residuals, unknowns)
    : solveNonlinear(assignments, residuals, unknowns);
  const alone = members.length === 1 && members[0].residual !== null;
  const bonds = bondsOf(assignments, members);
  const loop: AlgebraicLoop = {
    variables: torn.map(({ variable }, i) => ({
      name: variableName(assignments, variable),
      symbol: unknowns[i],
    })),
    residuals,
    linear,
    solved: solution.kind === "solved",
    circular: !alone,
    bonds,
  };
  if (solution.kind === "singular") {
    return { values, loop: null, findings: [], singular: { ...solution.why, members, bonds } };
  }
  const findings: Finding[] = alone ? [] : [loopFinding(assignments, members, loop)];
  if (!linear && !loop.solved) findings.push(implicitNote(assignments, torn, loop));
  if (solution.kind !== "solved") return { values, loop, findings, singular: null };

  const found = new Map<Expr, Expr>(
    unknowns.map((unknown, i) => [unknown, collected(pool, solution.values[i])]),
  );
  // What a torn variable is given by the others is that variable, and its solution the shorter way to write it.
  given.forEach((side, i) => {
    if (side !== null && side.args.length > 0) found.set(side, found.get(unknowns[i]) as Expr);
  });
  const replace = substitution(pool, found);
  for (const [variable, value] of values) {
    const replaced = replace(value);
    values.set(variable, replaced === value ? value : collected(pool, replaced));
  }
  return { values, loop: alone ? null : loop, findings, singular: null };
}

type Solution =
  | Exclude<LinearSolution, { kind: "singular" }>
  | { kind: "singular"; why: Pick<SingularLoop, "deficiency" | "proved" | "given"> };

function solveLinearResiduals(
  assignments: Assignments,
  residuals: readonly Expr[],
  unknowns: readonly Symbol[],
): Solution {
  const { pool } = assignments.causal.graph;
  const formOf = linearForms(pool, new Set(unknowns));
  const forms = residuals.map(formOf);
  const matrix = forms.map((form) => unknowns.map((unknown) => form?.coefficients.get(unknown) ?? pool.zero));
  const right = forms.map((form) => pool.negate(form?.constant ?? pool.zero));
  const solution: LinearSolution =
    unknowns.length > CLOSED_FORM_UP_TO ? { kind: "large" } : solveLinearSystem(pool, matrix, right);
  const deficiency = deficiencyOf(matrix, right, assignments.valueOf);
  const proved = solution.kind === "singular";
  if (deficiency === null && solution.kind !== "singular") return solution;
  const given = symbolsOf(...right.filter((_, i) => !proved || solution.rows.includes(i)));
  return {
    kind: "singular",
    why: {
      deficiency: deficiency ?? "open",
      proved,
      given: [...given].filter(({ role }) => role !== "parameter"),
    },
  };
}

function solveNonlinear(
  assignments: Assignments,
  residuals: readonly Expr[],
  unknowns: readonly Symbol[],
): Solution {
  const { pool } = assignments.causal.graph;
  if (unknowns.length !== 1) return { kind: "large" };
  const numerator = numeratorOf(pool, residuals[0]) ?? residuals[0];
  const value = turnRound(pool, numerator, unknowns[0], pool.zero, assignments.valueOf);
  return value === null ? { kind: "large" } : { kind: "solved", values: [value] };
}

/** `armature->R_a.e`; the state's own name for a store that follows an implicit law. */
export function variableName(assignments: Assignments, variable: Symbol): string {
  const bond = assignments.bondOf(variable);
  if (bond === undefined) return variable.name;
  return `${bond.id}.${variable === bond.effort ? "e" : "f"}`;
}

function bondsOf(assignments: Assignments, members: readonly Assignment[]): number[] {
  const { graph } = assignments.causal;
  const found = new Set<number>();
  for (const { variable } of members) {
    const bond = assignments.bondOf(variable);
    if (bond !== undefined) found.add(bond.index);
  }
  return [...found].sort((a, b) => compareNames(graph.bonds[a].id, graph.bonds[b].id));
}
