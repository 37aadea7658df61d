import type { Draft, Unsaved } from "./workspace.ts";

/**
 * Unsaved texts, kept in the browser so that they survive a closed tab, a crash and the end of a session. One draft
 * a person and set. Where the browser keeps nothing (private windows, a full store) the page works without.
 */
export function draftKey(person: string, team: string, set: string): string {
  return `draft:${person}:${team}/${set}`;
}

export function readDraft(key: string): Draft | null {
  try {
    const kept = localStorage.getItem(key);
    return kept === null ? null : (JSON.parse(kept) as Draft);
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
