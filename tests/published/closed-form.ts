import { SourceText } from "../../grammar/source/text.ts";
import type { Expr, FunctionName } from "../../grammar/symbolic/expression.ts";
import type { Pool } from "../../grammar/symbolic/pool.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import type { Expression } from "../../grammar/syntax/tree.ts";

/**
 * A formula as a book prints it, written in the notation's expression syntax. It is read by the parser alone and goes
 * through none of the stages it is compared with: its value is worked out here, from the syntax tree.
 * Names are those of the model: `rotor.p`, `R_a`, `u`; `rate(u)` is the rate of an input.
 */
export function closedForm(text: string): Expression {
  const { tree, findings } = parse(
    new SourceText("book.wright", `notation 1\nsystem Book {\n  let it = ${text}\n}\n`),
  );
  const [system] = tree.items;
  const [statement] = system.kind === "system" ? system.body : [];
  if (findings.length > 0 || statement?.kind !== "let")
    throw new Error(`not a formula: ${text}: ${findings[0]?.message}`);
  return statement.value;
}

/** The formula's value at a point. */
export function valueAt(formula: Expression, point: (name: string) => number): number {
  return fold<number>(formula, {
    number: (value) => value,
    name: point,
    rate: (name) => point(`rate(${name})`),
    negate: (x) => -x,
    binary: (operator, a, b) => ARITHMETIC[operator](a, b),
    call: (name, args) => (name === "sign" ? Math.sign(args[0]) : FUNCTIONS[name](...args)),
  });
}

/** The formula in the pool of a model, to be compared with what was derived. */
export function expressionOf(formula: Expression, pool: Pool, symbol: (name: string) => Expr): Expr {
  return fold<Expr>(formula, {
    number: (value) => pool.number(value),
    name: symbol,
    rate: (name) => pool.symbol("inputRate", name),
    negate: (x) => pool.negate(x),
    binary: (operator, a, b) => {
      if (operator === "+") return pool.sum(a, b);
      if (operator === "-") return pool.subtract(a, b);
      if (operator === "*") return pool.product(a, b);
      return operator === "/" ? pool.divide(a, b) : pool.power(a, b);
    },
    call: (name, args) => pool.call(name as FunctionName, ...args),
  });
}

type Arithmetic = "+" | "-" | "*" | "/" | "^";

interface Meaning<T> {
  number(value: number): T;
  name(name: string): T;
  rate(name: string): T;
  negate(x: T): T;
  binary(operator: Arithmetic, a: T, b: T): T;
  call(name: string, args: T[]): T;
}

const ARITHMETIC: Record<Arithmetic, (a: number, b: number) => number> = {
  "+": (a, b) => a + b,
  "-": (a, b) => a - b,
  "*": (a, b) => a * b,
  "/": (a, b) => a / b,
  "^": (a, b) => a ** b,
};

const FUNCTIONS: Record<string, (...args: number[]) => number> = {
  sin: Math.sin,
  cos: Math.cos,
  tanh: Math.tanh,
  exp: Math.exp,
  ln: Math.log,
  sqrt: Math.sqrt,
  abs: Math.abs,
};

function fold<T>(formula: Expression, meaning: Meaning<T>): T {
  switch (formula.kind) {
    case "number":
      return meaning.number(formula.value);
    case "reference":
      return meaning.name(nameOf(formula));
    case "group":
      return fold(formula.inner, meaning);
    case "unary":
      if (formula.operator !== "-") break;
      return meaning.negate(fold(formula.operand, meaning));
    case "binary":
      if (!(formula.operator in ARITHMETIC)) break;
      return meaning.binary(
        formula.operator as Arithmetic,
        fold(formula.left, meaning),
        fold(formula.right, meaning),
      );
    case "call": {
      const [first] = formula.arguments;
      if (formula.name.text === "rate" && first.kind === "reference") return meaning.rate(nameOf(first));
      return meaning.call(
        formula.name.text,
        formula.arguments.map((argument) => fold(argument, meaning)),
      );
    }
  }
  throw new Error(`no formula of a book holds this: ${formula.kind}`);
}

/** As written: `cell[2].p`; indices of book formulas are plain numbers. */
function nameOf(reference: Extract<Expression, { kind: "reference" }>): string {
  return reference.path
    .map(
      ({ name, indices }) =>
        name.text + indices.map((i) => (i.kind === "number" ? `[${i.value}]` : "[?]")).join(""),
    )
    .join(".");
}
