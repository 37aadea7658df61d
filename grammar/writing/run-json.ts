import type { TrialReport } from "../expectations/judge-trial.ts";
import { type CheckedFile, findingDocument, quantity } from "./json.ts";
import type { OneRun, RunDocument } from "./run-schemas.ts";

/** What `run --format json` says: of one trial, or of all, the first in front. */
export function runDocument({ report, files, shown }: CheckedFile): RunDocument {
  const [first, ...others] = report.trials.map(oneRun);
  return {
    schema: "bondwright/run@1",
    ...first,
    others,
    findings: report.findings.map((found) => findingDocument(found, files, shown)),
  };
}

function oneRun({ trial, signals, result, parameters, runs, expectations }: TrialReport): OneRun {
  const energy = result?.energy ?? null;
  return {
    trial: trial.name,
    system: trial.system,
    status: result?.status ?? "refused",
    reason: result?.reason ?? null,
    parameters: Object.fromEntries([...parameters].map(([name, value]) => [name, quantity(value)])),
    runs,
    time: (result?.times ?? []).map(quantity),
    signals: Object.fromEntries(
      signals.map(({ name }, i) => [name, (result?.samples[i] ?? []).map(quantity)]),
    ),
    energy:
      energy === null
        ? null
        : {
            supplied: quantity(energy.supplied),
            dissipated: quantity(energy.dissipated),
            stored: quantity(energy.stored),
            closure: quantity(energy.closure),
            elements: energy.elements.map(({ name, kind, energy: moved }) => ({
              name,
              kind,
              energy: quantity(moved),
            })),
          },
    expectations: expectations.map(({ text, passed, measured, wanted, margin, message }) => ({
      text,
      passed,
      measured,
      wanted,
      margin: margin ?? null,
      message,
    })),
    steps: result?.counters.steps ?? 0,
    method: methodText(result),
  };
}

const METHODS = { "dormand-prince": "Dormand-Prince 5(4)", rodas: "RODAS 4(3)" } as const;

/** Which methods made the steps of a run: `Dormand-Prince 5(4)`, or how many each made. */
export function methodText(result: TrialReport["result"]): string | null {
  if (result === null) return null;
  const { by } = result.counters;
  const used = (["dormand-prince", "rodas"] as const).filter((name) => by[name] > 0);
  if (used.length < 2) return METHODS[used[0] ?? "dormand-prince"];
  return used.map((name) => `${by[name]} by ${METHODS[name]}`).join(", ");
}
