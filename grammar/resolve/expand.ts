import { finding } from "../diagnostics/finding.ts";
import type {
  IndexedName,
  Repeat,
  Statement,
  SubDeclaration,
  System,
  Unreadable,
  Wiring,
} from "../syntax/tree.ts";
import {
  type Draft,
  type DraftNode,
  type Indices,
  type Instance,
  type Named,
  NO_INDICES,
  spanOf,
  type Value,
} from "./draft.ts";
import { type SourceFile, spanIn } from "./files.ts";
import type { NodeKind } from "./graph.ts";
import { fullName, unknownName } from "./names.ts";
import { DEEPEST_REPEAT, MOST_BONDS, MOST_STATEMENTS } from "./size.ts";
import { wholeScope } from "./structure.ts";
import { isValue, templateOf, type ValueStatement } from "./template.ts";
import { wholeNumber } from "./whole-numbers.ts";
import { wire } from "./wiring.ts";

/** Suggests where else in the set a system of this name stands; null where nobody has one. */
export type FindSystem = (name: string) => string | null;

/** Makes every node, value and bond of a system and of the subs in it; names are full from here on. */
export function expand(draft: Draft, system: System, file: SourceFile, findSystem: FindSystem): Instance {
  return new Expansion(draft, findSystem).instantiate(system, file, "", null, null, NO_INDICES);
}

class Expansion {
  readonly #draft: Draft;
  readonly #findSystem: FindSystem;
  #statements = 0;

  constructor(draft: Draft, findSystem: FindSystem) {
    this.#draft = draft;
    this.#findSystem = findSystem;
  }

  instantiate(
    system: System,
    file: SourceFile,
    prefix: string,
    parent: Instance | null,
    declaration: SubDeclaration | null,
    indices: Indices,
  ): Instance {
    const instance: Instance = {
      kind: "sub",
      template: templateOf(system),
      file,
      prefix,
      parent,
      declaration,
      nodes: new Map(),
      values: new Map(),
      structural: new Set(),
      unread: new Set(),
    };
    this.#draft.instances.push(instance);
    for (const statement of system.body)
      if (isValue(statement)) this.#declareValue(instance, statement, NO_INDICES, indices);
    if (parent !== null && declaration !== null) this.#checkOverrides(instance, parent, declaration);
    const wirings: { wiring: Wiring; indices: Indices }[] = [];
    this.#walk(instance, system.body, NO_INDICES, wirings, 0);
    for (const { wiring, indices: turn } of wirings) wire(this.#draft, instance, wiring, turn);
    return instance;
  }

  #walk(
    instance: Instance,
    body: readonly Statement[],
    indices: Indices,
    wirings: { wiring: Wiring; indices: Indices }[],
    depth: number,
  ): void {
    for (const statement of body) {
      this.#statements += 1;
      if (this.#statements > MOST_STATEMENTS || this.#draft.bonds.length > MOST_BONDS) {
        this.#tooLarge(instance);
        return;
      }
      switch (statement.kind) {
        case "junction":
          this.#declareNode(instance, statement.name, statement.junction, statement, indices);
          break;
        case "element":
          this.#declareNode(instance, statement.name, statement.element, statement, indices);
          break;
        case "port":
          this.#declareNode(instance, statement.name, "port", statement, indices);
          break;
        case "sub":
          this.#declareSub(instance, statement, indices);
          break;
        case "wiring":
          wirings.push({ wiring: statement, indices });
          break;
        case "start":
          this.#draft.starts.push({ statement, instance, indices });
          break;
        case "unreadable":
          this.#unreadable(instance, statement);
          break;
        case "expect":
          if (instance.parent === null) this.#draft.expects.push({ statement, instance, indices });
          break;
        case "repeat":
          this.#repeat(instance, statement, indices, wirings, depth);
          break;
        default:
          if (indices !== NO_INDICES) this.#declareValue(instance, statement, indices, NO_INDICES);
      }
    }
  }

  #repeat(
    instance: Instance,
    statement: Repeat,
    indices: Indices,
    wirings: { wiring: Wiring; indices: Indices }[],
    depth: number,
  ): void {
    const draft = this.#draft;
    const scope = wholeScope(instance, indices);
    const low = wholeNumber(statement.low, scope);
    const high = wholeNumber(statement.high, scope);
    if (low === null || high === null) {
      const range = low === null ? statement.low.range : statement.high.range;
      draft.broken = true;
      draft.report(
        finding(
          "syntax",
          spanOf(instance, range),
          "A repeat counts between whole numbers, made of numbers, indices and params.",
        ),
      );
      return;
    }
    if (high < low) return;
    if (depth >= DEEPEST_REPEAT) {
      this.#tooLarge(instance);
      return;
    }
    for (let i = low; i <= high; i += 1) {
      this.#statements += 1;
      if (this.#statements > MOST_STATEMENTS || draft.bonds.length > MOST_BONDS) {
        this.#tooLarge(instance);
        return;
      }
      this.#walk(instance, statement.body, new Map(indices).set(statement.index.text, i), wirings, depth + 1);
    }
  }

  /** Says again what is wrong with the text of a sub, whose file may not be the one that is checked. */
  #unreadable(instance: Instance, statement: Unreadable): void {
    this.#draft.broken = true;
    this.#draft.unread = true;
    for (const found of instance.file.syntaxErrors) {
      if (found.span.start >= statement.range.start && found.span.end <= statement.range.end)
        this.#draft.report(found);
    }
    const { declares } = statement;
    if (declares?.space === "node") instance.nodes.set(declares.name.text, { kind: "broken" });
    if (declares?.space === "value") instance.unread.add(declares.name.text);
  }

  #declareNode(
    instance: Instance,
    name: IndexedName,
    type: NodeKind,
    declaration: DraftNode["declaration"],
    indices: Indices,
  ): void {
    const local = this.#newName(instance, name, indices);
    if (local === null) return;
    const node: DraftNode = {
      kind: "node",
      type,
      name: instance.prefix === "" ? local : instance.prefix + local,
      local,
      instance,
      indices,
      declaration,
      ends: [],
      suspect: false,
      index: -1,
    };
    instance.nodes.set(local, node);
    this.#draft.nodes.push(node);
  }

  #declareSub(instance: Instance, statement: SubDeclaration, indices: Indices): void {
    const local = this.#newName(instance, statement.name, indices);
    if (local === null) return;
    const placed = instance.file.visible.systems.get(statement.system.text);
    if (placed === undefined) {
      instance.nodes.set(local, { kind: "broken" });
      this.#draft.broken = true;
      this.#unknownSystem(instance, statement);
      return;
    }
    const sub = this.instantiate(
      placed.item,
      placed.file,
      `${instance.prefix}${local}.`,
      instance,
      statement,
      indices,
    );
    instance.nodes.set(local, sub);
  }

  /** The full name within the system, or null where it can't be taken; that is reported. */
  #newName(instance: Instance, name: IndexedName, indices: Indices): string | null {
    const draft = this.#draft;
    const local = name.indices.length === 0 ? name.name.text : fullName(draft, name, instance, indices);
    if (local === null) {
      draft.broken = true;
      return null;
    }
    const other = instance.nodes.get(local);
    if (other === undefined) return local;
    if (other.kind === "node") other.suspect = true;
    draft.broken = true;
    draft.report(
      finding("duplicate-name", spanOf(instance, name.range), `A node \`${local}\` is declared already.`, {
        facts: firstPlace(instance, other),
      }),
    );
    return null;
  }

  #declareValue(instance: Instance, statement: ValueStatement, indices: Indices, outer: Indices): void {
    const draft = this.#draft;
    const { range } = statement.name;
    const text =
      statement.indices.length === 0
        ? statement.name.text
        : fullName(draft, { ...statement, range }, instance, indices);
    if (text === null) return;
    const other = instance.values.get(text);
    if (other !== undefined) {
      const again = other.statement === statement;
      draft.report(
        finding(
          "duplicate-name",
          spanOf(instance, range),
          again
            ? `\`${text}\` is declared once for each turn of the repeat; give it the index, as in \`${text}[i]\`, or declare it outside.`
            : `A value \`${text}\` is declared already.`,
          {
            facts: again
              ? []
              : [{ message: "declared here first", span: spanOf(instance, other.statement.name.range) }],
          },
        ),
      );
      return;
    }
    const set = instance.declaration?.overrides.find(({ name }) => name.text === text);
    const settable = statement.kind === "param" || statement.kind === "input";
    const value: Value = {
      name: instance.prefix + text,
      local: text,
      statement,
      instance,
      indices,
      override:
        set !== undefined && settable && instance.parent !== null
          ? { value: set.value, instance: instance.parent, indices: outer, range: set.range }
          : null,
      state: "new",
      typed: null,
      signal: false,
      parameter: null,
      input: null,
      track: null,
      unit: null,
    };
    instance.values.set(text, value);
  }

  #checkOverrides(instance: Instance, parent: Instance, declaration: SubDeclaration): void {
    const system = instance.template.system.name.text;
    const seen = new Set<string>();
    for (const { name } of declaration.overrides) {
      const span = spanOf(parent, name.range);
      if (seen.has(name.text)) {
        this.#draft.report(finding("duplicate-name", span, `\`${name.text}\` is set twice.`));
      }
      seen.add(name.text);
      const value = instance.values.get(name.text);
      if (value?.statement.kind === "param" || value?.statement.kind === "input") continue;
      if (value !== undefined) {
        const kind = value.statement.kind;
        this.#draft.report(
          finding(
            "unknown-name",
            span,
            `\`${name.text}\` of ${system} is ${kind === "output" ? "an" : "a"} ${kind}; only params and inputs can be set from outside.`,
          ),
        );
        continue;
      }
      const params = [...instance.values.values()]
        .filter(({ statement }) => statement.kind === "param" || statement.kind === "input")
        .map(({ local }) => local);
      this.#draft.report(
        unknownName(parent, name.range, `${system} has no param \`${name.text}\`.`, name.text, params),
      );
    }
  }

  #unknownSystem(instance: Instance, statement: SubDeclaration): void {
    const { file } = instance;
    const name = statement.system.text;
    if (file.missing === true || file.missing.has(name)) return;
    const span = spanIn(file, statement.system.range);
    const elsewhere = this.#draft.mayGuess() ? this.#findSystem(name) : null;
    if (elsewhere !== null) {
      this.#draft.report(
        finding(
          "unknown-name",
          span,
          `There is no system \`${name}\` in this file or in what it uses; ${elsewhere} has one.`,
          {
            fix: {
              title: `Use ${elsewhere}`,
              edits: [{ span: afterUses(file), text: bringLine(file, elsewhere) }],
            },
          },
        ),
      );
      return;
    }
    const meant = this.#draft.guess(name, () => file.visible.systems.keys());
    const message = `There is no system \`${name}\`.`;
    this.#draft.report(
      unknownName(instance, statement.system.range, message, name, meant === null ? [] : [meant]),
    );
  }

  #tooLarge(instance: Instance): void {
    this.#draft.broken = true;
    const root = this.#draft.instances[0] ?? instance;
    this.#draft.report(
      finding(
        "too-large",
        spanOf(root, root.template.system.name.range),
        `${root.template.system.name.text} has more than ${MOST_BONDS.toLocaleString("en")} bonds when its subs and repeats are written out.`,
      ),
    );
  }
}

function firstPlace(instance: Instance, other: Named) {
  const range =
    other.kind === "node"
      ? other.declaration.name.range
      : other.kind === "sub"
        ? other.declaration?.name.range
        : null;
  return range === null || range === undefined
    ? []
    : [{ message: "declared here first", span: spanOf(instance, range) }];
}

/** After the last `use`, else after the `notation` line. */
function afterUses(file: SourceFile) {
  const uses = file.tree.items.filter(({ kind }) => kind === "use");
  const after = uses.at(-1)?.range.end ?? file.tree.edition?.range.end ?? 0;
  return { file: file.path, start: after, end: after };
}

function bringLine(file: SourceFile, path: string): string {
  const first = afterUses(file).start === 0;
  return first ? `use ${JSON.stringify(path)}\n` : `\nuse ${JSON.stringify(path)}`;
}
