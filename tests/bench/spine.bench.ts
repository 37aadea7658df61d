import { bench, describe } from "vitest";
import { checkFile } from "../../grammar/pipeline.ts";
import { SourceText } from "../../grammar/source/text.ts";

/** Text to equations, parse included, for rows of cells: a mass each, tied to the next by a spring with damping. */
describe("a row of mass–spring–damper cells", () => {
  for (const cells of [10, 100, 1000]) {
    const text = rowOfCells(cells);
    bench(`${cells} cells, ${2 * cells} states`, () => {
      const source = new SourceText("row.wright", text);
      const report = checkFile(new Map([["row.wright", source]]), "row.wright");
      if (report.systems[0]?.model?.states.length !== 2 * cells) throw new Error("The row has other states.");
    });
  }
});

function rowOfCells(cells: number): string {
  const lines = [
    "notation 1",
    "system Row {",
    "  param m = 2 kg",
    "  param k = 3 N/m",
    "  param d = 0.5 N*s/m",
  ];
  lines.push("  input F : N", "  Se push e = F");
  for (let i = 1; i <= cells; i += 1) {
    lines.push(
      `  1 v${i} : translation`,
      `  I m${i} f = p/m`,
      `  0 l${i}`,
      `  1 s${i}`,
      `  C k${i} e = k*q`,
      `  R d${i} e = d*f`,
    );
    lines.push(`  v${i} -> m${i}`, `  v${i} -> l${i} -> s${i} -> k${i}, d${i}`);
    lines.push(`  l${i} -> ${i === cells ? "wall" : `v${i + 1}`}`);
  }
  return [...lines, "  push -> v1", "  Sf wall f = 0", "}", ""].join("\n");
}
