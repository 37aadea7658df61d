import type { Rows } from "./dense.ts";

/**
 * Scales d (powers of two) that make rows and columns of D⁻¹·A·D alike in size (Parlett and Reinsch 1969; from
 * memory). In SI a hydraulic volume is 1e-13 where a pressure is 1e7: without this the small ones drown.
 */
export function balance(a: Rows): { readonly scaled: number[][]; readonly scale: number[] } {
  const n = a.length;
  const scaled = a.map((row) => [...row]);
  const scale = new Array<number>(n).fill(1);
  for (let sweep = 0, changed = true; changed && sweep < 200; sweep += 1) {
    changed = false;
    for (let i = 0; i < n; i += 1) {
      let [row, column] = [0, 0];
      for (let j = 0; j < n; j += 1) {
        if (j === i) continue;
        row += Math.abs(scaled[i][j]);
        column += Math.abs(scaled[j][i]);
      }
      if (row === 0 || column === 0) continue;
      const factor = 2 ** Math.round(Math.log2(row / column) / 2);
      if (column * factor + row / factor >= 0.95 * (column + row)) continue;
      changed = true;
      scale[i] *= factor;
      for (let j = 0; j < n; j += 1) scaled[i][j] /= factor;
      for (let j = 0; j < n; j += 1) scaled[j][i] *= factor;
    }
  }
  return { scaled, scale };
}
