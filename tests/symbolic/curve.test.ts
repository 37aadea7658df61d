import { describe, expect, it } from "vitest";
import { curveValue, linearCurve, smoothCurve } from "../../grammar/symbolic/curve.ts";
import { derivative } from "../../grammar/symbolic/derivative.ts";
import { evaluate } from "../../grammar/symbolic/evaluate.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { turnRound } from "../../grammar/symbolic/turn.ts";
import { expressionLatex } from "../../grammar/writing/latex.ts";
import { expressionText } from "../../grammar/writing/text.ts";

const X = [0, 1, 2, 5, 6, 9];
const Y = [0, 0, 3, 4, 4.1, 2];

describe("a curve", () => {
  it("goes through its points and is held at its ends", () => {
    for (const curve of [linearCurve("k", X, Y), smoothCurve("k", X, Y)]) {
      X.forEach((x, i) => {
        expect(curveValue(curve, 0, x)).toBeCloseTo(Y[i], 14);
      });
      expect([curveValue(curve, 0, -3), curveValue(curve, 0, 12)]).toEqual([0, 2]);
      expect([curveValue(curve, 1, -3), curveValue(curve, 1, 12)]).toEqual([0, 0]);
      expect(curveValue(curve, 0, Number.NaN)).toBeNaN();
    }
  });

  it("is monotone between each two of its points where it is smooth", () => {
    const curve = smoothCurve("k", X, Y);
    for (let i = 0; i + 1 < X.length; i += 1) {
      const values = Array.from({ length: 101 }, (_, j) =>
        curveValue(curve, 0, X[i] + ((X[i + 1] - X[i]) * j) / 100),
      );
      const [low, high] = [Math.min(Y[i], Y[i + 1]), Math.max(Y[i], Y[i + 1])];
      const way = Math.sign(Y[i + 1] - Y[i]);
      values.forEach((value, j) => {
        if (j > 0) expect(way * (value - values[j - 1])).toBeGreaterThanOrEqual(-1e-12);
        expect(value).toBeGreaterThanOrEqual(low - 1e-12);
        expect(value).toBeLessThanOrEqual(high + 1e-12);
      });
    }
  });

  it("has derivatives that agree with differences, and one slope from both sides of a point", () => {
    const curve = smoothCurve("k", X, Y);
    const step = 1e-5;
    for (const at of [0.4, 1.7, 3.2, 5.5, 8.1]) {
      for (const order of [1, 2, 3]) {
        const difference =
          (curveValue(curve, order - 1, at + step) - curveValue(curve, order - 1, at - step)) / (2 * step);
        expect(curveValue(curve, order, at)).toBeCloseTo(difference, 4);
      }
    }
    for (const knot of X.slice(1, -1)) {
      expect(curveValue(curve, 1, knot - 1e-9)).toBeCloseTo(curveValue(curve, 1, knot), 6);
    }
  });

  it("is differentiated by the chain rule, and equal data is one expression", () => {
    const pool = new Pool();
    const x = pool.symbol("state", "tank.q");
    const curve = smoothCurve("level", X, Y);
    const call = pool.curve(curve, pool.product(pool.number(2), x));
    expect(pool.curve(smoothCurve("level", [...X], [...Y]), pool.sum(x, x))).toBe(call);
    expect(pool.curve(linearCurve("level", X, Y), pool.sum(x, x))).not.toBe(call);
    const slope = derivative(pool, call, x);
    expect(expressionText(slope)).toBe("2*level'(2*tank.q)");
    expect(expressionLatex(slope)).toContain("{\\mathrm{level}}'\\left(");
    expect(evaluate(slope, () => 1.1)).toBeCloseTo(2 * curveValue(curve, 1, 2.2), 14);
    expect(derivative(pool, derivative(pool, pool.curve(linearCurve("l", X, Y), x), x), x)).toBe(pool.zero);
  });

  it("is not turned round", () => {
    const pool = new Pool();
    const [e, f] = [pool.symbol("effort", "a"), pool.symbol("flow", "a")];
    expect(turnRound(pool, pool.curve(linearCurve("k", X, Y), f), f, e)).toBeNull();
  });
});
