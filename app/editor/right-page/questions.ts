import { createContext, useContext, useEffect, useState } from "react";
import type { AnswerTo, Question } from "../core-questions.ts";

export interface Questions {
  /** The system whose graph is shown; null while the newest text gives none, when nothing can be asked. */
  readonly system: string | null;
  /** Whether the equations that are shown are those of the newest text. */
  readonly current: boolean;
  /** Another object whenever the core has worked out a newer text: answers are then asked for anew. */
  readonly text: object | null;
  ask<Q extends Question>(question: Q): Promise<AnswerTo<Q>>;
}

export const QuestionsContext = createContext<Questions>({
  system: null,
  current: false,
  text: null,
  ask: () => Promise.resolve(null),
});

/**
 * The core's answer; undefined until the first one has come. While a newer one is worked out the last one stays. What
 * takes long to answer is asked only after the text has rested for `delay` milliseconds.
 */
export function useAnswer<Q extends Question>(question: Q | null, delay = 0): AnswerTo<Q> | undefined {
  const { ask, text } = useContext(QuestionsContext);
  const key = question === null ? null : JSON.stringify(question);
  const [known, setKnown] = useState<{ readonly key: string; readonly answer: AnswerTo<Q> } | null>(null);
  // biome-ignore lint/correctness/useExhaustiveDependencies: a question is the same while it says the same
  useEffect(() => {
    if (question === null || key === null) return;
    let overtaken = false;
    const asking = () =>
      void ask(question).then((answer) => {
        if (!overtaken) setKnown({ key, answer });
      });
    const waiting = delay === 0 ? undefined : setTimeout(asking, delay);
    if (delay === 0) asking();
    return () => {
      overtaken = true;
      clearTimeout(waiting);
    };
  }, [ask, key, text]);
  return known !== null && known.key === key ? known.answer : undefined;
}
