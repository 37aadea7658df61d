import { expect, test } from "vitest";
import { SourceText } from "../../grammar/source/text.ts";
import { format } from "../../grammar/syntax/format.ts";
import { parse } from "../../grammar/syntax/parse.ts";
import { meaning } from "./meaning.ts";
import { knownTexts, randomText, seeded } from "./random-texts.ts";

const COUNT = process.env.FULL === "1" ? 1_000_000 : 10_000;
const SEED = 20_261;

/** What must hold of every text; the answer is the first thing that doesn't, with the text. */
function broken(text: string): string | null {
  const source = new SourceText("random.wright", text);
  const { tree, findings } = parse(source);
  for (const { span, message } of findings) {
    if (!(span.start >= 0 && span.start <= span.end && span.end <= text.length)) {
      return `span ${span.start}..${span.end} is outside: ${message}`;
    }
    if (!/^["`(\p{L}].*\.$/su.test(message)) return `not a sentence: ${message}`;
  }
  const once = new SourceText("random.wright", format(tree, source));
  const again = parse(once);
  if (JSON.stringify(meaning(again.tree, once)) !== JSON.stringify(meaning(tree, source))) {
    return `formatting changed the meaning:\n${once.text}`;
  }
  const twice = format(again.tree, once);
  if (twice !== once.text) return `formatting twice differs:\n${once.text}\n---\n${twice}`;
  return null;
}

test(`${COUNT} random and mutated texts: no crash, spans inside, formatting idempotent and meaning-preserving`, () => {
  const known = knownTexts();
  const random = seeded(SEED);
  for (let i = 0; i < COUNT; i += 1) {
    const text = randomText(random, known);
    let wrong: string | null;
    try {
      wrong = broken(text);
    } catch (thrown) {
      wrong = thrown instanceof Error ? `${thrown.stack}` : String(thrown);
    }
    if (wrong !== null) expect.fail(`text ${i}: ${wrong}\n=== of\n${text}`);
  }
}, 3_600_000);
