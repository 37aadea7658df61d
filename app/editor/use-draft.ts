import { type Dispatch, useEffect, useRef, useState } from "react";
import { gathered, isOnShelf, keepDraft, type OtherDraft, ownKey, parsed, readDrafts } from "./drafts.ts";
import type { Step, Unsaved, Workspace } from "./workspace.ts";

const SETTLES_MS = 400;

export interface DraftState {
  /** False: the browser keeps no draft. */
  readonly kept: boolean;
  /** Texts that other tabs left of files that stand here otherwise. */
  readonly others: readonly OtherDraft[];
  /** Files that are unsaved here and, at this moment, in another tab. */
  readonly elsewhere: readonly string[];
  /** Shows that text instead, and keeps the one that stood here in its place. */
  swap(other: OtherDraft): void;
  drop(other: OtherDraft): void;
}

/** Keeps unsaved texts as they are typed, and brings back what earlier visits left. */
export function useDraft(
  shelf: string,
  workspace: Workspace,
  unsaved: readonly Unsaved[],
  step: Dispatch<Step>,
): DraftState {
  const { commit, saved } = workspace;
  const [own] = useState(() => ownKey(shelf));
  const [kept, setKept] = useState(true);
  const [others, setOthers] = useState<readonly OtherDraft[]>([]);
  const elsewhere = useElsewhere(shelf, own, unsaved);
  const newest = useRef({ commit, unsaved, saved });
  newest.current = { commit, unsaved, saved };
  const taken = useRef<readonly string[]>([]);
  const looked = useRef(false);
  const waiting = useRef(false);

  useEffect(() => {
    const found = gathered(readDrafts(shelf), newest.current.saved);
    taken.current = found.taken;
    setOthers(found.others);
    if (found.draft !== null) step({ kind: "restored", draft: found.draft });
    const keep = () => {
      if (waiting.current) keepDraft(own, newest.current.commit, newest.current.unsaved);
      waiting.current = false;
    };
    // A tab that took over what this one keeps removed it: while this one lives it keeps its own.
    const onStorage = ({ key, newValue }: StorageEvent) => {
      if (key === own && newValue === null) keepDraft(own, newest.current.commit, newest.current.unsaved);
    };
    window.addEventListener("pagehide", keep);
    window.addEventListener("storage", onStorage);
    return () => {
      window.removeEventListener("pagehide", keep);
      window.removeEventListener("storage", onStorage);
      keep();
    };
  }, [shelf, own, step]);

  // biome-ignore lint/correctness/useExhaustiveDependencies: what is kept is the newest, when it has changed
  useEffect(() => {
    // The first run sees the page as it was served; what an earlier visit left must not be wiped by it.
    if (!looked.current) {
      looked.current = true;
      return;
    }
    waiting.current = true;
    const soon = setTimeout(() => {
      waiting.current = false;
      const held = keepDraft(own, newest.current.commit, newest.current.unsaved);
      setKept(held);
      if (!held) return;
      for (const key of taken.current) keepDraft(key, null, []);
      taken.current = [];
    }, SETTLES_MS);
    return () => clearTimeout(soon);
  }, [own, commit, unsaved]);

  /** Leaves in the other's place in the store what `files` says of its file, and all its other files as they are. */
  const rewrite = (other: OtherDraft, file: Unsaved | null) => {
    const rest = others.filter(({ key, file: { path } }) => key === other.key && path !== other.file.path);
    keepDraft(other.key, other.commit, [...rest.map((one) => one.file), ...(file === null ? [] : [file])]);
  };
  return {
    kept,
    others,
    elsewhere,
    swap(other) {
      const standing = unsaved.find(({ path }) => path === other.file.path) ?? null;
      rewrite(other, standing);
      const at = new Date().toISOString();
      setOthers(
        others.flatMap((one) => {
          if (one !== other) return [one];
          return standing === null ? [] : [{ key: other.key, commit, at, file: standing }];
        }),
      );
      const draft = { commit: other.commit, at: other.at, files: [other.file] };
      step({ kind: "restored", draft });
    },
    drop(other) {
      rewrite(other, null);
      setOthers(others.filter((one) => one !== other));
    },
  };
}

/** Which of the files that are unsaved here another living tab keeps a draft of, as it writes it. */
function useElsewhere(shelf: string, own: string, unsaved: readonly Unsaved[]): string[] {
  const [theirs, setTheirs] = useState<ReadonlyMap<string, readonly string[]>>(new Map());
  useEffect(() => {
    const onStorage = ({ key, newValue }: StorageEvent) => {
      if (key === null || key === own || !isOnShelf(shelf, key)) return;
      const files = parsed(newValue)?.files ?? [];
      setTheirs((before) =>
        new Map(before).set(
          key,
          files.map(({ path }) => path),
        ),
      );
    };
    window.addEventListener("storage", onStorage);
    return () => window.removeEventListener("storage", onStorage);
  }, [shelf, own]);
  const paths = new Set([...theirs.values()].flat());
  return unsaved.map(({ path }) => path).filter((path) => paths.has(path));
}
