import type {
  InputDeclaration,
  LetDeclaration,
  OutputDeclaration,
  Statement,
  System,
  TrackDeclaration,
  ValueDeclaration,
} from "../syntax/tree.ts";
import { eachReference, expressionsOf } from "./tree-walk.ts";

export type ValueStatement =
  | ValueDeclaration
  | InputDeclaration
  | OutputDeclaration
  | LetDeclaration
  | TrackDeclaration;

/** What is known of a system before any instance of it is made; worked out once for a tree and kept with it. */
export interface Template {
  readonly system: System;
  /** Statements of all depths, those inside a `repeat` once. */
  readonly statements: readonly Statement[];
  /** Names of values, those that others are computed from before those others, where that can be. */
  readonly valueOrder: readonly string[];
  /** Bare names in expressions, and names of elements that take their law from a value. */
  readonly uses: ReadonlySet<string>;
  /** Functions and curves that are called. */
  readonly calls: ReadonlySet<string>;
}

const templates = new WeakMap<System, Template>();

export function templateOf(system: System): Template {
  let template = templates.get(system);
  if (template === undefined) {
    template = makeTemplate(system);
    templates.set(system, template);
  }
  return template;
}

const VALUES: ReadonlySet<string> = new Set(["param", "const", "input", "output", "let", "track"]);

export function isValue(statement: Statement): statement is ValueStatement {
  return VALUES.has(statement.kind);
}

function makeTemplate(system: System): Template {
  const statements: Statement[] = [];
  const open: Statement[] = [...system.body].reverse();
  for (let statement = open.pop(); statement !== undefined; statement = open.pop()) {
    statements.push(statement);
    if (statement.kind === "repeat") for (const inner of [...statement.body].reverse()) open.push(inner);
  }
  const uses = new Set<string>();
  const calls = new Set<string>();
  const needs = new Map<string, string[]>();
  for (const statement of statements) {
    const needed: string[] = [];
    for (const expression of expressionsOf(statement)) {
      eachReference(
        expression,
        (reference) => {
          const name = reference.path[0].name.text;
          uses.add(name);
          needed.push(name);
        },
        (call) => calls.add(call.name.text),
      );
    }
    if (statement.kind === "element" && statement.laws.length === 0) uses.add(statement.name.name.text);
    if (isValue(statement) && !needs.has(statement.name.text)) needs.set(statement.name.text, needed);
  }
  return { system, statements, valueOrder: inOrder(needs), uses, calls };
}

/** Depth first without recursion; what goes round in a circle is found where values are worked out. */
function inOrder(needs: ReadonlyMap<string, readonly string[]>): string[] {
  const order: string[] = [];
  const seen = new Set<string>();
  for (const root of needs.keys()) {
    const stack: [name: string, next: number][] = seen.has(root) ? [] : [[root, 0]];
    seen.add(root);
    while (stack.length > 0) {
      const top = stack[stack.length - 1];
      const needed = needs.get(top[0]) as readonly string[];
      if (top[1] === needed.length) {
        order.push(top[0]);
        stack.pop();
        continue;
      }
      const name = needed[top[1]];
      top[1] += 1;
      if (needs.has(name) && !seen.has(name)) {
        seen.add(name);
        stack.push([name, 0]);
      }
    }
  }
  return order;
}
