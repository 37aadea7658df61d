import type { StateModel } from "../equations/model.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { Analysis } from "./analyse.ts";
import { balance } from "./balance.ts";
import { type Complex, dot, eigen, identity, type Rows, solve } from "./dense.ts";
import { movingPart } from "./modes.ts";

/** How a mode answers to a parameter: per cent of change for each per cent of the parameter, to first order. */
export interface Sensitivity {
  readonly parameter: string;
  /** One a mode, in the order of `modesOf`; null where the mode has no left or right vector of its own. */
  readonly modes: readonly (ModeSensitivity | null)[];
}

export interface ModeSensitivity {
  /** p·∂λ/∂p. */
  readonly eigenvalue: Complex;
  /** (p/ω)·∂ω/∂p. */
  readonly frequency: number;
  /** p·∂ζ/∂p. */
  readonly damping: number;
}

/** The share by which a parameter is moved each way: what it leaves of third order is about 1e-9. */
const SHARE = 2 ** -15;

/**
 * ∂λ/∂p = wᵀ·(∂A/∂p)·v/(wᵀ·v) with the left and right vectors of each mode; ∂A/∂p from the symbolic A at the two
 * equilibria on both sides of p, so that what the operating point does to A is in it. Parameters that others define
 * are left out: they follow.
 */
export function modeSensitivities(model: StateModel): Sensitivity[] {
  const { linear } = new Analysis(model);
  if (linear.kind === "none" || linear.moving.length === 0) return [];
  const { scaled, scale } = balance(movingPart(linear));
  const { values, vectors } = eigen(scaled);
  const inverse = solve(vectors, identity(scale.length));
  const order = modeOrder(values);
  return model.causal.graph.parameters.flatMap(({ name, value, definition, constant }): Sensitivity[] => {
    const defined = [...symbolsOf(definition)].some(({ role }) => role === "parameter");
    if (constant || defined || value === 0) return [];
    const change = slopeOfA(model, name, value);
    if (change === null) return [];
    const balanced = change.map((row, i) => row.map((x, j) => (x * scale[j]) / scale[i]));
    if (balanced.every((row) => row.every((x) => x === 0))) return [];
    const well = inverse !== null && inverse.pivots > 1e-12 ? inverse.x : null;
    return [
      {
        parameter: name,
        modes: order.map((k) => (well === null ? null : along(balanced, vectors, well, values, k))),
      },
    ];
  });
}

/** p·∂A/∂p. */
function slopeOfA(model: StateModel, name: string, value: number): number[][] | null {
  const [low, high] = [1 - SHARE, 1 + SHARE].map(
    (share) => new Analysis(model, new Map([[name, value * share]])).linear,
  );
  if (low.kind === "none" || high.kind === "none") return null;
  const [a, b] = [movingPart(low), movingPart(high)];
  return b.map((row, i) => row.map((x, j) => (x - a[i][j]) / (2 * SHARE)));
}

/** First columns of the modes, by ascending natural frequency. */
function modeOrder(values: readonly Complex[]): number[] {
  const speed = (k: number) => Math.hypot(values[k].re, values[k].im);
  const first = values.flatMap(({ im }, k) => (im >= 0 ? [k] : []));
  return first.sort((a, b) => speed(a) - speed(b) || values[a].re - values[b].re);
}

/**
 * With v = v₁ + i·v₂ in columns k, k+1 and the rows w₁, w₂ of the inverse, the left vector is (w₁ - i·w₂)/2 and
 * wᵀ·v = 1.
 */
function along(
  change: Rows,
  vectors: Rows,
  inverse: Rows,
  values: readonly Complex[],
  k: number,
): ModeSensitivity {
  const { re, im } = values[k];
  const column = (j: number) => vectors.map((row) => row[j]);
  const form = (i: number, j: number) =>
    dot(
      inverse[i],
      change.map((row) => dot(row, column(j))),
    );
  const eigenvalue =
    im === 0
      ? { re: form(k, k), im: 0 }
      : {
          re: (form(k, k) + form(k + 1, k + 1)) / 2,
          im: (form(k, k + 1) - form(k + 1, k)) / 2,
        };
  const square = re * re + im * im;
  const frequency = (re * eigenvalue.re + im * eigenvalue.im) / square;
  const damping = -eigenvalue.re / Math.sqrt(square) + (re / Math.sqrt(square)) * frequency;
  return { eigenvalue, frequency, damping };
}
