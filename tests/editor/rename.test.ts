import { expect, test } from "vitest";
import { namesAt } from "../../app/editor/names/rename.ts";
import { fileSet } from "../../grammar/source/text.ts";

const ROPE = `notation 1
system Rope {
  param k = 3 N/m
  port top takes translation
  1 mid
  C spring e = k*q
  top -> mid -> spring
  output pull = mid.f
}
`;
const HOIST = `notation 1
use "rope.wright"
const limit = 3
system Hoist {
  param m = 2 kg
  param R_a = 3 N*s/m
  param n = 3
  Se m e = m*g0
  1 boat : translation
  R R_a
  sub rope = Rope(k = m*2 N/m/kg)
  repeat i = 1 .. 3 {
    1 cell[i]
    let x[i] = i*n*limit
    boat -> cell[i]
  }
  m -> boat -> R_a
  boat -> rope.top
  output y = boat.f + m*rope.pull*cell[2].f
}
trial drop of Hoist {
  set m = 4 kg
  run for 2 s
  expect max(boat.f) < 3 m/s
}
`;

/** Asks at the first place of `mark`, \`|\` before the name, and writes the answer's places as they would read. */
function renamed(file: string, mark: string, wanted: string, hoist = HOIST): string {
  const files = fileSet([
    ["hoist.wright", hoist],
    ["rope.wright", ROPE],
  ]);
  const text = files.get(file)?.text ?? "";
  const offset = text.indexOf(mark.replace("|", "")) + mark.indexOf("|");
  const answer = namesAt(files, new Map(), { path: file, text, offset, renaming: true, wanted });
  if ("refusal" in answer) return answer.refusal;
  const lines = text.split("\n");
  for (const { line, column, endColumn } of [...answer.places].sort((a, b) => b.column - a.column))
    lines[line - 1] = lines[line - 1].slice(0, column - 1) + wanted + lines[line - 1].slice(endColumn - 1);
  return lines.join("\n");
}

test("a value is renamed where it is declared, used, overridden with and set; a node of its name is not", () => {
  const text = renamed("hoist.wright", "param |m", "mass");
  expect(text).toContain("param mass = 2 kg");
  expect(text).toContain("Se m e = mass*g0");
  expect(text).toContain("Rope(k = mass*2 N/m/kg)");
  expect(text).toContain("  m -> boat");
  expect(text).toContain("boat.f + mass*rope.pull");
  expect(text).toContain("set mass = 4 kg");
});

test("a node is renamed in wiring, in laws and in trials, and a value of its name is not", () => {
  const text = renamed("hoist.wright", "m -> |boat", "hull");
  expect(text).toContain("1 hull : translation");
  expect(text).toContain("hull -> cell[i]");
  expect(text).toContain("y = hull.f + m");
  expect(text).toContain("max(hull.f)");
  expect(text).not.toContain("boat");
  expect(renamed("hoist.wright", "Se |m", "weight")).toContain("Se weight e = m*g0");
});

test("an element that takes the value of its name is renamed with it", () => {
  const text = renamed("hoist.wright", "param |R_a", "R_w");
  expect(text).toContain("param R_w = 3");
  expect(text).toContain("  R R_w\n");
  expect(text).toContain("boat -> R_w");
});

test("indexed names are renamed by their base, and an index is no value", () => {
  const text = renamed("hoist.wright", "1 |cell[i]", "part");
  expect(text).toContain("1 part[i]");
  expect(text).toContain("part[2].f");
  expect(renamed("hoist.wright", "= |i*n", "j")).toMatch(/^Only nodes and values/);
});

test("what reaches into another file, or would mean something else, is refused with a sentence", () => {
  expect(renamed("rope.wright", "param |k", "stiffness")).toMatch(/used in hoist.wright too \(line 11\)/);
  expect(renamed("hoist.wright", "Rope(|k", "stiffness")).toMatch(/declared in rope.wright: rename it there/);
  expect(renamed("hoist.wright", "rope.|pull", "force")).toMatch(/declared in rope.wright/);
  expect(renamed("hoist.wright", "n*|limit", "bound")).toMatch(/not declared in Hoist/);
  expect(renamed("rope.wright", "1 |mid", "middle")).toContain("pull = middle.f");
  expect(renamed("hoist.wright", "param |m", "n")).toMatch(/speaks of a `n` already/);
  expect(renamed("hoist.wright", "param |m", "i")).toMatch(/hide it/);
  expect(renamed("hoist.wright", "param |m", "out")).toMatch(/word of the notation/);
  expect(renamed("hoist.wright", "param |m", "2m")).toMatch(/A name is/);
  expect(renamed("hoist.wright", "param |m", "mass", HOIST.replace("run for", "run foo"))).toMatch(/syntax/);
});
