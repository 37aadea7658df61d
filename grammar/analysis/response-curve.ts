import type { Transfer } from "./transfer.ts";

export interface CurvePoint {
  /** Hz. */
  readonly frequency: number;
  readonly magnitude: number;
  /** Radians, without jumps. */
  readonly phase: number;
}

/** A frequency response from a decade under the first corner to a decade over the last, denser about the corners. */
export function responseCurve(transfer: Transfer, points = 160): CurvePoint[] {
  const corners = [...transfer.poles, ...transfer.zeros]
    .map(({ re, im }) => Math.hypot(re, im) / (2 * Math.PI))
    .filter((corner) => corner > 0);
  if (corners.length === 0) return [];
  const first = Math.floor(Math.log10(Math.min(...corners))) - 1;
  const last = Math.ceil(Math.log10(Math.max(...corners))) + 1;
  const grid = Array.from({ length: points + 1 }, (_, i) => 10 ** (first + ((last - first) * i) / points));
  const near = corners.flatMap((corner) =>
    [-0.12, -0.06, -0.03, -0.01, 0, 0.01, 0.03, 0.06, 0.12].map((aside) => corner * (1 + aside)),
  );
  return [...new Set([...grid, ...near])]
    .sort((a, b) => a - b)
    .flatMap((frequency) => {
      const response = transfer.response(frequency);
      return response === null || response.magnitude === 0 ? [] : [{ frequency, ...response }];
    });
}
