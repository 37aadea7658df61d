import { type Cell, cell } from "./format-columns.ts";
import type { ExpressionWriter } from "./format-expression.ts";
import type {
  Condition,
  CurveDeclaration,
  ElementDeclaration,
  Expression,
  FileItem,
  IndexedName,
  Repeat,
  Statement,
  StringLiteral,
  SubDeclaration,
  System,
  Trial,
  TrialStatement,
  Unreadable,
  Wiring,
} from "./tree.ts";

export type Plain = Exclude<FileItem | Statement | TrialStatement, System | Trial | Repeat | Unreadable>;

export interface Written {
  readonly family: string | null;
  readonly cells: readonly Cell[];
}

/** One statement in the cells of its columns; the families say which statements are aligned with each other. */
export class StatementWriter {
  readonly #expressions: ExpressionWriter;

  constructor(expressions: ExpressionWriter) {
    this.#expressions = expressions;
  }

  write(statement: Plain): Written {
    const { kind } = statement;
    switch (kind) {
      case "use": {
        const names = statement.names === null ? "" : `${namesOf(statement.names)} from `;
        return alone(`use ${names}${quoted(statement.path)}`);
      }
      case "domain": {
        const { name, pseudo, effort, flow } = statement;
        return alone(`domain ${name.text} ${pseudo ? "pseudo " : ""}effort ${effort.text} flow ${flow.text}`);
      }
      case "function": {
        const { name, parameters, body } = statement;
        const end = (parameters.at(-1) ?? name).range.end;
        return alone(`function ${name.text}(${namesOf(parameters)}) =${this.#after(end, body)}`);
      }
      case "curve":
        return alone(this.#curve(statement));
      case "param":
      case "const": {
        const { bounds } = statement;
        const range = bounds === null ? "" : ` range ${this.#interval(bounds.low, bounds.high)}`;
        return this.#equation("value", kind, this.#valueName(statement), statement.value, range);
      }
      case "input": {
        const { unit, nominal } = statement;
        const cells = [cell(0, `input ${this.#valueName(statement).text}`), cell(1, `: ${unit.text}`)];
        if (nominal !== null) cells.push(cell(2, `=${this.#after(unit.range.end, nominal)}`));
        return { family: kind, cells };
      }
      case "output": {
        const unit = statement.unit === null ? "" : ` as ${statement.unit.text}`;
        return this.#equation(kind, kind, this.#valueName(statement), statement.value, unit);
      }
      case "let":
        return this.#equation(kind, kind, this.#valueName(statement), statement.value);
      case "track": {
        const from = statement.from === null ? "" : ` from ${this.#expressions.write(statement.from)}`;
        return this.#equation(kind, kind, this.#valueName(statement), statement.rate, from);
      }
      case "junction": {
        const { junction, name, domain } = statement;
        const cells = [cell(0, junction), cell(1, this.#expressions.indexed(name))];
        if (domain !== null) cells.push(cell(2, `: ${domain.text}`, { gap: 2 }));
        return { family: "node", cells };
      }
      case "element":
        return { family: "node", cells: this.#element(statement) };
      case "sub":
        return { family: "node", cells: this.#sub(statement) };
      case "port": {
        const { name, gives, domain } = statement;
        const rest = `${gives ? "gives" : "takes"}${domain === null ? "" : ` ${domain.text}`}`;
        return { family: kind, cells: [cell(0, `port ${this.#expressions.indexed(name)}`), cell(1, rest)] };
      }
      case "wiring":
        return this.#wiring(statement);
      case "start": {
        const { target, value } = statement;
        if (target === null || value === null) return alone("start steady");
        const name = { text: this.#expressions.reference(target), end: target.range.end };
        return this.#equation(kind, kind, name, value);
      }
      case "set":
      case "drive": {
        const target = statement.kind === "set" ? statement.name : statement.input;
        const name = { text: this.#expressions.reference(target), end: target.range.end };
        return this.#equation(kind, kind, name, statement.value);
      }
      case "run": {
        const { duration, tolerance, every } = statement;
        const write = (word: string, value: Expression | null) =>
          value === null ? "" : ` ${word} ${this.#expressions.write(value)}`;
        return alone(`run${write("for", duration)}${write("tolerance", tolerance)}${write("every", every)}`);
      }
      case "record":
        return alone(
          `record ${this.#expressions.list(statement.signals, statement.signals[0].range.start, "")}`,
        );
      case "vary": {
        const { name, low, high, steps } = statement;
        const over = this.#interval(low, high);
        return alone(
          `vary ${this.#expressions.reference(name)} over ${over} steps ${this.#expressions.write(steps)}`,
        );
      }
      case "scatter":
        return alone(`scatter ${this.#expressions.write(statement.count)}`);
      case "compare": {
        const { signal, path, columns, limit } = statement;
        const bound =
          limit === null
            ? ""
            : ` ${limit.measure.text} ${limit.operator} ${this.#expressions.write(limit.value)}`;
        return alone(
          `compare ${this.#expressions.write(signal)} with ${quoted(path)}${columnsOf(columns)}${bound}`,
        );
      }
      case "expect":
        return alone(`expect ${this.#condition(statement.condition)}`);
    }
  }

  /** The head of a block, without its brace. */
  head(block: System | Trial | Repeat): string {
    if (block.kind === "system") return `system ${block.name.text}`;
    if (block.kind === "trial") return `trial ${block.name.text} of ${block.system.text}`;
    const { index, low, high } = block;
    return `repeat ${index.text} = ${this.#interval(low, high)}`;
  }

  #equation(
    family: string,
    word: string,
    name: { text: string; end: number },
    value: Expression,
    rest = "",
  ): Written {
    const cells = [cell(0, `${word} ${name.text}`), cell(1, `=${this.#after(name.end, value)}${rest}`)];
    return { family, cells };
  }

  #valueName({ name, indices }: Pick<IndexedName, "name" | "indices">): { text: string; end: number } {
    const text = this.#expressions.indexed({ name, indices, range: name.range });
    return { text, end: indices.at(-1)?.range.end ?? name.range.end };
  }

  /** An expression behind a sign, on the same line or, where its author broke it, on the next. */
  #after(end: number, value: Expression): string {
    return this.#expressions.gap(end, value.range.start) + this.#expressions.write(value);
  }

  #interval(low: Expression, high: Expression): string {
    return `${this.#expressions.write(low)} ..${this.#after(low.range.end, high)}`;
  }

  #curve({ name, from, to, source, interpolation }: CurveDeclaration): string {
    const smooth = interpolation === "smooth" ? " smooth" : "";
    const head = `curve ${name.text} : ${from.text} -> ${to.text}`;
    if (source.kind === "file")
      return `${head} from ${quoted(source.path)}${columnsOf(source.columns)}${smooth}`;
    let points = "";
    let end = to.range.end;
    for (const { x, y, range } of source.points) {
      points += `${this.#expressions.gap(end, range.start)}(${this.#expressions.write(x)},${this.#after(x.range.end, y)})`;
      end = range.end;
    }
    return `${head} =${points}${smooth}`;
  }

  #element({ word, name, ports, domain, valueOf, laws }: ElementDeclaration): Cell[] {
    const list = ports?.map(
      (port) =>
        `${port.gives ? "gives " : ""}${port.name.text}${port.domain === null ? "" : ` : ${port.domain.text}`}`,
    );
    const label = this.#expressions.indexed(name) + (list === undefined ? "" : `(${list.join(", ")})`);
    const cells = [cell(0, word.text), cell(1, label)];
    const loose = ports !== null;
    const end = name.range.end;
    const law = valueOf === null ? this.#laws(laws) : `=${this.#after(end, valueOf)}`;
    if (domain !== null)
      cells.push(cell(2, `: ${domain.text}${law === "" ? "" : `  ${law}`}`, { gap: 2, loose }));
    else if (law !== "") {
      const placed = valueOf === null ? { gap: 2, loose } : { gap: 1, hang: 2, loose };
      cells.push(cell(2, law, placed));
    }
    return cells;
  }

  #laws(laws: ElementDeclaration["laws"]): string {
    let text = "";
    for (const [i, { left, oneWay, right, range }] of laws.entries()) {
      if (i > 0) text += `,${this.#expressions.gap(laws[i - 1].range.end, range.start)}`;
      text += `${this.#expressions.reference(left)} ${oneWay ? "<-" : "="}${this.#after(left.range.end, right)}`;
    }
    return text;
  }

  #sub({ name, system, overrides }: SubDeclaration): Cell[] {
    let list = "";
    let end = system.range.end;
    for (const [i, override] of overrides.entries()) {
      list += (i === 0 ? "" : ",") + this.#expressions.gap(end, override.range.start, i === 0 ? "" : " ");
      list += `${override.name.text} =${this.#after(override.name.range.end, override.value)}`;
      end = override.range.end;
    }
    const inside = overrides.length === 0 ? "" : `(${list})`;
    const lineBreak = this.#expressions.gap(name.range.end, system.range.start);
    return [
      cell(0, `sub ${this.#expressions.indexed(name)}`),
      cell(2, `=${lineBreak}${system.text}${inside}`, { hang: 2 }),
    ];
  }

  /** Lines that begin with one name are aligned on their first arrow; a path or a list stands for itself. */
  #wiring({ groups, arrows, as }: Wiring): Written {
    const first = groups[0];
    let text = "";
    for (const [i, { stroke, range }] of arrows.entries()) {
      const sign = stroke === null ? "->" : stroke === "to" ? "->|" : "|->";
      const group = groups[i + 1];
      text += `${i === 0 ? "" : " "}${sign}${this.#expressions.gap(range.end, group[0].range.start)}${this.#ends(group)}`;
    }
    if (as !== null) text += ` as ${this.#expressions.indexed(as)}`;
    const plain = first.length === 1 && first[0].path.length === 1;
    return { family: plain ? "wiring" : null, cells: [cell(0, this.#ends(first)), cell(1, text)] };
  }

  #ends(group: Wiring["groups"][number]): string {
    return this.#expressions.list(group, group[0].range.start, "");
  }

  #condition(condition: Condition): string {
    const write = (expression: Expression) => this.#expressions.write(expression);
    if (condition.kind === "between") {
      const { measure, low, high } = condition;
      return `${write(measure)} between ${write(low)} and${this.#after(low.range.end, high)}`;
    }
    const within = condition.within === null ? "" : ` within ${write(condition.within)}`;
    if (condition.kind === "fact") return write(condition.measure) + within;
    const { left, operator, right } = condition;
    return `${write(left)} ${operator}${this.#after(left.range.end, right)}${within}`;
  }
}

function alone(text: string): Written {
  return { family: null, cells: [cell(0, text)] };
}

function namesOf(names: readonly { readonly text: string }[]): string {
  return names.map(({ text }) => text).join(", ");
}

function quoted({ value }: StringLiteral): string {
  return `"${value}"`;
}

function columnsOf(columns: readonly StringLiteral[]): string {
  return columns.length === 0 ? "" : ` columns ${columns.map(quoted).join(", ")}`;
}
