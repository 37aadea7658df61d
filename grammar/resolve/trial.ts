import type { Finding } from "../diagnostics/finding.ts";
import { nearest } from "../diagnostics/nearest.ts";
import type { Symbol } from "../symbolic/expression.ts";
import { symbolsOf } from "../symbolic/symbols.ts";
import type { Compare, Drive, Expression, Reference, Trial } from "../syntax/tree.ts";
import { DIMENSIONLESS } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Unit } from "../units/unit.ts";
import { describe } from "./describe.ts";
import { NO_INDICES } from "./draft.ts";
import { driveHelper, measuredPoints } from "./drive-helpers.ts";
import { type SourceFile, spanIn } from "./files.ts";
import type {
  FlatComparison,
  FlatDrive,
  FlatTrial,
  FlatVary,
  TrialExpectation,
  TrialSignal,
} from "./flat-trial.ts";
import type { FlatGraph, FlatParameter, FlatStart } from "./graph.ts";
import { fixedNumber, unitFor } from "./numbers.ts";
import { plainScope, type Scope } from "./scope.ts";
import { startTarget } from "./starts.ts";
import type { Translator } from "./translate.ts";
import { trialExpectation } from "./trial-conditions.ts";
import type { RunnableSystem } from "./trials.ts";

const SECOND = parseUnit("s") as Unit;

/** A trial whose text is at fault, or whose system is refused, has no graph: it is told as not run. */
export function flatTrial(
  file: SourceFile,
  trial: Trial,
  system: RunnableSystem | null,
): { trial: FlatTrial; findings: Finding[] } {
  const empty: FlatTrial = {
    name: trial.name.text,
    system: trial.system.text,
    description: describe(trial),
    span: spanIn(file, trial.name.range),
    graph: null,
    sets: new Map(),
    constants: new Map(),
    steady: null,
    starts: [],
    drives: [],
    duration: null,
    tolerance: null,
    every: null,
    records: [],
    varies: [],
    scatter: null,
    comparisons: [],
    expectations: [],
    texts: trial.body.flatMap((statement) =>
      statement.kind === "expect" || (statement.kind === "compare" && statement.limit !== null)
        ? [
            {
              text: textOf(file, statement.kind === "expect" ? statement.condition : statement),
              span: spanIn(file, statement.range),
            },
          ]
        : [],
    ),
  };
  if (system === null || system.graph === null || system.translator === null)
    return { trial: empty, findings: [] };
  const { translator, graph } = system;
  const before = translator.draft.findings.length;
  const reader = new TrialReader(file, translator, graph);
  const read = reader.read(trial);
  const findings = translator.draft.findings.splice(before);
  const refused =
    findings.some(({ severity }) => severity === "error") ||
    trial.body.some(({ kind }) => kind === "unreadable");
  return { trial: refused ? empty : { ...empty, ...read, graph }, findings };
}

function textOf(file: SourceFile, { range }: { range: { start: number; end: number } }): string {
  return file.source.text.slice(range.start, range.end);
}

class TrialReader {
  readonly #file: SourceFile;
  readonly #translator: Translator;
  readonly #graph: FlatGraph;
  readonly #scope: Scope;
  readonly #fixed: Scope;

  constructor(file: SourceFile, translator: Translator, graph: FlatGraph) {
    this.#file = file;
    this.#translator = translator;
    this.#graph = graph;
    const instance = translator.draft.instances[0];
    this.#scope = { ...plainScope(file, instance, NO_INDICES, false), warnsOfUnits: false };
    this.#fixed = plainScope(file, instance, NO_INDICES, true);
  }

  read({ body, name }: Trial): Partial<FlatTrial> {
    const sets = new Map<string, number>();
    const starts: FlatStart[] = [];
    const drives: FlatDrive[] = [];
    const records: TrialSignal[] = [];
    const varies: FlatVary[] = [];
    const comparisons: FlatComparison[] = [];
    const expectations: TrialExpectation[] = [];
    let [duration, tolerance, every, scatter]: (number | null)[] = [null, null, null, null];
    let steady: FlatTrial["steady"] = null;
    for (const statement of body) {
      switch (statement.kind) {
        case "set": {
          const parameter = this.#parameter(statement.name);
          const value = parameter && this.#numberLike(statement.value, parameter);
          if (parameter && value !== null && value !== undefined) sets.set(parameter.name, value);
          break;
        }
        case "start": {
          if (statement.target === null) {
            steady = spanIn(this.#file, statement.range);
            break;
          }
          const start = this.#start(statement.target, statement.value as Expression, statement.range);
          if (start !== null) starts.push(start);
          break;
        }
        case "drive": {
          const drive = this.#drive(statement);
          if (drive === null) break;
          if (drives.some(({ input }) => input === drive.input)) {
            this.#refuse("duplicate-name", statement.input.range, `\`${drive.input}\` is driven already.`);
          } else drives.push(drive);
          break;
        }
        case "run": {
          if (duration !== null) this.#refuse("duplicate-name", statement.range, "A trial has one `run`.");
          duration = this.#positive(statement.duration, SECOND, "The length of a run");
          tolerance = statement.tolerance && this.#positive(statement.tolerance, null, "The tolerance");
          every = statement.every && this.#positive(statement.every, SECOND, "The time between samples");
          if (tolerance !== null && tolerance > 0.1) {
            this.#refuse("law-form", statement.range, "A tolerance over 0.1 is no tolerance; 1e-6 is usual.");
          }
          break;
        }
        case "record":
          for (const tree of statement.signals) {
            const signal = this.#signal(tree);
            if (signal !== null) records.push(signal);
          }
          break;
        case "vary": {
          const parameter = this.#parameter(statement.name);
          if (parameter === null) break;
          const low = this.#numberLike(statement.low, parameter);
          const high = this.#numberLike(statement.high, parameter);
          const steps = this.#count(statement.steps, "The number of steps");
          if (low === null || high === null || steps === null) break;
          varies.push({ parameter: parameter.name, unit: parameter.unit, low, high, steps });
          break;
        }
        case "scatter":
          scatter = this.#count(statement.count, "The number of draws");
          break;
        case "compare": {
          const comparison = this.#comparison(statement);
          if (comparison !== null) comparisons.push(comparison);
          break;
        }
        case "expect": {
          const { condition, range } = statement;
          const text = textOf(this.#file, condition);
          const span = spanIn(this.#file, range);
          const made = trialExpectation(this.#translator, condition, this.#scope, text, span);
          if (made !== null) expectations.push(made);
          break;
        }
      }
    }
    if (duration === null && !body.some(({ kind }) => kind === "run" || kind === "unreadable")) {
      this.#refuse(
        "syntax",
        name.range,
        `The trial \`${name.text}\` does not say how long it runs: \`run for 10 s\`.`,
      );
    }
    const constants = this.#constants();
    return {
      sets,
      constants,
      starts,
      steady,
      drives,
      duration,
      tolerance,
      every,
      records,
      varies,
      scatter,
      comparisons,
      expectations,
    };
  }

  #constants(): Map<Symbol, number> {
    const known = new Set(this.#graph.parameters.map(({ symbol }) => symbol));
    const constants = new Map<Symbol, number>();
    for (const one of this.#translator.draft.consts.values()) {
      const symbol = one === "open" ? null : (one.typed.expr as Symbol);
      if (one !== "open" && symbol?.op === "symbol" && !known.has(symbol))
        constants.set(symbol, one.parameter.number);
    }
    return constants;
  }

  #refuse(name: Parameters<Translator["refuse"]>[0], range: Trial["range"], message: string): null {
    this.#translator.refuse(name, range, this.#scope, message);
    return null;
  }

  #parameter(reference: Reference): FlatParameter | null {
    const name = textOf(this.#file, reference).replace(/\s+/g, "");
    const found = this.#graph.parameters.find((parameter) => parameter.name === name && !parameter.constant);
    return (
      found ??
      this.#unknown(
        reference,
        name,
        "param",
        this.#graph.parameters.filter(({ constant }) => !constant),
      )
    );
  }

  #unknown(
    reference: Reference,
    name: string,
    kind: string,
    known: readonly { readonly name: string }[],
  ): null {
    const meant = nearest(
      name,
      known.map((one) => one.name),
    );
    const span = spanIn(this.#file, reference.range);
    const message = `${this.#graph.system} has no ${kind} \`${name}\`.${meant === null ? "" : ` Is \`${meant}\` meant?`}`;
    const fix = meant === null ? undefined : { title: `Write ${meant}`, edits: [{ span, text: meant }] };
    this.#translator.refuse("unknown-name", reference.range, this.#scope, message, { fix });
    return null;
  }

  #numberLike(tree: Expression, { name, unit }: FlatParameter): number | null {
    const number = fixedNumber(
      this.#translator,
      tree,
      this.#fixed,
      unit.dimension,
      unit,
      "This value",
      `\`${name}\``,
    );
    return number === null || Number.isFinite(number)
      ? number
      : this.#refuse("not-computable", tree.range, "This value is no finite number.");
  }

  #positive(tree: Expression, unit: Unit | null, what: string): number | null {
    const number = fixedNumber(
      this.#translator,
      tree,
      this.#fixed,
      unit?.dimension ?? DIMENSIONLESS,
      unit,
      what,
      "`run`",
    );
    return number === null || (number > 0 && Number.isFinite(number))
      ? number
      : this.#refuse("not-computable", tree.range, `${what} is a number greater than 0.`);
  }

  #count(tree: Expression, what: string): number | null {
    const number = fixedNumber(this.#translator, tree, this.#fixed, DIMENSIONLESS, null, what, "a trial");
    return number === null || (Number.isInteger(number) && number >= 1)
      ? number
      : this.#refuse("not-computable", tree.range, `${what} is a whole number, 1 or more.`);
  }

  #start(target: Reference, value: Expression, range: Trial["range"]): FlatStart | null {
    const found = startTarget(this.#translator, target, this.#scope);
    if (found === null) return null;
    const { measure, shown, symbol } = found;
    const number = fixedNumber(
      this.#translator,
      value,
      this.#fixed,
      measure,
      shown,
      "The start value",
      "this state",
    );
    return number === null ? null : { target: symbol, value: number, span: spanIn(this.#file, range) };
  }

  #drive(statement: Drive): FlatDrive | null {
    const name = textOf(this.#file, statement.input).replace(/\s+/g, "");
    const input = this.#graph.inputs.find((one) => one.name === name);
    if (input === undefined) return this.#unknown(statement.input, name, "input", this.#graph.inputs);
    const translator = this.#translator;
    const steps: FlatDrive["steps"][number][] = [];
    const context = { unit: input.unit, steps };
    translator.special = (tree, scope) =>
      tree.kind === "call" ? driveHelper(translator, tree, scope, context) : null;
    const written = translator.whole(statement.value, this.#scope);
    translator.special = null;
    const { dimension } = input.unit;
    const typed = translator.wanted(
      written,
      dimension,
      input.unit,
      statement.value.range,
      this.#scope,
      "This drive",
      `\`${name}\``,
    );
    if (typed.measure === "unknown") return null;
    const strange = [...symbolsOf(typed.expr)].find(
      ({ role }) => !["time", "parameter", "constant"].includes(role),
    );
    if (strange !== undefined) {
      const message =
        "A drive may depend on time and params alone; what depends on the model belongs in the model.";
      return this.#refuse("law-form", statement.value.range, message);
    }
    return { input: name, value: typed.expr, steps, span: spanIn(this.#file, statement.range) };
  }

  #signal(tree: Expression): TrialSignal | null {
    // An output keeps the unit in which it is to be shown.
    const output = this.#graph.outputs.find(({ name }) => name === textOf(this.#file, tree));
    if (output !== undefined) return output;
    const typed = this.#translator.whole(tree, this.#scope);
    if (typed.measure === "unknown") return null;
    if (typed.measure === "truth") return this.#refuse("law-form", tree.range, "A condition is no signal.");
    return { name: textOf(this.#file, tree), value: typed.expr, unit: unitFor(typed.measure, typed.shown) };
  }

  #comparison(statement: Compare): FlatComparison | null {
    const signal = this.#signal(statement.signal);
    if (signal === null) return null;
    const columns = statement.columns.map(({ value }) => value);
    const { path, range, limit } = statement;
    const points = measuredPoints(
      this.#translator,
      path.range,
      this.#scope,
      path.value,
      columns,
      signal.unit,
    );
    if (points === null) return null;
    const { text, span } = { text: textOf(this.#file, statement), span: spanIn(this.#file, range) };
    if (limit === null) return { signal, path: path.value, ...points, limit: null, text, span };
    const measure = limit.measure.text;
    if (measure !== "rms" && measure !== "max") {
      return this.#refuse("law-form", limit.measure.range, "A comparison is limited by `rms` or by `max`.");
    }
    const { dimension } = signal.unit;
    const value = fixedNumber(
      this.#translator,
      limit.value,
      this.#fixed,
      dimension,
      signal.unit,
      "This limit",
      "the signal",
    );
    if (value === null) return null;
    return {
      signal,
      path: path.value,
      ...points,
      limit: { measure, operator: limit.operator, value },
      text,
      span,
    };
  }
}
