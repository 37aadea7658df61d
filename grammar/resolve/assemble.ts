import type { Symbol } from "../symbolic/expression.ts";
import { describe } from "./describe.ts";
import { type DraftNode, type Instance, spanOf, type Value } from "./draft.ts";
import { workOut } from "./evaluate-values.ts";
import { spanIn } from "./files.ts";
import type {
  Domain,
  FlatBond,
  FlatExpectation,
  FlatGraph,
  FlatInput,
  FlatNode,
  FlatOutput,
  FlatParameter,
  FlatPort,
  FlatTrack,
} from "./graph.ts";
import { lawsOf } from "./laws.ts";
import { portNames } from "./port-variables.ts";
import { flatStarts } from "./starts.ts";
import type { Translator } from "./translate.ts";

/** Params first, since laws that learn a domain need their units; what depends on bonds comes after domains. */
export function workOutParameters(translator: Translator): void {
  for (const instance of translator.draft.instances)
    workOutValues(translator, instance, ["param", "const", "input"]);
}

export function workOutSignals(translator: Translator): void {
  for (const instance of translator.draft.instances)
    workOutValues(translator, instance, ["let", "track", "output"]);
}

function workOutValues(translator: Translator, instance: Instance, kinds: readonly string[]): void {
  for (const name of instance.template.valueOrder) {
    const value = instance.values.get(name);
    if (value !== undefined && kinds.includes(value.statement.kind)) workOut(translator, value);
  }
  if (instance.template.valueOrder.length === instance.values.size) return;
  for (const value of instance.values.values())
    if (kinds.includes(value.statement.kind)) workOut(translator, value);
}

/** The flat graph, or null where bonds or domains are not settled. Laws are read in any case, for their findings. */
export function assemble(translator: Translator): FlatGraph | null {
  const { draft } = translator;
  const root = draft.instances[0];
  const nodes = draft.nodes.map((node) => flatNode(translator, node));
  const starts = flatStarts(translator);
  const refused = draft.findings.some(({ severity }) => severity === "error");
  if (draft.broken || (draft.incomplete && !refused)) return null;
  const values = draft.instances.flatMap((instance) => [...instance.values.values()]);
  const { system } = root.template;
  return {
    system: system.name.text,
    description: describe(system),
    span: spanOf(root, system.range),
    pool: draft.pool,
    nodes,
    bonds: draft.bonds.map(
      (bond): FlatBond => ({
        index: bond.index,
        id: bond.id,
        from: bond.from.index,
        to: bond.to.index,
        domain: bond.domain as Domain,
        demanded: bond.demanded,
        effort: bond.effort as Symbol,
        flow: bond.flow as Symbol,
        span: bond.span,
      }),
    ),
    parameters: [...values.flatMap((value) => flatParameter(translator, value)), ...fileConsts(translator)],
    inputs: values.flatMap((value) => flatInput(translator, value)),
    outputs: [...root.values.values()].flatMap(flatOutput),
    tracks: values.flatMap((value) => flatTrack(translator, value)),
    starts,
    expectations: draft.expects.map(
      ({ statement, instance }): FlatExpectation => ({
        condition: statement.condition,
        text: instance.file.source.text.slice(statement.condition.range.start, statement.condition.range.end),
        span: spanOf(instance, statement.range),
      }),
    ),
  };
}

function flatNode(translator: Translator, node: DraftNode): FlatNode {
  const { laws, modulated } = lawsOf(translator, node);
  const names = portNames(node);
  const ends =
    names === null ? node.ends : names.flatMap((name) => node.ends.filter(({ port }) => port === name));
  const ports = ends.map(
    (end): FlatPort => ({
      name: names === null ? "" : end.port,
      bond: end.bond.index,
      end: end.side,
      domain: end.bond.domain as Domain,
    }),
  );
  return {
    index: node.index,
    name: node.name,
    kind: node.type,
    modulated,
    domain: names === null ? (ports[0]?.domain ?? null) : null,
    ports,
    laws,
    description: describe(node.declaration),
    span: spanOf(node.instance, node.declaration.range),
  };
}

function flatParameter(translator: Translator, value: Value): FlatParameter[] {
  if (value.parameter === null) return [];
  const { definition, number, unit, range } = value.parameter;
  return [
    {
      name: value.name,
      symbol: translator.draft.pool.symbol("parameter", value.name),
      definition,
      value: number,
      unit,
      constant: value.statement.kind === "const" || value.instance.structural.has(value.local),
      range,
      description: describe(value.statement),
      span: spanOf(value.instance, value.statement.range),
    },
  ];
}

function fileConsts(translator: Translator): FlatParameter[] {
  return [...translator.draft.consts.values()].flatMap((one) => {
    if (one === "open") return [];
    const { definition, number, unit, range } = one.parameter;
    const symbol = translator.draft.pool.symbol("parameter", one.name);
    const description = describe(one.item);
    return [
      {
        name: one.name,
        symbol,
        definition,
        value: number,
        unit,
        constant: true,
        range,
        description,
        span: spanIn(one.file, one.item.range),
      },
    ];
  });
}

function flatInput(translator: Translator, value: Value): FlatInput[] {
  if (value.input === null) return [];
  return [
    {
      name: value.name,
      symbol: translator.draft.pool.symbol("input", value.name),
      unit: value.input.unit,
      nominal: value.input.nominal,
      description: describe(value.statement),
      span: spanOf(value.instance, value.statement.range),
    },
  ];
}

function flatOutput(value: Value): FlatOutput[] {
  if (
    value.statement.kind !== "output" ||
    value.unit === null ||
    value.typed === null ||
    value.typed.measure === "unknown"
  )
    return [];
  const span = spanOf(value.instance, value.statement.range);
  return [
    {
      name: value.name,
      value: value.typed.expr,
      unit: value.unit,
      description: describe(value.statement),
      span,
    },
  ];
}

function flatTrack(translator: Translator, value: Value): FlatTrack[] {
  if (value.track === null) return [];
  const symbol = translator.draft.pool.symbol("state", value.name);
  return [{ name: value.name, symbol, ...value.track, span: spanOf(value.instance, value.statement.range) }];
}
