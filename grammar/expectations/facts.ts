import type { Analysis } from "../analysis/analyse.ts";
import { movingStates } from "../analysis/recording-tracks.ts";
import type { StateModel } from "../equations/model.ts";
import { stability } from "./system-measures.ts";

/** What the structure of a model says about itself: the measures that need no numbers. */
export const COUNTS: Readonly<Record<string, (model: StateModel) => number>> = {
  order: (model) => movingStates(model).length,
  dependent: ({ dependent }) => dependent.length,
  loops: ({ loops }) => loops.filter(({ circular }) => circular).length,
};

/** A fact holds or doesn't, by what was measured; or it can't be told, and the message says why. */
export type Fact = { readonly holds: boolean; readonly measured: string } | { readonly message: string };

export const FACTS: Readonly<Record<string, (analysis: Analysis) => Fact>> = {
  integral: ({ model: { dependent } }) => {
    if (dependent.length === 0) return { holds: true, measured: "integral" };
    const names = dependent.map(({ name }) => name).join(", ");
    const many = dependent.length === 1 ? "1 dependent store" : `${dependent.length} dependent stores`;
    return { holds: false, measured: `${many}: ${names}` };
  },
  stable: stability,
};
