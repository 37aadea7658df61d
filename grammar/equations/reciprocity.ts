import { storeSites } from "../causality/elements.ts";
import { type Fact, type Finding, finding } from "../diagnostics/finding.ts";
import { unitOfVariable } from "../resolve/domains.ts";
import type { FlatGraph, FlatNode } from "../resolve/graph.ts";
import type { Span } from "../source/span.ts";
import { derivative } from "../symbolic/derivative.ts";
import { evaluate } from "../symbolic/evaluate.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { equivalent } from "../symbolic/rational-form.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import { divide } from "../units/dimension.ts";
import type { Dimension } from "../units/unit.ts";
import { quantityText, unitOf } from "../units/unit-text.ts";
import { parameterValues } from "./assignments.ts";

/** A variable of a field's port, as its laws call it. */
interface Variable {
  readonly symbol: Symbol;
  readonly text: string;
  readonly dimension: Dimension;
}

/** x is the state, y what the energy gives for it: y = ∂E/∂x (e for a q, f for a p). */
interface Port {
  readonly x: Variable;
  readonly y: Variable;
}

interface Law {
  readonly port: Port;
  readonly left: Variable;
  readonly right: Expr;
  readonly span: Span;
}

/**
 * Stores with several ports whose laws, given one by one, are not those of one energy E.
 *
 * Where y_i = φ_i(x), ∂φ_i/∂x_j must be ∂φ_j/∂x_i; the same holds for x_i = ψ_i(y), whose potential is the co-energy.
 * Where some laws give y_a and others x_b, the potential is E - Σ y_b·x_b (Legendre), and between these two kinds the
 * sign turns: ∂y_a/∂y_b = -∂x_b/∂x_a. These are Maxwell's relations (D. C. Karnopp, D. L. Margolis, R. C. Rosenberg,
 * System Dynamics, chapter on multiport fields; from memory). All of them are one condition on residuals F(x, y) = 0:
 * Σ_k ∂F_i/∂x_k·∂F_j/∂y_k is symmetric in i and j.
 */
export function reciprocityFindings(graph: FlatGraph): Finding[] {
  const findings: Finding[] = [];
  for (const node of graph.nodes) {
    if (node.ports.length < 2 || (node.kind !== "C" && node.kind !== "I" && node.kind !== "IC")) continue;
    const found = fieldFinding(graph, node);
    if (found !== null) findings.push(found);
  }
  return findings;
}

function fieldFinding(graph: FlatGraph, node: FlatNode): Finding | null {
  const { pool } = graph;
  const { ports, laws } = readField(graph, node);
  if (laws.length !== ports.length) return null;
  const given = new Set(laws.map(({ left }) => left.symbol));
  // Where a law rests on what another one gives, only constant slopes can be compared away from the laws' solutions.
  const explicit = laws.every(({ right }) => ![...symbolsOf(right)].some((symbol) => given.has(symbol)));
  const slope = ({ left, right }: Law, { symbol }: Variable): Expr => {
    const of = derivative(pool, right, symbol);
    return left.symbol === symbol ? pool.subtract(of, pool.one) : of;
  };
  const bracket = (a: Law, b: Law) =>
    pool.sum(ports.map(({ x, y }) => pool.product(slope(a, x), slope(b, y))));
  for (const [i, one] of laws.entries()) {
    for (const other of laws.slice(i + 1)) {
      const differing = difference(graph, bracket(one, other), bracket(other, one), explicit);
      if (differing === null) continue;
      const where = differing.proved ? "" : " at the given values of the parameters";
      const message =
        `The laws of \`${node.name}\` are not those of one energy${where}: \`${one.left.text}\` and ` +
        `\`${other.left.text}\` do not answer alike to each other's port, so going round a closed path of its states gains or loses energy.`;
      const facts = explicit ? slopeFacts(one, other, given, (law, by) => differing.at(slope(law, by))) : [];
      return finding("not-reciprocal", other.span, message, { facts });
    }
  }
  return null;
}

function readField({ pool, bonds }: FlatGraph, node: FlatNode): { ports: Port[]; laws: Law[] } {
  const ports = storeSites([node]).map(({ port, variable, name }): Port => {
    const { name: short, bond, domain } = node.ports[port];
    const named = (symbol: Symbol, letter: "e" | "f" | "p" | "q"): Variable => ({
      symbol,
      text: `${short}.${letter}`,
      dimension: unitOfVariable(domain, letter).dimension,
    });
    const { effort, flow } = bonds[bond];
    return {
      x: named(pool.symbol("state", name), variable),
      y: variable === "q" ? named(effort, "e") : named(flow, "f"),
    };
  });
  const laws = node.laws.flatMap((law): Law[] => {
    if (law.kind !== "relation") return [];
    const port = ports[law.port];
    const left = law.variable === "p" || law.variable === "q" ? port.x : port.y;
    return [{ port, left, right: law.right, span: law.span }];
  });
  return { ports, laws };
}

const POINTS = 12;

interface Difference {
  /** By algebra; else only the numbers show it. */
  readonly proved: boolean;
  /** Values at a point where the two differ. */
  readonly at: (expr: Expr) => number;
}

/** Where two expressions differ at the parameters' values; null where they are equal or may well be. */
function difference(graph: FlatGraph, a: Expr, b: Expr, explicit: boolean): Difference | null {
  const same = equivalent(graph.pool, a, b);
  if (same === true) return null;
  const valueOf = parameterValues(graph);
  const free = [...symbolsOf(a, b)].filter((symbol) => valueOf(symbol) === undefined);
  if (!explicit && free.length > 0) return null;
  let seed = 7;
  // Park and Miller's generator, from memory, with a fixed start: the same model has the same findings.
  const random = () => {
    seed = (seed * 48271) % 2147483647;
    return seed / 2147483647;
  };
  for (let point = 0; point < POINTS; point += 1) {
    const values = new Map(free.map((symbol) => [symbol, (random() - 0.5) * 10 ** (1 - point)]));
    const at = (expr: Expr) =>
      evaluate(expr, (symbol) => valueOf(symbol) ?? values.get(symbol) ?? Number.NaN);
    const [x, y] = [at(a), at(b)];
    if (Math.abs(x - y) > 1e-6 * Math.max(Math.abs(x), Math.abs(y))) return { proved: same === false, at };
  }
  return null;
}

/** The two slopes that should agree, or be opposite between a law for a state and one for an effort or flow. */
function slopeFacts(
  one: Law,
  other: Law,
  given: ReadonlySet<Symbol>,
  valueOf: (law: Law, by: Variable) => number,
): Fact[] {
  const stated = (law: Law, port: Port): Fact => {
    const by = given.has(port.x.symbol) ? port.y : port.x;
    const value = quantityText(valueOf(law, by), unitOf(divide(law.left.dimension, by.dimension)), 6);
    return { message: `∂(${law.left.text})/∂(${by.text}) is ${value}`, span: law.span };
  };
  const facts = [stated(one, other.port), stated(other, one.port)];
  const mixed = (one.left === one.port.x) !== (other.left === other.port.x);
  return mixed
    ? [...facts, { message: "between a law for a state and one for an effort or flow, these are opposite" }]
    : facts;
}
