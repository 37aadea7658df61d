import { type Finding, finding } from "../diagnostics/finding.ts";
import { nearest } from "../diagnostics/nearest.ts";
import type { Range } from "../source/span.ts";
import type { IndexedName } from "../syntax/tree.ts";
import type { Draft, Indices, Instance, Named } from "./draft.ts";
import { spanOf } from "./draft.ts";
import { wholeScope } from "./structure.ts";
import { wholeNumber } from "./whole-numbers.ts";

/** `cell[i-1]` under `i = 3` is `cell[2]`; null where an index is no whole number, which is reported. */
export function fullName(
  draft: Draft,
  name: IndexedName,
  instance: Instance,
  indices: Indices,
): string | null {
  let text = name.name.text;
  for (const index of name.indices) {
    const value = wholeNumber(index, wholeScope(instance, indices));
    if (value === null) {
      draft.report(
        finding(
          "unknown-name",
          spanOf(instance, index.range),
          "An index is a whole number, made of numbers, the indices of the repeats around it, and params.",
        ),
      );
      return null;
    }
    text += `[${value}]`;
  }
  return text;
}

/** A finding about a name that nothing declares, with what was probably meant. */
export function unknownName(
  instance: Instance,
  range: Range,
  message: string,
  name: string,
  candidates: Iterable<string>,
): Finding {
  const meant = nearest(name, candidates);
  const span = spanOf(instance, range);
  if (meant === null) return finding("unknown-name", span, message);
  return finding("unknown-name", span, `${message} Is \`${meant}\` meant?`, {
    fix: { title: `Write ${meant}`, edits: [{ span, text: meant }] },
  });
}

/** The node, sub or named bond of `inside` that `from` speaks of; what nobody declares is reported. */
export function lookUp(
  draft: Draft,
  name: IndexedName,
  inside: Instance,
  from: Instance,
  indices: Indices,
): Named | null {
  const plain = name.indices.length === 0;
  const text = plain ? name.name.text : fullName(draft, name, from, indices);
  if (text === null) return null;
  const named = inside.nodes.get(text);
  if (named !== undefined) return named;
  if (!plain && inside.nodes.get(name.name.text)?.kind === "broken") return { kind: "broken" };
  reportUnknown(draft, name, text, inside, from);
  return null;
}

/** Once for a place in the text, however many turns of a repeat or instances of a sub come by it. */
function reportUnknown(
  draft: Draft,
  name: IndexedName,
  text: string,
  inside: Instance,
  from: Instance,
): void {
  const base = name.name.text;
  const place = `${from.file.path} ${name.range.start}`;
  let meant = draft.meant.get(place);
  if (meant === undefined) {
    const bases = new Set<string>();
    if (draft.mayGuess()) {
      for (const known of inside.nodes.keys()) bases.add(known.split("[", 1)[0]);
    }
    meant = bases.has(base) ? null : nearest(base, bases);
    draft.meant.set(place, meant);
    const span = name.indices.length === 0 ? name.name.range : name.range;
    if (inside.values.has(text)) {
      const message = `\`${text}\` is a value; there is no node of that name.`;
      draft.report(finding("unknown-name", spanOf(from, span), message));
    } else if (meant === null) {
      const others = bases.has(base) && name.indices.length === 0 ? `; there are \`${base}[ … ]\`` : "";
      draft.report(finding("unknown-name", spanOf(from, span), `There is no node \`${text}\`${others}.`));
    } else {
      const message = `There is no node \`${text}\`. Is \`${meant}\` meant?`;
      const fix = { title: `Write ${meant}`, edits: [{ span: spanOf(from, name.name.range), text: meant }] };
      draft.report(finding("unknown-name", spanOf(from, span), message, { fix }));
    }
  }
  // What was probably meant is not called unconnected on top.
  const likely = meant === null ? undefined : inside.nodes.get(meant + text.slice(base.length));
  if (likely?.kind === "node") likely.suspect = true;
}
