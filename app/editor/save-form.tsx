import type { Ref } from "react";
import { Link } from "react-router";
import type { Saving } from "./use-saving.ts";

interface SaveFormProps {
  readonly ref: Ref<HTMLInputElement>;
  readonly base: string;
  readonly parent: string | null;
  readonly path: string;
  readonly unsaved: number;
  readonly alive: boolean;
  readonly mayWrite: boolean;
  /** Whether the browser keeps the draft. */
  readonly kept: boolean;
  readonly saving: Saving;
}

/** Below the left page: what this version changes, in the writer's words, and Save. */
export function SaveForm({ ref, base, parent, path, unsaved, alive, mayWrite, kept, saving }: SaveFormProps) {
  const history = <Link to={`${base}/history?file=${encodeURIComponent(path)}`}>History of this file</Link>;
  if (!mayWrite) {
    return (
      <div className="save-form note">
        <p>Your role lets you read this set; what you see here follows from the saved text.</p>
        {history}
      </div>
    );
  }
  const invalid = saving.problems.some((problem) => problem.path === "");
  return (
    <div className="save-form">
      <input type="hidden" name="parent" value={parent ?? ""} />
      <input type="hidden" name="path" value={path} />
      <label className="sr-only" htmlFor="save-message">
        What this version changes
      </label>
      <input
        ref={ref}
        id="save-message"
        name="message"
        className="field"
        placeholder="What this version changes"
        autoComplete="off"
        value={saving.message}
        onChange={(event) => saving.setMessage(event.target.value)}
        onKeyDown={(event) => {
          if (event.key !== "Enter" || !(event.ctrlKey || event.metaKey)) return;
          event.preventDefault();
          event.currentTarget.form?.requestSubmit();
        }}
        aria-invalid={invalid}
        aria-describedby="save-saying"
        required
      />
      <button type="submit" className="button button-ink" disabled={alive && (unsaved === 0 || saving.busy)}>
        Save
      </button>
      <div className="saying note">
        <p id="save-saying" role="status">
          {saving.problems.map(({ path: where, message }) => (
            <span key={where + message} className="text-mistake block">
              ✕ {where === "" ? "" : `${where}: `}
              {message}
            </span>
          ))}
          {saving.behind !== null && (
            <span className="text-warning block">
              △ {saving.behind.newest.author} saved this file before you:{" "}
              <a href={`${base}/files/${saving.behind.head}/${path}`}>their text</a>. Yours is above and not
              saved yet; saving again puts it on top of theirs.
            </span>
          )}
          <State base={base} unsaved={unsaved} saving={saving} />
          {!kept && " The browser keeps no draft of it: save before you close the tab."}
        </p>
        <p className="ml-auto">{history}</p>
        <p className="basis-full">
          Ctrl+S goes to the message, Ctrl+Enter saves from there. Escape, then Tab, leaves the text; Ctrl+M
          makes Tab always leave it.
        </p>
      </div>
    </div>
  );
}

/** Saved or not, and as what: an unsaved text is told before what became of an earlier one. */
function State({ base, unsaved, saving }: Pick<SaveFormProps, "base" | "unsaved" | "saving">) {
  const { busy, outcome } = saving;
  if (busy) return "Saving …";
  if (unsaved > 0) return `● ${unsaved} file${unsaved === 1 ? "" : "s"} unsaved.`;
  if (outcome === null) return "All saved.";
  if (outcome.kind === "unchanged") return "The set holds this text already; there is nothing to save.";
  return (
    <>
      <span className="text-met font-semibold">✓</span> Saved as version{" "}
      <Link to={`${base}/commits/${outcome.oid}`} className="font-mono">
        {outcome.oid.slice(0, 7)}
      </Link>
      .{outcome.merged && " Others had saved other files; theirs stand beside yours."}
    </>
  );
}
