import { lazy, type ReactNode, type Ref, Suspense, useRef, useState } from "react";
import { Link } from "react-router";
import type { TextPageHandle, TextPageProps } from "./text-page.client.tsx";

const TextPage = lazy(async () => ({ default: (await import("./text-page.client.tsx")).TextPage }));

interface FileListProps {
  readonly base: string;
  readonly paths: readonly string[];
  readonly current: string;
  readonly unsaved: ReadonlySet<string>;
  /** Begins a file of this path, or says why not; null where the reader may not. */
  readonly onNew: ((path: string) => string | null) | null;
  readonly children: ReactNode;
}

/** The files of the set: the open one is in bold, unsaved ones are marked with a dot and the word. */
export function FileList({ base, paths, current, unsaved, onNew, children }: FileListProps) {
  return (
    <nav aria-label="Files of the set" className="file-list">
      <ul>
        {paths.map((path) => (
          <li key={path}>
            <Link
              to={`${base}/edit/${path}`}
              aria-current={path === current ? "page" : undefined}
              preventScrollReset
            >
              {path}
            </Link>
            {unsaved.has(path) && (
              <span className="unsaved">
                <span aria-hidden="true">●</span> unsaved
              </span>
            )}
          </li>
        ))}
        {onNew !== null && (
          <li>
            <NewFile onNew={onNew} />
          </li>
        )}
      </ul>
      {children}
    </nav>
  );
}

/** Asks for a path. It stands inside the form that saves, so that it is no form of its own. */
function NewFile({ onNew }: { onNew(path: string): string | null }) {
  const [asking, setAsking] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const field = useRef<HTMLInputElement>(null);
  if (!asking) {
    return (
      <button type="button" className="word" onClick={() => setAsking(true)}>
        New file
      </button>
    );
  }
  const leave = () => {
    setAsking(false);
    setProblem(null);
  };
  const begin = () => {
    const found = onNew(field.current?.value.trim() ?? "");
    if (found === null) leave();
    else setProblem(found);
  };
  return (
    <div className="flex flex-wrap items-baseline gap-2">
      <label className="sr-only" htmlFor="new-file">
        Path of the new file
      </label>
      <input
        ref={field}
        id="new-file"
        className="field font-mono text-small! w-52! min-h-7!"
        placeholder="parts/brake.wright"
        // biome-ignore lint/a11y/noAutofocus: the reader has just asked for this field
        autoFocus
        aria-invalid={problem !== null}
        aria-describedby="new-file-problem"
        onKeyDown={(event) => {
          if (event.key === "Escape") leave();
          if (event.key !== "Enter") return;
          event.preventDefault();
          begin();
        }}
      />
      <button type="button" className="word" onClick={begin}>
        Begin
      </button>
      <button type="button" className="word" onClick={leave}>
        Leave it
      </button>
      <span id="new-file-problem" className="text-mistake" role="status">
        {problem}
      </span>
    </div>
  );
}

interface LeftPageProps extends Omit<TextPageProps, "ref"> {
  readonly alive: boolean;
  readonly ref: Ref<TextPageHandle>;
}

/** The text in the editor; without scripts, and until they have come, in a plain field of the same size. */
export function Text({ alive, ref, ...text }: LeftPageProps) {
  const plain = (
    <textarea
      name="text"
      className="plain-text"
      aria-label={`Text of ${text.path}`}
      defaultValue={text.text}
      readOnly={text.readOnly}
      spellCheck={false}
      wrap="off"
      key={text.path}
    />
  );
  if (!alive) return plain;
  return (
    <Suspense fallback={plain}>
      <TextPage ref={ref} {...text} />
    </Suspense>
  );
}
