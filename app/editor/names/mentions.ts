import { conditionExpressions, eachReference, expressionsOf } from "../../../grammar/resolve/tree-walk.ts";
import type { Range } from "../../../grammar/source/span.ts";
import type {
  ElementDeclaration,
  Expression,
  File,
  IndexedName,
  Reference,
  Statement,
  System,
  Trial,
} from "../../../grammar/syntax/tree.ts";

/** A place in a text where a node or a value of a system is named: declared, wired, used in a law, overridden. */
export interface Mention {
  readonly file: string;
  readonly owner: Owner;
  readonly space: "node" | "value";
  readonly name: string;
  readonly range: Range;
  readonly declares: boolean;
}

/** A system by the file that declares it. */
export interface Owner {
  readonly file: string;
  readonly system: System;
}

export type Trees = ReadonlyMap<string, File>;

/** Every mention in one file, of its own systems and of those it uses. */
export function mentionsIn(path: string, trees: Trees): Mention[] {
  const tree = trees.get(path);
  if (tree === undefined) return [];
  return tree.items.flatMap((item) => {
    if (item.kind === "system") {
      const walk = new Walk(path, trees, { file: path, system: item });
      walk.statements(item.body, new Set());
      return walk.found;
    }
    if (item.kind !== "trial") return [];
    const owner = systemNamed(item.system.text, path, trees);
    if (owner === null) return [];
    const walk = new Walk(path, trees, owner);
    walk.trial(item);
    return walk.found;
  });
}

/** The system that a name means in a file: its own, or one that it brings in. */
function systemNamed(name: string, path: string, trees: Trees): Owner | null {
  const declaredIn = (file: string): Owner | null => {
    const items = trees.get(file)?.items ?? [];
    const found = items.find((item) => item.kind === "system" && item.name.text === name);
    return found?.kind === "system" ? { file, system: found } : null;
  };
  const used = (trees.get(path)?.items ?? []).flatMap((item) =>
    item.kind === "use" && (item.names === null || item.names.some(({ text }) => text === name))
      ? [item.path.value]
      : [],
  );
  return [path, ...used].map(declaredIn).find((owner) => owner !== null) ?? null;
}

class Walk {
  readonly found: Mention[] = [];
  readonly #file: string;
  readonly #trees: Trees;
  readonly #owner: Owner;
  readonly #subs: ReadonlyMap<string, string>;

  constructor(file: string, trees: Trees, owner: Owner) {
    this.#file = file;
    this.#trees = trees;
    this.#owner = owner;
    this.#subs = subsOf(owner.system.body);
  }

  statements(body: readonly Statement[], indices: ReadonlySet<string>): void {
    for (const statement of body) this.#statement(statement, indices);
  }

  trial({ body }: Trial): void {
    const none: ReadonlySet<string> = new Set();
    for (const statement of body) {
      switch (statement.kind) {
        case "set":
        case "vary":
          this.#value(statement.name.path, none);
          break;
        case "drive":
          this.#value(statement.input.path, none);
          this.#expression(statement.value, none);
          break;
        case "start":
          this.#statement(statement, none);
          break;
        case "record":
          for (const signal of statement.signals) this.#expression(signal, none);
          break;
        case "compare":
          this.#expression(statement.signal, none);
          break;
        case "expect":
          for (const part of conditionExpressions(statement.condition)) this.#expression(part, none);
          break;
      }
    }
  }

  #statement(statement: Statement, indices: ReadonlySet<string>): void {
    switch (statement.kind) {
      case "param":
      case "const":
      case "input":
      case "output":
      case "let":
      case "track":
        this.#add("value", statement.name.text, statement.name.range, true);
        break;
      case "junction":
      case "port":
        this.#declareNode(statement.name);
        break;
      case "element":
        this.#element(statement, indices);
        return;
      case "sub": {
        this.#declareNode(statement.name);
        const inner = this.#systemOf(statement.name.name.text);
        for (const { name } of statement.overrides) this.#add("value", name.text, name.range, false, inner);
        break;
      }
      case "wiring":
        for (const group of statement.groups) for (const end of group) this.#path(end.path);
        if (statement.as !== null) this.#declareNode(statement.as);
        break;
      case "repeat":
        this.statements(statement.body, new Set([...indices, statement.index.text]));
        break;
    }
    for (const expression of expressionsOf(statement)) this.#expression(expression, indices);
  }

  /** The element's own ports come before nodes of their name; without a law its name is also that of its value. */
  #element(element: ElementDeclaration, indices: ReadonlySet<string>): void {
    this.#declareNode(element.name);
    if (element.laws.length === 0 && element.valueOf === null) {
      const { text, range } = element.name.name;
      this.#add("value", text, range, false);
    }
    const ports = new Set(["in", "out", ...(element.ports ?? []).map(({ name }) => name.text)]);
    for (const expression of expressionsOf(element)) this.#expression(expression, indices, ports);
  }

  #expression(
    expression: Expression,
    indices: ReadonlySet<string>,
    ports: ReadonlySet<string> = new Set(),
  ): void {
    eachReference(expression, (reference) => this.#reference(reference, indices, ports));
  }

  #reference({ path }: Reference, indices: ReadonlySet<string>, ports: ReadonlySet<string>): void {
    if (path.length === 1) this.#value(path, indices);
    else if (path.length > 2 || !ports.has(path[0].name.text)) this.#path(path);
  }

  #value(path: readonly IndexedName[], indices: ReadonlySet<string>): void {
    const { text, range } = path[0].name;
    if (path.length > 1) this.#path(path);
    else if (!indices.has(text)) this.#add("value", text, range, false);
  }

  /** `sub.node.f`, `sub.output`, `node.e`: from the outside in. */
  #path(path: readonly IndexedName[]): void {
    let owner: Owner | null = this.#owner;
    for (const [depth, { name }] of path.entries()) {
      if (owner === null) return;
      const last = depth === path.length - 1;
      const space: Mention["space"] = depth > 0 && last && !declaresNode(owner, name.text) ? "value" : "node";
      this.#add(space, name.text, name.range, false, owner);
      const sub = subsOf(owner.system.body).get(name.text);
      owner = sub === undefined ? null : systemNamed(sub, owner.file, this.#trees);
    }
  }

  #declareNode({ name }: IndexedName): void {
    this.#add("node", name.text, name.range, true);
  }

  #systemOf(sub: string): Owner | null {
    const name = this.#subs.get(sub);
    return name === undefined ? null : systemNamed(name, this.#owner.file, this.#trees);
  }

  #add(
    space: Mention["space"],
    name: string,
    range: Range,
    declares: boolean,
    owner: Owner | null = this.#owner,
  ): void {
    if (owner !== null) this.found.push({ file: this.#file, owner, space, name, range, declares });
  }
}

const subs = new WeakMap<readonly Statement[], ReadonlyMap<string, string>>();

/** By name of the sub: the system it is an instance of. */
function subsOf(body: readonly Statement[]): ReadonlyMap<string, string> {
  const known = subs.get(body);
  if (known !== undefined) return known;
  const found = new Map<string, string>();
  for (const statement of flat(body))
    if (statement.kind === "sub") found.set(statement.name.name.text, statement.system.text);
  subs.set(body, found);
  return found;
}

function declaresNode({ system }: Owner, name: string): boolean {
  return flat(system.body).some((statement) => {
    if (statement.kind === "wiring") return statement.as?.name.text === name;
    const named =
      statement.kind === "junction" ||
      statement.kind === "element" ||
      statement.kind === "sub" ||
      statement.kind === "port";
    return named && statement.name.name.text === name;
  });
}

/** Statements with those within each `repeat`. */
export function flat(body: readonly Statement[]): Statement[] {
  return body.flatMap((statement) =>
    statement.kind === "repeat" ? [statement, ...flat(statement.body)] : [statement],
  );
}
