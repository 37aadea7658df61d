import { readFileSync } from "node:fs";
import { expect, it } from "vitest";
import { behaviourView } from "../../app/editor/build-behaviour.ts";
import { checkFile } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";

function viewOf(text: string) {
  const { model } = checkFile(fileSet([["m.wright", text]]), "m.wright").systems[0];
  if (model === null) throw new Error("no model");
  return behaviourView(model);
}

const demo = (file: string) => readFileSync(new URL(`../../models-demo/${file}`, import.meta.url), "utf8");

it("shows modes, gains in the units of the text, and the equilibrium", () => {
  const view = viewOf(demo("slewing-drive/slewing.wright"));
  expect(view).toMatchObject({ note: null, refusal: null, stable: true });
  expect(view.modes).toMatchObject([
    {
      number: 1,
      eigenvalue: "−10.618 ± 46.491j",
      frequency: "7.5899",
      damping: "0.2227",
      states: "arm.p 50 %, hose.q 50 %",
    },
  ]);
  expect(
    view.channels.find(({ input, output }) => input === "valve" && output === "slew_rate"),
  ).toMatchObject({
    gain: "33.0277 deg/s",
  });
  expect(view.states.map(({ name }) => name)).toEqual(["arm.p", "hose.q", "slewing"]);
});

it("draws a response that is finite, rises in frequency, and begins at the gain at rest", () => {
  const { channels } = viewOf(demo("slewing-drive/slewing.wright"));
  for (const { response } of channels) {
    expect(response.length).toBeGreaterThan(50);
    response.forEach(({ frequency, magnitude, phase }, i) => {
      expect([frequency, magnitude, phase].every(Number.isFinite)).toBe(true);
      if (i > 0) expect(frequency).toBeGreaterThan(response[i - 1].frequency);
    });
  }
  const valve = channels.find(({ input, output }) => input === "valve" && output === "slew_rate");
  expect(valve?.response[0].magnitude).toBeCloseTo(33.03, 1);
});

it("says why there is no equilibrium, and refuses what would hold typing up", () => {
  const mass =
    "notation 1\nsystem M {\ninput F : N = 3 N\nSe push e = F\n1 m : translation\nI b f = p/(2 kg)\npush -> m -> b\n}\n";
  expect(viewOf(mass).note).toMatch(/rate of `b\.p`/);
  const many = `notation 1\nsystem M {\nrepeat i = 1 .. 70 {\n1 m[i] : translation\nI b[i] f = p/(2 kg)\nC c[i] e = 3 N/m * q\nm[i] -> b[i], c[i]\n}\n}\n`;
  expect(viewOf(many).refusal).toMatch(/140 states are too many/);
});
