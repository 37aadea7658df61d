import type { FileSet, SourceText } from "../source/text.ts";
import type { Finding } from "./finding.ts";

/**
 * What a finding is known by from one commit to the next: 16 hexadecimal digits made of its name, its file, the
 * declaration it stands in, the text it points at, and which of several such it is. Lines may move, blanks and comments
 * may change; the finding is a new one when the text that it points at changes.
 */
export function fingerprintsOf(findings: readonly Finding[], files: FileSet): Map<Finding, string> {
  const seen = new Map<string, number>();
  const prints = new Map<Finding, string>();
  for (const found of [...findings].sort((a, b) => a.span.start - b.span.start)) {
    const identity = identityOf(found, files.get(found.span.file));
    const count = (seen.get(identity) ?? 0) + 1;
    seen.set(identity, count);
    prints.set(found, hash(`${identity}\n${count}`));
  }
  return prints;
}

function identityOf({ name, span }: Finding, source: SourceText | undefined): string {
  if (source === undefined) return [name, span.file].join("\n");
  // What spans many lines is known by its first: the rest may change without making it another finding.
  const [first] = source.text
    .slice(span.start, Math.min(span.end, span.start + 500))
    .trim()
    .split("\n");
  return [name, span.file, declarationAt(source, span.start), first.replace(/\s+/g, " ").trim()].join("\n");
}

interface Head {
  readonly at: number;
  readonly text: string;
}

const HEADS = new WeakMap<SourceText, readonly Head[]>();

/** The head of the declaration at file level that an offset stands in, without what may change beside its name. */
function declarationAt(source: SourceText, offset: number): string {
  let heads = HEADS.get(source);
  if (heads === undefined) {
    const found = source.text.matchAll(
      /^[ \t]*(system|trial|function|curve|domain)[ \t]+([\p{L}\p{N}_]+)/gmu,
    );
    heads = [...found].map((head) => ({ at: head.index, text: `${head[1]} ${head[2]}` }));
    HEADS.set(source, heads);
  }
  return heads.findLast(({ at }) => at <= offset)?.text ?? "";
}

/** FNV-1a, 64 bits, over UTF-16 code units (G. Fowler, L. C. Noll, K.-P. Vo; constants recalled from memory). */
function hash(text: string): string {
  let value = 0xcbf29ce484222325n;
  for (let index = 0; index < text.length; index++) {
    value = BigInt.asUintN(64, (value ^ BigInt(text.charCodeAt(index))) * 0x100000001b3n);
  }
  return value.toString(16).padStart(16, "0");
}
