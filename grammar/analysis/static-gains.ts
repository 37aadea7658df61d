import { balance } from "./balance.ts";
import { channelOf, gainAtRest } from "./channel.ts";
import { type Rows, solve } from "./dense.ts";
import type { LinearModel } from "./linearise.ts";

/** G(0) = D - C·A⁻¹·B, outputs by inputs, with signs; null where an output grows without end. */
export function staticGains(linear: LinearModel): (number | null)[][] {
  const { inputs, outputs, C, D } = linear;
  const moved = restingStates(linear);
  return outputs.map((_, k) =>
    inputs.map((_, j) =>
      moved === null
        ? gainAtRest(channelOf(linear, j, k))
        : C[k].reduce((sum, c, i) => sum - c * moved[i][j], D[k][j]),
    ),
  );
}

/** A⁻¹·B; null where A is singular, or as good as that. */
function restingStates({ A, B }: LinearModel): Rows | null {
  const { scaled, scale } = balance(A);
  const solved = solve(
    scaled,
    B.map((row, i) => row.map((value) => value / scale[i])),
  );
  if (solved === null || solved.pivots < 1e-13) return null;
  return solved.x.map((row, i) => row.map((value) => value * scale[i]));
}
