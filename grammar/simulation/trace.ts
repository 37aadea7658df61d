/** One signal of a run at every quarter of every step; at a jump its time stands twice. SI. */
export interface Trace {
  readonly times: readonly number[];
  readonly values: readonly number[];
}

export function finalOf({ values }: Trace): number {
  return values[values.length - 1] ?? Number.NaN;
}

/** At a jump, what holds from there on. */
export function valueAt({ times, values }: Trace, time: number): number {
  let low = 0;
  let high = times.length - 1;
  if (!(time >= times[0] && time <= times[high])) return Number.NaN;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (times[middle] <= time) low = middle;
    else high = middle;
  }
  if (time === times[high]) return values[high];
  return cubicThrough(times, values, low, time);
}

/** Between two points, by the parabola or cubic through the nearest points of the same smooth piece. */
function cubicThrough(
  times: readonly number[],
  values: readonly number[],
  low: number,
  time: number,
): number {
  let from = low;
  let to = low + 1;
  if (times[to] === times[from]) return values[to];
  if (from > 0 && times[from - 1] < times[from]) from -= 1;
  if (to < times.length - 1 && times[to + 1] > times[to]) to += 1;
  let sum = 0;
  for (let i = from; i <= to; i += 1) {
    let weight = values[i];
    for (let j = from; j <= to; j += 1) if (j !== i) weight *= (time - times[j]) / (times[i] - times[j]);
    sum += weight;
  }
  return sum;
}

/** The greatest value, between points by the parabola through three. */
export function maximumOf(trace: Trace): number {
  const { times, values } = trace;
  let best = Number.NEGATIVE_INFINITY;
  let at = 0;
  for (let i = 0; i < values.length; i += 1) {
    if (Number.isNaN(values[i])) return Number.NaN;
    if (values[i] > best) {
      best = values[i];
      at = i;
    }
  }
  if (at === 0 || at === values.length - 1) return best;
  const [a, b] = [times[at] - times[at - 1], times[at + 1] - times[at]];
  if (!(a > 0 && b > 0)) return best;
  const [left, right] = [(values[at] - values[at - 1]) / a, (values[at + 1] - values[at]) / b];
  const bend = (right - left) / (a + b);
  if (!(bend < 0)) return best;
  const slope = left + bend * a;
  return best - slope ** 2 / (4 * bend);
}

export function minimumOf({ times, values }: Trace): number {
  return -maximumOf({ times, values: values.map((value) => -value) });
}

/** ∫ g(x) dt over the run, by Boole's rule on each step of four quarters. */
export function integralOf({ times, values }: Trace, of: (value: number) => number): number {
  let sum = 0;
  let i = 0;
  while (i + 4 < times.length) {
    if (times[i + 1] === times[i]) {
      i += 1;
      continue;
    }
    const h = times[i + 4] - times[i];
    const [a, b, c, d, e] = [0, 1, 2, 3, 4].map((k) => of(values[i + k]));
    sum += (h / 90) * (7 * (a + e) + 32 * (b + d) + 12 * c);
    i += 4;
  }
  return sum;
}

/** The first time at or after `from` at which the trace passes the level upwards (or stands over it); null if never. */
export function firstAbove({ times, values }: Trace, level: number, from = times[0]): number | null {
  for (let i = 0; i < times.length; i += 1) {
    if (times[i] < from || !(values[i] >= level)) continue;
    if (i === 0 || times[i - 1] < from || times[i] === times[i - 1]) return times[i];
    return crossing({ times, values }, i - 1, level);
  }
  return null;
}

/** The last time at which the trace leaves the band about a value; `from` where it never does. */
export function lastOutside({ times, values }: Trace, about: number, band: number, from: number): number {
  for (let i = times.length - 1; i >= 0 && times[i] >= from; i -= 1) {
    if (Math.abs(values[i] - about) <= band) continue;
    if (i === times.length - 1) return Number.POSITIVE_INFINITY;
    if (times[i + 1] === times[i]) return times[i];
    return crossing({ times, values }, i, about + Math.sign(values[i] - about) * band);
  }
  return from;
}

/** Between point i and the next one. */
function crossing({ times, values }: Trace, i: number, level: number): number {
  let [low, high] = [times[i], times[i + 1]];
  const above = values[i] >= level;
  for (let round = 0; round < 60; round += 1) {
    const middle = (low + high) / 2;
    if (cubicThrough(times, values, i, middle) >= level === above) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
