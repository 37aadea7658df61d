import { expect, test } from "vitest";
import { answerTo } from "../../app/editor/build-audit.ts";
import { viewOf } from "../../app/editor/build-view.ts";
import { lightOfLine, litLines, shares } from "../../app/editor/light.ts";
import { suggestionsAt } from "../../app/editor/notation/completion.ts";
import type { Variables } from "../../app/editor/view-model.ts";
import { checkFile, type TreeCache } from "../../grammar/pipeline.ts";
import { fileSet } from "../../grammar/source/text.ts";

const CART = `notation 1
use "spring.wright"

## A cart on a spring.
system Cart {
  param m = 2 kg      -- mass
  param d = 3 N*s/m   -- damping
  input F : N = 0 N   -- push

  Se push  e = F
  1  body  : translation
  I  mass  f = p/m
  R  drag  e = d*f
  sub s = Spring(k = 8 N/m)

  push -> body -> mass, drag
  body -> s.end

  output speed = body.f  -- forward
  expect order = 2
}
`;
const SPRING = `notation 1

## A spring.
system Spring {
  param k = 1 N/m  -- stiffness
  port end takes translation
  C coil  e = k*q
  end -> coil
}
`;

function viewed(text: string, variables: Variables = "energy") {
  const files = fileSet([
    ["cart.wright", text],
    ["spring.wright", SPRING],
  ]);
  const trees: TreeCache = new Map();
  return viewOf(checkFile(files, "cart.wright", { cache: trees }), files, trees, { system: null, variables });
}

const lineOf = (mark: string) => CART.split("\n").findIndex((line) => line.includes(mark)) + 1;

test("the view crosses to the page as plain data, with the equations as text and typeset", () => {
  const view = structuredClone(viewed(CART));
  const equations = view.system?.model?.equations ?? [];
  expect(equations.map(({ left, text }) => `${left.text} = ${text}`)).toEqual([
    "d mass.p/dt = F - d*mass.p/m - s.k*s.coil.q",
    "d s.coil.q/dt = mass.p/m",
  ]);
  expect(equations[0].terms.map(({ sign, formula }) => `${sign}${formula.text}`)).toEqual([
    "+F",
    "-d*mass.p/m",
    "-s.k*s.coil.q",
  ]);
  expect(equations[0].left.html).toContain("katex");
  expect(view.system?.expectations.map(({ verdict }) => verdict)).toEqual(["passed"]);
});

test("in co-energy variables the states are flows and efforts", () => {
  const model = viewed(CART, "co-energy").system?.model;
  expect(model?.states.map(({ name }) => name)).toEqual(["mass.f", "s.coil.e"]);
  expect(model?.equations.map(({ left }) => left.text)).toEqual(["d mass.f/dt", "d s.coil.e/dt"]);
});

test("a line lights the terms that come from it, and a term its lines; a sub lights what came out of it", () => {
  const system = viewed(CART).system;
  const tied = system?.tied ?? [];
  const [push, drag, spring] = system?.model?.equations[0].terms ?? [];
  const lights = (mark: string, term: typeof drag) => shares(lightOfLine(tied, lineOf(mark)), term);

  expect(lights("R  drag", drag)).toBe(true);
  expect(lights("R  drag", spring)).toBe(false);
  expect(lights("param d", drag)).toBe(true);
  expect(lights("sub s", spring)).toBe(true);
  expect(lights("Se push", push)).toBe(true);
  expect(litLines(tied, drag)).toContain(lineOf("R  drag"));
  expect(litLines(tied, drag)).not.toContain(lineOf("Se push"));
});

test("an error leaves a view without equations, and no expectation is taken for met", () => {
  const view = viewed(CART.replace("e = F", "e = G"));
  expect(view.system?.model).toBeNull();
  expect(view.findings.map(({ name, place }) => `${name} ${place.line}`)).toContain(
    `unknown-name ${lineOf("Se push")}`,
  );
  expect(view.system?.expectations.map(({ verdict }) => verdict)).toEqual(["failed"]);
});

test.each([
  ["  ", "GY"],
  ["  param m_2 = 2 ", "kg"],
  ["  1 rod : ", "translation"],
  ["  sub t = ", "Spring"],
  ["  push -> ", "body"],
  ["  R more  e = ", "m"],
  ["  R more  e = body.", "f"],
  ["  R more  e = d*t", "tanh"],
  ["  expect ", "order"],
])("after `%s` one is offered `%s`", (before, label) => {
  const labels = suggestionsAt(before, viewed(CART).outline, "Cart").map((suggestion) => suggestion.label);
  expect(labels).toContain(label);
});

test("questions are answered out of the newest report: steps end in the equation, a bond names what sets it", () => {
  const files = fileSet([
    ["cart.wright", CART],
    ["spring.wright", SPRING],
  ]);
  const report = checkFile(files, "cart.wright");
  const derivation = answerTo({ about: "derivation", system: "Cart", store: "mass.p" }, report, files);
  const steps = derivation !== null && "steps" in derivation ? derivation.steps : [];
  expect(steps[0].equation.text).toBe("mass.p' = body->mass.e");
  expect(steps.at(-1)).toMatchObject({ rule: "collected", nodes: ["mass"] });
  expect(steps.find(({ bonds }) => bonds.includes("push->body"))?.place.line).toBe(lineOf("1  body"));

  const bond = structuredClone(
    answerTo({ about: "bond", system: "Cart", bond: "body->drag" }, report, files),
  );
  expect(bond).toMatchObject({ effortBy: "drag", flowBy: "body", domain: "translation" });
  expect(bond).toMatchObject({ effort: { equation: { text: "body->drag.e = d*mass.p/m" }, unit: "N" } });
  expect(answerTo({ about: "bond", system: "Cart", bond: "gone" }, report, files)).toBeNull();
});
