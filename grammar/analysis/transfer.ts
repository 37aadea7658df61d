import { type Channel, channelOf, gainAtRest, polesOf, responseAt, zerosOf } from "./channel.ts";
import { type Complex, norm, size } from "./dense.ts";
import type { LinearModel } from "./linearise.ts";

/** One transfer function, without what cancels. */
export interface Transfer {
  readonly input: string;
  readonly output: string;
  readonly poles: readonly Complex[];
  readonly zeros: readonly Complex[];
  /** G(0) with its sign; null where it is infinite. */
  readonly atRest: number | null;
  /** Of G(s) = gain·∏(s - zero)/∏(s - pole); 0 where the input does not reach the output. */
  readonly gain: number;
  response(frequency: number): Response | null;
}

export interface Response {
  readonly magnitude: number;
  /** Radians, continuous from low frequencies on: 0 or +π there, and -π/2 for each pole at the origin. */
  readonly phase: number;
}

/** The transfer function from an input to an output, by their indices. Frequencies are in Hz. */
export function transferOf(linear: LinearModel, input: number, output: number): Transfer {
  const channel = channelOf(linear, input, output);
  const floor = 64 * Math.max(1, channel.b.length) * Number.EPSILON * size(channel.A);
  const poles = polesOf(channel).map((pole) => settled(pole, floor));
  const zeros = zerosOf(channel).map((zero) => settled(zero, floor));
  const gain = leadingGain(channel, zeros.length, poles.length);
  const start = phaseFromLeft(gain, poles, zeros);
  return {
    input: linear.inputs[input].name,
    output: linear.outputs[output].name,
    poles,
    zeros,
    atRest: zeros.length + poles.length > 0 && gain === 0 ? 0 : gainAtRest(channel),
    gain,
    response(frequency) {
      const speed = 2 * Math.PI * frequency;
      const value = responseAt(channel, speed);
      if (value === null) return null;
      const expected = start + turned(zeros, speed) - turned(poles, speed);
      const principal = Math.atan2(value.im, value.re);
      const turns = Math.round((expected - principal) / (2 * Math.PI));
      return { magnitude: Math.hypot(value.re, value.im), phase: principal + 2 * Math.PI * turns };
    },
  };
}

/** The first frequency, Hz, at which the magnitude is 3 dB (1/√2) under that at rest; null where there is none. */
export function bandwidthOf(transfer: Transfer): number | null {
  const { atRest, poles, zeros, response } = transfer;
  if (atRest === null || atRest === 0) return null;
  const floor = Math.abs(atRest) * Math.SQRT1_2;
  const under = (frequency: number) => (response(frequency)?.magnitude ?? Number.POSITIVE_INFINITY) < floor;
  const corners = [...poles, ...zeros]
    .map(({ re, im }) => Math.hypot(re, im) / (2 * Math.PI))
    .filter((f) => f > 0);
  if (corners.length === 0) return null;
  let before = 0;
  for (const frequency of searched(corners)) {
    if (!under(frequency)) {
      before = frequency;
      continue;
    }
    let [low, high] = [before, frequency];
    while (high - low > 1e-12 * high) {
      const middle = low === 0 ? high / 2 : (low + high) / 2;
      if (middle === low || middle === high) break;
      if (under(middle)) high = middle;
      else low = middle;
    }
    return high;
  }
  return null;
}

/** Twenty a decade, wide beyond all corners, and the corners themselves. */
function searched(corners: readonly number[]): number[] {
  const first = Math.log10(Math.min(...corners)) - 3;
  const last = Math.log10(Math.max(...corners)) + 4;
  const steps = Math.min(1_000, Math.ceil((last - first) * 20));
  const grid = Array.from({ length: steps + 1 }, (_, i) => 10 ** (first + ((last - first) * i) / steps));
  return [...grid, ...corners].sort((a, b) => a - b);
}

/** What rounding can't tell from 0 is 0: else a pole on the axis would count as unstable by chance. */
function settled({ re, im }: Complex, floor: number): Complex {
  return { re: Math.abs(re) <= floor ? 0 : re, im: Math.abs(im) <= floor ? 0 : im };
}

/** The first Markov parameter that is not zero: c·A^k·b, or d, or g. */
function leadingGain({ A, b, c, d, g }: Channel, zeros: number, poles: number): number {
  if (g !== 0) return g;
  if (zeros === poles && d !== 0) return d;
  let moved = [...b];
  for (let k = 0; k < poles - zeros - 1; k += 1)
    moved = A.map((row) => row.reduce((sum, x, i) => sum + x * moved[i], 0));
  return norm(c) === 0 ? 0 : c.reduce((sum, x, i) => sum + x * moved[i], 0);
}

/** The phase just above zero frequency: that of what is left when poles and zeros at the origin are taken out. */
function phaseFromLeft(gain: number, poles: readonly Complex[], zeros: readonly Complex[]): number {
  const isZero = ({ re, im }: Complex) => re === 0 && im === 0;
  const unstable = (values: readonly Complex[]) => values.filter(({ re, im }) => re > 0 && im === 0).length;
  const negative = (gain < 0 ? 1 : 0) + unstable(poles) + unstable(zeros);
  const slope = zeros.filter(isZero).length - poles.filter(isZero).length;
  return (negative % 2 === 0 ? 0 : Math.PI) + (slope * Math.PI) / 2;
}

/** How far ∏(jω - value) has turned since ω = 0, continuously. */
function turned(values: readonly Complex[], speed: number): number {
  return values.reduce((sum, value) => {
    if (value.re === 0 && value.im === 0) return sum;
    return sum + angle(value, speed) - angle(value, 0);
  }, 0);
}

function angle({ re, im }: Complex, speed: number): number {
  return re > 0 ? Math.PI - Math.atan2(speed - im, re) : Math.atan2(speed - im, -re);
}
