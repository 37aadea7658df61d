import type { OutlineEntry } from "../view-model.ts";

export interface Suggestion {
  readonly label: string;
  readonly insert: string;
  /** What is written beside the label in the list. */
  readonly detail: string;
  readonly sort: "name" | "kind" | "statement" | "unit" | "function" | "variable" | "domain";
}

const KINDS: readonly [string, string][] = [
  ["Se", "effort source"],
  ["Sf", "flow source"],
  ["R", "resistor"],
  ["C", "compliance"],
  ["I", "inertia"],
  ["TF", "transformer"],
  ["GY", "gyrator"],
  ["RS", "resistor whose heat goes on"],
  ["IC", "mixed store"],
  ["0", "junction of one effort"],
  ["1", "junction of one flow"],
];

const STATEMENTS: readonly [string, string][] = [
  ["param", "parameter"],
  ["const", "constant, not to be overridden"],
  ["input", "input of the system"],
  ["output", "observed quantity"],
  ["let", "named signal"],
  ["track", "tracked displacement"],
  ["sub", "instance of another system"],
  ["port", "power port of this system"],
  ["start", "initial value"],
  ["repeat", "repeated statements"],
  ["expect", "requirement"],
];

const FILE_STATEMENTS: readonly [string, string][] = [
  ["notation", "edition of the notation"],
  ["use", "names of another file"],
  ["system", "a system"],
  ["trial", "a trial of a system"],
  ["function", "a function"],
  ["curve", "a curve through points"],
  ["domain", "a further domain"],
  ["const", "a constant"],
];

const DOMAINS: readonly [string, string][] = [
  ["translation", "N, m/s"],
  ["rotation", "N*m, rad/s"],
  ["electrical", "V, A"],
  ["hydraulic", "Pa, m^3/s"],
  ["thermal", "K, W/K"],
  ["heat", "K, W"],
  ["magnetic", "A, Wb/s"],
  ["acoustic", "Pa, m^3/s"],
  ["chemical", "J/mol, mol/s"],
];

const FUNCTIONS = "sin cos tan asin acos atan atan2 sinh cosh tanh exp ln log10 sqrt abs sign min max".split(
  " ",
);

const UNITS =
  "N kN N/m kN/m N*s/m kN*s/m N*m N*m/A N*m*s/rad N*m/rad kg kg*m^2 m mm m/s m/s^2 rad deg rad/s rpm V A ohm H mH F uF Pa bar m^3 L L/min m^3/s Pa*s/m^3 m^3/Pa W kW J s ms min K degC Hz % 1/s".split(
    " ",
  );

const FACTS: readonly [string, string][] = [
  ["order", "number of states"],
  ["dependent", "number of dependent stores"],
  ["loops", "number of algebraic loops"],
  ["integral", "every store is independent"],
  ["stable", "every eigenvalue's real part is negative"],
];

/** What may stand where the cursor is, judged from the line so far; the core settles whether it fits. */
export function suggestionsAt(
  before: string,
  outline: readonly OutlineEntry[],
  within: string | null,
): Suggestion[] {
  const inSystem = outline.filter((entry) => entry.within === within && within !== null);
  const nodes = inSystem.filter(({ space }) => space === "node").map(named);
  const values = inSystem.filter(({ space }) => space === "value").map(named);
  const fileWide = outline.filter((entry) => entry.within === null);

  if (/^\s*[\p{L}\d_]*$/u.test(before)) {
    if (within === null) return listed(FILE_STATEMENTS, "statement");
    return [...listed(KINDS, "kind"), ...listed(STATEMENTS, "statement"), ...nodes];
  }
  if (/(?:^|[^\p{L}\p{N}_.])\d[\d.]*(?:e[+-]?\d+)? [\p{L}%/*^\d]*$/iu.test(before))
    return listed(pairs(UNITS), "unit");
  if (/^\s*input\s.*:\s*\S*$/.test(before)) return listed(pairs(UNITS), "unit");
  if (/:\s*[\p{L}]*$/u.test(before) || /\b(takes|gives)\s+\p{L}*$/u.test(before))
    return listed(DOMAINS, "domain");
  if (/^\s*sub\s.*=\s*[\p{L}\d_]*$/u.test(before) || /\bof\s+[\p{L}\d_]*$/u.test(before)) {
    return fileWide.filter(({ space }) => space === "system").map(named);
  }
  const dotted = /([\p{L}_][\p{L}\p{N}_]*)\.[\p{L}\p{N}_]*$/u.exec(before);
  if (dotted !== null) return variablesOf(dotted[1], inSystem);
  if (/->/.test(before)) return nodes;
  if (/^\s*expect\s/.test(before)) return [...listed(FACTS, "function"), ...values];
  if (/[=+\-*/^(,<>]/.test(before)) {
    const functions = [
      ...pairs(FUNCTIONS),
      ...fileWide.filter(({ space }) => space === "function").map(pairOf),
    ];
    return [
      ...values,
      ...fileWide.filter(({ space }) => space === "value").map(named),
      ...functions.map(
        ([name, detail]): Suggestion => ({ label: name, insert: `${name}(`, detail, sort: "function" }),
      ),
      ...nodes,
    ];
  }
  return nodes;
}

function variablesOf(node: string, entries: readonly OutlineEntry[]): Suggestion[] {
  const word = entries.find(({ name, space }) => name === node && space === "node")?.word.replace(/^M/, "");
  const offers: Record<string, readonly [string, string][]> = {
    "0": [["e", "the effort all its bonds share"]],
    "1": [["f", "the flow all its bonds share"]],
    C: [
      ["q", "displacement"],
      ["e", "effort"],
      ["f", "flow"],
    ],
    I: [
      ["p", "momentum"],
      ["e", "effort"],
      ["f", "flow"],
    ],
    TF: [
      ["in", "the bond that points at it"],
      ["out", "the bond that leaves it"],
    ],
    GY: [
      ["in", "the bond that points at it"],
      ["out", "the bond that leaves it"],
    ],
  };
  return listed(
    offers[word ?? ""] ?? [
      ["e", "effort"],
      ["f", "flow"],
    ],
    "variable",
  );
}

function listed(words: readonly (readonly [string, string])[], sort: Suggestion["sort"]): Suggestion[] {
  return words.map(([label, detail]) => ({ label, insert: label, detail, sort }));
}

function pairs(words: readonly string[]): [string, string][] {
  return words.map((word) => [word, ""]);
}

function pairOf(entry: OutlineEntry): [string, string] {
  return [entry.name, entry.description ?? ""];
}

function named(entry: OutlineEntry): Suggestion {
  const detail = entry.description === null ? entry.declaration : `${entry.word}: ${entry.description}`;
  return { label: entry.name, insert: entry.name, detail, sort: "name" };
}
