import type { Expr } from "../symbolic/expression.ts";
import {
  type Factor,
  numberText,
  type Quotient,
  quotientOf,
  type SignedTerm,
  splitNumber,
  takesMinus,
  termsOf,
} from "./shape.ts";

/** How strongly an expression holds together; brackets stand where less would do than the place asks for. */
const LEVEL = {
  where: 0,
  or: 1,
  and: 2,
  not: 3,
  compare: 4,
  sum: 5,
  product: 6,
  factor: 7,
  base: 8,
} as const;

interface Piece {
  readonly expr: Expr;
  /** The least level that may stand here without brackets. */
  readonly level: number;
  /** The sign has been written already. */
  readonly unsigned: boolean;
  /** The negative of it is meant, by a difference written the other way round. */
  readonly turned: boolean;
}

type Task = string | Piece;

/** Longer texts are cut: a graph of shared parts can stand for a text that no memory holds. */
const LONGEST = 4_000_000;

/**
 * An expression in the notation's own syntax: `u - R_a*winding.p/L_a - k_m*rotor.p/J`, `winding.p'` for a rate,
 * `armature->motor.e` for the effort of a bond. Without recursion and linear in the length of the text.
 */
export function expressionText(expr: Expr): string {
  return render(piece(expr, LEVEL.where));
}

/** A summand without the sign that stands before it. */
export function termText({ term, turned }: SignedTerm): string {
  return render(piece(term, LEVEL.product, true, turned));
}

function render(root: Piece): string {
  const out: string[] = [];
  let length = 0;
  const tasks: Task[] = [root];
  for (let task = tasks.pop(); task !== undefined; task = tasks.pop()) {
    if (typeof task === "string") {
      out.push(task);
      length += task.length;
      if (length > LONGEST) return `${out.join("")}…`;
      continue;
    }
    const parts = write(task);
    for (let i = parts.length - 1; i >= 0; i -= 1) tasks.push(parts[i]);
  }
  return out.join("");
}

function piece(expr: Expr, level: number, unsigned = false, turned = false): Piece {
  return { expr, level, unsigned, turned };
}

function write({ expr, level, unsigned, turned }: Piece): Task[] {
  switch (expr.op) {
    case "symbol":
      return [symbolText(expr)];
    case "sum":
      return bracketed(LEVEL.sum, level, sum(expr, turned));
    case "number":
    case "product":
    case "power":
      return quotient(quotientOf(expr, turned || (!unsigned && takesMinus(expr))), level, unsigned);
    case "call":
      return [expr.name, "(", ...joined(expr.args, ", ", LEVEL.where), ")"];
    case "curve":
      return [`${expr.name}${"'".repeat(expr.value)}(`, piece(expr.args[0], LEVEL.where), ")"];
    case "where": {
      const [condition, then, otherwise] = expr.args;
      const parts = [
        piece(then, LEVEL.or),
        " where ",
        piece(condition, LEVEL.or),
        " else ",
        piece(otherwise, LEVEL.where),
      ];
      return bracketed(LEVEL.where, level, parts);
    }
    case "compare": {
      const [left, right] = expr.args;
      const unequal = expr.name === "!=";
      const parts = [piece(left, LEVEL.sum), ` ${unequal ? "=" : expr.name} `, piece(right, LEVEL.sum)];
      return unequal
        ? bracketed(LEVEL.not, level, ["not (", ...parts, ")"])
        : bracketed(LEVEL.compare, level, parts);
    }
    case "and":
      return bracketed(LEVEL.and, level, joined(expr.args, " and ", LEVEL.not));
    case "or":
      return bracketed(LEVEL.or, level, joined(expr.args, " or ", LEVEL.and));
    case "not":
      return bracketed(LEVEL.not, level, ["not ", piece(expr.args[0], LEVEL.compare)]);
  }
}

export function symbolText(symbol: Expr): string {
  switch (symbol.role) {
    case "rate":
    case "inputRate":
      return `${symbol.name}'`;
    case "effort":
      return `${symbol.name}.e`;
    case "flow":
      return `${symbol.name}.f`;
    default:
      return symbol.name;
  }
}

function bracketed(own: number, asked: number, parts: Task[]): Task[] {
  return own >= asked ? parts : ["(", ...parts, ")"];
}

function joined(args: readonly Expr[], separator: string, level: number): Task[] {
  return args.flatMap((arg, i): Task[] => (i === 0 ? [piece(arg, level)] : [separator, piece(arg, level)]));
}

function sum(expr: Expr, allTurned: boolean): Task[] {
  return termsOf(expr, allTurned).flatMap(({ term, negative, turned }, i): Task[] => {
    const sign = i === 0 ? (negative ? "-" : "") : negative ? " - " : " + ";
    return [sign, piece(term, LEVEL.product, true, turned)];
  });
}

function quotient(shape: Quotient, level: number, unsigned: boolean): Task[] {
  const { negative, coefficient, divisor, above, below } = shape;
  const minus = negative && !unsigned;
  const top = above.map(power);
  if (coefficient !== 1 || above.length === 0) top.unshift([numberText(coefficient)]);
  const bottom = below.map(power);
  if (divisor !== 1) bottom.unshift([numberText(divisor)]);
  const parts = times(top);
  if (bottom.length === 1) parts.push("/", ...times(bottom));
  if (bottom.length > 1) parts.push("/(", ...times(bottom), ")");
  const single = top.length === 1 && bottom.length === 0;
  const own = minus
    ? LEVEL.sum
    : !single
      ? LEVEL.product
      : above.length === 0 || isRoot(above[0])
        ? LEVEL.base
        : LEVEL.factor;
  return bracketed(own, level, minus ? ["-", ...parts] : parts);
}

function times(factors: readonly Task[][]): Task[] {
  return factors.flatMap((factor, i) => (i === 0 ? factor : ["*", ...factor]));
}

/** Written as a call, which holds together of itself. */
function isRoot(factor: Factor): boolean {
  return factor.kind !== "power" || factor.exponent === 0.5;
}

function power(factor: Factor): Task[] {
  if (factor.kind !== "power")
    return [factor.kind === "root" ? "sqrt(" : "abs(", ...quotient(factor.of, LEVEL.where, false), ")"];
  const { base, exponent, turned } = factor;
  if (exponent === 1) return [piece(base, LEVEL.factor, false, turned)];
  if (isRoot(factor)) return ["sqrt(", piece(base, LEVEL.where), ")"];
  if (typeof exponent !== "number") return [piece(base, LEVEL.base), "^", piece(exponent, LEVEL.base)];
  const { coefficient, divisor } = splitNumber(exponent, true);
  const raised = divisor === 1 ? numberText(coefficient) : `(${numberText(coefficient)}/${divisor})`;
  return [piece(base, LEVEL.base), "^", raised];
}
