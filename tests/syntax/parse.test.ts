import { describe, expect, test } from "vitest";
import type { Range } from "../../grammar/source/span.ts";
import { SourceText } from "../../grammar/source/text.ts";
import { NotationParser } from "../../grammar/syntax/grammar.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import type { Expression, Statement } from "../../grammar/syntax/tree.ts";
import { knownTexts } from "./random-texts.ts";

function treeOf(text: string) {
  return parse(new SourceText("case.wright", text)).tree;
}

function statements(lines: string): readonly Statement[] {
  const [system] = treeOf(`notation 1\nsystem S {\n${lines}\n}\n`).items;
  if (system.kind !== "system") throw new Error(`${lines} is read as ${system.kind}`);
  return system.body;
}

function expression(text: string): string {
  const [one] = statements(`let x = ${text}`);
  if (one.kind !== "let") throw new Error(`${text} can't be read`);
  return bracketed(one.value);
}

/** With a pair of brackets round every operation, so that its shape can be seen. */
function bracketed(one: Expression): string {
  switch (one.kind) {
    case "number":
      return one.text;
    case "quantity":
      return `${one.text}[${one.unit.text}]`;
    case "string":
      return `"${one.value}"`;
    case "reference":
      return one.path
        .map(({ name, indices }) => name.text + indices.map((i) => `[${bracketed(i)}]`).join(""))
        .join(".");
    case "unary":
      return `(${one.operator} ${bracketed(one.operand)})`;
    case "binary":
      return `(${bracketed(one.left)} ${one.operator} ${bracketed(one.right)})`;
    case "call":
      return `${one.name.text}(${one.arguments.map(bracketed).join(", ")})`;
    case "where":
      return `(${bracketed(one.then)} where ${bracketed(one.condition)} else ${bracketed(one.otherwise)})`;
    case "group":
      return bracketed(one.inner);
    case "missing":
      return "?";
  }
}

describe("the shape of an expression", () => {
  test.each([
    ["a + b*c - d/g", "((a + (b * c)) - (d / g))"],
    ["a/b/c", "((a / b) / c)"],
    ["a - b - c", "((a - b) - c)"],
    ["-x^2", "(- (x ^ 2))"],
    ["2^-x^2", "(2 ^ (- (x ^ 2)))"],
    ["a^b^c", "(a ^ (b ^ c))"],
    ["-a*b", "((- a) * b)"],
    ["a*-b + c", "((a * (- b)) + c)"],
    ["not a < b and c or d", "(((not (a < b)) and c) or d)"],
    ["a or b and c", "(a or (b and c))"],
    ["a + b where c >= d else g where h else k", "((a + b) where (c >= d) else (g where h else k))"],
    ["a where b = c else d", "(a where (b = c) else d)"],
    ["x + 3 N*m/rad*2 m", "(x + (3[N*m/rad] * 2[m]))"],
    ["2 m * x", "(2[m] * x)"],
    ["3 1/s + 5 % - 1", "((3[1/s] + 5[%]) - 1)"],
    ["2 m/s^-2", "2[m/s^-2]"],
    ["cell[i-1].spring.q*n", "(cell[(i - 1)].spring.q * n)"],
    ["atan2(a, -b)", "atan2(a, (- b))"],
    ["time_when(x = 2 m)", "time_when((x = 2[m]))"],
  ])("%s", (text, shape) => {
    expect(expression(text)).toBe(shape);
  });
});

test("a comparison in a requirement is the requirement; other conditions stay facts", () => {
  const conditions = statements("expect a < b + 1\nexpect a < b and c < d\nexpect mode(3 Hz) within 5 %").map(
    (one) => (one.kind === "expect" ? one.condition.kind : one.kind),
  );
  expect(conditions).toEqual(["comparison", "fact", "fact"]);
});

test("descriptions stand directly above, remarks behind, comments nowhere", () => {
  const body = statements("## One\n##  two.\n1 shaft -- turns\n\n## Lost.\n\n1 axle # not a remark");
  expect(body.map((one) => ("description" in one ? [one.description, one.remark] : one))).toEqual([
    ["One\n two.", "turns"],
    [null, null],
  ]);
});

test("an arrow keeps the end at which its stroke is demanded", () => {
  const [wiring] = statements("a, b ->| c |-> d -> g");
  expect(wiring.kind === "wiring" && wiring.arrows.map(({ stroke }) => stroke)).toEqual(["to", "from", null]);
});

test("the rest is read round a slip, and what it would have declared is known", () => {
  const body = statements("param k = 3 +* 4\nR bearing : e = \n1 shaft");
  expect(body.map((one) => (one.kind === "unreadable" ? one.declares?.name.text : one.kind))).toEqual([
    "k",
    "bearing",
    "junction",
  ]);
});

test("every range lies within its parent's", () => {
  const astray: string[] = [];
  const visit = (node: unknown, within: Range, path: string): void => {
    if (typeof node !== "object" || node === null) return;
    const range = "range" in node ? (node.range as Range) : within;
    if (!(within.start <= range.start && range.start <= range.end && range.end <= within.end))
      astray.push(path);
    for (const [key, value] of Object.entries(node))
      if (key !== "range") visit(value, range, `${path}.${key}`);
  };
  for (const text of knownTexts())
    visit(treeOf(text).items, { start: 0, end: text.length }, text.slice(0, 60));
  expect(astray).toEqual([]);
});

test("the grammar has no ambiguity that Chevrotain can find", () => {
  expect(() => new NotationParser(true)).not.toThrow();
});
