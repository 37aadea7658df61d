import { type Curve, isNonNegative } from "./curve.ts";
import { type Expr, type Operator, SYMBOL_ROLES, type SymbolRole } from "./expression.ts";

/** An expression as the pool keeps it: with what sorting, hashing and the rules about signs need to know at once. */
export class Node implements Expr {
  readonly id: number;
  readonly op: Operator;
  readonly args: readonly Node[];
  readonly value: number;
  readonly name: string;
  readonly role: SymbolRole | null;
  readonly curve: Curve | null;
  /** The highest role of a symbol in it, as an index of SYMBOL_ROLES; -1 for a number. */
  readonly rank: number;
  readonly nonNegative: boolean;
  readonly hash: number;
  /** Has the factor sin(x)^2, which may meet a cos(x)^2. */
  readonly sineSquared: boolean;
  /** Next in the same bucket of the pool. */
  next: Node | null;

  constructor(
    id: number,
    op: Operator,
    args: readonly Node[],
    value: number,
    name: string,
    role: SymbolRole | null,
    hash: number,
    next: Node | null,
    curve: Curve | null = null,
  ) {
    this.id = id;
    this.op = op;
    this.args = args;
    this.value = value;
    this.name = name;
    this.role = role;
    this.curve = curve;
    this.hash = hash;
    this.next = next;
    let rank = role === null ? -1 : SYMBOL_ROLES.indexOf(role);
    for (let i = 0; i < args.length; i += 1) if (args[i].rank > rank) rank = args[i].rank;
    this.rank = rank;
    this.nonNegative = nonNegative(op, args, value, name, curve);
    this.sineSquared =
      op === "power"
        ? isSine(args[0]) && args[1].value === 2
        : op === "product" && args.some((arg) => arg.sineSquared);
  }
}

function isSine(node: Node): boolean {
  return node.op === "call" && node.name === "sin";
}

function nonNegative(
  op: Operator,
  args: readonly Node[],
  value: number,
  name: string,
  curve: Curve | null,
): boolean {
  switch (op) {
    case "number":
      return value >= 0;
    case "sum":
    case "product":
      return args.every((arg) => arg.nonNegative);
    case "power": {
      const exponent = args[1];
      if (args[0].nonNegative) return true;
      // A root is real only where it is not negative; an even power never is.
      return exponent.op === "number" && (!Number.isInteger(exponent.value) || exponent.value % 2 === 0);
    }
    case "call":
      return name === "abs" || name === "exp" || name === "cosh";
    case "curve":
      return value === 0 && curve !== null && isNonNegative(curve);
    case "where":
      return args[1].nonNegative && args[2].nonNegative;
    case "symbol":
      return false;
    default:
      return true;
  }
}

/**
 * May x^a, and with it any x^b, be collected by adding exponents? For all real x (but 0) when they are whole. With a
 * root it holds only where the root is real: sqrt(x)*sqrt(x) is not x for x < 0, where it isn't a number; so the base
 * must be known not to be negative. Other powers count as a base of their own.
 */
export function collects(power: Node): boolean {
  const [base, exponent] = power.args;
  return base.nonNegative || (exponent.op === "number" && Number.isInteger(exponent.value));
}

export function baseOf(factor: Node): Node {
  return factor.op === "power" ? factor.args[0] : factor;
}

/** A term's numeric coefficient: 1 where none is written. */
export function coefficientOf(term: Node): number {
  if (term.op === "number") return term.value;
  return term.op === "product" && term.args[0].op === "number" ? term.args[0].value : 1;
}
