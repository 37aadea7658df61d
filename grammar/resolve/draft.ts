import type { Finding, Report } from "../diagnostics/finding.ts";
import { nearest } from "../diagnostics/nearest.ts";
import type { Range, Span } from "../source/span.ts";
import type { Expr, Symbol } from "../symbolic/expression.ts";
import { Pool } from "../symbolic/pool.ts";
import type {
  CurveDeclaration,
  ElementDeclaration,
  Expect,
  Expression,
  JunctionDeclaration,
  PortDeclaration,
  Start,
  SubDeclaration,
  ValueDeclaration,
  Wiring,
} from "../syntax/tree.ts";
import type { Unit } from "../units/unit.ts";
import type { CurveInUse } from "./curves.ts";
import type { SourceFile } from "./files.ts";
import { spanIn } from "./files.ts";
import type { Domain, NodeKind } from "./graph.ts";
import type { Group } from "./infer-domains.ts";
import type { Template, ValueStatement } from "./template.ts";
import type { Typed } from "./typed.ts";

/** Whole numbers that the `repeat`s around a statement count with, by name. */
export type Indices = ReadonlyMap<string, number>;

/** A system at its place in the whole: the root, or one `sub`. Its names are looked up here. */
export interface Instance {
  readonly kind: "sub";
  readonly template: Template;
  readonly file: SourceFile;
  /** `""` of the root, `rope.` of a sub. */
  readonly prefix: string;
  readonly parent: Instance | null;
  /** Where the sub stands in its parent; null for the root. */
  readonly declaration: SubDeclaration | null;
  readonly nodes: Map<string, Named>;
  readonly values: Map<string, Value>;
  /** Params whose value a `repeat` counts to: they shape the graph and can't be set afterwards. */
  readonly structural: Set<string>;
  /** Values whose declaration could not be read. */
  readonly unread: Set<string>;
}

/** What a name of the nodes' name space stands for; `broken`: its declaration is at fault and was reported. */
export type Named = DraftNode | Instance | NamedBond | { readonly kind: "broken" };

export interface NamedBond {
  readonly kind: "bond";
  bond: DraftBond;
  readonly span: Span;
}

export interface DraftNode {
  readonly kind: "node";
  readonly type: NodeKind;
  readonly name: string;
  /** As its own system calls it: what messages say, so that one mistake reads alike in every instance. */
  readonly local: string;
  readonly instance: Instance;
  readonly indices: Indices;
  readonly declaration: JunctionDeclaration | ElementDeclaration | PortDeclaration;
  readonly ends: End[];
  /** What led to a finding elsewhere: no finding that only follows from it is made. */
  suspect: boolean;
  index: number;
}

/** One end of a bond at a node; `port` names a field's port as wired, or a two-port's once it is known. */
export interface End {
  bond: DraftBond;
  /** The system whose wiring names the node here; joining ports gives the end another bond, but not another line. */
  readonly instance: Instance;
  readonly side: "from" | "to";
  port: string;
  readonly range: Range;
}

export interface DraftBond {
  from: DraftNode;
  fromPort: string;
  to: DraftNode;
  toPort: string;
  demanded: { end: "from" | "to"; span: Span } | null;
  span: Span;
  /** The system whose wiring drew it. */
  readonly instance: Instance;
  readonly wiring: Wiring;
  /** What it became part of when the ports between were joined. */
  into: DraftBond | null;
  index: number;
  id: string;
  effort: Symbol | null;
  flow: Symbol | null;
  domain: Domain | null;
  /** The bonds it shares its domain with. */
  group: Group | null;
}

export interface Value {
  readonly name: string;
  readonly local: string;
  readonly statement: ValueStatement;
  readonly instance: Instance;
  readonly indices: Indices;
  /** What the `sub` line sets it to, in the scope of the system outside. */
  readonly override: {
    readonly value: Expression;
    readonly instance: Instance;
    readonly indices: Indices;
    readonly range: Range;
  } | null;
  state: "new" | "open" | "done";
  typed: Typed | null;
  /** Depends on time, inputs, states or bonds. */
  signal: boolean;
  /** What the kind of statement adds, once worked out. */
  parameter: ParameterValue | null;
  input: { readonly unit: Unit; readonly nominal: number } | null;
  track: { readonly rate: Expr; readonly unit: Unit; readonly from: number } | null;
  /** Of an output: the unit it is shown in. */
  unit: Unit | null;
}

export interface ParameterValue {
  readonly definition: Expr;
  /** SI. */
  readonly number: number;
  readonly unit: Unit;
  readonly range: { readonly low: number; readonly high: number } | null;
}

/** A const of a file that this system uses. */
export interface FileConst {
  readonly name: string;
  readonly typed: Typed;
  readonly item: ValueDeclaration;
  readonly file: SourceFile;
  readonly parameter: ParameterValue;
}

export interface PlacedStatement<T extends Start | Expect> {
  readonly statement: T;
  readonly instance: Instance;
  readonly indices: Indices;
}

export type PlacedStart = PlacedStatement<Start>;

const MOST_GUESSES = 100;

export const NO_INDICES: Indices = new Map();

/** One system while it is worked out: what the steps of `resolve` hand to each other. */
export class Draft {
  readonly pool = new Pool();
  readonly root: SourceFile;
  readonly findings: Finding[] = [];
  readonly instances: Instance[] = [];
  nodes: DraftNode[] = [];
  /** Ports of subs, which joined bonds lead through: no nodes of the graph, but they may declare a domain. */
  ports: DraftNode[] = [];
  bonds: DraftBond[] = [];
  readonly starts: PlacedStatement<Start>[] = [];
  readonly expects: PlacedStatement<Expect>[] = [];
  /** Parameters' numbers by their symbols, as they become known. */
  readonly numbers = new Map<Expr, number>();
  readonly consts = new Map<ValueDeclaration, FileConst | "open">();
  /** Curves worked out so far; null for those at fault. */
  readonly curves = new Map<CurveDeclaration, CurveInUse | null>();
  /** The structure can't be built; later steps would only guess. */
  broken = false;
  /** Some expression stands for nothing; where no finding of this system says why, one of its file does. */
  incomplete = false;
  /** Some statement could not be read, so that what seems to be missing may well stand there. */
  unread = false;
  /** What an unknown name at a place in the text was probably meant to be. */
  readonly meant = new Map<string, string | null>();
  #guesses = 0;
  readonly #reported = new Set<string>();

  constructor(root: SourceFile) {
    this.root = root;
  }

  /** What was probably meant; after so many unknown names the time is better spent on what is known. */
  guess(name: string, candidates: () => Iterable<string>): string | null {
    return this.mayGuess() ? nearest(name, candidates()) : null;
  }

  mayGuess(): boolean {
    this.#guesses += 1;
    return this.#guesses <= MOST_GUESSES;
  }

  /** One finding of a name at a place: the instances of a sub and the turns of a `repeat` share their text. */
  readonly report: Report = (found) => {
    const key = `${found.name} ${found.span.file} ${found.span.start} ${found.span.end}`;
    if (this.#reported.has(key)) return;
    this.#reported.add(key);
    this.findings.push(found);
  };
}

export function spanOf(instance: Instance, range: Range): Span {
  return spanIn(instance.file, range);
}
