import type { Expr, Symbol } from "../symbolic/expression.ts";
import { substitute } from "../symbolic/substitute.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { type Assignments, assignmentsOf } from "./assignments.ts";
import { originOf } from "./coenergy.ts";
import type { StateModel, TracedTerm } from "./model.ts";

/** Past this many variables a term's way is no longer followed: it lights what was found. */
const LONGEST = 400;

/**
 * Each summand of a right side with the bonds and nodes that it came through. `what` is the name of a state, a
 * dependent store or an output, or the expression of one. Worked out when asked for.
 */
export function traceTerms(model: StateModel, what: Expr | string): TracedTerm[] {
  const target = targetOf(model, what);
  if (target === null) {
    return typeof what === "string" ? [] : summandsOf(what).map((term) => ({ term, bonds: [], nodes: [] }));
  }
  const origin = originOf(model);
  if (origin === undefined) return new Tracer(model).terms(target);
  // In co-energy variables: a term came the way of those that it is the image of.
  const before = new Tracer(origin.model).terms({ ...target, value: target.before ?? target.value });
  const { equation } = target;
  return summandsOf(target.value).map((term) => {
    const from = before.filter(({ term: old }) => {
      const image = equation === null ? null : origin.image(equation, old);
      return image !== null && summandsOf(image).some((each) => likeTerm(each, term));
    });
    return merged(term, from.length > 0 ? from : before);
  });
}

interface Target {
  readonly value: Expr;
  /** The index of the equation, where it is one. */
  readonly equation: number | null;
  /** The same right side in energy variables. */
  readonly before: Expr | null;
  /** The variables that it starts from. */
  readonly roots: readonly Symbol[];
  readonly start: { readonly bonds: readonly number[]; readonly nodes: readonly number[] };
}

function targetOf(model: StateModel, what: Expr | string): Target | null {
  const assignments = assignmentsOf(model.causal);
  const { graph } = model.causal;
  const original = originOf(model)?.model ?? model;
  const same = (name: string, value: Expr) => what === name || what === value;
  const equation = model.equations.findIndex(({ state, rate }) => same(state, rate));
  if (equation !== -1) {
    const value = model.equations[equation].rate;
    const before = original.equations[equation].rate;
    const { node, bond, name } = original.states[equation];
    if (node !== null && bond !== null) {
      const store = assignments.stores.find((each) => each.name === name);
      const roots = store === undefined ? [] : [store.rateVariable];
      return { value, equation, before, roots, start: { bonds: [bond], nodes: [node] } };
    }
    const track = graph.tracks.find((each) => each.name === name);
    const roots = track === undefined ? [] : [...symbolsOf(track.rate)];
    return { value, equation, before, roots, start: { bonds: [], nodes: [] } };
  }
  const dependent = model.dependent.findIndex(({ name, value }) => same(name, value));
  if (dependent !== -1) {
    const { value, symbol, node, bond } = model.dependent[dependent];
    const before = original.dependent[dependent].value;
    return { value, equation: null, before, roots: [symbol], start: { bonds: [bond], nodes: [node] } };
  }
  const output = model.outputs.findIndex(({ name, value }) => same(name, value));
  if (output !== -1) {
    const before = original.outputs[output].value;
    const roots = [...symbolsOf(graph.outputs[output].value)];
    return {
      value: model.outputs[output].value,
      equation: null,
      before,
      roots,
      start: { bonds: [], nodes: [] },
    };
  }
  return null;
}

class Tracer {
  readonly #assignments: Assignments;
  readonly #model: StateModel;

  constructor(model: StateModel) {
    this.#model = model;
    this.#assignments = assignmentsOf(model.causal);
  }

  terms({ value, roots, start }: Target): TracedTerm[] {
    return summandsOf(value).map((term) => {
      const bonds = new Set(start.bonds);
      const nodes = new Set(start.nodes);
      const open = roots.map((variable) => ({ variable, term }));
      const seen = new Set<Symbol>();
      for (let at = 0; at < open.length && seen.size < LONGEST; at += 1) {
        const { variable, term: wanted } = open[at];
        if (seen.has(variable)) continue;
        const carried = at < roots.length && roots.length === 1 ? true : this.#carries(variable, wanted);
        if (!carried) continue;
        seen.add(variable);
        const bond = this.#assignments.bondOf(variable);
        const assignment = this.#assignments.of.get(variable);
        if (bond !== undefined) bonds.add(bond.index);
        if (assignment === undefined) continue;
        nodes.add(assignment.node);
        open.push(...this.#sources(variable, wanted));
      }
      return { term, bonds: [...bonds], nodes: [...nodes] };
    });
  }

  #valueOf(variable: Symbol): Expr | null {
    const bond = this.#assignments.bondOf(variable);
    if (bond !== undefined) {
      return variable === bond.effort ? this.#model.efforts[bond.index] : this.#model.flows[bond.index];
    }
    return this.#model.dependent.find(({ symbol }) => symbol === variable)?.value ?? null;
  }

  #carries(variable: Symbol, term: Expr): boolean {
    const value = this.#valueOf(variable);
    return value !== null && summandsOf(value).some((each) => likeTerm(each, term));
  }

  /** The variables one step back that the term comes from, each with the summand of its value that became the term. */
  #sources(variable: Symbol, term: Expr): { variable: Symbol; term: Expr }[] {
    const { pool } = this.#model.causal.graph;
    const right = this.#assignments.of.get(variable)?.right;
    if (right === null || right === undefined) return [];
    const inputs = [...symbolsOf(right)].filter((symbol) => this.#assignments.of.has(symbol));
    const found: { variable: Symbol; term: Expr }[] = [];
    for (const input of inputs) {
      const value = this.#valueOf(input);
      if (value === null) continue;
      for (const summand of summandsOf(value)) {
        const put = new Map<Expr, Expr>(inputs.map((each) => [each, each === input ? summand : pool.zero]));
        const image = substitute(pool, right, put);
        if (summandsOf(image).some((each) => likeTerm(each, term)))
          found.push({ variable: input, term: summand });
      }
    }
    if (found.length > 0) return found;
    // No single summand became the term (a law that isn't linear): it hangs on all that shares a symbol with it.
    const symbols = symbolsOf(term);
    return inputs.flatMap((input) => {
      const value = this.#valueOf(input);
      if (value === null) return [];
      const summand = summandsOf(value).find((each) => shares(each, symbols));
      return summand === undefined ? [] : [{ variable: input, term: summand }];
    });
  }
}

function shares(expr: Expr, symbols: ReadonlySet<Symbol>): boolean {
  for (const symbol of symbolsOf(expr)) {
    if (symbols.has(symbol) && (symbol.role === "state" || symbol.role === "input")) return true;
  }
  return false;
}

export function summandsOf(expr: Expr): readonly Expr[] {
  return expr.op === "sum" ? expr.args : [expr];
}

/** Equal but for a numeric coefficient. */
function likeTerm(a: Expr, b: Expr): boolean {
  if (a === b) return true;
  if (a.op === "number" || b.op === "number") return a.op === b.op;
  const x = factors(a);
  const y = factors(b);
  return x.length === y.length && x.every((factor, i) => factor === y[i]);
}

function factors(term: Expr): readonly Expr[] {
  if (term.op !== "product") return [term];
  return term.args[0].op === "number" ? term.args.slice(1) : term.args;
}

function merged(term: Expr, from: readonly TracedTerm[]): TracedTerm {
  return {
    term,
    bonds: [...new Set(from.flatMap(({ bonds }) => bonds))],
    nodes: [...new Set(from.flatMap(({ nodes }) => nodes))],
  };
}
