import type { Answers, Question } from "./core-questions.ts";
import type { NameAnswer, NameQuestion } from "./names/rename.ts";
import type { FileView, Variables } from "./view-model.ts";

/** What the page asks of the core's worker. `number` grows with every request: an older answer is dropped. */
export type CoreRequest =
  | {
      readonly kind: "check";
      readonly number: number;
      readonly path: string;
      /** null: the last system of the file. */
      readonly system: string | null;
      readonly variables: Variables;
      /** Only the texts that changed since the last request; null takes a file out of the set. */
      readonly changed: readonly (readonly [path: string, text: string | null])[];
    }
  | { readonly kind: "format"; readonly number: number; readonly path: string; readonly text: string }
  | ({ readonly kind: "names"; readonly number: number } & NameQuestion)
  | { readonly kind: "ask"; readonly number: number; readonly path: string; readonly question: Question };

export type CoreAnswer =
  | { readonly kind: "view"; readonly number: number; readonly view: FileView; readonly milliseconds: number }
  | { readonly kind: "formatted"; readonly number: number; readonly text: string }
  | { readonly kind: "named"; readonly number: number; readonly answer: NameAnswer }
  | {
      readonly kind: "answer";
      readonly number: number;
      readonly answer: Answers[keyof Answers] | null;
    }
  /** A fault of ours, not of the text: shown as such, and the next key stroke tries again. */
  | { readonly kind: "fault"; readonly number: number; readonly message: string };
