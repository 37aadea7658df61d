import type { Analysis } from "../analysis/analyse.ts";
import type { Complex } from "../analysis/dense.ts";
import type { LinearModel, Signal } from "../analysis/linearise.ts";
import type { Mode, Modes } from "../analysis/modes.ts";
import { staticGains } from "../analysis/static-gains.ts";
import { bandwidthOf, type Transfer, transferOf } from "../analysis/transfer.ts";
import type { Expression } from "../syntax/tree.ts";
import { DIMENSIONLESS, divide } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Unit } from "../units/unit.ts";
import { numberText } from "../units/unit-text.ts";
import { type Measured, none, type Value, value } from "./measured.ts";
import { inputNamed, nameIn, recordedIn, signalNamed } from "./signals.ts";

/** A measure of a system with its arguments: names as written, other arguments worked out by `worth`. */
export type SystemMeasure = (
  analysis: Analysis,
  args: readonly Expression[],
  worth: (expr: Expression) => Measured,
) => Measured;

export const SYSTEM_MEASURES: Readonly<Record<string, SystemMeasure>> = {
  frequency: (analysis, args, worth) =>
    ofMode(analysis, args, worth, ({ frequency }) => value(frequency, HERTZ.dimension, HERTZ)),
  damping: (analysis, args, worth) =>
    ofMode(analysis, args, worth, ({ damping }) =>
      damping === null ? none("The mode's eigenvalue is 0, so it has no damping ratio.") : value(damping),
    ),
  gain: (analysis, args, worth) => {
    if (args.length === 2) return gainAtRest(analysis, args);
    return atFrequency(analysis, args, worth, "gain(u, y, 2 Hz)", (magnitude, _, unit) =>
      value(magnitude, unit.dimension, unit),
    );
  },
  phase: (analysis, args, worth) =>
    atFrequency(analysis, args, worth, "phase(u, y, 2 Hz)", (magnitude, phase) =>
      magnitude === 0
        ? none("Nothing of the input arrives at this frequency, so there is no phase.")
        : value(phase, DIMENSIONLESS, DEGREE),
    ),
  bandwidth: (analysis, args) => {
    const asked = channelAsked(analysis, args, "bandwidth(u, y)");
    if ("kind" in asked) return asked;
    const { transfer } = asked;
    if (transfer.atRest === null)
      return none("The gain at zero frequency is infinite, so no bandwidth counts from it.");
    if (transfer.atRest === 0)
      return none("The gain at zero frequency is 0, so no bandwidth counts from it.");
    const bandwidth = bandwidthOf(transfer);
    return bandwidth === null
      ? none("The gain does not fall 3 dB below that at zero frequency.")
      : value(bandwidth, HERTZ.dimension, HERTZ);
  },
  steady: (analysis, args) => {
    const signal =
      args.length === 1 ? signalAsked(analysis, args[0]) : none("Write `steady(y)` with an output.");
    if ("kind" in signal) return signal;
    const track = recordedIn(analysis.model, signal);
    if (track !== null)
      return none(`\`${signal.name}\` hangs on \`${track}\`, which only records: it has no equilibrium.`);
    const found = analysis.equilibrium;
    if (found.kind === "none") return none(`There is no equilibrium. ${found.reason}`);
    return value(found.evaluated.valueOf(signal.value), signal.unit.dimension, signal.unit);
  },
};

const HERTZ = parseUnit("Hz") as Unit;
const DEGREE = parseUnit("deg") as Unit;

/** `stable`: what speaks for it or against it. */
export function stability(analysis: Analysis): { holds: boolean; measured: string } | { message: string } {
  const modes = modesAsked(analysis);
  if ("kind" in modes) return { message: modes.kind === "none" ? modes.message : "" };
  if (modes.modes.length === 0) return { holds: true, measured: "no states" };
  const worst = modes.modes.reduce((most, mode) => (mode.eigenvalue.re > most.eigenvalue.re ? mode : most));
  if (modes.stable)
    return { holds: true, measured: `real parts up to ${numberText(worst.eigenvalue.re)} 1/s` };
  const { re } = worst.eigenvalue;
  // A double zero shows in the rank of A even where rounding moved its eigenvalues aside.
  const shown = re < 0 ? "0" : eigenvalueText(worst.eigenvalue);
  return { holds: false, measured: `eigenvalue ${shown} 1/s` };
}

/** `mode(3.3 Hz) within 5 %`: an oscillating mode is that near. */
export function modeThere(
  analysis: Analysis,
  wanted: Value,
  width: Value | null,
): { holds: boolean; measured: string } | { message: string } {
  const frequency = hertz(wanted);
  if (frequency === null)
    return { message: "A mode is asked for by a frequency: `mode(3.3 Hz) within 5 %`." };
  if (width === null) return { message: "Say how near the mode has to be: `mode(3.3 Hz) within 5 %`." };
  const allowed = width.relative ? width.value * frequency : hertz(width);
  if (allowed === null) return { message: "`within` takes a percentage or a frequency here." };
  const modes = modesAsked(analysis);
  if ("kind" in modes) return { message: modes.kind === "none" ? modes.message : "" };
  const found = modes.modes.filter(({ pair }) => pair).map((mode) => mode.frequency);
  if (found.length === 0) return { holds: false, measured: "no mode oscillates" };
  const near = found.reduce((best, f) => (Math.abs(f - frequency) < Math.abs(best - frequency) ? f : best));
  return { holds: Math.abs(near - frequency) <= allowed, measured: `nearest ${numberText(near, 6)} Hz` };
}

function eigenvalueText({ re, im }: Complex): string {
  return im === 0 ? numberText(re) : `${numberText(re)} ± ${numberText(im)}j`;
}

/** Hz counts turns, rad/s the angle; a bare 1/s could be either and is refused. */
export function hertz({ value: number, dimension, unit }: Value): number | null {
  if (dimension.some((exponent, i) => exponent !== HERTZ.dimension[i])) return null;
  if (unit?.cycles === true) return number;
  return unit?.angular === true ? number / (2 * Math.PI) : null;
}

function linearAsked(analysis: Analysis, signals: readonly Signal[]): LinearModel | Measured {
  const found = analysis.equilibrium;
  const linear = signals.length === 0 ? analysis.linear : analysis.linearFor(signals);
  if (linear.kind === "none") return none(`The model can't be linearised. ${linear.reason}`);
  // Without an equilibrium the slopes at the start mean something only where they are the same everywhere.
  if (found.kind === "none" && !analysis.sameSlopesEverywhere(signals)) {
    return none(`There is no equilibrium to linearise at. ${found.reason}`);
  }
  return linear;
}

function modesAsked(analysis: Analysis): Modes | Measured {
  const linear = linearAsked(analysis, []);
  if (linear.kind !== "linear") return linear;
  return analysis.modes as Modes;
}

function ofMode(
  analysis: Analysis,
  args: readonly Expression[],
  worth: (expr: Expression) => Measured,
  of: (mode: Mode) => Measured,
): Measured {
  const number = args.length === 1 ? worth(args[0]) : none("Ask for one mode by its number: `frequency(1)`.");
  if (number.kind === "none") return number;
  const modes = modesAsked(analysis);
  if ("kind" in modes) return modes;
  const count = modes.modes.length;
  const mode = Number.isInteger(number.value) ? modes.modes[number.value - 1] : undefined;
  if (mode !== undefined) return of(mode);
  return none(
    `There is no mode ${numberText(number.value)}: the system has ${count === 0 ? "none" : `modes 1 to ${count}`}.`,
  );
}

interface Asked {
  readonly linear: LinearModel;
  readonly input: number;
  readonly signal: Signal;
  /** Of y per u. */
  readonly unit: Unit;
  readonly transfer: Transfer;
}

function channelAsked(analysis: Analysis, args: readonly Expression[], form: string): Asked | Measured {
  if (args.length < 2) return none(`Write \`${form}\` with an input and an output.`);
  const name = nameIn(args[0]);
  const input = name === null ? -1 : inputNamed(analysis.model, name);
  if (input < 0) {
    const inputs = analysis.model.inputs.map((one) => `\`${one.name}\``).join(", ");
    return none(`\`${name ?? form}\` is no input of the system; it has ${inputs || "none"}.`);
  }
  const signal = signalAsked(analysis, args[1]);
  if ("kind" in signal) return signal;
  const linear = linearAsked(analysis, [signal]);
  if (linear.kind !== "linear") return linear;
  const unit = per(signal.unit, linear.inputs[input].unit);
  return {
    linear,
    input,
    signal,
    unit,
    get transfer() {
      return transferOf(linear, input, 0);
    },
  };
}

function signalAsked(analysis: Analysis, expr: Expression): Signal | Measured {
  const name = nameIn(expr);
  const signal = name === null ? null : signalNamed(analysis.model, name);
  if (signal !== null) return signal;
  const outputs = analysis.model.outputs.map((one) => `\`${one.name}\``).join(", ");
  return none(
    `\`${name ?? "this"}\` is no output, state, effort or flow of the system; its outputs are ${outputs || "none"}.`,
  );
}

function gainAtRest(analysis: Analysis, args: readonly Expression[]): Measured {
  const asked = channelAsked(analysis, args, "gain(u, y)");
  if ("kind" in asked) return asked;
  const gain = staticGains(asked.linear)[0][asked.input];
  return gain === null
    ? none(
        `Under a constant input \`${asked.signal.name}\` grows without end, so there is no gain at zero frequency.`,
      )
    : value(gain, asked.unit.dimension, asked.unit);
}

function atFrequency(
  analysis: Analysis,
  args: readonly Expression[],
  worth: (expr: Expression) => Measured,
  form: string,
  of: (magnitude: number, phase: number, unit: Unit) => Measured,
): Measured {
  if (args.length !== 3) return none(`Write \`${form}\` with an input, an output and a frequency.`);
  const at = worth(args[2]);
  if (at.kind === "none") return at;
  const frequency = hertz(at);
  if (frequency === null || !(frequency >= 0)) return none("The frequency is wanted in Hz or in rad/s.");
  const asked = channelAsked(analysis, args, form);
  if ("kind" in asked) return asked;
  const response = asked.transfer.response(frequency);
  if (response === null) return none(`At ${numberText(frequency)} Hz the response is infinite.`);
  return of(response.magnitude, response.phase, asked.unit);
}

function per(output: Unit, input: Unit): Unit {
  const text = input.text === "1" ? output.text : `${output.text} per ${input.text}`;
  return {
    text,
    dimension: divide(output.dimension, input.dimension),
    factor: output.factor / input.factor,
    offset: 0,
    cycles: false,
    angular: false,
  };
}
