import type { Dispatch } from "react";
import { LocalTime } from "../components/local-time.tsx";
import type { Step } from "./workspace.ts";

/** Says that the text is a draft that an earlier visit left, and what can be done with it. */
export function DraftNote({ restored, step }: { restored: string | null; step: Dispatch<Step> }) {
  if (restored === null) return null;
  return (
    <p className="draft-note" role="status">
      Unsaved text of <LocalTime at={restored} /> was kept in this browser and stands here again.{" "}
      <button type="button" className="word" onClick={() => step({ kind: "noted" })}>
        Go on with it
      </button>{" "}
      <button type="button" className="word" onClick={() => step({ kind: "discarded" })}>
        Discard it
      </button>
    </p>
  );
}
