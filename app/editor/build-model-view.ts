import { inCoEnergy } from "../../grammar/equations/coenergy.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { traceTerms } from "../../grammar/equations/trace.ts";
import type { FlatGraph } from "../../grammar/resolve/graph.ts";
import type { Span } from "../../grammar/source/span.ts";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import { symbolsOf } from "../../grammar/symbolic/symbols.ts";
import { expressionLatex, termLatex } from "../../grammar/writing/latex.ts";
import { dotted, nameLatex } from "../../grammar/writing/latex-name.ts";
import { termsOf } from "../../grammar/writing/shape.ts";
import { expressionText, termText } from "../../grammar/writing/text.ts";
import { DARK, type Light } from "./light.ts";
import { shownIn } from "./shown-number.ts";
import { formula } from "./typeset.ts";
import type {
  DependentView,
  EquationView,
  Formula,
  LoopView,
  ModelView,
  Place,
  StateView,
  TermView,
  Variables,
} from "./view-model.ts";

type PlaceOf = (span: Span) => Place;

export function modelView(
  graph: FlatGraph,
  derived: StateModel,
  variables: Variables,
  placeOf: PlaceOf,
): ModelView {
  const model = variables === "co-energy" ? inCoEnergy(derived) : derived;
  return {
    variables,
    states: model.states.map(
      (state): StateView => ({
        name: state.name,
        symbol: shown(state.symbol),
        unit: state.unit.text,
        start: shownIn(state.start, state.unit),
        kind: state.kind,
        place: placeOf(state.span),
        nodes: state.node === null ? [] : [graph.nodes[state.node].name],
        bonds: state.bond === null ? [] : [graph.bonds[state.bond].id],
        values: [],
      }),
    ),
    equations:
      model.implicit === null
        ? model.equations.map(({ state, rate }, i) => ({
            ...equation(graph, model, state, rate),
            store: derived.equations[i].state,
          }))
        : implicitRows(graph, model).map((row, i) => ({ ...row, store: derived.states[i].name })),
    coupled: model.implicit !== null,
    dependent: model.dependent.map(
      (store): DependentView => ({
        name: store.name,
        of: store.of,
        equation: {
          ...equation(graph, model, store.name, store.value, written(store.symbol)),
          store: store.name,
        },
        unit: store.unit.text,
        place: placeOf(store.span),
        nodes: [graph.nodes[store.node].name],
        bonds: [graph.bonds[store.bond].id],
        values: [],
      }),
    ),
    loops: model.loops.map(
      (loop): LoopView => ({
        variables: loop.variables.map(({ name }) => name),
        linear: loop.linear,
        solved: loop.solved,
        residuals: loop.residuals.map(shown),
        nodes: [],
        bonds: loop.bonds.map((bond) => graph.bonds[bond].id),
        values: [],
      }),
    ),
    outputs: model.outputs.map((output) => ({
      name: output.name,
      equation: equation(graph, model, output.name, output.value, named(output.name)),
      unit: output.unit.text,
      ...DARK,
      values: [output.name],
    })),
  };
}

/** Text and LaTeX of the same thing, not yet typeset. */
interface Written {
  readonly text: string;
  readonly latex: string;
}

function written(expr: Expr): Written {
  return { text: expressionText(expr), latex: expressionLatex(expr) };
}

function shown(expr: Expr): Formula {
  const { text, latex } = written(expr);
  return formula(text, latex);
}

function rateOf(name: string): Written {
  return { text: `d ${name}/dt`, latex: dotted(name) };
}

function named(name: string): Written {
  return { text: name, latex: nameLatex(name) };
}

function equation(
  graph: FlatGraph,
  model: StateModel,
  state: string,
  right: Expr,
  left: Written = rateOf(state),
): EquationView {
  const terms = tracedTerms(graph, model, right, model.implicit === null ? state : right);
  return {
    state,
    store: null,
    leftTerms: null,
    left: formula(left.text, left.latex),
    leftLatex: left.latex,
    ...written(right),
    terms,
    ...together(terms),
  };
}

/**
 * The summands of a right side in the order of the written text, each with all it came through and with the
 * parameters and inputs it holds.
 */
function tracedTerms(graph: FlatGraph, model: StateModel, right: Expr, what: Expr | string): TermView[] {
  const traces = new Map(traceTerms(model, what).map((traced) => [traced.term, traced]));
  return termsOf(right).map((signed) => {
    const { term, negative } = signed;
    const { nodes, bonds } = traces.get(term) ?? { nodes: [], bonds: [] };
    return {
      sign: negative ? "-" : "+",
      formula: formula(termText(signed), termLatex(signed)),
      nodes: nodes.map((node) => graph.nodes[node].name),
      bonds: bonds.map((bond) => graph.bonds[bond].id),
      values: [...symbolsOf(term)]
        .filter(({ role }) => role === "parameter" || role === "input" || role === "inputRate")
        .map(({ name }) => name),
    };
  });
}

function together(lights: readonly Light[]): Light {
  return {
    nodes: [...new Set(lights.flatMap(({ nodes }) => nodes))],
    bonds: [...new Set(lights.flatMap(({ bonds }) => bonds))],
    values: [...new Set(lights.flatMap(({ values }) => values))],
  };
}

/** Where the rates stay coupled: one row of M(x)·ẋ = h(x, u, t) an equation, its left side term by term. */
function implicitRows(graph: FlatGraph, model: StateModel): EquationView[] {
  if (model.implicit === null) return [];
  const { mass, right } = model.implicit;
  return right.map((side, row) => {
    const left = mass[row].flatMap((factor, column) => {
      const isZero = factor.op === "number" && factor.value === 0;
      return isZero ? [] : [coupledTerm(factor, rateOf(model.states[column].name))];
    });
    const sum = (of: "text" | "latex") =>
      left.map(({ sign, ...term }, i) => `${i === 0 && sign === "+" ? "" : `${sign} `}${term[of]}`).join(" ");
    const both = { text: sum("text"), latex: sum("latex") };
    return {
      ...equation(graph, model, model.states[row].name, side, both),
      leftTerms: left.map(({ sign, text, latex }) => ({ sign, formula: formula(text, latex) })),
    };
  });
}

/** A factor times a rate, with its sign before it. */
function coupledTerm(factor: Expr, rate: Written): Written & { readonly sign: "+" | "-" } {
  if (factor.op === "number" && factor.value === 1) return { sign: "+", ...rate };
  const terms = termsOf(factor);
  const { text, latex } = written(factor);
  if (terms.length > 1)
    return { sign: "+", text: `(${text})*${rate.text}`, latex: `\\left(${latex}\\right)\\,${rate.latex}` };
  const bare = (signed: string) => (terms[0].negative ? signed.replace(/^-\s*/, "") : signed);
  return {
    sign: terms[0].negative ? "-" : "+",
    text: `${bare(text)}*${rate.text}`,
    latex: `${bare(latex)}\\,${rate.latex}`,
  };
}
