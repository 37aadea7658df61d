import type { Analysis } from "../analysis/analyse.ts";
import type { Complex, Rows } from "../analysis/dense.ts";
import type { LinearModel } from "../analysis/linearise.ts";
import type { Mode } from "../analysis/modes.ts";
import { controllability, observability, type Reach } from "../analysis/reach.ts";
import { modeSensitivities } from "../analysis/sensitivity.ts";
import { staticGains } from "../analysis/static-gains.ts";
import { bandwidthOf, transferOf } from "../analysis/transfer.ts";
import type { Unit } from "../units/unit.ts";
import { numberText, quantityText } from "../units/unit-text.ts";
import type { TextSection } from "./system-text.ts";

/** A linear model as lines of text, section by section. */
export function linearText(analysis: Analysis, linear: LinearModel, sensitivity: boolean): TextSection[] {
  const sections: TextSection[] = [
    { title: pointTitle(analysis), lines: pointLines(analysis) },
    { title: modesTitle(analysis), lines: table(modeRows(analysis, linear)) },
    { title: "Gains at rest", lines: table(gainRows(linear)) },
    { title: "Transfer functions", lines: table(transferRows(linear)) },
    { title: "Reach", lines: reachLines(linear) },
    ...(sensitivity
      ? [
          {
            title: "Sensitivity of the modes, per cent for each per cent",
            lines: table(sensitivityRows(analysis)),
          },
        ]
      : []),
    ...matrixSections(linear),
  ];
  return sections.filter(({ lines }) => lines.length > 0);
}

function pointTitle(analysis: Analysis): string {
  const { equilibrium, reason } = analysis.operatingPoint;
  if (equilibrium) return "Equilibrium";
  return reason === null
    ? "At the given point, which is no equilibrium"
    : "At the start values, since there is no equilibrium";
}

function pointLines({ model, operatingPoint }: Analysis): string[] {
  const { point } = operatingPoint;
  return table([
    ...model.states.map(({ name, unit }, i) => [name, quantityText(point.states[i], unit, 6)]),
    ...model.inputs.map(({ name, unit }, i) => [name, quantityText(point.inputs[i], unit, 6)]),
  ]);
}

function modesTitle(analysis: Analysis): string {
  if (analysis.modes === null || analysis.modes.modes.length === 0) return "Modes";
  return analysis.modes.stable ? "Modes: stable" : "Modes: not stable";
}

function modeRows(analysis: Analysis, linear: LinearModel): string[][] {
  const modes = analysis.modes?.modes ?? [];
  if (modes.length === 0) return [];
  const head = [
    "",
    "eigenvalue, 1/s",
    "frequency, Hz",
    "damping",
    "time constant, s",
    "states that take part",
  ];
  return [
    head,
    ...modes.map((mode, i) => [
      String(i + 1),
      complexText(mode.eigenvalue, mode.pair),
      numberText(mode.frequency, 5),
      mode.damping === null ? "-" : numberText(mode.damping, 4),
      mode.timeConstant === null ? "-" : numberText(mode.timeConstant, 4),
      sharesText(mode, linear),
    ]),
  ];
}

export function complexText({ re, im }: Complex, pair: boolean): string {
  const real = numberText(re, 5);
  if (im === 0) return real;
  const sign = pair ? "±" : im < 0 ? "-" : "+";
  return `${re === 0 ? "" : `${real} `}${sign} ${numberText(Math.abs(im), 5)}j`;
}

/** The greatest shares, till nine tenths are told. */
export function sharesText({ participation }: Mode, { states, moving }: LinearModel): string {
  if (participation === null) return "modes coincide";
  const order = participation.map((share, i) => ({ share, name: states[moving[i]].name }));
  order.sort((a, b) => b.share - a.share);
  const told: string[] = [];
  let sum = 0;
  for (const { share, name } of order) {
    if (sum > 0.9 || told.length === 4) break;
    told.push(`${name} ${Math.round(share * 100)} %`);
    sum += share;
  }
  return told.join(", ");
}

function gainRows(linear: LinearModel): string[][] {
  return staticGains(linear).flatMap((row, k) =>
    row.map((gain, j) => [
      `${linear.inputs[j].name} to ${linear.outputs[k].name}`,
      gain === null ? "grows without end" : gainText(gain, linear.inputs[j].unit, linear.outputs[k].unit),
    ]),
  );
}

/** In the units in which input and output are written: `9.08 mm/s per V`. */
export function gainText(gain: number, input: Unit, output: Unit): string {
  const number = numberText((gain * input.factor) / output.factor, 6);
  const per = input.text === "1" ? "" : ` per ${input.text}`;
  return output.text === "1" ? `${number}${per}` : `${number} ${output.text}${per}`;
}

/** Beyond this a list of transfer functions is no reading matter; JSON and requirements still give each. */
const MOST_TRANSFERS = 24;

function transferRows(linear: LinearModel): string[][] {
  const { inputs, outputs, states } = linear;
  if (states.length > 12 || inputs.length * outputs.length > MOST_TRANSFERS || states.length === 0) return [];
  const rows = outputs.flatMap((output, k) =>
    inputs.map((input, j) => {
      const transfer = transferOf(linear, j, k);
      const bandwidth = bandwidthOf(transfer);
      return [
        `${input.name} to ${output.name}`,
        numberText(transfer.gain, 5),
        rootsText(transfer.zeros),
        rootsText(transfer.poles),
        bandwidth === null ? "-" : numberText(bandwidth, 4),
      ];
    }),
  );
  return rows.length === 0 ? [] : [["", "gain", "zeros, 1/s", "poles, 1/s", "bandwidth, Hz"], ...rows];
}

function rootsText(roots: readonly Complex[]): string {
  const ordered = [...roots]
    .filter(({ im }) => im >= 0)
    .sort((a, b) => Math.hypot(a.re, a.im) - Math.hypot(b.re, b.im));
  return ordered.map((root) => complexText(root, root.im !== 0)).join(", ") || "none";
}

function reachLines(linear: LinearModel): string[] {
  if (linear.states.length === 0) return [];
  const told = (what: string, { full, rank, missing }: Reach) => {
    if (full)
      return `${what} ${linear.states.length === 1 ? "the state" : `all ${linear.states.length} states`}`;
    const directions = missing.map((direction) =>
      direction
        .map(({ state, weight }) => (direction.length === 1 ? state : `${numberText(weight, 3)} ${state}`))
        .join(", "),
    );
    return `${what} ${rank} of ${linear.states.length} directions; left out: ${directions.join("; ")}`;
  };
  return [
    ...(linear.inputs.length === 0 ? [] : [told("the inputs move", controllability(linear))]),
    ...(linear.outputs.length === 0 ? [] : [told("the outputs tell", observability(linear))]),
  ];
}

function sensitivityRows({ model }: Analysis): string[][] {
  return modeSensitivities(model).map(({ parameter, modes }) => [
    parameter,
    ...modes.map((mode, i) =>
      mode === null ? `mode ${i + 1}: -` : `mode ${i + 1}: ${numberText(mode.frequency, 3)} %`,
    ),
  ]);
}

const WIDEST = 8;

/** Small models with all entries; large ones are for machines. */
function matrixSections({ states, inputs, outputs, A, B, C, D }: LinearModel): TextSection[] {
  if (states.length > WIDEST || inputs.length > WIDEST) return [];
  const names = (list: readonly { readonly name: string }[]) => list.map(({ name }) => name);
  const section = (title: string, rows: Rows, left: readonly string[], top: readonly string[]) =>
    rows.length === 0 || top.length === 0
      ? []
      : [
          {
            title,
            lines: table([
              ["", ...top],
              ...rows.map((row, i) => [left[i], ...row.map((value) => numberText(value, 5))]),
            ]),
          },
        ];
  return [
    ...section("A: rates by states", A, names(states), names(states)),
    ...section("B: rates by inputs", B, names(states), names(inputs)),
    ...section("C: outputs by states", C, names(outputs), names(states)),
    ...section("D: outputs by inputs", D, names(outputs), names(inputs)),
  ];
}

/** Columns two blanks apart. */
export function table(rows: readonly (readonly string[])[]): string[] {
  const widths: number[] = [];
  for (const row of rows)
    row.forEach((cell, i) => {
      widths[i] = Math.max(widths[i] ?? 0, cell.length);
    });
  return rows.map((row) =>
    row
      .map((cell, i) => cell.padEnd(widths[i]))
      .join("  ")
      .trimEnd(),
  );
}
