import type { Expr } from "../symbolic/expression.ts";
import { nameLatex, symbolLatex } from "./latex-name.ts";
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

export interface LatexOptions {
  /** Put round each top-level summand, whose index is its place among the sum's arguments: `\htmlData{term=3}`. */
  readonly mark?: (index: number) => string;
  /** Summands on a line of a long sum; 0 never breaks. */
  readonly termsPerLine?: number;
}

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
  readonly level: number;
  readonly unsigned: boolean;
  readonly turned: boolean;
  /** How many groups of braces this stands in: readers of LaTeX recurse, so depth is bounded. */
  readonly depth: number;
}

type Task = string | Piece;

const DEEPEST = 60;
/** Fractions within fractions are written with a stroke from here on: smaller print can't be read. */
const DEEPEST_FRACTION = 2;
const LONGEST = 400_000;

/** An expression for KaTeX or any LaTeX; what stands in names is escaped, so that a model cannot carry a command. */
export function expressionLatex(expr: Expr, options: LatexOptions = {}): string {
  return lines(expr, options).join("\\\\ ");
}

/** A summand without the sign that stands before it. */
export function termLatex({ term, turned }: SignedTerm): string {
  return render({ expr: term, level: LEVEL.product, unsigned: true, turned, depth: 0 });
}

/** `left = right`, over several aligned lines where the sum is long. */
export function equationLatex(left: string, right: Expr, options: LatexOptions = {}): string {
  const [first, ...more] = lines(right, options);
  if (more.length === 0) return `${left} = ${first}`;
  return `\\begin{aligned}${left} &= ${first}${more.map((line) => `\\\\ &\\quad ${line}`).join("")}\\end{aligned}`;
}

function lines(expr: Expr, { mark, termsPerLine = 0 }: LatexOptions): string[] {
  const perLine = termsPerLine > 0 ? termsPerLine : Number.POSITIVE_INFINITY;
  const out: string[] = [];
  termsOf(expr).forEach(({ term, index, negative, turned }, place) => {
    const sign = place === 0 ? (negative ? "-" : "") : negative ? "- " : "+ ";
    const single = expr.op !== "sum";
    const body = render({
      expr: term,
      level: single ? LEVEL.where : LEVEL.product,
      unsigned: true,
      turned,
      depth: 0,
    });
    // The empty group keeps the sign a binary one, with its spaces, at the start of the marked group.
    const joint = place === 0 ? sign : `{}${sign}`;
    const text = mark === undefined ? `${sign}${body}` : `${mark(index)}{${joint}${body}}`;
    if (place % perLine === 0) out.push(text);
    else out[out.length - 1] += ` ${text}`;
  });
  return out;
}

function render(root: Piece): string {
  const out: string[] = [];
  let length = 0;
  const tasks: Task[] = [root];
  for (let task = tasks.pop(); task !== undefined; task = tasks.pop()) {
    if (typeof task !== "string") {
      // Over the limit the braces that are open are still closed, with nothing more inside.
      const parts = length > LONGEST || task.depth > DEEPEST ? ["\\ldots "] : write(task);
      for (let i = parts.length - 1; i >= 0; i -= 1) tasks.push(parts[i]);
    } else {
      out.push(task);
      length += task.length;
    }
  }
  return out.join("");
}

function write(piece: Piece): Task[] {
  const { expr, level, unsigned, turned } = piece;
  const inside = (arg: Expr, at: number): Piece => ({
    expr: arg,
    level: at,
    unsigned: false,
    turned: false,
    depth: piece.depth + 1,
  });
  switch (expr.op) {
    case "symbol":
      return [symbolLatex(expr)];
    case "sum":
      return bracketed(LEVEL.sum, level, sum(piece));
    case "number":
    case "product":
    case "power":
      return quotient(
        quotientOf(expr, turned || (!unsigned && takesMinus(expr))),
        level,
        unsigned,
        piece.depth,
      );
    case "call":
      return call(expr, inside);
    case "curve": {
      const name = `{${nameLatex(expr.name)}}${"'".repeat(expr.value)}`;
      return [name, "\\left(", inside(expr.args[0], LEVEL.where), "\\right)"];
    }
    case "where": {
      const [condition, then, otherwise] = expr.args;
      const head = ["\\begin{cases}", inside(then, LEVEL.or), "& \\text{if } ", inside(condition, LEVEL.or)];
      const parts = [...head, "\\\\ ", inside(otherwise, LEVEL.or), "& \\text{otherwise}\\end{cases}"];
      return level > LEVEL.compare ? ["\\left(", ...parts, "\\right)"] : parts;
    }
    case "compare": {
      const [left, right] = expr.args;
      const parts = [inside(left, LEVEL.sum), ` ${COMPARISONS[expr.name] ?? "="} `, inside(right, LEVEL.sum)];
      return bracketed(LEVEL.compare, level, parts);
    }
    case "and":
      return bracketed(
        LEVEL.and,
        level,
        joined(
          expr.args.map((arg) => inside(arg, LEVEL.not)),
          " \\land ",
        ),
      );
    case "or":
      return bracketed(
        LEVEL.or,
        level,
        joined(
          expr.args.map((arg) => inside(arg, LEVEL.and)),
          " \\lor ",
        ),
      );
    case "not":
      return bracketed(LEVEL.not, level, ["\\lnot ", inside(expr.args[0], LEVEL.base)]);
  }
}

const COMPARISONS: Readonly<Record<string, string>> = {
  "<": "<",
  "<=": "\\le",
  ">": ">",
  ">=": "\\ge",
  "=": "=",
  "!=": "\\ne",
};

const FUNCTIONS: Readonly<Record<string, string>> = {
  asin: "\\arcsin",
  acos: "\\arccos",
  atan: "\\arctan",
  atan2: "\\operatorname{atan2}",
  log10: "\\log_{10}",
  sign: "\\operatorname{sgn}",
};

function call({ name, args }: Expr, inside: (arg: Expr, level: number) => Piece): Task[] {
  const parts = joined(
    args.map((arg) => inside(arg, LEVEL.where)),
    ", ",
  );
  if (name === "abs") return ["\\left|", ...parts, "\\right|"];
  // All other functions of the notation (sin, tanh, exp, min …) are LaTeX commands of the same name.
  return [FUNCTIONS[name] ?? `\\${name}`, "\\left(", ...parts, "\\right)"];
}

function bracketed(own: number, asked: number, parts: Task[]): Task[] {
  return own >= asked ? parts : ["\\left(", ...parts, "\\right)"];
}

function joined(pieces: readonly Task[], separator: string): Task[] {
  return pieces.flatMap((piece, i) => (i === 0 ? [piece] : [separator, piece]));
}

function sum({ expr, depth, turned: allTurned }: Piece): Task[] {
  return termsOf(expr, allTurned).flatMap(({ term, negative, turned }, place): Task[] => {
    const sign = place === 0 ? (negative ? "-" : "") : negative ? " - " : " + ";
    return [sign, { expr: term, level: LEVEL.product, unsigned: true, turned, depth: depth + 1 }];
  });
}

function quotient(shape: Quotient, level: number, unsigned: boolean, depth: number): Task[] {
  const { coefficient, divisor, above, below } = shape;
  const minus = shape.negative && !unsigned;
  const fraction = below.length > 0 || divisor !== 1;
  const stroke = fraction && depth >= DEEPEST_FRACTION;
  // Alone above or below a fraction's line a sum needs no brackets.
  const bare = (factors: readonly Factor[], number: number) =>
    fraction && !stroke && factors.length === 1 && number === 1;
  const top = times(coefficient, above, depth, bare(above, coefficient));
  const bottom = times(divisor, below, depth, bare(below, divisor));
  const single = above.length + (coefficient === 1 ? 0 : 1) <= 1 && !fraction;
  const own = minus
    ? LEVEL.sum
    : fraction || !single
      ? LEVEL.product
      : above.length === 0 || isRoot(above[0])
        ? LEVEL.base
        : LEVEL.factor;
  const parts = !fraction
    ? top
    : stroke
      ? [
          ...top,
          "/",
          ...(below.length + (divisor === 1 ? 0 : 1) > 1 ? ["\\left(", ...bottom, "\\right)"] : bottom),
        ]
      : ["\\frac{", ...top, "}{", ...bottom, "}"];
  return bracketed(own, level, minus ? ["-", ...parts] : parts);
}

function times(number: number, factors: readonly Factor[], depth: number, bare: boolean): Task[] {
  const parts: Task[][] = factors.map((factor) => power(factor, depth + 1, bare));
  if (number !== 1 || factors.length === 0) parts.unshift([numberLatex(number)]);
  return parts.flatMap((part, i): Task[] => (i === 0 ? part : [" \\, ", ...part]));
}

/** Written within its own sign, which holds together of itself. */
function isRoot(factor: Factor): boolean {
  return factor.kind !== "power" || factor.exponent === 0.5;
}

function power(factor: Factor, depth: number, bare: boolean): Task[] {
  if (factor.kind !== "power") {
    const inside = quotient(factor.of, LEVEL.where, false, depth);
    return factor.kind === "root" ? ["\\sqrt{", ...inside, "}"] : ["\\left|", ...inside, "\\right|"];
  }
  const { base, exponent } = factor;
  const part = (expr: Expr, level: number, turned = false): Piece => ({
    expr,
    level,
    unsigned: false,
    turned,
    depth,
  });
  if (exponent === 1) return [part(base, bare ? LEVEL.where : LEVEL.factor, factor.turned)];
  if (isRoot(factor)) return ["\\sqrt{", part(base, LEVEL.where), "}"];
  if (typeof exponent !== "number")
    return ["{", part(base, LEVEL.base), "}^{", part(exponent, LEVEL.where), "}"];
  const { coefficient, divisor } = splitNumber(exponent, true);
  const raised = divisor === 1 ? numberLatex(coefficient) : `${numberLatex(coefficient)}/${divisor}`;
  return ["{", part(base, LEVEL.base), "}^{", raised, "}"];
}

/** `2.5e-7` as a power of ten. */
function numberLatex(value: number): string {
  const text = numberText(value);
  if (text.endsWith("inf")) return value > 0 ? "\\infty " : "-\\infty ";
  if (text === "nan") return "\\mathrm{nan}";
  const [digits, tens] = text.split("e");
  if (tens === undefined) return digits;
  return digits === "1" ? `10^{${tens}}` : `${digits} \\cdot 10^{${tens}}`;
}
