import type { Expr } from "../symbolic/expression.ts";

/**
 * Names as the trade sets them: `R_a` → R_{a}, `rope.spring.q` → q_{\mathrm{rope.spring}}, `J1` → J_{1}. A name of
 * one letter is a quantity and slanted, a longer one is a word and upright (ISO 80000-1, 7.2.1 and 7.2.2, from memory).
 * A Greek letter's name is that letter, as engineers without the key for it write it: `rho_o` → \rho_{o}.
 * Nothing but letters, digits and the few signs below reaches the LaTeX: a name cannot carry a command.
 */
export function symbolLatex(symbol: Expr): string {
  switch (symbol.role) {
    case "rate":
    case "inputRate":
      return dotted(symbol.name);
    case "effort":
      return withSubscripts("e", [pathLatex(symbol.name)]);
    case "flow":
      return withSubscripts("f", [pathLatex(symbol.name)]);
    default:
      return nameLatex(symbol.name);
  }
}

export function nameLatex(name: string): string {
  const { base, subscripts } = split(name);
  return withSubscripts(letterLatex(base), subscripts);
}

/** The rate of a quantity: a dot over its letter, or over its word. */
export function dotted(name: string): string {
  const { base, subscripts } = split(name);
  return withSubscripts(`\\dot{${letterLatex(base)}}`, subscripts);
}

/** The last part of a dotted name is the quantity; what it belongs to, and what follows its `_`, stand below. */
function split(name: string): { base: string; subscripts: string[] } {
  const dot = name.lastIndexOf(".");
  const owner = dot === -1 ? "" : name.slice(0, dot);
  const { base, below } = splitQuantity(name.slice(dot + 1));
  const subscripts = below.map((part) => ([...part].length === 1 ? letterLatex(part) : upright(part)));
  if (owner !== "") subscripts.push(pathLatex(owner));
  return { base, subscripts };
}

/** `R_a` → R, a; `J1` → J, 1; `m_b_2` → m, b, 2; a word stays whole, with its digits and underlines. */
function splitQuantity(last: string): { base: string; below: string[] } {
  const quantity = QUANTITY.exec(last);
  if (quantity === null) return { base: last, below: [] };
  const [, base, digits, rest] = quantity;
  return { base, below: [digits, ...rest.split("_")].filter((part) => part !== "") };
}

function withSubscripts(base: string, subscripts: readonly string[]): string {
  return subscripts.length === 0 ? base : `${base}_{${subscripts.join(",\\,")}}`;
}

function letterLatex(text: string): string {
  const spelled = SPELLED[text];
  if (spelled !== undefined) return spelled;
  const [only, ...more] = [...text];
  if (more.length > 0 || only === undefined) return upright(text);
  return GREEK[only] ?? (/^[a-zA-Z0-9]$/.test(only) ? only : upright(only));
}

/** `rope.spring` upright, but `C_f` in it as the quantity that it is; a bond with its arrow. */
function pathLatex(path: string): string {
  return path.split("->").map(endLatex).join("\\to ");
}

function endLatex(path: string): string {
  const { base, below } = splitQuantity(path);
  return below.length > 0 ? withSubscripts(letterLatex(base), below.map(upright)) : upright(path);
}

function upright(text: string): string {
  const safe = [...text].map(safeCharacter).join("");
  return /^[\x20-\x7e]*$/.test(text) ? `\\mathrm{${safe}}` : `\\text{${safe}}`;
}

function safeCharacter(character: string): string {
  if (/^[\p{L}\p{N}\p{M}.,[\]]$/u.test(character)) return character;
  if (character === "_") return "\\_";
  if (character === "#") return "\\#";
  return "?";
}

const LETTERS =
  "αalpha βbeta γgamma δdelta εvarepsilon ζzeta ηeta θtheta ιiota κkappa λlambda μmu νnu ξxi πpi ρrho σsigma τtau " +
  "υupsilon φvarphi χchi ψpsi ωomega ϑvartheta ϕphi ϵepsilon ΓGamma ΔDelta ΘTheta ΛLambda ΞXi ΠPi ΣSigma ΦPhi ΨPsi ΩOmega";

const GREEK: Readonly<Record<string, string>> = Object.assign(
  Object.create(null),
  Object.fromEntries(LETTERS.split(" ").map((entry) => [entry[0], `\\${entry.slice(1)} `])),
);

/** `epsilon` and `phi` as they are usually drawn; the other shapes of the two have no name of their own here. */
const SPELLED: Readonly<Record<string, string>> = Object.assign(
  Object.create(null),
  Object.fromEntries(
    LETTERS.split(" ")
      .map((entry) => [entry.slice(1).replace(/^var/, ""), GREEK[entry[0]]] as const)
      .reverse(),
  ),
);

const QUANTITY = new RegExp(`^(${Object.keys(SPELLED).join("|")}|\\p{L}\\p{M}*)(\\d*)((?:_[^_]+)*)$`, "u");
