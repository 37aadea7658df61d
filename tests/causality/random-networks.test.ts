import fc from "fast-check";
import { expect, it } from "vitest";
import type { CausalGraph, Stroke } from "../../grammar/causality/strokes.ts";
import type { FlatNode } from "../../grammar/resolve/graph.ts";
import { broken, causalityOf, drawn } from "./causal-case.ts";

const pair = fc.constantFrom("", "", "TF", "GY");

/**
 * Networks in one domain: a tree of junctions, some joined through a TF or a GY, bonds that close rings, and elements
 * hung on them. Small enough to try all strokes, and about half of them have none that fit.
 */
const network = fc
  .record({
    junctions: fc.array(fc.tuple(fc.constantFrom("0", "1"), fc.nat(), pair), { minLength: 1, maxLength: 9 }),
    rings: fc.array(fc.tuple(fc.nat(), fc.nat(), pair), { maxLength: 5 }),
    elements: fc.array(fc.tuple(fc.constantFrom("R", "R", "R", "C", "I", "C", "I", "Se", "Sf"), fc.nat()), {
      minLength: 1,
      maxLength: 7,
    }),
  })
  .map(({ junctions, rings, elements }) => {
    const nodes: string[] = [];
    const bonds: string[] = [];
    const join = (from: string, to: string, via: string, name: string) => {
      if (via === "") bonds.push(`${from} -> ${to}`);
      else bonds.push(`${from} -> ${name}`, `${name} -> ${to}`);
      if (via === "TF") nodes.push(`TF ${name} out.f = 2*in.f`);
      if (via === "GY") nodes.push(`GY ${name} out.e = 2 ohm * in.f`);
    };
    junctions.forEach(([kind, parent, via], i) => {
      nodes.push(`${kind} j${i} : electrical`);
      if (i > 0) join(`j${parent % i}`, `j${i}`, via, `t${i}`);
    });
    rings.forEach(([a, b, via], i) => {
      const [from, to] = [`j${a % junctions.length}`, `j${b % junctions.length}`];
      if (from !== to || via !== "") join(from, to, via, `r${i}`);
    });
    elements.forEach(([kind, where], i) => {
      const at = `j${where % junctions.length}`;
      nodes.push(`${kind} x${i} ${LAWS[kind]}`);
      bonds.push(kind.startsWith("S") ? `x${i} -> ${at}` : `${at} -> x${i}`);
    });
    return { nodes, bonds };
  });

const LAWS: Readonly<Record<string, string>> = {
  R: "e = 2 ohm * f",
  C: "q = 1 F * e",
  I: "p = 1 H * f",
  Se: "e = 1 V",
  Sf: "f = 1 A",
};

const text = (lines: readonly string[]) => `notation 1\nsystem S {\n${lines.join("\n")}\n}\n`;

const FULL = process.env.FULL === "1";
/** For a busy machine: what is asked is whether, not how fast. */
const PATIENCE = FULL ? 600_000 : 60_000;

it(
  "finds strokes that keep every law wherever there are any, and says what contradicts where there are none",
  () => {
    fc.assert(
      fc.property(network, ({ nodes, bonds }) => {
        const { causal, findings } = causalityOf(text([...nodes, ...bonds]));
        if (findings.length === 0) expect(broken(causal)).toEqual([]);
        else expect(anyStrokesFit(causal)).toBe(false);
      }),
      { numRuns: FULL ? 10_000 : 100 },
    );
  },
  PATIENCE,
);

it(
  "does not look at the order of lines",
  () => {
    // Bonds between the same two ends are told apart by their order, so each pair is joined once here.
    const shuffled = network.chain(({ nodes, bonds }) => {
      const lines = [...nodes, ...new Set(bonds)];
      return fc.tuple(fc.constant(lines), fc.shuffledSubarray(lines, { minLength: lines.length }));
    });
    fc.assert(
      fc.property(shuffled, (orders) => {
        const [one, other] = orders.map((lines) => causalityOf(text(lines)));
        expect(drawn(other.causal).sort()).toEqual(drawn(one.causal).sort());
        expect(other.findings.map(({ message }) => message)).toEqual(
          one.findings.map(({ message }) => message),
        );
      }),
      { numRuns: FULL ? 3_000 : 50 },
    );
  },
  PATIENCE,
);

/** Tries all strokes, leaving a branch as soon as a node can no longer keep its law. */
function anyStrokesFit({ graph: { nodes, bonds } }: CausalGraph): boolean {
  const strokes: (Stroke | null)[] = bonds.map(() => null);
  const mayHold = ({ kind, ports }: FlatNode) => {
    const here = ports.filter(({ bond, end }) => strokes[bond] === end).length;
    const open = ports.filter(({ bond }) => strokes[bond] === null).length;
    if (kind === "0") return here <= 1 && here + open >= 1;
    if (kind === "1") return here <= ports.length - 1 && here + open >= ports.length - 1;
    if (kind === "TF") return open > 0 || here === 1;
    if (kind === "GY") return open > 0 || here !== 1;
    if (kind === "Se") return here === 0;
    return kind !== "Sf" || here + open === 1;
  };
  const fits = (at: number): boolean => {
    if (at === bonds.length) return true;
    for (const stroke of ["from", "to"] as const) {
      strokes[at] = stroke;
      if (mayHold(nodes[bonds[at].from]) && mayHold(nodes[bonds[at].to]) && fits(at + 1)) return true;
    }
    strokes[at] = null;
    return false;
  };
  return fits(0);
}
