import { type Curve, curveValue } from "../symbolic/curve.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { postorder } from "../symbolic/postorder.ts";

/**
 * Expression graphs as straight-line code: a tape of instructions, each of which makes one value from values made
 * before it. What is shared in the graph is worked out once; what holds no variable is worked out once for a run.
 */
export interface Program {
  readonly variables: readonly Symbol[];
  /** Largest parts that hold no variable: their values are given to a machine, not worked out by it. */
  readonly fixed: readonly Expr[];
  readonly tape: readonly Instruction[];
  /** By root: the instruction whose value it is. */
  readonly results: readonly number[];
  /** Outside functions by their index in `outside` instructions. */
  readonly outside: readonly ((a: number, b: number) => number)[];
}

/** Operands are indices of earlier instructions; of `load` the slot in memory, of `number` nothing. */
export interface Instruction {
  readonly op: TapeOperation;
  readonly a: number;
  readonly b: number;
  readonly c: number;
  readonly value: number;
}

export type TapeOperation =
  | "number"
  | "load"
  | "add"
  | "multiply"
  | "divide"
  | "negate"
  | "abs"
  | "sqrt"
  | "min"
  | "max"
  | "<"
  | "<="
  | ">"
  | ">="
  | "="
  | "!="
  /** b where a is not zero, else c. */
  | "select"
  /** The function of number `value` on a and b. */
  | "outside";

/** Runs a program over its memory: variables first, then fixed parts, then results. */
export interface Machine {
  readonly variables: Float64Array;
  readonly fixed: Float64Array;
  readonly results: Float64Array;
  run(): void;
}

export function slotsOf({ variables, fixed, results }: Program): number {
  return variables.length + fixed.length + results.length;
}

/** Compiles roots over the given variables; every other symbol counts as fixed for a run. */
export function compileProgram(roots: readonly Expr[], variables: readonly Symbol[]): Program {
  return new Compiler(variables).program(roots);
}

class Compiler {
  readonly #variables: readonly Symbol[];
  readonly #slots: Map<Expr, number>;
  readonly #varies = new Map<Expr, boolean>();
  readonly #values = new Map<Expr, number>();
  readonly #constants = new Map<number, number>();
  readonly #fixed: Expr[] = [];
  readonly #tape: Instruction[] = [];
  readonly #outside: ((a: number, b: number) => number)[] = [];
  readonly #functions = new Map<string, number>();

  constructor(variables: readonly Symbol[]) {
    this.#variables = variables;
    this.#slots = new Map(variables.map((symbol, i) => [symbol, i]));
  }

  program(roots: readonly Expr[]): Program {
    postorder(
      roots,
      (expr) => this.#varies.has(expr),
      (expr) => {
        const varies =
          expr.op === "symbol"
            ? this.#slots.has(expr)
            : expr.args.some((arg) => this.#varies.get(arg) === true);
        this.#varies.set(expr, varies);
      },
    );
    const isFixed = (expr: Expr) => this.#varies.get(expr) === false;
    postorder(
      roots,
      (expr) => this.#values.has(expr),
      (expr) => this.#values.set(expr, isFixed(expr) ? this.#fixedValue(expr) : this.#compiled(expr)),
      isFixed,
    );
    return {
      variables: this.#variables,
      fixed: this.#fixed,
      tape: this.#tape,
      results: roots.map((root) => this.#values.get(root) as number),
      outside: this.#outside,
    };
  }

  #fixedValue(expr: Expr): number {
    if (expr.op === "number") return this.#number(expr.value);
    this.#fixed.push(expr);
    return this.#emit("load", this.#variables.length + this.#fixed.length - 1);
  }

  #number(value: number): number {
    // A map tells 0 from -0 no more than a reader would.
    const known = this.#constants.get(value);
    if (known !== undefined && Object.is(this.#tape[known].value, value)) return known;
    const made = this.#emit("number", 0, 0, 0, value);
    this.#constants.set(value, made);
    return made;
  }

  #compiled(expr: Expr): number {
    const of = (arg: Expr) => this.#values.get(arg) as number;
    const { args } = expr;
    switch (expr.op) {
      case "number":
        return this.#number(expr.value);
      case "symbol":
        return this.#emit("load", this.#slots.get(expr) as number);
      case "sum":
        return this.#chain("add", args.map(of));
      case "product":
        return this.#quotient(args, of);
      case "power":
        return this.#power(of(args[0]), args[1], of(args[1]));
      case "call":
        return this.#call(expr.name, args.map(of));
      case "curve": {
        const [curve, order] = [expr.curve as Curve, expr.value];
        this.#outside.push((x) => curveValue(curve, order, x));
        const x = of(args[0]);
        return this.#emit("outside", x, x, 0, this.#outside.length - 1);
      }
      case "where":
        return this.#emit("select", of(args[0]), of(args[1]), of(args[2]));
      case "compare":
        return this.#emit(expr.name as TapeOperation, of(args[0]), of(args[1]));
      case "and":
        return this.#truth(
          this.#chain(
            "multiply",
            args.map((arg) => this.#truth(of(arg))),
          ),
        );
      case "or":
        return this.#truth(
          this.#chain(
            "add",
            args.map((arg) => this.#truth(of(arg))),
          ),
        );
      case "not":
        return this.#emit("=", of(args[0]), this.#number(0));
    }
  }

  /** As the evaluator has it: what stands below the fraction bar is divided by. */
  #quotient(factors: readonly Expr[], of: (arg: Expr) => number): number {
    const above: number[] = [];
    const below: number[] = [];
    for (const factor of factors) {
      const inverse = factor.op === "power" && factor.args[1].value === -1 && factor.args[1].op === "number";
      if (inverse && this.#varies.get(factor) === true) below.push(of(factor.args[0]));
      else above.push(of(factor));
    }
    const product = above.length === 0 ? this.#number(1) : this.#chain("multiply", above);
    return below.length === 0 ? product : this.#emit("divide", product, this.#chain("multiply", below));
  }

  #power(base: number, exponent: Expr, at: number): number {
    if (exponent.op === "number") {
      const n = exponent.value;
      if (n === 0.5) return this.#emit("sqrt", base);
      if (n === -0.5) return this.#emit("divide", this.#number(1), this.#emit("sqrt", base));
      if (Number.isInteger(n) && Math.abs(n) <= 4 && n !== 0) {
        const positive = this.#chain("multiply", new Array<number>(Math.abs(n)).fill(base));
        return n > 0 ? positive : this.#emit("divide", this.#number(1), positive);
      }
    }
    return this.#emit("outside", base, at, 0, this.#function("pow"));
  }

  #call(name: string, args: readonly number[]): number {
    if (name === "abs" || name === "sqrt") return this.#emit(name, args[0]);
    if (name === "min" || name === "max") return this.#chain(name, args);
    return this.#emit(
      "outside",
      args[0],
      args[1] ?? args[0],
      0,
      this.#function(name === "ln" ? "log" : name),
    );
  }

  #function(name: string): number {
    let index = this.#functions.get(name);
    if (index === undefined) {
      index = this.#outside.push(Math[name as "pow"]) - 1;
      this.#functions.set(name, index);
    }
    return index;
  }

  #truth(value: number): number {
    return this.#emit("!=", value, this.#number(0));
  }

  #chain(op: TapeOperation, values: readonly number[]): number {
    return values.reduce((left, right) => this.#emit(op, left, right));
  }

  #emit(op: TapeOperation, a: number, b = 0, c = 0, value = 0): number {
    return this.#tape.push({ op, a, b, c, value }) - 1;
  }
}
