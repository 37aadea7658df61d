import { readFileSync } from "node:fs";
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { check, coEnergyRates, outputs, rates } from "./read.ts";

/** The statements of every system of the models beside these tests. */
const systems = ["tied-stores", "loops-and-fields"].flatMap((name) => {
  const text = readFileSync(`tests/equations/models/${name}.wright`, "utf8");
  return [...text.matchAll(/^system (\w+) \{\n([\s\S]*?)^\}/gm)].map(
    ([, system, body]) => [system, body.trimEnd().split("\n")] as const,
  );
});

describe("equal models give equal text whatever the order of their lines", () => {
  test.each(systems)("%s", (_, lines) => {
    const said = (statements: readonly string[]) => {
      const { model, findings } = check(statements.join("\n"));
      if (model === null) throw new Error(findings.map(({ message }) => message).join("\n"));
      return {
        rates: rates(model),
        coEnergy: coEnergyRates(model),
        outputs: outputs(model),
        dependent: model.dependent.map(({ name, of }) => [name, of]),
        loops: model.loops.map(({ variables }) => variables.map(({ name }) => name)),
        findings: findings.map(({ name, message }) => `${name}: ${message}`).sort(),
      };
    };
    const wanted = said(lines);
    const shuffled = fc.shuffledSubarray([...lines], { minLength: lines.length });
    fc.assert(
      fc.property(shuffled, (statements) => {
        expect(said(statements)).toEqual(wanted);
      }),
      { numRuns: 25 },
    );
  });
});
