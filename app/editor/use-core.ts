import { useCallback, useEffect, useRef, useState } from "react";
import { Core } from "./core.client.ts";
import type { AnswerTo, Question } from "./core-questions.ts";
import type { NameAnswer, NameQuestion } from "./names/rename.ts";
import type { FileView, SystemView, Variables } from "./view-model.ts";
import type { Texts } from "./workspace.ts";

export interface CoreState {
  /** What follows from the newest text that has been worked out; null until the first answer. */
  readonly view: FileView | null;
  /** The system to show: with the last good equations where the text has errors. */
  readonly system: SystemView | null;
  /** The equations shown are not of this text but of the last one without errors. */
  readonly stale: boolean;
  readonly fault: string | null;
  readonly milliseconds: number;
}

const NOTHING: CoreState = { view: null, system: null, stale: false, fault: null, milliseconds: 0 };

/** Runs the core in its worker over the texts as they are typed. */
export function useCore(texts: Texts, path: string, wanted: string | null, variables: Variables) {
  const core = useRef<Core | null>(null);
  const good = useRef(new Map<string, SystemView>());
  const [state, setState] = useState(NOTHING);

  useEffect(() => {
    const opened = new Core({
      view(view, milliseconds) {
        const { system, stale } = shownSystem(view, good.current);
        setState({ view, system, stale, fault: null, milliseconds });
      },
      fault: (message) => setState((before) => ({ ...before, fault: message })),
    });
    core.current = opened;
    return () => {
      core.current = null;
      opened.close();
    };
  }, []);

  useEffect(() => {
    if (texts.has(path)) core.current?.check(texts, path, wanted, variables);
  }, [texts, path, wanted, variables]);

  const format = useCallback(
    (file: string, text: string) => core.current?.format(file, text) ?? Promise.resolve(null),
    [],
  );
  const names = useCallback(
    (question: NameQuestion): Promise<NameAnswer> =>
      core.current?.names(question) ?? Promise.resolve({ refusal: "The core is not running." }),
    [],
  );
  const ask = useCallback(
    <Q extends Question>(question: Q): Promise<AnswerTo<Q>> =>
      core.current?.ask(path, question) ?? Promise.resolve(null),
    [path],
  );
  const current =
    state.view !== null && state.view.path === path ? state : { ...NOTHING, fault: state.fault };
  return { ...current, format, names, ask };
}

/** What the newest text gives, and where errors stopped it, what the last text without them gave. */
function shownSystem(
  view: FileView,
  good: Map<string, SystemView>,
): { system: SystemView | null; stale: boolean } {
  const newest = view.system;
  const key = `${view.path} ${newest?.name ?? ""}`;
  if (newest !== null && newest.model !== null) {
    good.set(key, newest);
    good.set(`${view.path} `, newest);
    return { system: newest, stale: false };
  }
  const last = good.get(key);
  if (last === undefined) return { system: newest, stale: false };
  // What the new text still gives is shown anew: only what errors stopped comes from before.
  return {
    system:
      newest === null
        ? last
        : {
            ...newest,
            model: last.model,
            diagram: newest.diagram ?? last.diagram,
            tied: newest.diagram === null ? last.tied : newest.tied,
          },
    stale: true,
  };
}
