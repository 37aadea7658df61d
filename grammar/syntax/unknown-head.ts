import type { IToken } from "chevrotain";
import { nearest } from "../diagnostics/nearest.ts";
import { explainSign, rangeOf, show } from "./messages.ts";
import type { Mistake } from "./mistake.ts";
import { belongs, Equals, Greater, Minus, Name } from "./tokens.ts";

/** What to say of a line whose head begins no statement; `words` are those that would, here. */
export function explainHead(
  tokens: readonly IToken[],
  stray: IToken | null,
  place: "file" | "system" | "trial",
  words: readonly string[],
): Mistake {
  const [head, next] = tokens;
  const range = rangeOf(head);
  if (stray !== null && (stray === head || stray === next)) return explainSign(stray);
  if (!belongs(head.tokenType, Name)) {
    const hint = "a statement goes on only where the line before ends in an operator, an arrow or a comma";
    return { name: "syntax", range, message: `A line can't begin with ${show(head)}; ${hint}.` };
  }
  if (next?.tokenType === Equals) {
    const begin = { file: "`const`", system: "`param`, `let` or `output`", trial: "`set` or `drive`" }[place];
    const message = `${show(head)} is given a value, but not said what it is; begin the line with ${begin}.`;
    return { name: "syntax", range, message };
  }
  const split = tokens.findIndex(
    (token, i) => token.tokenType === Minus && tokens[i + 1]?.tokenType === Greater,
  );
  if (split !== -1) {
    const sign = { start: tokens[split].startOffset, end: tokens[split + 1].startOffset + 1 };
    const message = "A bond is drawn with `->`, without a blank in it.";
    return { name: "syntax", range: sign, message, mend: { range: sign, text: "->" } };
  }
  const meant = nearest(head.image, words);
  if (meant === null) {
    return {
      name: "syntax",
      range,
      message: `${show(head)} begins no statement of a ${place}${ELSE[place]}.`,
    };
  }
  const message = `${show(head)} begins no statement; \`${meant}\` was meant, perhaps.`;
  return { name: "syntax", range, message, mend: { range, text: meant } };
}

const ELSE = {
  file: "; a file holds `use`, `const`, `system`, `trial` and the like",
  system: "; a line declares (`param`, `1`, `R` …) or wires (`a -> b`)",
  trial: "; a trial holds `drive`, `run`, `expect` and the like",
} as const;
