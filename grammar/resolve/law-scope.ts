import type { Reference } from "../syntax/tree.ts";
import { type DraftNode, type End, spanOf } from "./draft.ts";
import { bondVariable, finalBond, portNames, storeVariable } from "./port-variables.ts";
import { plainScope, type Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import type { Typed } from "./typed.ts";

export type Variable = "e" | "f" | "p" | "q";

/** A variable of a port of the element whose law is read; `port` is empty for a one-port. */
export interface OwnVariable {
  readonly port: string;
  readonly variable: Variable;
  readonly typed: Typed;
}

/** Which variables a port of each kind has. */
const HAS: Readonly<Record<string, readonly Variable[]>> = {
  Se: ["e", "f"],
  Sf: ["e", "f"],
  R: ["e", "f"],
  RS: ["e", "f"],
  TF: ["e", "f"],
  GY: ["e", "f"],
  C: ["e", "f", "q"],
  I: ["e", "f", "p"],
  IC: ["e", "f", "p", "q"],
};

/** Scope of a law: the element's own variables come first, and which of them the law uses is kept in `used`. */
export function lawScope(node: DraftNode, used: OwnVariable[]): Scope {
  return {
    file: node.instance.file,
    instance: node.instance,
    indices: node.indices,
    fixed: false,
    warnsOfUnits: true,
    self: node,
    used,
    bound: null,
  };
}

/** The element's variable that a reference in its law means; null where it means something else. */
export function ownVariable(
  translator: Translator,
  node: DraftNode,
  reference: Reference,
): OwnVariable | null {
  const { path } = reference;
  if (path.length > 2 || path[path.length - 1].indices.length > 0) return null;
  const name = path[path.length - 1].name.text;
  if (name !== "e" && name !== "f" && name !== "p" && name !== "q") return null;
  const ports = portNames(node);
  let port = path.length === 2 ? path[0].name.text : "";
  if (ports === null ? port !== "" : port !== "" && !ports.includes(port)) return null;
  // The law of an RS is written as that of an R: bare variables are those of the bond that points at it.
  if (node.type === "RS" && port === "") port = "in";
  const wrong = (message: string): OwnVariable => ({
    port,
    variable: name,
    typed: translator.refuse(
      "unknown-variable",
      reference.range,
      plainScope(node.instance.file, node.instance, node.indices, false),
      message,
    ),
  });
  if (ports !== null && port === "") {
    return wrong(
      `${node.type} ${node.local} has variables port by port: ${ports.map((one) => `\`${one}.${name}\``).join(", ")}.`,
    );
  }
  const has = HAS[node.type] ?? [];
  if (!has.includes(name)) {
    const list = has.map((one) => `\`${one}\``);
    return wrong(
      `${node.type} ${node.local} has ${list.slice(0, -1).join(", ")} and ${list[list.length - 1]}, no \`${name}\`.`,
    );
  }
  const end = endOf(node, port);
  if (end === undefined) return { port, variable: name, typed: translator.unknown };
  const bond = finalBond(end.bond);
  const store = node.type === "RS" ? "" : port;
  const typed =
    name === "e" || name === "f"
      ? bondVariable(translator, bond, name)
      : storeVariable(translator, node, store, bond, name);
  return { port, variable: name, typed };
}

export function endOf(node: DraftNode, port: string): End | undefined {
  return port === "" ? node.ends[0] : node.ends.find((end) => end.port === port);
}

export function declarationSpan(node: DraftNode) {
  return spanOf(node.instance, node.declaration.name.range);
}
