import { Analysis } from "../../grammar/analysis/analyse.ts";
import type { LinearModel } from "../../grammar/analysis/linearise.ts";
import { responseCurve } from "../../grammar/analysis/response-curve.ts";
import { staticGains } from "../../grammar/analysis/static-gains.ts";
import { bandwidthOf, transferOf } from "../../grammar/analysis/transfer.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { complexText, gainText, sharesText } from "../../grammar/writing/linear-text.ts";
import type { BehaviourView, ChannelView, ModeView } from "./behaviour-view.ts";
import { shownIn, shownNumber } from "./shown-number.ts";

/** Larger models would hold up the equations of the next key stroke; the terminal takes them. */
const MOST_STATES = 60;
const MOST_CHANNELS = 16;

export function behaviourView(model: StateModel): BehaviourView {
  const nothing = { note: null, states: [], stable: null, modes: [], channels: [] };
  if (model.states.length > MOST_STATES) {
    const refusal = `${model.states.length} states are too many to follow every key stroke: \`bondwright linear\` takes them.`;
    return { ...nothing, refusal };
  }
  const analysis = new Analysis(model);
  const { linear } = analysis;
  if (linear.kind === "none") return { ...nothing, refusal: linear.reason };
  const { point, reason } = analysis.operatingPoint;
  return {
    note: reason,
    refusal: null,
    states: model.states.map(({ name, unit }, i) => ({
      name,
      value: shownIn(point.states[i], unit),
      unit: unit.text,
    })),
    stable: linear.moving.length === 0 ? null : (analysis.modes?.stable ?? null),
    modes: modes(analysis, linear),
    channels: channels(linear),
  };
}

function modes(analysis: Analysis, linear: LinearModel): ModeView[] {
  return (analysis.modes?.modes ?? []).map((mode, i) => ({
    number: i + 1,
    eigenvalue: complexText(mode.eigenvalue, mode.pair).replaceAll("-", "−"),
    re: mode.eigenvalue.re,
    im: mode.eigenvalue.im,
    frequency: shownNumber(Number(mode.frequency.toPrecision(5))),
    damping: mode.damping === null ? "–" : shownNumber(Number(mode.damping.toPrecision(4))),
    timeConstant: mode.timeConstant === null ? "–" : shownNumber(Number(mode.timeConstant.toPrecision(4))),
    states: sharesText(mode, linear),
  }));
}

function channels(linear: LinearModel): ChannelView[] {
  const { inputs, outputs } = linear;
  const gains = staticGains(linear);
  const pairs = outputs.flatMap((output, k) => inputs.map((input, j) => ({ output, input, k, j })));
  return pairs.slice(0, MOST_CHANNELS).map(({ output, input, k, j }) => {
    const gain = gains[k][j];
    const transfer = transferOf(linear, j, k);
    const bandwidth = bandwidthOf(transfer);
    const factor = input.unit.factor / output.unit.factor;
    return {
      input: input.name,
      output: output.name,
      gain: gain === null ? "grows without end" : gainText(gain, input.unit, output.unit).replace("-", "−"),
      bandwidth: bandwidth === null ? "–" : shownNumber(Number(bandwidth.toPrecision(4))),
      response: responseCurve(transfer).map((at) => ({ ...at, magnitude: at.magnitude * factor })),
      unit: `${output.unit.text} per ${input.unit.text}`,
    };
  });
}
