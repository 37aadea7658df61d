import type { ChannelView } from "../behaviour-view.ts";
import { shownNumber } from "../shown-number.ts";

const WIDTH = 560;
const LEFT = 64;
const RIGHT = 12;
const HEIGHTS = { magnitude: 130, phase: 100 };
const GAP = 26;
const TOP = 16;
const BOTTOM = 34;

interface Axis {
  readonly low: number;
  readonly high: number;
  readonly ticks: readonly number[];
}

/** Magnitude and phase over frequency, both axes of the first and the frequency logarithmic. */
export function ResponsePlot({ channel }: { channel: ChannelView }) {
  const { response, unit, input, output } = channel;
  const frequency = decades(response.map((at) => at.frequency));
  const magnitude = decades(response.map((at) => at.magnitude));
  const phase = quarters(response.map((at) => (at.phase * 180) / Math.PI));
  const x = (value: number) =>
    LEFT + ((Math.log10(value) - frequency.low) / (frequency.high - frequency.low)) * (WIDTH - LEFT - RIGHT);
  const phaseTop = TOP + HEIGHTS.magnitude + GAP;
  const y = (value: number, { low, high }: Axis, top: number, height: number) =>
    top + height - ((value - low) / (high - low)) * height;
  const yMagnitude = (value: number) => y(Math.log10(value), magnitude, TOP, HEIGHTS.magnitude);
  const yPhase = (value: number) => y(value, phase, phaseTop, HEIGHTS.phase);
  const bottom = phaseTop + HEIGHTS.phase;
  const path = (of: (at: ChannelView["response"][number]) => number) =>
    response
      .map((at, i) => `${i === 0 ? "M" : "L"}${x(at.frequency).toFixed(1)} ${of(at).toFixed(1)}`)
      .join("");
  return (
    <svg
      className="response-plot"
      viewBox={`0 0 ${WIDTH} ${bottom + BOTTOM}`}
      role="img"
      aria-label={`Frequency response from ${input} to ${output}: magnitude in ${unit} and phase in degrees over frequency in Hz`}
    >
      <text x={LEFT} y={TOP - 6} className="title">
        magnitude, {unit}
      </text>
      <text x={LEFT} y={phaseTop - 4} className="title">
        phase, °
      </text>
      {frequency.ticks.map((tick) => (
        <g key={tick}>
          <path
            className="grid"
            d={`M${x(10 ** tick)} ${TOP}V${TOP + HEIGHTS.magnitude}M${x(10 ** tick)} ${phaseTop}V${bottom}`}
          />
          <text x={x(10 ** tick)} y={bottom + 13} textAnchor="middle">
            {powerOfTen(tick)}
          </text>
        </g>
      ))}
      {magnitude.ticks.map((tick) => (
        <g key={tick}>
          <path className="grid" d={`M${LEFT} ${yMagnitude(10 ** tick)}H${WIDTH - RIGHT}`} />
          <text x={LEFT - 5} y={yMagnitude(10 ** tick) + 3.5} textAnchor="end">
            {powerOfTen(tick)}
          </text>
        </g>
      ))}
      {phase.ticks.map((tick) => (
        <g key={tick}>
          <path className="grid" d={`M${LEFT} ${yPhase(tick)}H${WIDTH - RIGHT}`} />
          <text x={LEFT - 5} y={yPhase(tick) + 3.5} textAnchor="end">
            {shownNumber(tick)}
          </text>
        </g>
      ))}
      <path className="curve" d={path((at) => yMagnitude(at.magnitude))} />
      <path className="curve" d={path((at) => yPhase((at.phase * 180) / Math.PI))} />
      <text x={(LEFT + WIDTH - RIGHT) / 2} y={bottom + 28} textAnchor="middle">
        frequency, Hz
      </text>
    </svg>
  );
}

/** Whole decades about some values, with at most eight ticks. */
function decades(values: readonly number[]): Axis {
  const logs = values.map(Math.log10).filter(Number.isFinite);
  const low = Math.floor(Math.min(...logs) + 1e-9);
  const high = Math.max(low + 1, Math.ceil(Math.max(...logs) - 1e-9));
  const step = Math.ceil((high - low) / 8);
  return { low, high, ticks: steps(low, high, step) };
}

/** Whole quarters of a turn about some angles. */
function quarters(degrees: readonly number[]): Axis {
  const low = Math.floor(Math.min(...degrees) / 90 + 1e-3) * 90;
  const high = Math.max(low + 90, Math.ceil(Math.max(...degrees) / 90 - 1e-3) * 90);
  return { low, high, ticks: steps(low, high, (high - low) / 90 <= 2 ? 45 : 90) };
}

function steps(low: number, high: number, step: number): number[] {
  return Array.from({ length: Math.floor((high - low) / step) + 1 }, (_, i) => low + i * step);
}

function powerOfTen(exponent: number): string {
  return exponent >= -3 && exponent <= 3
    ? shownNumber(10 ** exponent)
    : `1e${String(exponent).replace("-", "−")}`;
}
