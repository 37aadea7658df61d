import type { Analysis } from "../analysis/analyse.ts";
import type { Complex, Rows } from "../analysis/dense.ts";
import { evaluateModel } from "../analysis/evaluate-model.ts";
import { type LinearModel, symbolicMatrices } from "../analysis/linearise.ts";
import type { Point } from "../analysis/point.ts";
import { controllability, observability, type Reach } from "../analysis/reach.ts";
import { modeSensitivities } from "../analysis/sensitivity.ts";
import { staticGains } from "../analysis/static-gains.ts";
import { bandwidthOf, transferOf } from "../analysis/transfer.ts";
import { type Finding, finding } from "../diagnostics/finding.ts";
import type { StateModel } from "../equations/model.ts";
import type { SystemReport } from "../pipeline.ts";
import { type CheckedFile, findingDocument, quantity } from "./json.ts";
import type { LinearDocument, RatesDocument } from "./linear-schemas.ts";
import { expressionText } from "./text.ts";

/** What `linear --format json` says; a refused system has empty arrays beside its findings. */
export function linearDocument(
  { report, files, shown }: CheckedFile,
  system: SystemReport | null,
  analysis: Analysis | null,
  options: { readonly sensitivity: boolean },
): LinearDocument {
  const linear = analysis?.linear ?? null;
  const found = [...report.findings, ...findingsOn(analysis)];
  const head = { schema: "bondwright/linear@1", system: system?.system ?? null } as const;
  const findings = found.map((one) => findingDocument(one, files, shown));
  const operatingPoint = pointDocument(analysis);
  if (analysis === null || linear === null || linear.kind === "none") {
    return { ...head, ...NOTHING, operatingPoint, findings };
  }
  const modes = analysis.modes;
  const differentiated = linear.inputs.some((input) => input.differentiated);
  return {
    ...head,
    states: linear.states.map(({ name }) => name),
    inputs: linear.inputs.map(({ name }) => name),
    outputs: linear.outputs.map(({ name }) => name),
    A: matrix(linear.A),
    B: matrix(linear.B),
    C: matrix(linear.C),
    D: matrix(linear.D),
    ...(differentiated ? { E: matrix(linear.E), G: matrix(linear.G) } : {}),
    symbolic: symbolicDocument(analysis.model, linear, differentiated),
    eigenvalues: (modes?.eigenvalues ?? []).map(complex),
    stable: modes?.stable ?? null,
    modes: (modes?.modes ?? []).map(({ eigenvalue, frequency, damping, timeConstant, participation }) => ({
      eigenvalue: complex(eigenvalue),
      frequency: quantity(frequency),
      damping: damping === null ? null : quantity(damping),
      timeConstant: timeConstant === null ? null : quantity(timeConstant),
      participation:
        participation === null
          ? null
          : Object.fromEntries(linear.moving.map((row, i) => [linear.states[row].name, participation[i]])),
    })),
    dcGain: staticGains(linear).map((row) => row.map((gain) => (gain === null ? "inf" : quantity(gain)))),
    transfers: transfersOf(linear),
    controllability: reachDocument(controllability(linear)),
    observability: reachDocument(observability(linear)),
    ...(options.sensitivity ? { sensitivity: sensitivityDocument(analysis.model) } : {}),
    operatingPoint,
    findings,
  };
}

const NOTHING = {
  states: [],
  inputs: [],
  outputs: [],
  A: [],
  B: [],
  C: [],
  D: [],
  symbolic: null,
  eigenvalues: [],
  stable: null,
  modes: [],
  dcGain: [],
  transfers: [],
  controllability: null,
  observability: null,
};

/** Beyond these each pair of input and output would take longer than a reader waits. */
const MOST_STATES = 40;
const MOST_PAIRS = 100;

export function transfersOf(linear: LinearModel): LinearDocument["transfers"] {
  const { inputs, outputs, states } = linear;
  if (states.length > MOST_STATES || inputs.length * outputs.length > MOST_PAIRS) return [];
  return outputs.flatMap((output, k) =>
    inputs.map((input, j) => {
      const transfer = transferOf(linear, j, k);
      const bandwidth = bandwidthOf(transfer);
      return {
        input: input.name,
        output: output.name,
        poles: transfer.poles.map(complex),
        zeros: transfer.zeros.map(complex),
        gain: quantity(transfer.gain),
        bandwidth: bandwidth === null ? null : quantity(bandwidth),
      };
    }),
  );
}

/** No equilibrium is worth a warning here, since what follows holds at the start values alone. */
export function findingsOn(analysis: Analysis | null): Finding[] {
  if (analysis === null) return [];
  const { span } = analysis.model.causal.graph;
  const { reason } = analysis.operatingPoint;
  const { linear } = analysis;
  return [
    ...(reason === null
      ? []
      : [finding("no-equilibrium", span, `${reason} What follows holds at the start values.`)]),
    ...(linear.kind === "linear" ? [] : [finding("not-computable", span, linear.reason)]),
  ];
}

function pointDocument(analysis: Analysis | null): LinearDocument["operatingPoint"] {
  if (analysis === null) return { states: {}, inputs: {}, equilibrium: false, note: null };
  const { model } = analysis;
  const { point, equilibrium, reason } = analysis.operatingPoint;
  return {
    states: Object.fromEntries(model.states.map(({ name }, i) => [name, quantity(point.states[i])])),
    inputs: Object.fromEntries(model.inputs.map(({ name }, i) => [name, quantity(point.inputs[i])])),
    equilibrium,
    note: reason,
  };
}

function symbolicDocument(
  model: StateModel,
  linear: LinearModel,
  differentiated: boolean,
): LinearDocument["symbolic"] {
  const symbolic = symbolicMatrices(model, linear);
  if (symbolic === null) return null;
  const { E, G, ...others } = symbolic;
  const shown = differentiated ? { ...others, E, G } : others;
  return Object.fromEntries(
    Object.entries(shown).map(([name, rows]) => [name, rows.map((row) => row.map(expressionText))]),
  ) as LinearDocument["symbolic"];
}

function sensitivityDocument(model: StateModel): LinearDocument["sensitivity"] {
  return modeSensitivities(model).map(({ parameter, modes }) => ({
    parameter,
    modes: modes.map((mode) =>
      mode === null ? null : { frequency: quantity(mode.frequency), damping: quantity(mode.damping) },
    ),
  }));
}

function reachDocument({ rank, missing }: Reach): LinearDocument["controllability"] {
  return {
    rank,
    missing: missing.map((direction) =>
      Object.fromEntries(direction.map(({ state, weight }) => [state, weight])),
    ),
  };
}

function matrix(rows: Rows) {
  return rows.map((row) => row.map(quantity));
}

function complex({ re, im }: Complex) {
  return { re: quantity(re), im: quantity(im) };
}

/** What `rates --format json` says of one point. */
export function ratesDocument(
  { report, files, shown }: CheckedFile,
  system: SystemReport | null,
  point: Point | null,
): RatesDocument {
  const model = system?.model ?? null;
  const evaluation = model === null || point === null ? null : evaluateModel(model, point);
  const failed =
    evaluation?.kind === "none" && model !== null
      ? [finding("not-computable", model.causal.graph.span, evaluation.reason)]
      : [];
  const head = {
    schema: "bondwright/rates@1",
    system: system?.system ?? null,
    findings: [...report.findings, ...failed].map((one) => findingDocument(one, files, shown)),
  } as const;
  if (model === null || evaluation === null || evaluation.kind === "none") {
    return { ...head, rates: {}, outputs: {}, variables: {} };
  }
  const { valueOf, rates } = evaluation;
  const { bonds } = model.causal.graph;
  const of = (expr: Parameters<typeof valueOf>[0] | null) =>
    expr === null ? "nan" : quantity(valueOf(expr));
  return {
    ...head,
    rates: Object.fromEntries([
      ...model.states.map(({ name }, i) => [name, quantity(rates[i])]),
      ...model.dependent.map(({ name, rate }) => [name, of(rate)]),
    ]),
    outputs: Object.fromEntries(model.outputs.map(({ name, value }) => [name, of(value)])),
    variables: Object.fromEntries(
      bonds.map(({ id }, i) => [id, { e: of(model.efforts[i]), f: of(model.flows[i]) }]),
    ),
  };
}
