import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { SourceText } from "../../grammar/source/text.ts";
import { broken, caseNames, caseText, causalityOf, drawn } from "./causal-case.ts";

/** `#: word a b` of a case; null where the case does not speak of it. */
function wanted(text: string, word: string): string[] | null {
  const lines = [...text.matchAll(/^#: (.*)$/gm)].map(([, line]) => line.trim().split(/ +/));
  const own = lines.filter(([first]) => (word === "" ? /->/.test(first) : first === word));
  if (own.length === 0) return null;
  return own.flatMap((items) => (word === "" ? items : items.slice(1))).sort();
}

describe.each(caseNames())("%s", (name) => {
  const text = caseText(name);
  const { causal, findings } = causalityOf(text);
  const strokes = wanted(text, "");
  const lines = text.split("\n");

  it.runIf(strokes !== null)("has the strokes worked by hand", () => {
    expect(drawn(causal).sort()).toEqual(strokes);
  });

  it("makes the findings that stand under its lines, and no others", () => {
    const source = new SourceText("case.wright", text);
    const found = findings.map(({ name: what, message, span, facts }) => ({
      line: source.position(span.start).line,
      text: `${what} ${message.replaceAll("`", "")}`,
      facts: facts.map((fact) => fact.message.replaceAll("`", "")),
    }));
    const expected = lines.flatMap((line, i) => {
      const mark = /^\s*#! (.*)$/.exec(line);
      if (mark === null) return [];
      const facts: string[] = [];
      for (let at = i + 1; /^\s*#- /.test(lines[at]); at += 1) facts.push(lines[at].replace(/^\s*#- /, ""));
      return [
        {
          line: i,
          text: expect.stringContaining(mark[1]),
          facts: facts.length === 0 ? expect.anything() : facts,
        },
      ];
    });
    for (const { facts } of expected)
      if (Array.isArray(facts)) expect(found[0].facts).toEqual(expect.arrayContaining(facts));
    expect(found).toEqual(expected.map((one) => ({ ...one, facts: expect.anything() })));
  });

  it("keeps the laws of junctions and two-ports", () => {
    if (findings.length === 0) expect(broken(causal)).toEqual([]);
  });

  it("chooses and differentiates what the case says", () => {
    const chosen = causal.chosen.map((bond) => causal.graph.bonds[bond].id);
    const derivative = causal.stores.filter(({ integral }) => !integral).map((store) => store.name);
    const said = wanted(text, "chosen");
    if (said !== null) expect(chosen.sort()).toEqual(said);
    if (findings.length === 0) expect(derivative.sort()).toEqual(wanted(text, "derivative") ?? []);
  });

  it("is the same whatever the order of its lines", () => {
    const head = lines.findIndex((line) => line.startsWith("system")) + 1;
    const tail = lines.lastIndexOf("}");
    const body = lines.slice(head, tail).filter((line) => line.trim() !== "" && !line.trim().startsWith("#"));
    const base = drawn(causal).sort();
    const said = findings.map(({ message }) => message);
    fc.assert(
      fc.property(fc.shuffledSubarray(body, { minLength: body.length }), (shuffled) => {
        const other = causalityOf([...lines.slice(0, head), ...shuffled, ...lines.slice(tail)].join("\n"));
        expect(drawn(other.causal).sort()).toEqual(base);
        expect(other.findings.map(({ message }) => message)).toEqual(said);
      }),
      { numRuns: 15 },
    );
  });
});
