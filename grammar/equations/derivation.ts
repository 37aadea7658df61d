import type { Expr, Symbol } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { type Assignment, type Assignments, assignmentsOf } from "./assignments.ts";
import type { DerivationStep, StateModel } from "./model.ts";

/** A reader follows a few dozen steps; what goes on past them is in the equation itself. */
const LONGEST = 400;

/**
 * How the equation of a state (or of a dependent store) comes about, in the order in which a reviewer would audit
 * it: the store's rate is a bond variable, that is a junction's sum with its signs, whose terms follow from laws and
 * two-ports, down to states and inputs; then the rates of dependent stores and solved loops that enter; then the
 * collected form. Worked out when asked for.
 */
export function derivationOf(model: StateModel, stateName: string): DerivationStep[] {
  const assignments = assignmentsOf(model.causal);
  const { pool, tracks } = model.causal.graph;
  const equation = model.equations.find(({ state }) => state === stateName);
  const dependent = model.dependent.find(({ name }) => name === stateName);
  const store = assignments.stores.find(({ name }) => name === stateName);
  const track = tracks.find(({ name }) => name === stateName);
  const steps: DerivationStep[] = [];
  const walk = new Walk(assignments, model, steps);

  if (dependent !== undefined && store !== undefined) {
    walk.follow([store.symbol]);
    const { symbol, value, span, bond } = dependent;
    steps.push({ rule: "collected", left: symbol, right: value, bonds: [bond], span });
    return steps;
  }
  if (equation === undefined) return steps;
  const left = pool.symbol("rate", stateName);
  if (store !== undefined) {
    const right = pool.product(pool.number(store.sign), store.rateVariable);
    const { span } = model.causal.graph.nodes[store.node];
    steps.push({ rule: "rate", left, right, bonds: [store.bond], span });
    walk.follow([store.rateVariable]);
  } else if (track !== undefined) {
    steps.push({
      rule: "rate",
      left,
      right: track.rate,
      bonds: bondsIn(assignments, track.rate),
      span: track.span,
    });
    walk.follow(variablesIn(assignments, track.rate));
  }
  const bonds = store === undefined ? [] : [store.bond];
  steps.push({ rule: "collected", left, right: equation.rate, bonds, span: equation.span });
  return steps;
}

class Walk {
  readonly #assignments: Assignments;
  readonly #model: StateModel;
  readonly #steps: DerivationStep[];
  readonly #seen = new Set<Symbol>();

  constructor(assignments: Assignments, model: StateModel, steps: DerivationStep[]) {
    this.#assignments = assignments;
    this.#model = model;
    this.#steps = steps;
  }

  /** Breadth first: a sum stands before what its terms come from. */
  follow(variables: readonly Symbol[]): void {
    const open = [...variables];
    for (let at = 0; at < open.length && this.#steps.length < LONGEST; at += 1) {
      const variable = open[at];
      if (this.#seen.has(variable)) continue;
      this.#seen.add(variable);
      const assignment = this.#assignments.of.get(variable);
      if (assignment === undefined) continue;
      const own = assignment.rule === "rate" ? this.#dependentRate(assignment) : this.#assigned(assignment);
      open.push(...own);
    }
  }

  #assigned(assignment: Assignment): Symbol[] {
    const { variable, right, residual, rule, span } = assignment;
    const expr = right ?? residual;
    if (expr === null) return [];
    const loop = this.#model.loops.find(({ variables }) =>
      variables.some(({ name }) => name === this.#nameOf(variable)),
    );
    if (loop !== undefined) {
      // A torn variable: what the loop gives for it stands for what would lead round in a circle.
      const value = this.#valueOf(variable);
      if (value !== null) {
        this.#steps.push({ rule: "substitution", left: variable, right: value, bonds: loop.bonds, span });
        return [];
      }
    }
    const own = this.#assignments.bondOf(variable);
    const bonds = bondsIn(this.#assignments, expr);
    if (own !== undefined && !bonds.includes(own.index)) bonds.unshift(own.index);
    if (right === null) {
      const { pool } = this.#model.causal.graph;
      this.#steps.push({ rule, left: expr, right: pool.zero, bonds, span });
    } else this.#steps.push({ rule, left: variable, right, bonds, span });
    return variablesIn(this.#assignments, expr);
  }

  /** The flow into a dependent C (the effort on a dependent I) is the rate of its state, which follows from others. */
  #dependentRate({ variable, right, node, span }: Assignment): Symbol[] {
    const store = this.#assignments.stores.find(
      (each) => each.node === node && each.rateVariable === variable,
    );
    if (store === undefined || right === null) return [];
    const bonds = [store.bond];
    this.#steps.push({ rule: "rate", left: variable, right, bonds, span });
    const dependent = this.#model.dependent.find(({ name }) => name === store.name);
    if (dependent === undefined) return [];
    this.#steps.push({ rule: "law", left: store.symbol, right: dependent.value, bonds, span });
    this.#steps.push({ rule: "substitution", left: store.rateSymbol, right: dependent.rate, bonds, span });
    return [];
  }

  #nameOf(variable: Symbol): string {
    const bond = this.#assignments.bondOf(variable);
    if (bond === undefined) return variable.name;
    return `${bond.id}.${variable === bond.effort ? "e" : "f"}`;
  }

  #valueOf(variable: Symbol): Expr | null {
    const bond = this.#assignments.bondOf(variable);
    if (bond === undefined) return null;
    return variable === bond.effort ? this.#model.efforts[bond.index] : this.#model.flows[bond.index];
  }
}

function variablesIn(assignments: Assignments, expr: Expr): Symbol[] {
  return [...symbolsOf(expr)].filter((symbol) => assignments.of.has(symbol));
}

function bondsIn(assignments: Assignments, expr: Expr): number[] {
  const found = new Set<number>();
  for (const symbol of symbolsOf(expr)) {
    const bond = assignments.bondOf(symbol);
    if (bond !== undefined) found.add(bond.index);
  }
  return [...found];
}
