import { evaluateModel } from "../../grammar/analysis/evaluate-model.ts";
import { type Point, startPoint } from "../../grammar/analysis/point.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { ratesDocument } from "../../grammar/writing/linear-json.ts";
import { ratesText } from "../../grammar/writing/rates-text.ts";
import { oneSystem } from "../one-system.ts";
import { type ColourChoice, paintFor, print, remark } from "../output/print.ts";
import { remarkFindings } from "../output/remark-findings.ts";
import { sectionsText } from "../output/sections.ts";
import { pointFrom } from "../point-file.ts";

export interface RatesArguments {
  readonly format: "text" | "json";
  readonly at?: string;
  readonly system?: string;
  readonly color: ColourChoice;
  readonly stdinName: string;
}

/** Prints all rates, outputs and bond variables of one system at a point. 1 where they have no values. */
export function rates(file: string, options: RatesArguments): number {
  const { from, system } = oneSystem(file, options);
  const model = system?.model ?? null;
  const point = model === null ? null : pointOf(model, options.at);
  const document = ratesDocument(from, system, point);
  if (options.format === "json") print(JSON.stringify(document, null, 2));
  else {
    remarkFindings(from, system, options.color);
    if (system !== null && model !== null && point !== null) {
      const evaluation = evaluateModel(model, point);
      if (evaluation.kind === "none") remark(evaluation.reason);
      else print(sectionsText(system, ratesText(model, evaluation), paintFor(options.color)));
    }
  }
  return model === null || Object.keys(document.variables).length === 0 ? 1 : 0;
}

function pointOf(model: StateModel, file: string | undefined): Point {
  return file === undefined ? startPoint(model) : pointFrom(file, model);
}
