import { spawnSync } from "node:child_process";
import { describe, expect, it } from "vitest";
import { Analysis } from "../../grammar/analysis/analyse.ts";
import type { Rows } from "../../grammar/analysis/dense.ts";
import { modesOf, movingPart } from "../../grammar/analysis/modes.ts";
import { derive } from "../equations/read.ts";

/**
 * Eigenvalues against LAPACK's dgeev (through NumPy), with the condition number 1/|wᴴ·v| of each: what rounding in A
 * alone may do to it (Golub and Van Loan, Matrix Computations, 7.2.2; recalled).
 */
const REFERENCE = `
import json, sys, numpy
from scipy.linalg import eig, matrix_balance
a = numpy.array(json.load(sys.stdin))
b, _ = matrix_balance(a)
w, l, r = eig(b, left=True, right=True)
condition = 1/numpy.abs(numpy.sum(l.conj()*r, axis=0))
json.dump({"re": list(w.real), "im": list(w.imag), "condition": list(condition), "size": numpy.linalg.norm(b, 2)}, sys.stdout)
`;

interface Reference {
  readonly re: number[];
  readonly im: number[];
  readonly condition: number[];
  readonly size: number;
}

function reference(A: Rows): Reference {
  const done = spawnSync("/usr/bin/python3", ["-c", REFERENCE], {
    input: JSON.stringify(A),
    encoding: "utf8",
    maxBuffer: 1 << 28,
  });
  if (done.status !== 0) throw new Error(done.stderr);
  return JSON.parse(done.stdout);
}

/** Cells of mass, spring and damper in a row, no two alike, the first held by a wall. */
function chain(cells: number): string {
  const lines: string[] = ["input F : N", "Se push e = F", "push -> at[1]"];
  lines.push("Sf wall f = 0", "0 line[0]", "wall -> line[0]");
  for (let i = 1; i <= cells; i += 1) {
    const vary = 1 + 0.3 * Math.sin(i * i);
    lines.push(
      `1 at[${i}] : translation`,
      `I m[${i}] f = p/(${(2 * vary).toFixed(6)} kg)`,
      `at[${i}] -> m[${i}]`,
      `0 line[${i}]`,
      `1 stretch[${i}]`,
      `C k[${i}] e = ${(3e4 * vary).toFixed(3)} N/m * q`,
      `R d[${i}] e = ${(20 / vary).toFixed(6)} N*s/m * f`,
      `line[${i}] -> stretch[${i}] -> k[${i}], d[${i}]`,
      i === 1 ? `line[0] -> line[1] -> at[1]` : `at[${i - 1}] -> line[${i}] -> at[${i}]`,
    );
  }
  return lines.join("\n");
}

describe("eigenvalues against LAPACK", () => {
  it.each([4, 40, 400])("%d states: to what the conditioning allows", { timeout: 120_000 }, (states) => {
    const found = new Analysis(derive(chain(states / 2))).linear;
    if (found.kind === "none") throw new Error(found.reason);
    const A = movingPart(found);
    expect(A).toHaveLength(states);
    const { eigenvalues, stable } = modesOf(found);
    expect(stable).toBe(true);
    const { re, im, condition, size } = reference(A);
    const worst = re.map((real, k) => {
      const near = Math.min(...eigenvalues.map((ours) => Math.hypot(ours.re - real, ours.im - im[k])));
      return near / (condition[k] * size * Number.EPSILON);
    });
    // Both sides round: backward errors of a modest multiple of eps·‖A‖ each.
    expect(Math.max(...worst)).toBeLessThan(4 * Math.sqrt(states) + 8);
  });
});
