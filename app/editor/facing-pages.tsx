import {
  type RefObject,
  useCallback,
  useEffect,
  useMemo,
  useReducer,
  useRef,
  useState,
  useSyncExternalStore,
} from "react";
import { useLocation, useNavigate } from "react-router";
import { SourceText } from "../../grammar/source/text.ts";
import { lineHash, lineOfHash, rememberLine } from "./address.ts";
import { DraftNote } from "./draft-note.tsx";
import { draftShelf } from "./drafts.ts";
import "./facing-pages.css";
import { Fold } from "./fold.tsx";
import { holderAt } from "./holder.ts";
import { FileList, Text } from "./left-page.tsx";
import { LightingContext } from "./right-page/lighting.ts";
import { WhatFollows } from "./right-page/what-follows.tsx";
import { SaveForm } from "./save-form.tsx";
import type { TextPageHandle } from "./text-page.client.tsx";
import { TwoVersions } from "./two-versions.tsx";
import { useCore } from "./use-core.ts";
import { useDraft } from "./use-draft.ts";
import { useLighting } from "./use-lighting.ts";
import { plainParent, type SaveAnswer, useSaving } from "./use-saving.ts";
import type { Variables } from "./view-model.ts";
import { next, opened, type Texts, unsaved as unsavedOf } from "./workspace.ts";

interface FacingPagesProps {
  readonly person: string;
  readonly team: string;
  readonly set: string;
  readonly path: string;
  readonly commit: string | null;
  readonly files: Texts;
  readonly mayWrite: boolean;
  /** What the server said to the plain form, where the page came from posting it. */
  readonly answer: SaveAnswer | undefined;
}

const never = () => () => {};
const useAlive = () =>
  useSyncExternalStore(
    never,
    () => true,
    () => false,
  );

/** A model set opened as a book: the text of one file on the left, what follows from it on the right. */
export function FacingPages({ person, team, set, path, commit, files, mayWrite, answer }: FacingPagesProps) {
  const base = `/sets/${team}/${set}`;
  const alive = useAlive();
  const navigate = useNavigate();
  const location = useLocation();
  const search = useMemo(() => new URLSearchParams(location.search), [location.search]);
  const [workspace, step] = useReducer(next, null, () =>
    (answer?.sent ?? []).reduce(
      (before, file) => next(before, { kind: "typed", ...file }),
      opened(commit, files),
    ),
  );
  const unsaved = useMemo(() => unsavedOf(workspace), [workspace]);
  const saving = useSaving(workspace, unsaved, step, answer);
  const draft = useDraft(draftShelf(person, team, set), workspace, unsaved, step);
  useEffect(() => step({ kind: "loaded", commit, files }), [commit, files]);

  const core = useCore(workspace.texts, path, search.get("system"), variablesOf(search));
  const lighting = useLighting(core.system?.tied ?? NOTHING_TIED);
  const [turned, setTurned] = useState<Page>("text");
  const textPage = useRef<TextPageHandle>(null);
  const rightPage = useRef<HTMLElement>(null);
  const messageField = useRef<HTMLInputElement>(null);

  useSaveKey(messageField);

  const inAddress = (name: string, value: string | null, hash = window.location.hash) => {
    const wanted = new URLSearchParams(search);
    if (value === null) wanted.delete(name);
    else wanted.set(name, value);
    void navigate({ search: wanted.toString(), hash }, { replace: true, preventScrollReset: true });
  };
  // What follows is of the system one writes in; one chosen by name stays until the cursor enters another.
  const entered = useRef<string | null>(null);
  const followSystem = (line: number) => {
    const holder = core.view === null ? null : holderAt(core.view, line);
    const name = holder?.space === "system" ? holder.name : null;
    if (name !== null && name !== entered.current && name !== core.system?.name)
      inAddress("system", name, lineHash(line));
    entered.current = name ?? entered.current;
  };
  const goTo = useCallback(
    ({ file, line, column }: { file: string; line: number; column: number }) => {
      setTurned("text");
      if (file !== path) void navigate(`${base}/edit/${file}${lineHash(line)}`, { preventScrollReset: true });
      else requestAnimationFrame(() => textPage.current?.reveal(line, column));
    },
    [base, navigate, path],
  );
  const begin = (fresh: string): string | null => {
    if (!fresh.endsWith(".wright")) return "The name of a model file ends in .wright";
    if (workspace.texts.has(fresh)) return "The set has a file of this name";
    step({ kind: "typed", path: fresh, text: BLANK });
    if (fresh !== path) void navigate(`${base}/edit/${fresh}`);
    return null;
  };
  const { light, term, show, linesOf } = lighting;
  const context = useMemo(
    () => ({ light, term, show, linesOf, path, open: goTo }),
    [light, term, show, linesOf, goTo, path],
  );

  if (alive && saving.behind !== null) {
    return <TwoVersions behind={saving.behind} onSettled={saving.settle} onBack={saving.back} />;
  }
  // Without scripts nothing can be begun by a button: an empty file is there at once.
  const text = workspace.texts.get(path) ?? (mayWrite && !alive ? BLANK : undefined);
  return (
    <LightingContext value={context}>
      <main className="book" data-turned={turned} id="main">
        <PageTurn turned={turned} onTurn={setTurned} />
        <form
          method="post"
          className="page left-page"
          aria-label="Text"
          onSubmit={(event) => {
            event.preventDefault();
            saving.save();
          }}
        >
          <FileList
            base={base}
            paths={[...workspace.texts.keys()]}
            current={path}
            unsaved={new Set(unsaved.map((file) => file.path))}
            onNew={mayWrite && alive ? begin : null}
          >
            {alive && text !== undefined && (
              <p className="text-tools">
                {mayWrite && (
                  <button type="button" className="word" onClick={() => textPage.current?.run("format")}>
                    Format
                  </button>
                )}
                <button type="button" className="word" onClick={() => textPage.current?.run("outline")}>
                  Outline
                </button>
              </p>
            )}
          </FileList>
          <DraftNote restored={workspace.restored} draft={draft} step={step} />
          {text === undefined ? (
            <p className="flex-1 p-4">
              There is no file {path} in this version of the set.{" "}
              {mayWrite && (
                <button type="button" className="word" onClick={() => begin(path)}>
                  Begin it
                </button>
              )}
            </p>
          ) : (
            <Text
              alive={alive}
              ref={textPage}
              path={path}
              text={text}
              placed={workspace.placed}
              line={lineOfHash(location.hash)}
              readOnly={!mayWrite}
              view={core.view}
              tiedLines={lighting.tiedLines}
              litLines={lighting.litLines}
              onText={(file, typed) => step({ kind: "typed", path: file, text: typed })}
              onCursor={(line) => {
                lighting.setCursor(line);
                followSystem(line);
                rememberLine(line);
              }}
              onPoint={lighting.pointAtLine}
              onScroll={lighting.redraw}
              onSave={() => messageField.current?.focus()}
              onOpen={goTo}
              format={core.format}
              names={core.names}
            />
          )}
          <SaveForm
            ref={messageField}
            base={base}
            parent={plainParent(saving.behind) ?? workspace.commit}
            path={path}
            unsaved={unsaved.length}
            alive={alive}
            mayWrite={mayWrite}
            kept={draft.kept}
            saving={saving}
          />
        </form>
        <Fold
          text={textPage}
          page={rightPage}
          tiedLines={lighting.tiedLines}
          litLines={lighting.litLines}
          stale={core.stale}
          redraw={lighting.redrawFold}
        />
        <WhatFollows
          ref={rightPage}
          core={core}
          path={path}
          mayFix={mayWrite}
          onVariables={(chosen) => inAddress("states", chosen === "energy" ? null : chosen)}
          onSystem={(name) => inAddress("system", name)}
          onFix={({ fix }) =>
            textPage.current?.apply(fix?.edits.filter(({ place }) => place.file === path) ?? [])
          }
          onOpen={goTo}
          onOpenSpan={({ file, start }) => goTo(placeInText(file, workspace.texts.get(file) ?? "", start))}
        />
      </main>
    </LightingContext>
  );
}

function placeInText(file: string, text: string, offset: number) {
  const { line, column } = new SourceText(file, text).position(offset);
  return { file, line, column };
}

/** Ctrl+S goes to the message wherever one is on the page, and never to the browser's own saving. */
function useSaveKey(field: RefObject<HTMLInputElement | null>): void {
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key !== "s" || !(event.ctrlKey || event.metaKey) || event.altKey || event.shiftKey) return;
      event.preventDefault();
      field.current?.focus();
    };
    window.addEventListener("keydown", onKey);
    return () => window.removeEventListener("keydown", onKey);
  }, [field]);
}

const BLANK = "notation 1\n\n";

const NOTHING_TIED: readonly never[] = [];

function variablesOf(search: URLSearchParams): Variables {
  return search.get("states") === "co-energy" ? "co-energy" : "energy";
}

type Page = "text" | "follows";

function PageTurn({ turned, onTurn }: { turned: Page; onTurn(page: Page): void }) {
  return (
    <nav className="page-turn no-print" aria-label="Pages of the book">
      <button type="button" aria-pressed={turned === "text"} onClick={() => onTurn("text")}>
        Text
      </button>
      <button type="button" aria-pressed={turned === "follows"} onClick={() => onTurn("follows")}>
        What follows
      </button>
    </nav>
  );
}
