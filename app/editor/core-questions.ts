import type { BondView, DerivationView } from "./audit-view.ts";
import type { BehaviourView } from "./behaviour-view.ts";

/**
 * What a reader asks about one equation or one bond, and how the model behaves. It is worked out only when asked for, over the newest text:
 * in a large model the answers to all such questions are far longer than the model.
 */
export type Question =
  | { readonly about: "derivation"; readonly system: string; readonly store: string }
  | { readonly about: "bond"; readonly system: string; readonly bond: string }
  | { readonly about: "behaviour"; readonly system: string };

export interface Answers {
  readonly derivation: DerivationView;
  readonly bond: BondView;
  readonly behaviour: BehaviourView;
}

/** null: the newest text no longer has what was asked about. */
export type AnswerTo<Q extends Question> = Answers[Q["about"]] | null;
