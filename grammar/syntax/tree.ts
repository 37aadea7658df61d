import type { Range } from "../source/span.ts";
import type {
  Expression,
  Identifier,
  IndexedName,
  Reference,
  StringLiteral,
  UnitText,
} from "./expression-tree.ts";

export type * from "./expression-tree.ts";

/**
 * The syntax tree of one `.wright` file: what was written, in the order it was written, with nothing looked up.
 * Every node keeps its range, so that findings, the formatter and the editor point at the text itself.
 */
export interface File {
  readonly path: string;
  readonly range: Range;
  /** The edition after `notation`; null where the line is missing. */
  readonly edition: { readonly number: number; readonly range: Range } | null;
  readonly items: readonly FileItem[];
  /** Every `#` comment in the order of the text, those of descriptions (`##`) included. */
  readonly comments: readonly Comment[];
  /** Every block is closed where it should be; the formatter leaves a file alone where it isn't. */
  readonly balanced: boolean;
}

/**
 * A statement with a `syntax` finding, or a block whose head has one: it is kept as a stretch of the text, so that
 * the formatter prints it as it stands and later stages know that something is missing here. What it would have
 * declared is told where that could be read, so that one slip does not make every use of the name a second finding.
 */
export interface Unreadable extends Described {
  readonly kind: "unreadable";
  readonly range: Range;
  readonly declares: { readonly name: Identifier; readonly space: "node" | "value" | "file" } | null;
}

export interface Comment {
  readonly text: string;
  readonly range: Range;
  /** `##` lines directly above a declaration. */
  readonly description: boolean;
}

/** What may stand after a declaration: the joined `##` lines above it and the `-- text` behind it. */
export interface Described {
  readonly description: string | null;
  readonly remark: string | null;
}

export type FileItem =
  | Use
  | DomainDeclaration
  | ValueDeclaration
  | FunctionDeclaration
  | CurveDeclaration
  | System
  | Trial
  | Unreadable;

export interface Use extends Described {
  readonly kind: "use";
  readonly range: Range;
  /** null: everything in the file. */
  readonly names: readonly Identifier[] | null;
  readonly path: StringLiteral;
}

export interface DomainDeclaration extends Described {
  readonly kind: "domain";
  readonly range: Range;
  readonly name: Identifier;
  readonly pseudo: boolean;
  readonly effort: UnitText;
  readonly flow: UnitText;
}

export interface FunctionDeclaration extends Described {
  readonly kind: "function";
  readonly range: Range;
  readonly name: Identifier;
  readonly parameters: readonly Identifier[];
  readonly body: Expression;
}

export interface CurveDeclaration extends Described {
  readonly kind: "curve";
  readonly range: Range;
  readonly name: Identifier;
  readonly from: UnitText;
  readonly to: UnitText;
  readonly source:
    | {
        readonly kind: "points";
        readonly points: readonly { readonly x: Expression; readonly y: Expression; readonly range: Range }[];
      }
    | { readonly kind: "file"; readonly path: StringLiteral; readonly columns: readonly StringLiteral[] };
  readonly interpolation: "linear" | "smooth";
}

export interface System extends Described {
  readonly kind: "system";
  readonly range: Range;
  /** From `{` to `}`. */
  readonly block: Range;
  readonly name: Identifier;
  readonly body: readonly Statement[];
}

export type Statement =
  | ValueDeclaration
  | InputDeclaration
  | OutputDeclaration
  | LetDeclaration
  | TrackDeclaration
  | JunctionDeclaration
  | ElementDeclaration
  | SubDeclaration
  | PortDeclaration
  | Wiring
  | Start
  | Repeat
  | Expect
  | Unreadable;

export interface ValueDeclaration extends Described {
  readonly kind: "param" | "const";
  readonly range: Range;
  readonly name: Identifier;
  /** Of a value declared inside a `repeat`: `let x[i] = …`; empty otherwise. */
  readonly indices: readonly Expression[];
  readonly value: Expression;
  readonly bounds: { readonly low: Expression; readonly high: Expression; readonly range: Range } | null;
}

export interface InputDeclaration extends Described {
  readonly kind: "input";
  readonly range: Range;
  readonly name: Identifier;
  /** Of a value declared inside a `repeat`: `let x[i] = …`; empty otherwise. */
  readonly indices: readonly Expression[];
  readonly unit: UnitText;
  readonly nominal: Expression | null;
}

export interface OutputDeclaration extends Described {
  readonly kind: "output";
  readonly range: Range;
  readonly name: Identifier;
  /** Of a value declared inside a `repeat`: `let x[i] = …`; empty otherwise. */
  readonly indices: readonly Expression[];
  readonly value: Expression;
  readonly unit: UnitText | null;
}

export interface LetDeclaration extends Described {
  readonly kind: "let";
  readonly range: Range;
  readonly name: Identifier;
  /** Of a value declared inside a `repeat`: `let x[i] = …`; empty otherwise. */
  readonly indices: readonly Expression[];
  readonly value: Expression;
}

export interface TrackDeclaration extends Described {
  readonly kind: "track";
  readonly range: Range;
  readonly name: Identifier;
  /** Of a value declared inside a `repeat`: `let x[i] = …`; empty otherwise. */
  readonly indices: readonly Expression[];
  readonly rate: Expression;
  readonly from: Expression | null;
}

export interface JunctionDeclaration extends Described {
  readonly kind: "junction";
  readonly range: Range;
  readonly junction: "0" | "1";
  readonly name: IndexedName;
  readonly domain: Identifier | null;
}

export type ElementKind = "Se" | "Sf" | "R" | "C" | "I" | "TF" | "GY" | "IC" | "RS";

export interface ElementDeclaration extends Described {
  readonly kind: "element";
  readonly range: Range;
  readonly element: ElementKind;
  /** The kind word as written: `MTF` and `TF` are both accepted. */
  readonly word: Identifier;
  readonly name: IndexedName;
  /** Named ports of a field; null where none are listed. */
  readonly ports: readonly FieldPort[] | null;
  readonly domain: Identifier | null;
  /** `C spring = k`: another value's name stands for the linear law. */
  readonly valueOf: Expression | null;
  readonly laws: readonly Law[];
}

export interface FieldPort {
  readonly name: Identifier;
  /** `R pump(shaft, gives line)`: the port counts power out of the element. */
  readonly gives: boolean;
  readonly domain: Identifier | null;
  readonly range: Range;
}

export interface Law {
  /** `e`, `out.f`, `a.p`, or `energy`. */
  readonly left: Reference;
  readonly oneWay: boolean;
  readonly right: Expression;
  readonly range: Range;
}

export interface SubDeclaration extends Described {
  readonly kind: "sub";
  readonly range: Range;
  readonly name: IndexedName;
  readonly system: Identifier;
  readonly overrides: readonly {
    readonly name: Identifier;
    readonly value: Expression;
    readonly range: Range;
  }[];
}

export interface PortDeclaration extends Described {
  readonly kind: "port";
  readonly range: Range;
  readonly name: IndexedName;
  readonly gives: boolean;
  readonly domain: Identifier | null;
}

/** `A -> B -> C, D as NAME`: groups of endpoints joined by arrows. */
export interface Wiring extends Described {
  readonly kind: "wiring";
  readonly range: Range;
  /** At least two groups; only the first and the last may hold more than one endpoint. */
  readonly groups: readonly (readonly Reference[])[];
  readonly arrows: readonly Arrow[];
  readonly as: IndexedName | null;
}

export interface Arrow {
  readonly range: Range;
  /** The end at which the causal stroke is demanded, if it is. */
  readonly stroke: "from" | "to" | null;
}

export interface Start extends Described {
  readonly kind: "start";
  readonly range: Range;
  /** null: `start steady`, in a trial. */
  readonly target: Reference | null;
  readonly value: Expression | null;
}

export interface Repeat extends Described {
  readonly kind: "repeat";
  readonly range: Range;
  /** From `{` to `}`. */
  readonly block: Range;
  readonly index: Identifier;
  readonly low: Expression;
  readonly high: Expression;
  readonly body: readonly Statement[];
}

export interface Expect extends Described {
  readonly kind: "expect";
  readonly range: Range;
  readonly condition: Condition;
}

export type Condition =
  | {
      readonly kind: "fact";
      readonly measure: Expression;
      readonly range: Range;
      readonly within: Expression | null;
    }
  | {
      readonly kind: "comparison";
      readonly left: Expression;
      readonly operator: "<" | "<=" | ">" | ">=" | "=";
      readonly right: Expression;
      readonly within: Expression | null;
      readonly range: Range;
    }
  | {
      readonly kind: "between";
      readonly measure: Expression;
      readonly low: Expression;
      readonly high: Expression;
      readonly range: Range;
    };

export interface Trial extends Described {
  readonly kind: "trial";
  readonly range: Range;
  /** From `{` to `}`. */
  readonly block: Range;
  readonly name: Identifier;
  readonly system: Identifier;
  readonly body: readonly TrialStatement[];
}

export type TrialStatement =
  | SetValue
  | Start
  | Drive
  | Run
  | RecordSignals
  | Vary
  | Scatter
  | Compare
  | Expect
  | Unreadable;

export interface SetValue extends Described {
  readonly kind: "set";
  readonly range: Range;
  readonly name: Reference;
  readonly value: Expression;
}

export interface Drive extends Described {
  readonly kind: "drive";
  readonly range: Range;
  readonly input: Reference;
  readonly value: Expression;
}

export interface Run extends Described {
  readonly kind: "run";
  readonly range: Range;
  readonly duration: Expression;
  readonly tolerance: Expression | null;
  readonly every: Expression | null;
}

export interface RecordSignals extends Described {
  readonly kind: "record";
  readonly range: Range;
  readonly signals: readonly Expression[];
}

export interface Vary extends Described {
  readonly kind: "vary";
  readonly range: Range;
  readonly name: Reference;
  readonly low: Expression;
  readonly high: Expression;
  readonly steps: Expression;
}

export interface Scatter extends Described {
  readonly kind: "scatter";
  readonly range: Range;
  readonly count: Expression;
}

/** `compare boat_speed with "data/run7.csv" columns "t", "v" rms < 0.03 m/s`. */
export interface Compare extends Described {
  readonly kind: "compare";
  readonly range: Range;
  readonly signal: Expression;
  readonly path: StringLiteral;
  readonly columns: readonly StringLiteral[];
  readonly limit: {
    readonly measure: Identifier;
    readonly operator: "<" | "<=";
    readonly value: Expression;
  } | null;
}
