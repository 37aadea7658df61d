import { type Dispatch, useEffect, useRef, useState } from "react";
import { useFetcher, useRevalidator } from "react-router";
import type { Behind } from "./two-versions.tsx";
import type { Settled, Step, Unsaved, Workspace } from "./workspace.ts";

/** What the server answers to a save; to the plain form with the texts it sent, for the page that follows. */
export type SaveAnswer = Answer & {
  readonly sent?: readonly { readonly path: string; readonly text: string }[];
};

type Answer =
  | {
      readonly kind: "saved";
      readonly commit: { readonly oid: string; readonly message: string };
      readonly merged: boolean;
    }
  | { readonly kind: "unchanged"; readonly head: string | null }
  | ({ readonly kind: "behind" } & Behind)
  | {
      readonly kind: "refused";
      readonly problems: readonly { readonly path: string; readonly message: string }[];
    };

/** What became of the last save. */
export type Outcome =
  | { readonly kind: "saved"; readonly oid: string; readonly merged: boolean }
  | { readonly kind: "unchanged" };

export interface Saving {
  readonly busy: boolean;
  readonly outcome: Outcome | null;
  readonly problems: readonly { readonly path: string; readonly message: string }[];
  /** Set while someone else's newer version of the same files is to be dealt with. */
  readonly behind: Behind | null;
  readonly message: string;
  setMessage(message: string): void;
  save(): void;
  settle(files: Settled[]): void;
  back(): void;
}

/** `first` is what the server said to the plain form, before the scripts were there. */
export function useSaving(
  workspace: Workspace,
  unsaved: readonly Unsaved[],
  step: Dispatch<Step>,
  first: SaveAnswer | undefined,
): Saving {
  const fetcher = useFetcher<SaveAnswer>();
  const { revalidate } = useRevalidator();
  const sent = useRef<readonly Unsaved[]>([]);
  const [dealtWith, setDealtWith] = useState<SaveAnswer | undefined>();
  const [message, setMessage] = useState("");
  const newest = fetcher.data ?? first;
  const answer = newest === dealtWith ? undefined : newest;

  useEffect(() => {
    if (fetcher.data?.kind !== "saved") return;
    step({ kind: "saved", commit: fetcher.data.commit.oid, files: sent.current });
    setMessage("");
    // Others had saved other files: fetch them, so that the whole set is the one that was saved.
    if (fetcher.data.merged) void revalidate();
  }, [fetcher.data, step, revalidate]);

  return {
    busy: fetcher.state !== "idle",
    outcome: outcomeOf(answer),
    problems: answer?.kind === "refused" ? answer.problems : [],
    behind: answer?.kind === "behind" ? answer : null,
    message,
    setMessage,
    save() {
      if (fetcher.state !== "idle" || unsaved.length === 0) return;
      sent.current = unsaved;
      const files = unsaved.map(({ path, text }) => ({ path, text }));
      const body = { parent: workspace.commit, message, files };
      void fetcher.submit(body, { method: "post", encType: "application/json" });
    },
    settle(files) {
      if (answer?.kind !== "behind") return;
      step({ kind: "settled", head: answer.head, files });
      setDealtWith(answer);
      void revalidate();
    },
    back: () => setDealtWith(answer),
  };
}

function outcomeOf(answer: SaveAnswer | undefined): Outcome | null {
  if (answer?.kind === "saved") return { kind: "saved", oid: answer.commit.oid, merged: answer.merged };
  return answer?.kind === "unchanged" ? { kind: "unchanged" } : null;
}

/** Without scripts the form itself must name the version that the text is now to be saved on. */
export function plainParent(behind: Behind | null): string | undefined {
  return behind?.head;
}
