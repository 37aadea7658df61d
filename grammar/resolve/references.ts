import type { IndexedName, Reference } from "../syntax/tree.ts";
import { DIMENSIONLESS } from "../units/dimension.ts";
import { parseUnit } from "../units/parse-unit.ts";
import type { Dimension, Unit } from "../units/unit.ts";
import type { DraftBond, DraftNode, Instance } from "./draft.ts";
import { valueOf } from "./evaluate-values.ts";
import { spanIn } from "./files.ts";
import { ownVariable } from "./law-scope.ts";
import { fullName, lookUp } from "./names.ts";
import { fileConst } from "./parameters.ts";
import { bondVariable, finalBond, portNames, storeVariable } from "./port-variables.ts";
import type { Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import type { Typed } from "./typed.ts";

const SECOND = parseUnit("s") as Unit;
const ACCELERATION: Dimension = [0, 1, -2, 0, 0, 0, 0];
const PORT_VARIABLES = new Set(["e", "f", "p", "q"]);

export function translateReference(translator: Translator, tree: Reference, scope: Scope): Typed {
  const [first] = tree.path;
  if (scope.self !== null) {
    const own = ownVariable(translator, scope.self, tree);
    if (own !== null) {
      scope.used?.push(own);
      return own.typed;
    }
  }
  if (tree.path.length === 1) return bareName(translator, first, scope);
  if (scope.instance === null) {
    return translator.refuse(
      "unknown-name",
      tree.range,
      scope,
      "A function sees its parameters and the consts of its file, no nodes.",
    );
  }
  if (scope.fixed) {
    return translator.refuse(
      "unknown-variable",
      tree.range,
      scope,
      "Only params and consts can stand here, nothing that changes with time.",
    );
  }
  if (translator.trying) {
    translator.signal = true;
    return translator.unknown;
  }
  return dotted(translator, tree.path, scope.instance, scope);
}

function bareName(translator: Translator, part: IndexedName, scope: Scope): Typed {
  const { pool } = translator.draft;
  const name = part.name.text;
  const { range } = part;
  if (part.indices.length > 0) return indexedName(translator, part, scope);
  const bound = scope.bound === null ? undefined : scope.bound.get(name);
  if (bound !== undefined) return bound;
  const index = scope.indices.get(name);
  if (index !== undefined)
    return { expr: pool.number(index), measure: index === 0 ? "any" : DIMENSIONLESS, shown: null };
  if (name === "pi") return { expr: pool.symbol("constant", "pi"), measure: DIMENSIONLESS, shown: null };
  if (name === "g0") return { expr: pool.symbol("constant", "g0"), measure: ACCELERATION, shown: null };
  if (name === "time") {
    if (scope.fixed)
      return translator.refuse(
        "unknown-variable",
        range,
        scope,
        "Nothing that changes with time can stand here.",
      );
    translator.signal = true;
    return { expr: pool.symbol("time", "time"), measure: SECOND.dimension, shown: SECOND };
  }
  if (PORT_VARIABLES.has(name)) {
    return translator.refuse(
      "unknown-variable",
      range,
      scope,
      `\`${name}\` is a port's own variable and has a meaning only in the law of an element that has it; elsewhere write \`node.${name}\`.`,
    );
  }
  const value = scope.instance?.values.get(name);
  if (value !== undefined) return valueOf(translator, value, scope, range);
  const placed = scope.file.visible.values.get(name);
  if (placed !== undefined && (placed.item.kind === "const" || placed.item.kind === "param"))
    return fileConst(translator, placed, scope, range);
  return unknownValue(translator, part, scope);
}

/** `x[i]`, declared within a repeat. */
function indexedName(translator: Translator, part: IndexedName, scope: Scope): Typed {
  const { instance } = scope;
  if (instance === null) return unknownValue(translator, part, scope);
  const name = fullName(translator.draft, part, instance, scope.indices);
  if (name === null || instance.unread.has(part.name.text)) return translator.unknown;
  const value = instance.values.get(name);
  if (value !== undefined) return valueOf(translator, value, scope, part.range);
  const node = instance.nodes.has(name)
    ? ` It is a node; write which variable is meant, as in \`${name}.f\`.`
    : "";
  return translator.refuse("unknown-name", part.range, scope, `There is no value \`${name}\`.${node}`);
}

function unknownValue(translator: Translator, part: IndexedName, scope: Scope): Typed {
  const name = part.name.text;
  const { instance, file } = scope;
  if (file.missing === true || file.missing.has(name) || instance?.unread.has(name))
    return translator.unknown;
  const node = instance?.nodes.get(name);
  if (node !== undefined) {
    if (node.kind === "broken") return translator.unknown;
    const hint = node.kind === "sub" ? "one of its outputs" : `its variable, as in \`${name}.f\``;
    return translator.refuse(
      "unknown-name",
      part.range,
      scope,
      `\`${name}\` is a node, not a value; write ${hint}.`,
    );
  }
  if (file.visible.values.has(name)) {
    return translator.refuse(
      "unknown-name",
      part.range,
      scope,
      `\`${name}\` is a function; it is called with a value in brackets.`,
    );
  }
  const meant = translator.draft.guess(name, () => [
    ...(scope.bound?.keys() ?? []),
    ...(instance?.values.keys() ?? []),
    ...scope.indices.keys(),
    ...file.visible.values.keys(),
  ]);
  const message = `There is no value \`${name}\`.${meant === null ? "" : ` Is \`${meant}\` meant?`}`;
  const span = spanIn(file, part.range);
  const fix = meant === null ? undefined : { title: `Write ${meant}`, edits: [{ span, text: meant }] };
  return translator.refuse("unknown-name", part.range, scope, message, { fix });
}

/** `node.f`, `field.port.e`, `sub.output`, `sub.node.q`. */
function dotted(translator: Translator, path: readonly IndexedName[], from: Instance, scope: Scope): Typed {
  const { draft } = translator;
  let instance = from;
  for (let at = 0; at < path.length - 1; at += 1) {
    const named = lookUp(draft, path[at], instance, from, scope.indices);
    if (named === null || named.kind === "broken") return translator.unknown;
    if (named.kind === "sub") {
      instance = named;
      continue;
    }
    const rest = path.slice(at + 1);
    if (named !== scope.self) translator.signal = true;
    if (named.kind === "bond") return bondByName(translator, named.bond, path[at], rest, scope);
    return nodeVariable(translator, named, rest, scope);
  }
  const last = path[path.length - 1];
  const name = last.indices.length === 0 ? last.name.text : fullName(draft, last, from, scope.indices);
  if (name === null || instance.unread.has(last.name.text)) return translator.unknown;
  const value = instance.values.get(name);
  if (value?.statement.kind === "output") return valueOf(translator, value, scope, last.range);
  const meant = draft.guess(name, () => {
    const outputs = [...instance.values.values()].filter(({ statement }) => statement.kind === "output");
    return outputs.map(({ local }) => local);
  });
  const system = instance.template.system.name.text;
  const message =
    value !== undefined
      ? `\`${name}\` is inside ${system}; only its outputs and nodes can be read from outside.`
      : `${system} has no output \`${name}\`.${meant === null ? "" : ` Is \`${meant}\` meant?`}`;
  const span = spanIn(scope.file, last.range);
  const fix = meant === null ? undefined : { title: `Write ${meant}`, edits: [{ span, text: meant }] };
  return translator.refuse("unknown-name", last.range, scope, message, { fix });
}

function bondByName(
  translator: Translator,
  bond: DraftBond,
  part: IndexedName,
  rest: readonly IndexedName[],
  scope: Scope,
): Typed {
  const variable = rest[0].name.text;
  if (rest.length !== 1 || (variable !== "e" && variable !== "f")) {
    return translator.refuse(
      "unknown-variable",
      rest[0].range,
      scope,
      `A bond has \`.e\` and \`.f\`: \`${part.name.text}.e\`.`,
    );
  }
  return bondVariable(translator, finalBond(bond), variable);
}

function nodeVariable(
  translator: Translator,
  node: DraftNode,
  rest: readonly IndexedName[],
  scope: Scope,
): Typed {
  const names = rest.map(({ name }) => name.text);
  const wrong = (message: string) =>
    translator.refuse("unknown-variable", rest[rest.length - 1].range, scope, message);
  const variable = names[names.length - 1];
  const ports = portNames(node);
  if (node.type === "0" || node.type === "1") {
    const has = node.type === "1" ? "f" : "e";
    if (names.length > 1 || variable !== has) return wrong(junctionHas(node));
  } else if (ports === null) {
    const store = node.type === "C" ? "q" : node.type === "I" ? "p" : null;
    if (names.length > 1 || !(variable === "e" || variable === "f" || variable === store)) {
      return wrong(
        `${node.type === "port" ? "The port" : node.type} ${node.local} has \`.e\`, \`.f\`${store === null ? "" : ` and \`.${store}\``}.`,
      );
    }
  } else if (names.length !== 2 || !ports.includes(names[0]) || !PORT_VARIABLES.has(variable)) {
    return wrong(
      `${node.type} ${node.local} is asked port by port: ${ports.map((port) => `\`${node.local}.${port}.f\``).join(", ")}.`,
    );
  }
  const port = ports === null ? "" : names[0];
  const end = ports === null ? node.ends[0] : node.ends.find((one) => one.port === port);
  if (end === undefined) return translator.unknown;
  const bond = finalBond(end.bond);
  if (variable === "e" || variable === "f") return bondVariable(translator, bond, variable);
  const isStore = node.type === "C" || node.type === "I" || node.type === "IC";
  if (!isStore || (node.type === "C" && variable === "p") || (node.type === "I" && variable === "q")) {
    return wrong(`A port of ${node.type} ${node.local} has no \`${variable}\`.`);
  }
  return storeVariable(translator, node, port, bond, variable as "p" | "q");
}

function junctionHas(node: DraftNode): string {
  return node.type === "1"
    ? `A 1-junction has one flow, \`${node.local}.f\`; its efforts belong to its bonds: ask an element, or name a bond with \`as\`.`
    : `A 0-junction has one effort, \`${node.local}.e\`; its flows belong to its bonds: ask an element, or name a bond with \`as\`.`;
}
