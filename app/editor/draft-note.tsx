import type { Dispatch } from "react";
import { LocalTime } from "../components/local-time.tsx";
import type { DraftState } from "./use-draft.ts";
import type { Step } from "./workspace.ts";

interface DraftNoteProps {
  readonly restored: string | null;
  readonly draft: DraftState;
  readonly step: Dispatch<Step>;
}

/** Says that the text is a draft that an earlier visit left, what other tabs hold, and what can be done with it. */
export function DraftNote({ restored, draft, step }: DraftNoteProps) {
  const { others, elsewhere } = draft;
  return (
    <>
      {restored !== null && (
        <p className="draft-note" role="status">
          Unsaved text of <LocalTime at={restored} /> was kept in this browser and stands here again.{" "}
          <button type="button" className="word" onClick={() => step({ kind: "noted" })}>
            Go on with it
          </button>{" "}
          <button type="button" className="word" onClick={() => step({ kind: "discarded" })}>
            Discard it
          </button>
        </p>
      )}
      {others.map((other) => (
        <p key={`${other.key} ${other.file.path}`} className="draft-note" role="status">
          A different unsaved text of <code>{other.file.path}</code>, of <LocalTime at={other.at} />, is kept
          too.{" "}
          <button type="button" className="word" onClick={() => draft.swap(other)}>
            Show it instead
          </button>{" "}
          <button type="button" className="word" onClick={() => draft.drop(other)}>
            Throw it away
          </button>
        </p>
      ))}
      {elsewhere.length > 0 && (
        <p className="draft-note" role="status">
          <span className="text-warning font-semibold">△ Another tab</span> has unsaved text of{" "}
          <code>{elsewhere.join(", ")}</code> too. Each tab keeps its own; whichever saves second is shown
          both.
        </p>
      )}
    </>
  );
}
