import { describe, expect, it } from "vitest";
import type { Expr } from "../../grammar/symbolic/expression.ts";
import { Pool } from "../../grammar/symbolic/pool.ts";
import { expressionText } from "../../grammar/writing/text.ts";

const pool = new Pool();
const par = (name: string) => pool.symbol("parameter", name);
const state = (name: string) => pool.symbol("state", name);
const n = (value: number) => pool.number(value);
const [a, b, c, x] = [par("a"), par("b"), par("c"), state("x")];

describe("expressionText", () => {
  const u = pool.symbol("input", "u");
  const loss = pool.divide(pool.product(par("R_a"), state("winding.p")), par("L_a"));
  const back = pool.divide(pool.product(par("k_m"), state("rotor.p")), par("J"));

  const cases: [string, Expr][] = [
    ["u - k_m*rotor.p/J - R_a*winding.p/L_a", pool.sum(u, pool.negate(loss), pool.negate(back))],
    ["x - a", pool.subtract(x, a)],
    ["-a - x", pool.negate(pool.sum(a, x))],
    ["-a*x", pool.negate(pool.product(a, x))],
    ["(a + b)*x/c", pool.product(pool.sum(a, b), x, pool.power(c, n(-1)))],
    ["x/(a + b)", pool.divide(x, pool.sum(a, b))],
    ["x/(a*b)", pool.divide(x, pool.product(a, b))],
    ["1/x^2", pool.power(x, n(-2))],
    ["x/2", pool.product(n(0.5), x)],
    ["3*x/2", pool.product(n(1.5), x)],
    ["0.35*x", pool.product(n(0.35), x)],
    ["x/28", pool.product(pool.rational(1, 28), x)],
    ["1/3 + x", pool.sum(x, pool.rational(1, 3))],
    ["1e21*x", pool.product(n(1e21), x)],
    ["250e-9*x", pool.product(n(2.5e-7), x)],
    ["sqrt(a + x)", pool.power(pool.sum(a, x), n(0.5))],
    ["a/sqrt(x)", pool.divide(a, pool.power(x, n(0.5)))],
    ["x^(2/3)", pool.power(x, pool.rational(2, 3))],
    ["x^a", pool.power(x, a)],
    ["x^(-a)", pool.power(x, pool.negate(a))],
    ["(a*x)^b", pool.power(pool.product(a, x), b)],
    ["(a^b)^c", pool.power(pool.power(a, b), c)],
    ["winding.p'", pool.symbol("rate", "winding.p")],
    ["u'", pool.symbol("inputRate", "u")],
    ["supply->armature.e", pool.symbol("effort", "supply->armature")],
    ["atan2(a, x) + sin(a*x)", pool.sum(pool.call("sin", pool.product(a, x)), pool.call("atan2", a, x))],
    [
      "a where x < 0 else b where x > 1 else c",
      pool.where(pool.compare("<", x, n(0)), a, pool.where(pool.compare(">", x, n(1)), b, c)),
    ],
    ["c*(a where x < 0 else b)", pool.product(pool.where(pool.compare("<", x, n(0)), a, b), c)],
    [
      "a where not (x < 0 or x > 1) else b",
      pool.where(pool.not(pool.or(pool.compare("<", x, n(0)), pool.compare(">", x, n(1)))), a, b),
    ],
    ["b*(x - a)/c", pool.divide(pool.product(n(-1), b, pool.subtract(a, x)), c)],
    ["-b*(a + x)/c", pool.divide(pool.product(n(-1), b, pool.sum(a, x)), c)],
    ["x - b*(a - c)", pool.subtract(x, pool.product(b, pool.subtract(a, c)))],
    [
      "a*(exp(x) - 1) - b",
      pool.subtract(pool.negate(b), pool.product(a, pool.subtract(n(1), pool.call("exp", x)))),
    ],
    ["x - b*(1 - a)", pool.subtract(x, pool.product(b, pool.subtract(n(1), a)))],
    ["b - a*(exp(x) - 1)", pool.sum(b, pool.product(a, pool.subtract(n(1), pool.call("exp", x))))],
    ["sqrt(2*x)", pool.call("sqrt", pool.product(n(2), x))],
    [
      "a*sqrt(2*abs(x)/c)*sign(x)",
      pool.product(
        a,
        pool.call("sqrt", pool.divide(pool.product(n(2), pool.call("abs", x)), c)),
        pool.call("sign", x),
      ),
    ],
    ["sqrt(2*a)*sqrt(b)", pool.product(...[n(2), a, b].map((one) => pool.call("sqrt", one)))],
    ["sqrt(abs(a*x/b))", pool.call("sqrt", pool.call("abs", pool.divide(pool.product(a, x), b)))],
    ["abs(a*x)", pool.call("abs", pool.product(a, x))],
    ["a/sqrt(2*x)", pool.divide(a, pool.call("sqrt", pool.product(n(2), x)))],
    ["1.2e9*x", pool.product(n(1.2e9), x)],
    ["22e-6*x", pool.product(n(22e-6), x)],
    ["-3", n(-3)],
    ["0", n(0)],
  ];
  it.each(cases)("%s", (text, expr) => {
    expect(expressionText(expr)).toBe(text);
  });

  it("is safe in depth and cut in length", () => {
    let deep: Expr = x;
    for (let i = 0; i < 20_000; i += 1) deep = pool.call("sin", pool.sum(deep, a));
    expect(expressionText(deep).startsWith("sin(")).toBe(true);
    let doubled: Expr = x;
    for (let i = 0; i < 60; i += 1)
      doubled = pool.product(pool.call("sin", doubled), pool.call("cos", doubled));
    expect(expressionText(doubled).endsWith("…")).toBe(true);
  });
});
