import type { Span } from "../source/span.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { linearForms } from "../symbolic/linear.ts";
import type { Pool } from "../symbolic/pool.ts";
import { solveLinear } from "../symbolic/solve-linear.ts";
import { holdsSymbol } from "../symbolic/symbols.ts";
import { turnRound, type ValueOf } from "../symbolic/turn.ts";

export interface Relation {
  readonly variable: Symbol;
  readonly right: Expr;
  readonly span: Span;
}

export interface Settled {
  readonly variable: Symbol;
  readonly right: Expr | null;
  readonly residual: Expr | null;
  readonly span: Span;
}

/**
 * An element's laws solved for one unknown of each port: as written where the law already says it, turned round
 * where the notation allows that, a linear system for a field; otherwise each unknown keeps a law as its residual.
 */
export function settleRelations(
  pool: Pool,
  relations: readonly Relation[],
  unknowns: readonly Symbol[],
  valueOf: ValueOf,
): Settled[] {
  if (relations.length !== unknowns.length) return [];
  const free = ({ right }: Relation) => !unknowns.some((unknown) => holdsSymbol(right, unknown));
  if (relations.every((relation) => unknowns.includes(relation.variable) && free(relation))) {
    return relations.map(({ variable, right, span }) => ({ variable, right, residual: null, span }));
  }
  if (relations.length === 1) return [settleOne(pool, relations[0], unknowns[0], valueOf)];
  return settleField(pool, relations, unknowns);
}

function settleOne(pool: Pool, relation: Relation, unknown: Symbol, valueOf: ValueOf): Settled {
  const { variable, right, span } = relation;
  const solved = variable === unknown ? null : turnRound(pool, right, unknown, variable, valueOf);
  if (solved !== null) return { variable: unknown, right: solved, residual: null, span };
  return { variable: unknown, right: null, residual: pool.subtract(right, variable), span };
}

function settleField(pool: Pool, relations: readonly Relation[], unknowns: readonly Symbol[]): Settled[] {
  const residuals = relations.map(({ variable, right }) => pool.subtract(right, variable));
  const formOf = linearForms(pool, new Set(unknowns));
  const forms = residuals.map(formOf);
  const linear = forms.flatMap((form) => (form === null ? [] : [form]));
  const solved =
    linear.length === forms.length
      ? solveLinear(
          pool,
          linear.map(({ coefficients }) => unknowns.map((unknown) => coefficients.get(unknown) ?? pool.zero)),
          linear.map(({ constant }) => pool.negate(constant)),
        )
      : null;
  return unknowns.map((variable, i) => ({
    variable,
    right: solved === null ? null : solved[i],
    residual: solved === null ? residuals[i] : null,
    span: relations[i].span,
  }));
}
