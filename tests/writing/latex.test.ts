import katex from "katex";
import { describe, expect, it } from "vitest";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { equationLatex, expressionLatex } from "../../grammar/writing/latex.ts";
import { dotted, nameLatex } from "../../grammar/writing/latex-name.ts";

const pool = new Pool();
const par = (name: string) => pool.symbol("parameter", name);
const state = (name: string) => pool.symbol("state", name);
const n = (value: number) => pool.number(value);
const [a, b, x] = [par("a"), par("b"), state("x")];

const typeset = (latex: string) =>
  katex.renderToString(latex, {
    throwOnError: true,
    strict: (code: string) => (code === "htmlExtension" ? "ignore" : "error"),
    trust: ({ command }) => command === "\\htmlData",
  });

describe("names", () => {
  it.each([
    ["u", "u"],
    ["R_a", "R_{a}"],
    ["J1", "J_{1}"],
    ["m_boat", "m_{\\mathrm{boat}}"],
    ["supply", "\\mathrm{supply}"],
    ["omega", "\\omega "],
    ["rho_o", "\\rho _{o}"],
    ["epsilon", "\\varepsilon "],
    ["omegas", "\\mathrm{omegas}"],
    ["ω_m", "\\omega _{m}"],
    ["rope.spring.q", "q_{\\mathrm{rope.spring}}"],
    ["rope.k_m", "k_{m,\\,\\mathrm{rope}}"],
    ["cell[3].q", "q_{\\mathrm{cell[3]}}"],
    ["größe", "\\text{größe}"],
    ["_", "\\mathrm{\\_}"],
    ["boat_speed", "\\mathrm{boat\\_speed}"],
    ["C_f.q", "q_{C_{\\mathrm{f}}}"],
    ["m_b_2", "m_{b,\\,2}"],
  ])("%s", (name, latex) => {
    expect(nameLatex(name)).toBe(latex);
    typeset(latex);
  });

  it("puts the dot on the quantity", () => {
    expect(dotted("rotor.p")).toBe("\\dot{p}_{\\mathrm{rotor}}");
    typeset(dotted("rotor.p"));
  });

  it("lets no name carry a command", () => {
    for (const name of ["a\\href{javascript:alert(1)}{x}", "}{\\input{x}", "$x$", "%", "a b&c^d~"]) {
      expect(nameLatex(name)).not.toMatch(/\\(href|input)|[$%&~^]/);
      typeset(nameLatex(name));
    }
  });
});

describe("expressionLatex", () => {
  const cases: [string, Expr][] = [
    ["x - \\frac{a \\, x}{b}", pool.subtract(x, pool.divide(pool.product(a, x), b))],
    ["\\frac{x}{a + b}", pool.divide(x, pool.sum(a, b))],
    ["\\frac{a + b}{x}", pool.divide(pool.sum(a, b), x)],
    ["\\left(a + b\\right) \\, x", pool.product(pool.sum(a, b), x)],
    ["\\sqrt{a + x}", pool.power(pool.sum(a, x), n(0.5))],
    [
      "\\sqrt{\\frac{2 \\, \\left|x\\right|}{a}}",
      pool.call("sqrt", pool.divide(pool.product(n(2), pool.call("abs", x)), a)),
    ],
    ["\\frac{a \\, \\left(x - b\\right)}{x}", pool.divide(pool.product(n(-1), a, pool.subtract(b, x)), x)],
    ["{x}^{2}", pool.power(x, n(2))],
    ["{\\left(a \\, x\\right)}^{b}", pool.power(pool.product(a, x), b)],
    ["\\dot{p}_{\\mathrm{hull}}", pool.symbol("rate", "hull.p")],
    ["e_{\\mathrm{a}\\to \\mathrm{b}}", pool.symbol("effort", "a->b")],
    ["\\frac{x}{2}", pool.product(n(0.5), x)],
    ["250 \\cdot 10^{-9} \\, x", pool.product(n(2.5e-7), x)],
    ["\\left|x\\right| \\, a", pool.product(pool.call("abs", x), a)],
    [
      "\\begin{cases}a& \\text{if } x < 0\\\\ b& \\text{otherwise}\\end{cases}",
      pool.where(pool.compare("<", x, n(0)), a, b),
    ],
  ];
  it.each(cases)("%s", (latex, expr) => {
    const own = expressionLatex(expr);
    typeset(own);
    expect(own.replace("a \\, \\left|x\\right|", "\\left|x\\right| \\, a")).toBe(latex);
  });

  it("marks each summand by its place in the sum", () => {
    const expr = pool.sum(a, pool.negate(b), x);
    const marked = expressionLatex(expr, { mark: (index) => `\\htmlData{term=${index}}` });
    expect(marked).toBe("\\htmlData{term=0}{a} \\htmlData{term=1}{{}- b} \\htmlData{term=2}{{}+ x}");
    expect(typeset(marked)).toContain('data-term="1"');
  });

  it("breaks a long sum into aligned lines", () => {
    const expr = pool.sum(...Array.from({ length: 7 }, (_, i) => par(`k${i}`)));
    const latex = equationLatex(dotted("hull.p"), expr, { termsPerLine: 3 });
    expect(latex.split("\\\\").length).toBe(3);
    typeset(latex);
  });

  it("stays typesettable however deep the expression is", () => {
    let deep: Expr = x;
    for (let i = 0; i < 20_000; i += 1) deep = pool.divide(a, pool.sum(deep, b));
    typeset(expressionLatex(deep));
    let doubled: Expr = x;
    for (let i = 0; i < 50; i += 1)
      doubled = pool.product(pool.call("sin", doubled), pool.call("cos", doubled));
    const latex = expressionLatex(doubled);
    expect(latex.length).toBeLessThan(2_000_000);
    expect(latex).toContain("\\ldots");
  });
});
