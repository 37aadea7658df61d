import type { TreeCache } from "../../../grammar/pipeline.ts";
import { type FileSet, SourceText } from "../../../grammar/source/text.ts";
import { parse } from "../../../grammar/syntax/parse.ts";
import { RESERVED_NAMES } from "../../../grammar/syntax/words.ts";
import { placeOf } from "../place.ts";
import type { Place } from "../view-model.ts";
import { flat, type Mention, mentionsIn, type Trees } from "./mentions.ts";

/** All places of the file that mean the same as the one asked about, or why it can't be renamed. */
export type NameAnswer =
  | { readonly places: readonly Place[]; readonly name: string }
  | { readonly refusal: string };

export interface NameQuestion {
  readonly path: string;
  /** As it stands in the editor, which may be newer than what was checked last. */
  readonly text: string;
  readonly offset: number;
  readonly renaming: boolean;
  readonly wanted: string | null;
}

const NAME = /^[\p{L}_][\p{L}\p{N}_]*$/u;

/**
 * Where the name at `offset` is written; with `renaming`, only if all of it may be renamed, and with `wanted` to that.
 * A rename stays within one file: where others use the name, or could be meant by it, it is refused.
 */
export function namesAt(
  files: FileSet,
  trees: TreeCache,
  { path, text, offset, renaming, wanted }: NameQuestion,
): NameAnswer {
  const known = files.get(path);
  const source = known?.text === text ? known : new SourceText(path, text);
  const set = new Map([...files, [path, source]]);
  const parsed = new Map(
    [...set].flatMap(([file, one]) =>
      file.endsWith(".wright") ? [[file, trees.get(one) ?? parse(one)] as const] : [],
    ),
  );
  if ((parsed.get(path)?.findings.length ?? 0) > 0 && renaming)
    return {
      refusal: "Mend the syntax of this file first: a name in a line that cannot be read would stay.",
    };

  const readable: Trees = new Map([...parsed].map(([file, { tree }]) => [file, tree]));
  const own = mentionsIn(path, readable);
  const asked = own.find(({ range }) => range.start <= offset && offset <= range.end);
  if (asked === undefined)
    return { refusal: "Only nodes and values of a system can be renamed, where they are declared or used." };
  const group = tied(asked, own);
  const means = (mention: Mention) =>
    group.some((one) => one.space === mention.space) &&
    mention.name === asked.name &&
    sameOwner(mention, asked);
  const places = [...new Map(own.filter(means).map((one) => [one.range.start, one])).values()].map(
    ({ range }) => placeOf({ file: path, ...range }, set),
  );
  if (!renaming) return { places, name: asked.name };

  const badName = wanted === null ? null : refusedName(wanted, asked, own);
  const refusal = badName ?? undeclared(asked, group, own.filter(means));
  if (refusal !== null) return { refusal };
  for (const file of readable.keys()) {
    if (file === path) continue;
    const there = mentionsIn(file, readable).find(means);
    if (there !== undefined) {
      const { line } = placeOf({ file, ...there.range }, set);
      return {
        refusal: `\`${asked.name}\` is used in ${file} too (line ${line}); a rename stays in one file.`,
      };
    }
    const broken = (parsed.get(file)?.findings.length ?? 0) > 0;
    if (
      broken &&
      new RegExp(`(?<![\\p{L}\\p{N}_])${asked.name}(?![\\p{L}\\p{N}_])`, "u").test(set.get(file)?.text ?? "")
    )
      return { refusal: `${file} has lines that cannot be read and names \`${asked.name}\`: mend it first.` };
  }
  return { places, name: asked.name };
}

/** An element without a law takes the value of its name: the two are renamed together. */
function tied(asked: Mention, own: readonly Mention[]): Mention[] {
  const here = own.filter((one) => one.name === asked.name && sameOwner(one, asked));
  const both = here.some((one) =>
    here.some((other) => one !== other && one.range.start === other.range.start),
  );
  return both ? here : here.filter(({ space }) => space === asked.space);
}

/** What a system does not declare itself is named elsewhere too, by a `use` or from another file. */
function undeclared(asked: Mention, group: readonly Mention[], meant: readonly Mention[]): string | null {
  const { file, system } = asked.owner;
  const declared = group.every(({ space }) => meant.some((one) => one.space === space && one.declares));
  if (declared) return null;
  return meant.length > 0 && meant[0].file !== file
    ? `\`${asked.name}\` is declared in ${file}: rename it there.`
    : `\`${asked.name}\` is not declared in ${system.name.text}; only its own nodes and values can be renamed.`;
}

function sameOwner(a: Mention, b: Mention): boolean {
  return a.owner.file === b.owner.file && a.owner.system.name.text === b.owner.system.name.text;
}

function refusedName(wanted: string, asked: Mention, own: readonly Mention[]): string | null {
  if (!NAME.test(wanted)) return "A name is a letter or _, then letters, digits and _.";
  if (RESERVED_NAMES.has(wanted)) return `\`${wanted}\` is a word of the notation.`;
  const system = asked.owner.system.name.text;
  if (own.some((one) => one.name === wanted && sameOwner(one, asked)))
    return `${system} speaks of a \`${wanted}\` already.`;
  const statements = flat(asked.owner.system.body);
  const hidden = statements.some(
    (one) =>
      (one.kind === "repeat" && one.index.text === wanted) ||
      (one.kind === "element" && (one.ports ?? []).some(({ name }) => name.text === wanted)),
  );
  return hidden ? `\`${wanted}\` is an index or a port in ${system}, which would hide it.` : null;
}
