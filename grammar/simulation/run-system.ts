import { newton } from "../analysis/newton.ts";
import { parametersAt } from "../analysis/point.ts";
import { type Slope, slopes } from "../analysis/slopes.ts";
import { unknownsOf } from "../analysis/unknowns.ts";
import type { StateModel } from "../equations/model.ts";
import { differentiation } from "../symbolic/derivative.ts";
import { evaluator } from "../symbolic/evaluate.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import type { Pool } from "../symbolic/pool.ts";
import { substitution } from "../symbolic/substitute.ts";
import { denseSolver } from "./linear-solver.ts";
import type { Place, Problem } from "./ode.ts";
import { compileProgram, type Machine, type Program } from "./program.ts";
import { freeze, type Switch } from "./switches.ts";
import { machineFor } from "./wasm.ts";

export interface RunInputs {
  /** Each input as an expression in time; one that is not named rests at its nominal value. */
  readonly drives: ReadonlyMap<string, Expr>;
  /** SI, of parameters that differ from the text. */
  readonly parameters: ReadonlyMap<string, number>;
  readonly constants?: ReadonlyMap<Symbol, number>;
  /** What is watched beside the rates, in terms of states, inputs, time and what loops leave unknown. */
  readonly watched: readonly Expr[];
}

interface Coded {
  readonly program: Program;
  readonly machine: Machine;
}

/** A model under its drives, compiled: rates, slopes and watched values at any time and state. */
export class RunSystem implements Problem {
  readonly size: number;
  readonly pattern: readonly Place[];
  readonly switches: readonly Switch[];
  /** By switch: what is held in its place, and its slope. */
  readonly holds: Float64Array;
  readonly slants: Float64Array;
  /** What stopped the last evaluation that gave no finite value. */
  failure: string | null = null;
  readonly #model: StateModel;
  readonly #valueOf: (expr: Expr) => number;
  readonly #rates: Coded;
  readonly #slopes: Coded;
  readonly #watched: Coded;
  readonly #senses: Coded;
  readonly #sizes: Coded;
  readonly #residuals: Coded | null;
  readonly #unknowns: Float64Array;
  readonly #unknownPattern: readonly Slope[];
  readonly #parts: SlopeParts;

  constructor(model: StateModel, inputs: RunInputs) {
    const { pool } = model.causal.graph;
    const time = pool.symbol("time", "time");
    const driven = substitution(pool, drivesOf(model, pool, inputs.drives, time));
    const unknowns = unknownsOf(model);
    const rates = model.equations.map(({ rate }) => driven(rate));
    const residuals = unknowns.residuals.map(driven);
    const all = [...rates, ...residuals, ...inputs.watched.map(driven)];
    const { roots, switches } = freeze(pool, all);
    const [n, m] = [rates.length, residuals.length];
    const [frozen, open, watched] = [roots.slice(0, n), roots.slice(n, n + m), roots.slice(n + m)];
    const states = model.states.map(({ symbol }) => symbol);
    const held = switches.flatMap(({ hold, slope }) => (slope === null ? [hold] : [hold, slope]));
    const variables = [...states, time, ...unknowns.symbols, ...held];

    this.#model = model;
    this.size = n;
    this.switches = switches;
    this.holds = new Float64Array(switches.length);
    this.slants = new Float64Array(switches.length);
    this.#unknowns = new Float64Array(m);
    const known = parametersAt(model.causal.graph, inputs.parameters);
    this.#valueOf = evaluator((symbol) => known(symbol) ?? inputs.constants?.get(symbol) ?? Number.NaN);
    const code = (exprs: readonly Expr[]): Coded => this.#code(exprs, variables);
    this.#rates = code(frozen);
    this.#watched = code(watched);
    this.#senses = code(switches.map(({ sense }) => sense));
    this.#sizes = code(frozen.map((rate) => sizeOf(pool, rate)));
    this.#unknownPattern = slopes(pool, open, unknowns.symbols);
    this.#residuals = m === 0 ? null : code([...open, ...this.#unknownPattern.map(({ value }) => value)]);
    this.#parts = slopeParts(pool, frozen, open, states, unknowns.symbols, time);
    this.#slopes = code(this.#parts.exprs);
    this.pattern = this.#parts.pattern;
  }

  /** The part of an expression that holds no variable, for this run's parameters. */
  fixedValue(expr: Expr): number {
    return this.#valueOf(expr);
  }

  rates(t: number, x: Float64Array, out: Float64Array): boolean {
    if (!this.#run(this.#rates, t, x)) return false;
    const { results } = this.#rates.machine;
    out.set(results);
    for (let i = 0; i < out.length; i += 1) {
      if (Number.isFinite(out[i])) continue;
      this.failure = `The rate of \`${this.#model.states[i].name}\` has no finite value here.`;
      return false;
    }
    return true;
  }

  slopes(t: number, x: Float64Array, entries: Float64Array, slope: Float64Array): boolean {
    if (!this.#run(this.#slopes, t, x)) return false;
    const done = this.#parts.gather(this.#slopes.machine.results, entries, slope);
    return done && entries.every(Number.isFinite) && slope.every(Number.isFinite);
  }

  magnitudes(t: number, x: Float64Array): Float64Array {
    this.#run(this.#sizes, t, x);
    return Float64Array.from(this.#sizes.machine.results, (value) => (Number.isFinite(value) ? value : 0));
  }

  /** Values of what is watched; the array is used again at the next call. */
  watch(t: number, x: Float64Array): Float64Array {
    this.#run(this.#watched, t, x);
    return this.#watched.machine.results;
  }

  /** By switch: what its sign decides by. */
  senses(t: number, x: Float64Array): Float64Array {
    this.#run(this.#senses, t, x);
    return this.#senses.machine.results;
  }

  #code(exprs: readonly Expr[], variables: readonly Symbol[]): Coded {
    const program = compileProgram(exprs, variables);
    const machine = machineFor(program);
    program.fixed.forEach((expr, i) => {
      machine.fixed[i] = this.#valueOf(expr);
    });
    return { program, machine };
  }

  #run({ machine }: Coded, t: number, x: Float64Array): boolean {
    if (this.#residuals !== null && !this.#solveUnknowns(this.#residuals.machine, t, x)) return false;
    this.#load(machine.variables, t, x);
    machine.run();
    return true;
  }

  #load(variables: Float64Array, t: number, x: Float64Array): void {
    variables.set(x);
    variables[this.size] = t;
    variables.set(this.#unknowns, this.size + 1);
    let at = this.size + 1 + this.#unknowns.length;
    for (let i = 0; i < this.switches.length; i += 1) {
      variables[at] = this.holds[i];
      at += 1;
      if (this.switches[i].slope === null) continue;
      variables[at] = this.slants[i];
      at += 1;
    }
  }

  /** Newton from where it stood last; where that fails, damped and from other places. */
  #solveUnknowns(machine: Machine, t: number, x: Float64Array): boolean {
    const m = this.#unknowns.length;
    const solver = denseSolver(m, this.#unknownPattern);
    const negative = new Float64Array(this.#unknownPattern.length);
    const residual = (z: ArrayLike<number>) => {
      this.#load(machine.variables, t, x);
      machine.variables.set(z, this.size + 1);
      machine.run();
      return machine.results;
    };
    const z = Float64Array.from(this.#unknowns);
    const step = new Float64Array(m);
    for (let round = 0; round < 12; round += 1) {
      const values = residual(z);
      for (let i = 0; i < m; i += 1) step[i] = values[i];
      for (let i = 0; i < negative.length; i += 1) negative[i] = values[m + i];
      if (!solver.factor(negative, 0)) break;
      solver.solve(step);
      let [most, size] = [0, 0];
      for (let i = 0; i < m; i += 1) {
        z[i] += step[i];
        most = Math.max(most, Math.abs(step[i]));
        size = Math.max(size, Math.abs(z[i]));
      }
      if (!Number.isFinite(most)) break;
      if (most <= 1e-13 * size || most === 0) {
        this.#unknowns.set(z);
        return true;
      }
    }
    const equations = {
      residual: (at: readonly number[]) => [...residual(at).subarray(0, m)],
      jacobian: (at: readonly number[]) => {
        const values = residual(at);
        const rows = Array.from({ length: m }, () => new Array<number>(m).fill(0));
        this.#unknownPattern.forEach(({ row, column }, i) => {
          rows[row][column] = values[m + i];
        });
        return rows;
      },
    };
    for (const guess of [null, 0, 1, -1, 1e-3, -1e-3, 1e3, -1e3]) {
      const found = newton(
        equations,
        guess === null ? [...this.#unknowns] : new Array<number>(m).fill(guess),
      );
      if (found === null) continue;
      this.#unknowns.set(found);
      return true;
    }
    const names = unknownsOf(this.#model).symbols.map(({ name }) => `\`${name}\``);
    this.failure = `No solution of the implicit equations was found for ${names.slice(0, 3).join(", ")}.`;
    return false;
  }
}

function drivesOf(
  model: StateModel,
  pool: Pool,
  drives: ReadonlyMap<string, Expr>,
  time: Symbol,
): ReadonlyMap<Expr, Expr> {
  const rateOf = differentiation(pool, time);
  return new Map(
    model.inputs.flatMap(({ name, symbol, nominal }): [Expr, Expr][] => {
      const drive = drives.get(name) ?? pool.number(nominal);
      return [
        [symbol, drive],
        [pool.symbol("inputRate", name), rateOf(drive)],
      ];
    }),
  );
}

/** What an expression is added up from: |a| + |b| for a - b, whatever their difference is. */
function sizeOf(pool: Pool, expr: Expr, depth = 0): Expr {
  if (depth > 6) return pool.call("abs", expr);
  if (expr.op === "sum") return pool.sum(expr.args.map((term) => sizeOf(pool, term, depth + 1)));
  if (expr.op === "product") return pool.product(expr.args.map((factor) => sizeOf(pool, factor, depth + 1)));
  return pool.call("abs", expr);
}

interface SlopeParts {
  readonly exprs: readonly Expr[];
  readonly pattern: readonly Place[];
  gather(values: Float64Array, entries: Float64Array, slope: Float64Array): boolean;
}

/** ∂f/∂x and ∂f/∂t; through what loops leave unknown: f_x − f_z·g_z⁻¹·g_x, which fills the matrix. */
function slopeParts(
  pool: Pool,
  rates: readonly Expr[],
  residuals: readonly Expr[],
  states: readonly Symbol[],
  unknowns: readonly Symbol[],
  time: Symbol,
): SlopeParts {
  const [n, m] = [states.length, unknowns.length];
  const direct = slopes(pool, rates, states);
  const inTime = slopes(pool, rates, [time]);
  const first = [...direct, ...inTime].map(({ value }) => value);
  if (m === 0) {
    return {
      exprs: first,
      pattern: direct.map(({ row, column }) => ({ row, column })),
      gather(values, entries, slope) {
        entries.set(values.subarray(0, direct.length));
        slope.fill(0);
        inTime.forEach(({ row }, i) => {
          slope[row] = values[direct.length + i];
        });
        return true;
      },
    };
  }
  const byUnknown = slopes(pool, rates, unknowns);
  const own = slopes(pool, residuals, unknowns);
  // The column after the states is time.
  const given = slopes(pool, residuals, [...states, time]);
  const solver = denseSolver(m, own);
  const pattern = Array.from({ length: n * n }, (_, i) => ({ row: Math.floor(i / n), column: i % n }));
  return {
    exprs: [...first, ...[...byUnknown, ...own, ...given].map(({ value }) => value)],
    pattern,
    gather(values, entries, slope) {
      let at = 0;
      const next = (count: number) => {
        at += count;
        return values.subarray(at - count, at);
      };
      entries.fill(0);
      slope.fill(0);
      const [fx, ft, fz] = [next(direct.length), next(inTime.length), next(byUnknown.length)];
      const [gz, gx] = [next(own.length), next(given.length)];
      direct.forEach(({ row, column }, i) => {
        entries[row * n + column] = fx[i];
      });
      inTime.forEach(({ row }, i) => {
        slope[row] = ft[i];
      });
      // The solver takes 0·I − J, so its solutions are −g_z⁻¹·b.
      if (!solver.factor(Float64Array.from(gz), 0)) return false;
      for (let column = 0; column <= n; column += 1) {
        const b = new Float64Array(m);
        given.forEach((place, i) => {
          if (place.column === column) b[place.row] = gx[i];
        });
        if (b.every((value) => value === 0)) continue;
        solver.solve(b);
        byUnknown.forEach(({ row, column: unknown }, i) => {
          if (column === n) slope[row] += fz[i] * b[unknown];
          else entries[row * n + column] += fz[i] * b[unknown];
        });
      }
      return true;
    },
  };
}
