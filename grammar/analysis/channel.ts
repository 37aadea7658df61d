import { balance } from "./balance.ts";
import {
  type Complex,
  dot,
  eigen,
  multiply,
  norm,
  type Rows,
  singular,
  size,
  solve,
  transpose,
} from "./dense.ts";
import type { LinearModel } from "./linearise.ts";

/** From one input to one output: G(s) = c·(s·1 - A)⁻¹·b + d + g·s. */
export interface Channel {
  readonly A: Rows;
  readonly b: readonly number[];
  readonly c: readonly number[];
  readonly d: number;
  /** Where the output follows the rate of the input. */
  readonly g: number;
}

/** The balanced part of a model between an input and an output: what the one moves and the other sees. */
export function channelOf(linear: LinearModel, input: number, output: number): Channel {
  const { scaled, scale } = balance(linear.A);
  const column = (rows: Rows) => rows.map((row, i) => row[input] / scale[i]);
  const [b, e] = [column(linear.B), column(linear.E)];
  const c = linear.C[output].map((value, i) => value * scale[i]);
  // With x + E·u for x the rate of the input goes out of the first equation.
  const through = scaled.map((row, i) => b[i] + dot(row, e));
  const whole = {
    A: scaled,
    b: through,
    c,
    d: linear.D[output][input] + dot(c, e),
    g: linear.G[output][input],
  };
  return minimal(whole);
}

/** Without what the input does not move, then without what the output does not see. */
function minimal(channel: Channel): Channel {
  const moved = onto(channel, reached(channel.A, [channel.b]));
  const seen = reached(transpose(moved.A), [moved.c]);
  return onto(moved, seen);
}

function onto({ A, b, c, d, g }: Channel, basis: Rows): Channel {
  if (basis.length === b.length) return { A, b, c, d, g };
  const across = multiply(basis, A);
  return {
    A: multiply(across, transpose(basis)),
    b: basis.map((row) => dot(row, b)),
    c: basis.map((row) => dot(row, c)),
    d,
    g,
  };
}

/**
 * An orthonormal basis, by rows, of what is reached from some vectors by A (the staircase algorithm, Van Dooren 1981;
 * from memory): each step takes A times the newest directions and keeps what is new in them.
 */
export function reached(A: Rows, from: Rows): number[][] {
  const basis: number[][] = [];
  const floor = 64 * Math.max(A.length, 1) * Number.EPSILON;
  const strength = size(A) || 1;
  const longest = Math.max(0, ...from.map(norm));
  let newest = fresh(from, basis, floor * longest);
  while (newest.length > 0) {
    basis.push(...newest);
    if (basis.length >= A.length) break;
    newest = fresh(
      newest.map((v) => A.map((row) => dot(row, v))),
      basis,
      floor * strength,
    );
  }
  return basis.slice(0, A.length);
}

/** What stands across a basis in some vectors, as orthonormal directions; twice, since once leaves rounding behind. */
function fresh(vectors: Rows, basis: Rows, floor: number): number[][] {
  const across = vectors.map((vector) => {
    const rest = [...vector];
    for (let pass = 0; pass < 2; pass += 1) {
      for (const direction of basis) {
        const along = dot(direction, rest);
        for (let i = 0; i < rest.length; i += 1) rest[i] -= along * direction[i];
      }
    }
    return rest;
  });
  const kept = across.filter((vector) => norm(vector) > floor);
  if (kept.length <= 1) return kept.map((vector) => vector.map((value) => value / norm(vector)));
  const { s, v } = singular(kept);
  return s.flatMap((value, k) => (value > floor ? [v.map((row) => row[k])] : []));
}

export function polesOf({ A }: Channel): Complex[] {
  return eigen(balance(A).scaled).values;
}

/**
 * The zeros that are left when the input is chosen so that the output stays zero (after Emami-Naeini and Van Dooren
 * 1982; from memory): while the output does not follow the input at once, the direction that the output sees has to
 * rest, and its rate becomes the output.
 */
export function zerosOf({ A, b, c, d, g }: Channel): Complex[] {
  if (g !== 0) {
    const last = [...c.map((value) => -value / g), -d / g];
    return eigen(balance([...A.map((row, i) => [...row, b[i]]), last]).scaled).values;
  }
  const direct = Math.abs(d) > 64 * Number.EPSILON * norm(b) * norm(c) * scaleOf(A);
  if (direct)
    return eigen(balance(A.map((row, i) => row.map((value, j) => value - (b[i] * c[j]) / d))).scaled).values;
  if (A.length === 0 || norm(c) === 0) return [];
  const turned = householder(A, b, c);
  const last = A.length - 1;
  return zerosOf({
    A: turned.A.slice(0, last).map((row) => row.slice(0, last)),
    b: turned.b.slice(0, last),
    c: turned.A[last].slice(0, last),
    d: turned.b[last],
    g: 0,
  });
}

/** The time that a response takes, roughly: without it d could not be compared with c and b. */
function scaleOf(A: Rows): number {
  const strength = size(A);
  return strength === 0 ? 1 : 1 / strength;
}

/** Reflects the states so that the output sees the last one alone. */
function householder(A: Rows, b: readonly number[], c: readonly number[]): { A: number[][]; b: number[] } {
  const n = c.length;
  const length = norm(c);
  const v = [...c];
  v[n - 1] += v[n - 1] >= 0 ? length : -length;
  const weight = 2 / dot(v, v);
  const reflect = (x: readonly number[]) => {
    const along = weight * dot(v, x);
    return x.map((value, i) => value - along * v[i]);
  };
  return { A: transpose(transpose(A.map(reflect), n).map(reflect), n), b: reflect(b) };
}

/** G(0): null where it is not finite, since something is summed up without end. */
export function gainAtRest({ A, b, c, d }: Channel): number | null {
  const solved = solve(
    A,
    b.map((value) => [value]),
  );
  if (solved === null || solved.pivots < 64 * A.length * Number.EPSILON) return null;
  return d - solved.x.reduce((sum, [value], i) => sum + c[i] * value, 0);
}

/** G(jω) from the real system of twice the size. null at a pole on the axis. */
export function responseAt({ A, b, c, d, g }: Channel, speed: number): Complex | null {
  const n = b.length;
  const rows = [
    ...A.map((row, i) => [...row.map((value) => -value), ...axis(n, i, -speed)]),
    ...A.map((row, i) => [...axis(n, i, speed), ...row.map((value) => -value)]),
  ];
  const solved = solve(
    rows,
    [...b, ...b.map(() => 0)].map((value) => [value]),
  );
  if (solved === null || solved.pivots < 4 * Number.EPSILON) return null;
  const x = solved.x.map(([value]) => value);
  return { re: dot(c, x.slice(0, n)) + d, im: dot(c, x.slice(n)) + g * speed };
}

function axis(n: number, i: number, value: number): number[] {
  const row = new Array<number>(n).fill(0);
  row[i] = value;
  return row;
}
