import { inCoEnergy } from "../../grammar/equations/coenergy.ts";
import type { StateModel } from "../../grammar/equations/model.ts";
import { checkFile, type SystemReport } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { expressionText } from "../../grammar/writing/text.ts";

/** One system from its statements, checked from end to end. */
export function check(statements: string, tail = ""): SystemReport {
  const text = `notation 1\nsystem Tested {\n${statements}\n}\n${tail}`;
  return checkFile(fileSet([["tested.wright", text]]), "tested.wright").systems[0];
}

export function derive(statements: string): StateModel {
  const { model, findings } = check(statements);
  if (model === null) throw new Error(findings.map(({ name, message }) => `${name}: ${message}`).join("\n"));
  return model;
}

/** Right sides by state, as text. */
export function rates(model: StateModel): Record<string, string> {
  return Object.fromEntries(model.equations.map(({ state, rate }) => [state, expressionText(rate)]));
}

export function coEnergyRates(model: StateModel): Record<string, string> {
  return rates(inCoEnergy(model));
}

export function outputs(model: StateModel): Record<string, string> {
  return Object.fromEntries(model.outputs.map(({ name, value }) => [name, expressionText(value)]));
}

/** Names of errors and warnings. */
export function troubles(report: SystemReport): string[] {
  return report.findings.filter(({ severity }) => severity !== "note").map(({ name }) => name);
}
