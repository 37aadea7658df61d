import { describe, expect, test } from "vitest";
import type { FlatGraph } from "../../grammar/resolve/graph.ts";
import { resolve } from "../../grammar/resolve/resolve.ts";
import { fileSet } from "../../grammar/source/text.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import { expressionText } from "../../grammar/writing/text.ts";

function resolved(text: string, others: Record<string, string> = {}) {
  const files = fileSet([["main.wright", `notation 1\n${text}`], ...Object.entries(others)]);
  return resolve(files, "main.wright", parse);
}

function graphOf(text: string, others: Record<string, string> = {}): FlatGraph {
  const { systems, findings } = resolved(text, others);
  const last = systems[systems.length - 1];
  const wrong = [...findings, ...last.findings].filter(({ severity }) => severity !== "note");
  expect(wrong.map(({ message }) => message)).toEqual([]);
  if (last.graph === null) throw new Error("no graph");
  return last.graph;
}

function lawsOf(graph: FlatGraph): Record<string, string[]> {
  return Object.fromEntries(
    graph.nodes.map((node) => [
      node.name,
      node.laws.map((law) => {
        if (law.kind === "ratio") return `ratio ${expressionText(law.ratio)}`;
        if (law.kind === "energy") return `energy ${expressionText(law.energy)}`;
        return `${law.port}.${law.variable} ${law.oneWay ? "<-" : "="} ${expressionText(law.right)}`;
      }),
    ]),
  );
}

describe("bonds", () => {
  test("chains, fans, strokes, second bonds and ports keep their ids and ends", () => {
    const graph = graphOf(
      `system S {
        1 a : translation
        0 b
        1 c
        I m = 1 kg
        I n = 1 kg
        R r(x, gives y) x.e = x.f*(1 N*s/m), y.f = y.e/(1 N*s/m)
        Sf s f = 1 m/s
        Sf t f = 1 m/s
        s, t -> a ->| b |-> c
        a -> m
        c -> n, r.x
        r.y -> b
      }`,
    );
    const demanded = (end: string | undefined) => (end === undefined ? "" : `|${end}`);
    expect(graph.bonds.map((bond) => bond.id + demanded(bond.demanded?.end))).toEqual([
      "s->a",
      "t->a",
      "a->b|to",
      "b->c|from",
      "a->m",
      "c->n",
      "c->r.x",
      "r.y->b",
    ]);
    for (const node of graph.nodes) {
      for (const port of node.ports) expect(graph.bonds[port.bond][port.end]).toBe(node.index);
    }
  });

  test("a bond through the ports of nested subs is one bond, named by its real ends", () => {
    const graph = graphOf(
      `system Inner {
        port a takes translation
        I m = 1 kg
        a -> m
      }
      system Outer {
        port a takes translation
        sub inner = Inner()
        a ->| inner.a
      }
      system S {
        1 rail : translation
        sub outer = Outer()
        rail -> outer.a
      }`,
    );
    expect(graph.bonds.map(({ id, demanded }) => [id, demanded?.end])).toEqual([
      ["rail->outer.inner.m", "to"],
    ]);
    expect(graph.nodes.map(({ kind, name }) => `${kind} ${name}`)).toEqual(["1 rail", "I outer.inner.m"]);
  });

  test("an open port of the system itself stays as a node", () => {
    const graph = graphOf("system S {\n port a takes rotation\n I J = 1 kg*m^2\n a -> J\n output w = a.f\n}");
    expect(graph.nodes[0]).toMatchObject({ kind: "port", name: "a" });
    expect(graph.outputs[0].unit.text).toBe("rad/s");
  });
});

describe("laws in normal form", () => {
  test("every form of a transformer and a gyrator", () => {
    const forms = [
      ["TF", "out.f = n*in.f", "n"],
      ["TF", "in.f = out.f/n", "n"],
      ["TF", "in.e = n*out.e", "n"],
      ["TF", "out.e = in.e/n", "n"],
      ["TF", "out.f = (n + 1)*in.f - in.f", "n"],
      ["GY", "out.e = r*in.f", "r"],
      ["GY", "in.f = out.e/r", "r"],
      ["GY", "in.e = r*out.f", "r"],
      ["GY", "out.f = in.e/r", "r"],
    ];
    for (const [kind, law, ratio] of forms) {
      const graph = graphOf(
        `system S {
          param n = 2
          param r = 3 ohm
          0 a : electrical
          0 b : electrical
          ${kind} t ${law}
          a -> t -> b
        }`,
      );
      expect(lawsOf(graph).t).toEqual([`ratio ${ratio}`]);
    }
  });

  test("linear laws by dimension, fields, mixed stores and one-way laws", () => {
    const graph = graphOf(
      `system S {
        param R1 = 2 ohm
        param G = 2 S
        param C1 = 2 F
        param D = 2 1/F
        param L = 2 H
        param M = 1 H
        param l = 2 mm
        1 a : electrical
        1 t : translation
        R R1
        R G
        C C1
        C D
        R diode f <- G*e
        I coils(x, y) x.p = L*x.f + M*y.f, y.p = M*x.f + L*y.f
        IC relay(coil, arm) energy = coil.p^2/(2*L*(1 + arm.q/l))
        a -> R1, G, C1, D, diode, coils.x, coils.y, relay.coil
        t -> relay.arm
      }`,
    );
    expect(lawsOf(graph)).toMatchObject({
      R1: ["0.e = R1*a->R1.f"],
      G: ["0.f = G*a->G.e"],
      C1: ["0.e = C1.q/C1"],
      D: ["0.e = D*D.q"],
      diode: ["0.f <- G*a->diode.e"],
      relay: [expect.stringContaining("energy relay.coil.p^2/")],
    });
    expect(lawsOf(graph).coils).toHaveLength(2);
  });

  test("what depends on a signal is modulated, what depends on its own variables is not", () => {
    const graph = graphOf(
      `system S {
        input x : 1 = 1
        let twice = 2*x
        1 a : translation
        R plain e = f*(1 N*s/m)
        R by_input e = x*f*(1 N*s/m)
        R by_let e = twice*f*(1 N*s/m)
        R by_node e = plain.e*f/(1 m/s)
        C own e = q*(1 N/m) + 0*own.q*(1 N/m)
        a -> plain, by_input, by_let, by_node, own
      }`,
    );
    const modulated = graph.nodes.filter((node) => node.modulated).map(({ name }) => name);
    expect(modulated).toEqual(["by_input", "by_let", "by_node"]);
  });
});

describe("values", () => {
  test("SI numbers, units as written, overrides in the scope outside, consts of files", () => {
    const graph = graphOf(
      `use "parts.wright"
      const F_c = 80 N
      system S {
        param d = 2.4 kN*s/m range 1 kN*s/m .. 3 kN*s/m
        param T = 20 degC
        param cold = -5 degC
        param slope = 2 W/degC
        1 a : translation
        Se push e = F_c
        sub r = Damper(d = d/2)
        push -> a -> r.a
      }`,
      {
        "parts.wright":
          "notation 1\nsystem Damper {\n param d = 1 N*s/m\n port a takes translation\n R d\n a -> d\n}\n",
      },
    );
    const shown = graph.parameters.map(({ name, value, unit, definition }) => [
      name,
      value,
      unit.text,
      expressionText(definition),
    ]);
    expect(shown).toEqual([
      ["d", 2400, "kN*s/m", "2400"],
      ["T", 293.15, "degC", "293.15"],
      ["cold", 268.15, "degC", "268.15"],
      ["slope", 2, "W/degC", "2"],
      ["r.d", 1200, "kN*s/m", "d/2"],
      ["F_c", 80, "N", "80"],
    ]);
    expect(graph.parameters[0].range).toEqual({ low: 1000, high: 3000 });
  });

  test("a system that uses a part may start it otherwise than the part does", () => {
    const graph = graphOf(
      `system Buffer {
        port rod takes translation
        0 n
        C spring e = q*(1 N/m)
        rod -> n -> spring
        start spring.q = 1 mm
      }
      system Cart {
        1 a : translation
        I m = 1 kg
        sub d = Buffer()
        sub undisturbed = Buffer()
        a -> m, d.rod, undisturbed.rod
        start d.spring.q = 5 mm
        start m.f = 36 km/h
      }`,
    );
    expect(graph.starts.map(({ target, value }) => [target.name, value])).toEqual([
      ["d.spring.q", 0.005],
      ["a->m", 10],
      ["undisturbed.spring.q", 0.001],
    ]);
  });

  test("names of JavaScript's own objects are ordinary names", () => {
    const graph = graphOf(
      "system constructor {\n param __proto__ = 1 kg\n 1 toString : translation\n I __proto__\n toString -> __proto__\n output valueOf = toString.f\n}",
    );
    expect(graph.parameters.map(({ name }) => name)).toEqual(["__proto__"]);
    expect(graph.nodes[1].laws).toHaveLength(1);
  });

  test("a repeat is the same as what it writes out, and a param may count it", () => {
    const cell = (i: number | string, before: number | string) =>
      `1 s[${i}]\n R r[${i}] = r\n 0 n[${i}]\n C c[${i}] = c\n n[${before}] -> s[${i}] -> n[${i}] -> c[${i}]\n s[${i}] -> r[${i}]\n`;
    const head = "param r = 1 ohm\n param c = 1 F\n 0 n[0] : electrical\n";
    const rolled = graphOf(
      `system S {\n param N = 3\n ${head} repeat i = 1 .. N {\n ${cell("i", "i-1")} }\n}`,
    );
    const written = graphOf(`system S {\n ${head} ${[1, 2, 3].map((i) => cell(i, i - 1)).join("")}}`);
    expect(new Set(rolled.bonds.map(({ id }) => id))).toEqual(new Set(written.bonds.map(({ id }) => id)));
    expect(lawsOf(rolled)).toEqual(lawsOf(written));
    expect(rolled.parameters[0]).toMatchObject({ name: "N", constant: true });
  });
});

describe("limits", () => {
  test("10^12 turns, deep subs and long chains of lets are findings, not failures", () => {
    const turns = resolved("system S {\n repeat i = 1 .. 1000000000000 {\n 1 a[i] : translation\n }\n}");
    expect(turns.systems[0].findings.map(({ name }) => name)).toContain("too-large");

    let deep = "system D0 {\n I m = 1 kg\n port a takes translation\n a -> m\n}\n";
    for (let i = 1; i <= 150; i += 1)
      deep += `system D${i} {\n port a takes translation\n sub x = D${i - 1}()\n a -> x.a\n}\n`;
    const subs = resolved(deep).systems;
    expect(subs[50].graph).not.toBeNull();
    expect(subs[150].findings.map(({ name }) => name)).toContain("too-large");

    const lets = Array.from({ length: 5000 }, (_, i) => ` let x${i} = x${i + 1} + 1\n`).join("");
    const chain = graphOf(
      `system S {\n 1 a : translation\n I m = 1 kg\n a -> m\n${lets} let x5000 = time/1 s\n output y = x0\n}`,
    );
    expect(expressionText(chain.outputs[0].value)).toContain("5000");
  });

  test("thousands of unknown names and of systems end soon", () => {
    const names = Array.from({ length: 3000 }, (_, i) => ` R r${i} = 1 N*s/m\n a -> x${i}\n`).join("");
    expect(resolved(`system S {\n 1 a : translation\n${names}}`).systems[0].graph).toBeNull();
    const systems = Array.from({ length: 5000 }, (_, i) => `system S${i} {\n}\n`).join("");
    expect(resolved(systems).systems).toHaveLength(5000);
  });

  test("functions that double the work at each call end in a finding", () => {
    const functions = Array.from(
      { length: 40 },
      (_, i) => `function f${i + 1}(x) = f${i}(2*x) + f${i}(2*x + 1)\n`,
    ).join("");
    const { systems } = resolved(
      `function f0(x) = x\n${functions}system S {\n 1 a : translation\n R r e = f40(f)\n a -> r\n}`,
    );
    expect(systems[0].findings.map(({ name }) => name)).toContain("too-large");
  });
});
