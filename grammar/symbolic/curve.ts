/** Points of a measured or given characteristic, x rising; `slopes` at the points where it is smooth, else null. */
export interface Curve {
  readonly name: string;
  readonly x: readonly number[];
  readonly y: readonly number[];
  readonly slopes: readonly number[] | null;
}

/** At least two points with x strictly rising: callers see to that. */
export function linearCurve(name: string, x: readonly number[], y: readonly number[]): Curve {
  return { name, x, y, slopes: null };
}

/**
 * Monotone between each two points: piecewise cubic with the slopes of F. N. Fritsch and R. E. Carlson, Monotone
 * piecewise cubic interpolation, SIAM Journal on Numerical Analysis 17 (1980) 238–246; from memory: the mean of the
 * secants beside a point, 0 where these differ in sign, and both ends of an interval drawn back onto the circle of
 * radius 3 about the origin where (α, β) lies outside it.
 */
export function smoothCurve(name: string, x: readonly number[], y: readonly number[]): Curve {
  const secants = x.slice(1).map((next, i) => (y[i + 1] - y[i]) / (next - x[i]));
  const slopes = x.map((_, i) => {
    const [before, after] = [secants[i - 1] ?? secants[i], secants[i] ?? secants[i - 1]];
    return before * after <= 0 ? 0 : (before + after) / 2;
  });
  secants.forEach((secant, i) => {
    if (secant === 0) return;
    const length = Math.hypot(slopes[i] / secant, slopes[i + 1] / secant);
    if (length <= 3) return;
    slopes[i] *= 3 / length;
    slopes[i + 1] *= 3 / length;
  });
  return { name, x, y, slopes };
}

/**
 * The value at `at` (order 0) or that of the derivative of this order, held at the ends; at a corner a derivative is
 * that of the right side. NaN stays NaN.
 */
export function curveValue({ x, y, slopes }: Curve, order: number, at: number): number {
  const last = x.length - 1;
  if (Number.isNaN(at)) return at;
  if (at < x[0]) return order === 0 ? y[0] : 0;
  if (at >= x[last]) return order === 0 ? y[last] : 0;
  const i = intervalOf(x, at);
  const width = x[i + 1] - x[i];
  const secant = (y[i + 1] - y[i]) / width;
  const t = at - x[i];
  if (slopes === null) return order === 0 ? y[i] + secant * t : order === 1 ? secant : 0;
  // The cubic of Hermite: y + m*t + c*t^2 + d*t^3.
  const c = (3 * secant - 2 * slopes[i] - slopes[i + 1]) / width;
  const d = (slopes[i] + slopes[i + 1] - 2 * secant) / (width * width);
  switch (order) {
    case 0:
      return y[i] + t * (slopes[i] + t * (c + t * d));
    case 1:
      return slopes[i] + t * (2 * c + t * 3 * d);
    case 2:
      return 2 * c + 6 * d * t;
    default:
      return order === 3 ? 6 * d : 0;
  }
}

/** Where a curve or a derivative of it has a corner or a jump: places a run must step onto. */
export function knotsOf({ x }: Curve): readonly number[] {
  return x;
}

/** The highest derivative that is not zero everywhere. */
export function degreeOf({ slopes }: Curve): number {
  return slopes === null ? 1 : 3;
}

export function isNonNegative({ y }: Curve): boolean {
  return y.every((value) => value >= 0);
}

/** An order by name and by data, so that two curves of one name from different files are told apart alike always. */
export function compareCurves(a: Curve, b: Curve): number {
  if (a === b) return 0;
  if (a.name !== b.name) return a.name < b.name ? -1 : 1;
  if (a.x.length !== b.x.length) return a.x.length - b.x.length;
  if ((a.slopes === null) !== (b.slopes === null)) return a.slopes === null ? -1 : 1;
  for (let i = 0; i < a.x.length; i += 1) {
    if (a.x[i] !== b.x[i]) return a.x[i] - b.x[i];
    if (a.y[i] !== b.y[i]) return a.y[i] - b.y[i];
  }
  return 0;
}

/** The i with x[i] <= at < x[i + 1]. */
function intervalOf(x: readonly number[], at: number): number {
  let low = 0;
  let high = x.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (x[middle] <= at) low = middle;
    else high = middle;
  }
  return low;
}
