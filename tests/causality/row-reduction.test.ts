import { expect, it } from "vitest";
import { leftNullSpace } from "../../grammar/causality/row-reduction.ts";

it("finds nothing where the rank is full, and all of it where it is not", () => {
  expect(
    leftNullSpace([
      [1, -2],
      [3, 1],
    ]),
  ).toEqual([]);
  expect(
    leftNullSpace([
      [1, -1],
      [-1, 1],
    ]),
  ).toEqual([[1, 1]]);
  const matrix = [
    [1, 2, 3],
    [2, 4, 6],
    [1, 2, 3],
  ];
  const vectors = leftNullSpace(matrix);
  expect(vectors).toHaveLength(2);
  for (const y of vectors) {
    for (const column of [0, 1, 2])
      expect(y.reduce((sum, weight, i) => sum + weight * matrix[i][column], 0)).toBeCloseTo(0, 12);
  }
});
