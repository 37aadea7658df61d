import type { languages } from "monaco-editor/editor";
import {
  CLAUSE_WORDS,
  ELEMENT_WORDS,
  FUNCTION_NAMES,
  OPERATOR_WORDS,
  STATEMENT_WORDS,
} from "../../../grammar/syntax/words.ts";

const anyOf = (words: Iterable<string>) =>
  new RegExp(`(?:${[...words].sort((a, b) => b.length - a.length).join("|")})(?![\\p{L}\\p{N}_])`, "u");

const KINDS = anyOf(ELEMENT_WORDS.keys());
const STATEMENTS = anyOf(STATEMENT_WORDS);
const WORDS = anyOf([...CLAUSE_WORDS, ...OPERATOR_WORDS]);
const FUNCTIONS = anyOf(FUNCTION_NAMES);
const NUMBER = /\d+(?:\.\d+)?(?:[eE][+-]?\d+)?/;
const UNIT = /(?:1\/)?[\p{L}%µΩ°][\p{L}\p{N}%µΩ°]*(?:[*/^]-?[\p{L}\p{N}%µΩ°]+)*/u;

const join = (...parts: readonly (RegExp | string)[]) =>
  new RegExp(parts.map((part) => (typeof part === "string" ? part : part.source)).join(""), "u");

/** Highlighting only: what a line means is settled by the core, which has the last word through its findings. */
export const notationTokens: languages.IMonarchLanguage = {
  unicode: true,
  defaultToken: "",
  tokenizer: {
    root: [
      [/^\s*##.*$/, "comment.description"],
      [/#.*$/, "comment"],
      [/--(?=\s|$).*$/, "comment.remark"],
      [join(/^(\s*)/, "(", KINDS, ")"), ["", "kind"]],
      [/^(\s*)([01])(?=\s)/, ["", "kind"]],
      [join(/^(\s*)/, "(", STATEMENTS, ")"), ["", "keyword"]],
      [join("(", NUMBER, ")( )(?!", WORDS, ")(", UNIT, ")"), ["number", "", "unit"]],
      [NUMBER, "number"],
      [join(/(:)(\s*)/, "(", UNIT, ")"), ["delimiter", "", "unit"]],
      [/"[^"\n]*"?/, "string"],
      [/->\||\|->|->/, "arrow"],
      [/<-|<=|>=|\.\.|[-+*/^=<>]/, "operator"],
      [/[{}()[\],]/, "delimiter"],
      [WORDS, "keyword"],
      [FUNCTIONS, "function"],
      [/[\p{L}_][\p{L}\p{N}_]*/u, "name"],
      [/\./, "delimiter"],
    ],
  },
};

export const notationConfiguration: languages.LanguageConfiguration = {
  comments: { lineComment: "#" },
  brackets: [
    ["{", "}"],
    ["(", ")"],
    ["[", "]"],
  ],
  autoClosingPairs: [
    { open: "{", close: "}" },
    { open: "(", close: ")" },
    { open: "[", close: "]" },
    { open: '"', close: '"', notIn: ["string", "comment"] },
  ],
  wordPattern: /[\p{L}_][\p{L}\p{N}_]*/u,
  indentationRules: { increaseIndentPattern: /\{\s*(?:--.*|#.*)?$/, decreaseIndentPattern: /^\s*\}/ },
};
