import { type FormEvent, lazy, type ReactNode, type Ref, Suspense, useState } from "react";
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

function NewFile({ onNew }: { onNew(path: string): string | null }) {
  const [asking, setAsking] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  if (!asking) {
    return (
      <button type="button" className="word" onClick={() => setAsking(true)}>
        New file
      </button>
    );
  }
  const create = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault();
    const path = String(new FormData(event.currentTarget).get("path")).trim();
    const found = onNew(path);
    setProblem(found);
    if (found === null) setAsking(false);
  };
  return (
    <form onSubmit={create} className="flex flex-wrap items-baseline gap-2">
      <label className="sr-only" htmlFor="new-file">
        Path of the new file
      </label>
      <input
        id="new-file"
        name="path"
        className="field font-mono text-small! w-52! min-h-7!"
        placeholder="parts/brake.wright"
        required
        // biome-ignore lint/a11y/noAutofocus: the reader has just asked for this field
        autoFocus
        aria-invalid={problem !== null}
        aria-describedby="new-file-problem"
        onKeyDown={(event) => event.key === "Escape" && setAsking(false)}
      />
      <button type="submit" className="word">
        Begin
      </button>
      <button type="button" className="word" onClick={() => setAsking(false)}>
        Leave it
      </button>
      <span id="new-file-problem" className="text-mistake" role="status">
        {problem}
      </span>
    </form>
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
