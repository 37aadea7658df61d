import { checkFile } from "../../grammar/pipeline.ts";
import { SourceText } from "../../grammar/source/text.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import { expressionText } from "../../grammar/writing/text.ts";

/** What is measured, bundled as the command line is; `run.mjs` does the measuring. */
export { familyText } from "./families.ts";
export { readByHand } from "./read-by-hand.ts";

/** Parses a text; gives the number of characters in its statements, so that nothing is left out. */
export function parseText(text: string): number {
  const { tree, findings } = parse(new SourceText("model.wright", text));
  if (findings.length > 0) throw new Error(findings[0].message);
  return tree.range.end;
}

/** Text to equations as text, all stages; gives the number of states. */
export function textToEquations(text: string): number {
  const path = "model.wright";
  const report = checkFile(new Map([[path, new SourceText(path, text)]]), path);
  const model = report.systems[0].model;
  if (model === null) throw new Error(report.findings[0].message);
  const { mass = [], right = [] } = model.implicit ?? {};
  for (const { rate } of model.equations) expressionText(rate);
  for (const expr of [...mass.flat(), ...right]) expressionText(expr);
  return model.states.length;
}

/** A thousand lines of a model as engineers write them, each with a name, numbers, a unit and a remark. */
export function thousandLines(): string {
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
