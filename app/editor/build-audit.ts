import { explainStroke } from "../../grammar/causality/explain.ts";
import type { CausalGraph } from "../../grammar/causality/strokes.ts";
import { derivationOf } from "../../grammar/equations/derivation.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import type { FileReport } from "../../grammar/pipeline.ts";
import type { FlatGraph } from "../../grammar/resolve/graph.ts";
import type { Span } from "../../grammar/source/span.ts";
import type { FileSet } from "../../grammar/source/text.ts";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import { expressionLatex } from "../../grammar/writing/latex.ts";
import { expressionText } from "../../grammar/writing/text.ts";
import type { BondView, DerivationView, StepView, VariableView } from "./audit-view.ts";
import type { BehaviourView } from "./behaviour-view.ts";
import { behaviourView } from "./build-behaviour.ts";
import type { Question } from "./core-questions.ts";
import { placeOf } from "./place.ts";
import { formula } from "./typeset.ts";

/** The answer to a reader's question, out of the report of the newest text. */
export function answerTo(
  question: Question,
  report: FileReport,
  files: FileSet,
): DerivationView | BondView | BehaviourView | null {
  const system = report.systems.find((one) => one.system === question.system);
  if (system?.graph == null) return null;
  if (question.about === "behaviour") return system.model && behaviourView(system.model);
  return question.about === "derivation"
    ? system.model && derivationView(system.graph, system.model, question.store, files)
    : bondView(system.graph, system.causal, system.model, question.bond, files);
}

function derivationView(
  graph: FlatGraph,
  model: StateModel,
  store: string,
  files: FileSet,
): DerivationView | null {
  const steps = derivationOf(model, store).map(
    ({ rule, left, right, bonds, span }): StepView => ({
      rule: left === right ? "implicit" : rule,
      equation: left === right ? shown(left) : equals(left, right),
      place: placeOf(span, files),
      nodes: nodesAt(graph, span),
      bonds: bonds.map((bond) => graph.bonds[bond].id),
      values: [],
    }),
  );
  return steps.length === 0 ? null : { steps };
}

/** A law stands within its element's declaration: that line lights up too. */
function nodesAt(graph: FlatGraph, { file, start, end }: Span): string[] {
  return graph.nodes
    .filter(({ span }) => span.file === file && span.start <= start && end <= span.end)
    .map(({ name }) => name);
}

function bondView(
  graph: FlatGraph,
  causal: CausalGraph | null,
  model: StateModel | null,
  id: string,
  files: FileSet,
): BondView | null {
  const bond = graph.bonds.find((one) => one.id === id);
  if (bond === undefined) return null;
  const stroke = causal?.strokes[bond.index] ?? null;
  const names = { from: graph.nodes[bond.from].name, to: graph.nodes[bond.to].name };
  // The end with the stroke is told the effort by the other end, and tells it the flow.
  const other = stroke === "from" ? "to" : "from";
  const variable = (symbol: Expr, value: Expr | null | undefined, unit: string): VariableView | null =>
    value == null ? null : { equation: equals(symbol, value), unit };
  return {
    id,
    ...names,
    domain: bond.domain.name,
    place: placeOf(bond.span, files),
    effortBy: stroke && names[other],
    flowBy: stroke && names[stroke],
    effort: variable(bond.effort, model?.efforts[bond.index], bond.domain.effort.text),
    flow: variable(bond.flow, model?.flows[bond.index], bond.domain.flow.text),
    why: (causal === null ? [] : explainStroke(causal, bond.index)).map(({ text, bond: step, span }) => ({
      text,
      bond: graph.bonds[step].id,
      place: placeOf(span, files),
      nodes: nodesAt(graph, span),
      bonds: [graph.bonds[step].id],
      values: [],
    })),
  };
}

function shown(expr: Expr) {
  return formula(expressionText(expr), expressionLatex(expr));
}

function equals(left: Expr, right: Expr) {
  return formula(
    `${expressionText(left)} = ${expressionText(right)}`,
    `${expressionLatex(left)} = ${expressionLatex(right)}`,
  );
}
