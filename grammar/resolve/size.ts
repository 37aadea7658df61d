import { finding } from "../diagnostics/finding.ts";
import type { Statement, SubDeclaration, System } from "../syntax/tree.ts";
import type { Draft } from "./draft.ts";
import { type SourceFile, spanIn } from "./files.ts";
import { eachReference } from "./tree-walk.ts";
import { plainNumber, type WholeScope, wholeNumber } from "./whole-numbers.ts";

export const MOST_BONDS = 200_000;
/** Declarations and turns of repeats: what has no bond takes time too. */
export const MOST_STATEMENTS = 1_000_000;
export const DEEPEST_SUB = 100;
export const DEEPEST_REPEAT = 250;

interface Size {
  readonly bonds: number;
  readonly statements: number;
}

const NOTHING: Size = { bonds: 0, statements: 0 };

/** From this size on, a part of a system that is too large is not worked out for itself either. */
const LARGE_PART = 5_000;

/**
 * How large a system becomes when its subs are expanded, counted once a system, so that parts that double at
 * each level are refused before any is made. Counts go by the params' own values; what overrides add to a
 * `repeat` is caught while it is expanded.
 */
export function fitsLimits(draft: Draft, system: System, file: SourceFile, refused: Set<System>): boolean {
  const known = new Map<System, Size>();
  const open: System[] = [];
  let fits = true;

  const refuse = (
    name: "too-large" | "sub-cycle",
    sub: SubDeclaration | System,
    from: SourceFile,
    message: string,
  ): Size => {
    fits = false;
    draft.report(
      finding(name, spanIn(from, sub.kind === "sub" ? sub.system.range : sub.name.range), message),
    );
    return NOTHING;
  };

  const sizeOf = (part: System, home: SourceFile): Size => {
    const seen = known.get(part);
    if (seen !== undefined) return seen;
    open.push(part);
    const size = sizeOfBody(part.body, part, home, new Map(), 0);
    open.pop();
    known.set(part, size);
    return size;
  };

  const sizeOfSub = (sub: SubDeclaration, home: SourceFile): Size => {
    const placed = home.visible.systems.get(sub.system.text);
    if (placed === undefined || !fits) return NOTHING;
    const at = open.indexOf(placed.item);
    if (at !== -1) {
      const circle = [...open.slice(at), placed.item].map(({ name }) => name.text).join(" → ");
      return refuse("sub-cycle", sub, home, `${placed.item.name.text} contains itself: ${circle}.`);
    }
    if (open.length > DEEPEST_SUB) {
      return refuse("too-large", sub, home, `Subs are nested more than ${DEEPEST_SUB} deep here.`);
    }
    return sizeOf(placed.item, placed.file);
  };

  const sizeOfBody = (
    body: readonly Statement[],
    part: System,
    home: SourceFile,
    indices: ReadonlyMap<string, number>,
    depth: number,
  ): Size => {
    const scope: WholeScope = (name) => indices.get(name) ?? defaultOf(part, name);
    let bonds = 0;
    let statements = 0;
    for (const statement of body) {
      statements += 1;
      if (statement.kind === "wiring") {
        for (let i = 1; i < statement.groups.length; i += 1) {
          bonds += statement.groups[i - 1].length * statement.groups[i].length;
        }
      } else if (statement.kind === "sub") {
        const size = sizeOfSub(statement, home);
        bonds += size.bonds;
        statements += size.statements;
      } else if (statement.kind === "repeat" && depth < DEEPEST_REPEAT) {
        const low = wholeNumber(statement.low, scope);
        const high = wholeNumber(statement.high, scope);
        if (low === null || high === null || high < low) continue;
        const turns = high - low + 1;
        if (!countsWith(statement.body, statement.index.text)) {
          const size = sizeOfBody(statement.body, part, home, indices, depth + 1);
          bonds += turns * size.bonds;
          statements += turns * (size.statements + 1);
        } else {
          // An inner repeat may count to this index, so each turn is counted for itself, up to the limit.
          for (let i = low; i <= high && bonds <= MOST_BONDS && statements <= MOST_STATEMENTS; i += 1) {
            const size = sizeOfBody(
              statement.body,
              part,
              home,
              new Map(indices).set(statement.index.text, i),
              depth + 1,
            );
            bonds += size.bonds;
            statements += size.statements + 1;
          }
        }
      }
    }
    return { bonds, statements };
  };

  const { bonds, statements } = sizeOf(system, file);
  const name = system.name.text;
  if (fits && (bonds > MOST_BONDS || statements > MOST_STATEMENTS)) {
    const what =
      bonds > MOST_BONDS
        ? `more than ${MOST_BONDS.toLocaleString("en")} bonds`
        : `more than ${MOST_STATEMENTS.toLocaleString("en")} statements`;
    refuse(
      "too-large",
      system,
      file,
      `${name} would have ${what} when its subs and repeats are written out.`,
    );
    for (const part of known.keys()) refused.add(part);
  } else if (fits && refused.has(system) && bonds > LARGE_PART) {
    refuse(
      "too-large",
      system,
      file,
      `${name} is a part of a system that is too large, and is worked out when that one fits.`,
    );
  }
  return fits;
}

/** Whether some repeat within counts to this index, so that its turns differ. */
function countsWith(body: readonly Statement[], index: string): boolean {
  return body.some((inner) => {
    if (inner.kind !== "repeat") return false;
    let mentions = false;
    for (const bound of [inner.low, inner.high]) {
      eachReference(bound, ({ path }) => {
        if (path[0].name.text === index) mentions = true;
      });
    }
    return mentions || countsWith(inner.body, index);
  });
}

function defaultOf(system: System, name: string): number | null {
  for (const statement of system.body) {
    if ((statement.kind === "param" || statement.kind === "const") && statement.name.text === name) {
      return plainNumber(statement.value, () => null);
    }
  }
  return null;
}
