import { type Dispatch, useEffect, useRef, useState } from "react";
import { keepDraft, readDraft } from "./drafts.ts";
import type { Step, Unsaved, Workspace } from "./workspace.ts";

const SETTLES_MS = 400;

/** Keeps unsaved texts as they are typed, and brings back what an earlier visit left. False: they aren't kept. */
export function useDraft(
  key: string,
  { commit }: Workspace,
  unsaved: readonly Unsaved[],
  step: Dispatch<Step>,
): boolean {
  const [kept, setKept] = useState(true);
  const newest = useRef({ commit, unsaved });
  newest.current = { commit, unsaved };
  const looked = useRef(false);
  const waiting = useRef(false);

  useEffect(() => {
    const draft = readDraft(key);
    if (draft !== null && draft.files.length > 0) step({ kind: "restored", draft });
    const keep = () => {
      if (waiting.current) keepDraft(key, newest.current.commit, newest.current.unsaved);
      waiting.current = false;
    };
    window.addEventListener("pagehide", keep);
    return () => {
      window.removeEventListener("pagehide", keep);
      keep();
    };
  }, [key, step]);

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
      setKept(keepDraft(key, newest.current.commit, newest.current.unsaved));
    }, SETTLES_MS);
    return () => clearTimeout(soon);
  }, [key, commit, unsaved]);

  return kept;
}
