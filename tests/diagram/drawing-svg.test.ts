import { describe, expect, it } from "vitest";
import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";
import { drawingSvg, PRINTED_DARK } from "../../grammar/writing/drawing-svg.ts";
import { drawn } from "./drawn.ts";
import { HOIST, sketched } from "./sketched.ts";

const HOSTILE = [
  `</text><script>alert(1)</script>`,
  `" onload="alert(1)`,
  `]]>&lt;!--`,
  `__proto__`,
  `constructor`,
  "\u0000\u0008\uD800 broken",
  "ω_m µ 漢字 👩‍🚒",
  "'><image href=x onerror=alert(1)>",
];

describe("the SVG file", () => {
  it("is well formed and holds the drawing alone", async () => {
    const svg = drawingSvg(await drawn(sketched(HOIST)));
    expect(wellFormed(svg)).toEqual(new Set(["svg", "title", "rect", "g", "path", "text", "tspan"]));
    expect(svg.match(/<g class="node">/g)).toHaveLength(17);
    expect(svg.match(/<g class="bond">/g)).toHaveLength(16);
  });

  it("takes hostile names as text", async () => {
    const svg = drawingSvg(await drawn(hostile()), PRINTED_DARK);
    const names = wellFormed(svg);
    expect(
      [...names].filter((name) => !["svg", "title", "rect", "g", "path", "text", "tspan"].includes(name)),
    ).toEqual([]);
    expect(svg).not.toMatch(/<[^>]*\son\w+=/);
    expect(svg).toContain("&lt;script&gt;alert(1)&lt;/script&gt;");
    expect(svg).toContain("ω_m µ 漢字 👩‍🚒");
    expect(svg).toContain("__proto__");
  });
});

function hostile(): DiagramModel {
  const span = { file: "x", start: 0, end: 1 };
  const hub = { id: "1", kind: "1", symbol: "1", domain: null, description: HOSTILE[0] } as const;
  const mark = { dependent: false, conflict: false, span };
  return {
    system: HOSTILE[0],
    nodes: [
      { ...hub, ...mark },
      ...HOSTILE.map((id) => ({ ...hub, ...mark, id, kind: "R" as const, symbol: "R" })),
    ],
    bonds: HOSTILE.map((id) => ({
      id: `1->${id}`,
      from: "1",
      to: id,
      stroke: "to" as const,
      demanded: null,
      conflict: false,
      domain: id,
      effortUnit: "V",
      flowUnit: "A",
      span,
    })),
  };
}

/** The element names of an XML text without prolog, comments, CDATA; throws where it is not well formed (XML 1.0, 2.1). */
function wellFormed(xml: string): Set<string> {
  const names = new Set<string>();
  const open: string[] = [];
  let rest = xml.trim();
  const tag = /^<(\/?)([a-z]+)((?:\s+[\w:-]+="[^"<&]*(?:&(?:amp|lt|gt|quot|#39);[^"<&]*)*")*)\s*(\/?)>/;
  while (rest !== "") {
    const text = /^(?:[^<&]|&(?:amp|lt|gt|quot|#39);)+/.exec(rest);
    if (text !== null) {
      if (/[^\t\n\r\u0020-\uD7FF\uE000-\uFFFD\u{10000}-\u{10FFFF}]/u.test(text[0]))
        throw new Error("no XML character");
      rest = rest.slice(text[0].length);
      continue;
    }
    const found = tag.exec(rest);
    if (found === null) throw new Error(`not well formed at ${rest.slice(0, 80)}`);
    const [whole, closing, name, , empty] = found;
    names.add(name);
    if (closing === "/") expect(open.pop()).toBe(name);
    else if (empty !== "/") open.push(name);
    rest = rest.slice(whole.length);
  }
  expect(open).toEqual([]);
  return names;
}
