/**
 * The yardstick of the parser's speed: a scanner and a recursive descent that know nothing but the four statements of
 * the measured text, keep no comments, give no findings and stop at nothing. Slower than this a parser must be.
 */
interface Node {
  readonly kind: string;
  readonly start: number;
  readonly parts: readonly (Node | string)[];
}

export function readByHand(text: string): Node[] {
  let at = 0;
  let kind = "";
  let word = "";
  let start = 0;
  const statements: Node[] = [];
  advance();
  while (kind !== "end") {
    if (kind === "line") advance();
    else statements.push(statement());
  }
  return statements;

  /** The next token: its first sign stands for its kind, but for words, numbers and line ends. */
  function advance(): void {
    let code = text.charCodeAt(at);
    while (code === 32) code = text.charCodeAt(++at);
    start = at;
    if (at >= text.length) kind = "end";
    else if (code === 10) {
      kind = "line";
      at += 1;
    } else if (isLetter(code)) {
      while (isLetter(code) || isDigit(code)) code = text.charCodeAt(++at);
      kind = "word";
      word = text.slice(start, at);
    } else if (isDigit(code)) {
      while (isDigit(code) || code === 46 || code === 101) code = text.charCodeAt(++at);
      kind = "number";
      word = text.slice(start, at);
    } else if (code === 45 && text.charCodeAt(at + 1) === 45) {
      at = text.indexOf("\n", at);
      advance();
    } else if (code === 45 && text.charCodeAt(at + 1) === 62) {
      kind = "->";
      at += 2;
    } else {
      kind = text[at];
      at += 1;
    }
  }

  function isAt(wanted: string): boolean {
    return kind === wanted;
  }

  function take(): string {
    const taken = word;
    advance();
    return taken;
  }

  function statement(): Node {
    const from = start;
    const head = take();
    const parts: (Node | string)[] = [];
    while (kind !== "line" && kind !== "end") {
      if (kind === "=") {
        advance();
        parts.push(sum());
      } else if (kind === "word" || kind === "number") parts.push(take());
      else advance();
    }
    return { kind: head, start: from, parts };
  }

  function sum(): Node {
    let left = product();
    while (kind === "+" || kind === "-") {
      const sign = kind;
      advance();
      left = { kind: sign, start: left.start, parts: [left, product()] };
    }
    return left;
  }

  function product(): Node {
    let left = operand();
    while (kind === "*" || kind === "/" || kind === "^") {
      const sign = kind;
      advance();
      left = { kind: sign, start: left.start, parts: [left, operand()] };
    }
    return left;
  }

  function operand(): Node {
    const from = start;
    if (kind === "-") {
      advance();
      return { kind: "negative", start: from, parts: [operand()] };
    }
    if (kind === "(") {
      advance();
      const inner = sum();
      advance();
      return inner;
    }
    if (kind === "number") {
      const value = take();
      if (!isAt("word")) return { kind: "number", start: from, parts: [value] };
      const unit = start;
      while (at < text.length && !/[\s)]/.test(text[at])) at += 1;
      const written = text.slice(unit, at);
      advance();
      return { kind: "quantity", start: from, parts: [value, written] };
    }
    const path = [take()];
    while (kind === ".") {
      advance();
      path.push(take());
    }
    if (kind !== "(") return { kind: "reference", start: from, parts: path };
    advance();
    const argument = sum();
    advance();
    return { kind: "call", start: from, parts: [path[0], argument] };
  }
}

function isLetter(code: number): boolean {
  return (code >= 97 && code <= 122) || (code >= 65 && code <= 90) || code === 95;
}

function isDigit(code: number): boolean {
  return code >= 48 && code <= 57;
}
