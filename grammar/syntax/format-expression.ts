import type { BinaryOperator, Expression, IndexedName, Reference } from "./tree.ts";

/**
 * Expressions as the formatter writes them: `*`, `/` and `^` close up, other operators stand between blanks, and an
 * index closes up altogether (`cell[i-1]`). After a unit every operator stands free, or it would be read as part of
 * it. A line break of the author after an operator or a comma stays: here as a bare line end, which the caller indents.
 */
export class ExpressionWriter {
  readonly #text: string;

  constructor(text: string) {
    this.#text = text;
  }

  /** What stands between two parts: the author's line break, or else `otherwise`. */
  gap(from: number, to: number, otherwise = " "): string {
    for (let at = from; at < to; at += 1) {
      const sign = this.#text.charCodeAt(at);
      if (sign === 10 || sign === 13) return "\n";
    }
    return otherwise;
  }

  write(expression: Expression): string {
    switch (expression.kind) {
      case "number":
        return expression.text;
      case "quantity":
        return `${expression.text} ${expression.unit.text}`;
      case "string":
        return `"${expression.value}"`;
      case "reference":
        return this.reference(expression);
      case "unary":
        return this.#unary(expression.operator, expression.operand);
      case "binary":
        return this.#chain(expression);
      case "call": {
        const { name, arguments: list } = expression;
        return `${name.text}(${this.list(list, name.range.end, "")})`;
      }
      case "where": {
        const { then: value, condition, otherwise } = expression;
        const afterWhere = this.gap(value.range.end, condition.range.start);
        const afterElse = this.gap(condition.range.end, otherwise.range.start);
        return `${this.write(value)} where${afterWhere}${this.write(condition)} else${afterElse}${this.write(otherwise)}`;
      }
      case "group":
        return `(${this.gap(expression.range.start, expression.inner.range.start, "")}${this.write(expression.inner)})`;
      case "missing":
        return "";
    }
  }

  /** Parts joined by commas; `from` is where what stands before the first ends. */
  list(parts: readonly Expression[], from: number, first: string): string {
    let text = "";
    let end = from;
    for (const [i, part] of parts.entries()) {
      text +=
        (i === 0 ? "" : ",") + this.gap(end, part.range.start, i === 0 ? first : " ") + this.write(part);
      end = part.range.end;
    }
    return text;
  }

  reference({ path }: Reference): string {
    return path.map((part) => this.indexed(part)).join(".");
  }

  indexed({ name, indices }: IndexedName): string {
    return name.text + indices.map((index) => `[${this.#index(index)}]`).join("");
  }

  #index(index: Expression): string {
    if (
      index.kind === "binary" &&
      isPlain(index.left) &&
      isPlain(index.right) &&
      CLOSES_UP.has(index.operator)
    ) {
      return this.write(index.left) + index.operator + this.write(index.right);
    }
    return this.write(index);
  }

  #unary(operator: string, operand: Expression): string {
    const apart = operator === "not" || (operand.kind === "unary" && operand.operator !== "not");
    return `${operator}${apart ? " " : ""}${this.write(operand)}`;
  }

  /** Walks down the left side in a loop: a sum may have thousands of terms. */
  #chain(whole: Expression & { kind: "binary" }): string {
    const links: (Expression & { kind: "binary" })[] = [];
    let first: Expression = whole;
    while (first.kind === "binary") {
      links.push(first);
      first = first.left;
    }
    const pieces = [this.write(first)];
    for (let link = links.pop(); link !== undefined; link = links.pop()) {
      const { operator, left, right } = link;
      const close = (operator === "*" || operator === "/" || operator === "^") && !endsInUnit(left);
      const after = this.gap(left.range.end, right.range.start, close ? "" : " ");
      pieces.push(close ? operator : ` ${operator}`, after, this.write(right));
    }
    return pieces.join("");
  }
}

const CLOSES_UP: ReadonlySet<BinaryOperator> = new Set(["+", "-", "*", "/"]);

function isPlain(expression: Expression): boolean {
  return expression.kind === "number" || expression.kind === "reference";
}

function endsInUnit(expression: Expression): boolean {
  let last = expression;
  for (;;) {
    if (last.kind === "quantity") return true;
    if (last.kind === "binary") last = last.right;
    else if (last.kind === "unary") last = last.operand;
    else if (last.kind === "where") last = last.otherwise;
    else return false;
  }
}
