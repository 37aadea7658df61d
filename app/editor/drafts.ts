import type { Draft, Unsaved } from "./workspace.ts";

/**
 * Unsaved texts, kept in the browser so that they survive a closed tab, a crash and the end of a session: one draft a
 * person, set and tab, so that no tab writes over what another one keeps. Where the browser keeps nothing (private
 * windows, a full store) the page works without.
 */
export function draftShelf(person: string, team: string, set: string): string {
  return `draft:${person}:${team}/${set}`;
}

export function ownKey(shelf: string): string {
  const tab = Date.now().toString(36) + Math.random().toString(36).slice(2, 8);
  return `${shelf}~${tab}`;
}

export function isOnShelf(shelf: string, key: string): boolean {
  return key === shelf || key.startsWith(`${shelf}~`);
}

export interface KeptDraft {
  readonly key: string;
  readonly draft: Draft;
}

export function readDrafts(shelf: string): KeptDraft[] {
  try {
    return Object.keys(localStorage).flatMap((key) => {
      const draft = isOnShelf(shelf, key) ? parsed(localStorage.getItem(key)) : null;
      return draft === null ? [] : [{ key, draft }];
    });
  } catch {
    return [];
  }
}

export function parsed(text: string | null): Draft | null {
  try {
    const draft = text === null ? null : (JSON.parse(text) as Draft);
    return draft !== null && Array.isArray(draft.files) ? draft : null;
  } catch {
    return null;
  }
}

/** False where the browser did not keep it: the page then says so. */
export function keepDraft(key: string, commit: string | null, files: readonly Unsaved[]): boolean {
  try {
    if (files.length === 0) localStorage.removeItem(key);
    else
      localStorage.setItem(
        key,
        JSON.stringify({ commit, at: new Date().toISOString(), files } satisfies Draft),
      );
    return true;
  } catch {
    return files.length === 0;
  }
}

/** A text that another tab left of a file of which a newer one stands on the page. */
export interface OtherDraft {
  readonly key: string;
  readonly commit: string | null;
  readonly at: string;
  readonly file: Unsaved;
}

export interface Gathered {
  /** The newest text of each file. */
  readonly draft: Draft | null;
  /** Keys whose texts all stand in `draft`: they can go as soon as the page keeps its own. */
  readonly taken: readonly string[];
  readonly others: readonly OtherDraft[];
}

/** What several tabs left, brought together: nothing of it is lost where they differ. */
export function gathered(kept: readonly KeptDraft[], saved: ReadonlyMap<string, string>): Gathered {
  const newestFirst = [...kept].sort((a, b) => (a.draft.at < b.draft.at ? 1 : -1));
  const chosen = new Map<string, { readonly file: Unsaved; readonly draft: Draft }>();
  const others: OtherDraft[] = [];
  const taken: string[] = [];
  for (const { key, draft } of newestFirst) {
    let all = true;
    for (const file of draft.files) {
      if (saved.get(file.path) === file.text) continue;
      const known = chosen.get(file.path);
      if (known === undefined) chosen.set(file.path, { file, draft });
      else if (known.file.text !== file.text) {
        others.push({ key, commit: draft.commit, at: draft.at, file });
        all = false;
      }
    }
    if (all) taken.push(key);
  }
  const texts = [...chosen.values()];
  if (texts.length === 0) return { draft: null, taken, others };
  // Where someone else changed a file since, the version it was written on must be the parent of a save.
  const moved = texts.filter(({ file }) => (saved.get(file.path) ?? null) !== file.base);
  const oldest = (moved.length > 0 ? moved : texts).reduce((a, b) => (b.draft.at < a.draft.at ? b : a));
  return {
    draft: {
      commit: oldest.draft.commit,
      at: texts[0].draft.at,
      files: texts.map(({ file }) => file),
    },
    taken,
    others,
  };
}
