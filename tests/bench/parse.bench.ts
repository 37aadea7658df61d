import { bench, describe } from "vitest";
import { SourceText } from "../../grammar/source/text.ts";
import { format } from "../../grammar/syntax/format.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import { readByHand } from "./read-by-hand.ts";

/** A thousand lines of a model as engineers write them, each with a name, numbers, a unit and a remark. */
const TEXT = thousandLines();

describe("a thousand lines to a tree", () => {
  const source = new SourceText("model.wright", TEXT);
  const { tree, findings } = parse(source);
  if (findings.length > 0) throw new Error(findings[0].message);
  if (readByHand(TEXT).length < 900) throw new Error("The reference reads another text.");

  bench("the parser", () => {
    parse(source);
  });
  bench("a scanner and descent written by hand for these lines alone", () => {
    readByHand(TEXT);
  });
  bench("the formatter", () => {
    format(tree, source);
  });
});

function thousandLines(): string {
  const lines = ["notation 1", "system Long {"];
  for (let i = 0; i < 249; i += 1) {
    lines.push(
      `  param k_${i} = ${i + 1}.5e3 N*m/rad -- stiffness ${i}`,
      `  let s_${i} = k_${i}*(shaft_${i}.f + 2.4 kN*s/m)^2/-x - sin(y)`,
      `  R bearing_${i} e = k_${i}*f + 3*abs(f)*f`,
      `  shaft_${i} -> gear_${i} -> drum_${i} -> hook_${i}`,
    );
  }
  return [...lines, "}", ""].join("\n");
}
