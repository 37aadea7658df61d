import type { Law } from "../syntax/tree.ts";
import { multiply } from "../units/dimension.ts";
import { type DraftNode, spanOf } from "./draft.ts";
import type { FlatLaw } from "./graph.ts";
import { endOf, lawScope, type OwnVariable, ownVariable, type Variable } from "./law-scope.ts";
import { linearLaw } from "./linear-law.ts";
import { type MentionedVariable, mixedUse } from "./mixed-use.ts";
import { finalBond, portNames } from "./port-variables.ts";
import type { Scope } from "./scope.ts";
import type { Translator } from "./translate.ts";
import { turnedFactorFix } from "./turned-factor-fix.ts";
import { twoPortLaw } from "./two-port-law.ts";

export interface Laws {
  readonly laws: readonly FlatLaw[];
  /** Some law depends on a signal from outside the element. */
  readonly modulated: boolean;
}

const NONE: Laws = { laws: [], modulated: false };

/** Which variables a relation of each kind joins: the left side is one of them, the right side holds the other. */
const JOINS: Readonly<Record<string, readonly Variable[]>> = {
  R: ["e", "f"],
  RS: ["e", "f"],
  C: ["e", "q"],
  I: ["f", "p"],
  /** Of one port either e and q or f and p. */
  IC: ["e", "f", "p", "q"],
};

/** The laws of an element in normal form; what is wrong with them is reported and left out. */
export function lawsOf(translator: Translator, node: DraftNode): Laws {
  const { declaration } = node;
  if (declaration.kind !== "element" || !isWired(node)) return NONE;
  const used: OwnVariable[] = [];
  const scope = lawScope(node, used);
  translator.signal = false;
  if (declaration.laws.length === 0) {
    const law = linearLaw(translator, node, declaration, scope);
    return law === null ? NONE : { laws: [law], modulated: checkStore(translator, node, scope) };
  }
  if (node.type === "TF" || node.type === "GY") {
    const ratio = twoPortLaw(translator, node, declaration, scope, used);
    return ratio === null ? NONE : { laws: [ratio], modulated: translator.signal };
  }
  const laws: FlatLaw[] = [];
  const mentioned: MentionedVariable[] = [];
  for (const law of declaration.laws) {
    used.length = 0;
    const flat = isEnergy(law)
      ? energyLaw(translator, node, law, scope, used)
      : relation(translator, node, law, scope, used);
    if (flat === null) continue;
    mentioned.push(...used);
    if (flat.kind === "relation")
      mentioned.push({ port: portNames(node)?.[flat.port] ?? "", variable: flat.variable });
    if (laws.some((other) => portOf(other) === portOf(flat))) {
      translator.refuse(
        "law-form",
        law.range,
        scope,
        `${node.type} ${node.local} has ${flat.kind === "relation" && node.ends.length > 1 ? "two laws for one port" : "more than one law"}; one is enough.`,
      );
    }
    laws.push(flat);
  }
  checkPorts(translator, node, laws, scope, declaration.laws.length);
  const clash = node.type === "IC" ? mixedUse(mentioned) : null;
  if (clash !== null) translator.refuse("law-form", declaration.range, scope, clash);
  return { laws, modulated: checkStore(translator, node, scope) };
}

/** Which port a law settles; an energy settles all. */
function portOf(law: FlatLaw): number {
  return law.kind === "relation" ? law.port : -1;
}

/** What is not wired was reported; its law has no variables to speak of. */
function isWired(node: DraftNode): boolean {
  if (node.suspect) return false;
  const names = portNames(node);
  return names === null
    ? node.ends.length > 0
    : names.every((name) => node.ends.some(({ port }) => port === name));
}

function isEnergy(law: Law): boolean {
  return law.left.path.length === 1 && law.left.path[0].name.text === "energy";
}

function isStore(node: DraftNode): boolean {
  return node.type === "C" || node.type === "I" || node.type === "IC";
}

/** What changes a store's law from outside does work on the store, and would do it through no port. */
function checkStore(translator: Translator, node: DraftNode, scope: Scope): boolean {
  if (!translator.signal || !isStore(node)) return translator.signal;
  const { declaration } = node;
  const range =
    declaration.kind === "element"
      ? (declaration.laws[0]?.right.range ?? declaration.range)
      : declaration.range;
  translator.refuse(
    "modulated-store",
    range,
    scope,
    `The law of ${node.type} ${node.local} depends on a signal from outside, which does work on the store without a port; give it that port with an \`IC\` or a field.`,
  );
  return true;
}

function relation(
  translator: Translator,
  node: DraftNode,
  law: Law,
  scope: Scope,
  used: OwnVariable[],
): FlatLaw | null {
  const left = leftSide(translator, node, law, scope);
  if (left === null) return null;
  used.length = 0;
  const right = translator.whole(law.right, scope);
  if (!ownVariablesFit(translator, node, law, left, used, scope)) return null;
  const typed = translator.wanted(
    right,
    left.typed.measure,
    left.typed.shown,
    law.right.range,
    scope,
    "The right side",
    "the left side",
    () => turnedFactorFix(translator, law.right, left.typed.measure, scope),
  );
  if (typed.measure === "unknown" || left.typed.measure === "unknown") return null;
  return {
    kind: "relation",
    port: portIndex(node, left.port),
    variable: left.variable,
    right: typed.expr,
    oneWay: law.oneWay,
    span: spanOf(node.instance, law.range),
  };
}

/** Ports stand in the order in which a field declares them; of an RS the one that points at it is the first. */
export function portIndex(node: DraftNode, port: string): number {
  const { declaration } = node;
  if (declaration.kind !== "element" || declaration.ports === null) return 0;
  return declaration.ports.findIndex(({ name }) => name.text === port);
}

function leftSide(translator: Translator, node: DraftNode, law: Law, scope: Scope): OwnVariable | null {
  const left = ownVariable(translator, node, law.left);
  if (left === null) {
    const name = law.left.path.map((part) => part.name.text).join(".");
    translator.refuse(
      "unknown-variable",
      law.left.range,
      scope,
      `\`${name}\` is no variable of ${node.type} ${node.local}; ${formOf(node)}.`,
    );
    return null;
  }
  // Unknown for want of a domain is no mistake of the law; an unknown variable was reported.
  const joined = JOINS[node.type];
  const right =
    node.type === "Se"
      ? left.variable === "e"
      : node.type === "Sf"
        ? left.variable === "f"
        : joined?.includes(left.variable) === true;
  if (right && (node.type !== "RS" || left.port === "in")) return left;
  if (
    left.typed.measure !== "unknown" ||
    translator.trying ||
    finalBond(endOf(node, left.port)?.bond ?? node.ends[0].bond).domain !== null
  ) {
    if (left.typed.measure !== "unknown")
      translator.refuse(
        "law-form",
        law.range,
        scope,
        `The law of ${node.type} ${node.local} cannot start with \`${left.variable}\`: ${formOf(node)}.`,
      );
  }
  return null;
}

function ownVariablesFit(
  translator: Translator,
  node: DraftNode,
  law: Law,
  left: OwnVariable,
  used: readonly OwnVariable[],
  scope: Scope,
): boolean {
  const joined = JOINS[node.type] ?? [];
  const several = (node.declaration.kind === "element" ? node.declaration.ports : null) !== null;
  for (const own of used) {
    const same = own.port === left.port && own.variable === left.variable;
    const heat = node.type === "RS" && own.port === "out";
    const fits = heat || (joined.includes(own.variable) && !same);
    if (fits) continue;
    if (own.typed.measure === "unknown") return false;
    const name = several ? `${own.port}.${own.variable}` : own.variable;
    translator.refuse(
      "law-form",
      law.range,
      scope,
      `The law of ${node.type} ${node.local} cannot have \`${name}\` on its right side: ${formOf(node)}.`,
    );
    return false;
  }
  return true;
}

/** The energy of a store in its own p and q; efforts and flows are its derivatives. */
function energyLaw(
  translator: Translator,
  node: DraftNode,
  law: Law,
  scope: Scope,
  used: OwnVariable[],
): FlatLaw | null {
  if (!isStore(node) || law.oneWay) {
    translator.refuse(
      "law-form",
      law.range,
      scope,
      `${node.type} ${node.local} stores no energy: ${formOf(node)}.`,
    );
    return null;
  }
  const right = translator.whole(law.right, scope);
  const kinds = node.type === "C" ? ["q"] : node.type === "I" ? ["p"] : ["p", "q"];
  const wrong = used.find((own) => !kinds.includes(own.variable) && own.typed.measure !== "unknown");
  if (wrong !== undefined) {
    translator.refuse(
      "law-form",
      law.range,
      scope,
      `The energy of ${node.type} ${node.local} is a function of its ${kinds.map((kind) => `\`${kind}\``).join(" and ")}, not of \`${wrong.variable}\`.`,
    );
    return null;
  }
  const { domain } = finalBond(node.ends[0].bond);
  if (domain === null) return null;
  const energy = multiply(domain.effort.dimension, domain.displacement.dimension);
  const typed = translator.wanted(right, energy, null, law.right.range, scope, "The right side", "an energy");
  if (typed.measure === "unknown") return null;
  return { kind: "energy", energy: typed.expr, span: spanOf(node.instance, law.range) };
}

/** Every port of a field has its law, or the energy uses every port. */
function checkPorts(
  translator: Translator,
  node: DraftNode,
  laws: readonly FlatLaw[],
  scope: Scope,
  written: number,
): void {
  const { declaration } = node;
  if (declaration.kind !== "element" || declaration.ports === null || laws.length < written) return;
  if (laws.some(({ kind }) => kind === "energy")) return;
  declaration.ports.forEach((port, index) => {
    if (laws.some((law) => law.kind === "relation" && law.port === index)) return;
    translator.refuse(
      "law-missing",
      port.range,
      scope,
      `The port \`${port.name.text}\` of ${node.type} ${node.local} has no law.`,
    );
  });
}

function formOf(node: DraftNode): string {
  switch (node.type) {
    case "Se":
      return "an effort source is written `e = …`";
    case "Sf":
      return "a flow source is written `f = …`";
    case "C":
      return "a compliance relates `e` and `q`, as in `e = k*q`";
    case "I":
      return "an inertia relates `f` and `p`, as in `f = p/m`";
    case "IC":
      return "an IC is written `energy = …` in the p and q of its ports, or with a law for each port that relates `e` and `q` or `f` and `p`";
    default:
      return "a resistor relates `e` and `f`, as in `e = R*f`";
  }
}

/** Whether a draft's laws hold no slip in the units when its bonds are of the domains they now have. */
export function lawsFit(translator: Translator, node: DraftNode): boolean {
  const before = translator.trying;
  translator.trying = true;
  translator.mismatched = false;
  lawsOf(translator, node);
  translator.trying = before;
  return !translator.mismatched;
}
