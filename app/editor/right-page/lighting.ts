import { createContext, useContext } from "react";
import { DARK, isDark, type Light, shares } from "../light.ts";

export interface Lighting {
  readonly light: Light;
  /** The one term that is pointed at: it lights the text and the diagram, but no other term. */
  readonly term: TermKey | null;
  /** Lights what shares something with it; null puts it out. */
  show(light: Light | null, term?: TermKey): void;
  /** The file that is shown on the left. */
  readonly path: string;
  open(place: { readonly file: string; readonly line: number; readonly column: number }): void;
  /** The lines tied to a thing, for saying in words what the threads show. */
  linesOf(light: Light): readonly number[];
}

export interface TermKey {
  readonly equation: string;
  /** −1: a step that leads to the equation, and none of its terms. */
  readonly index: number;
}

export const LightingContext = createContext<Lighting>({
  light: DARK,
  term: null,
  path: "",
  show() {},
  open() {},
  linesOf: () => [],
});

function lights(light: Light, own: Light): boolean {
  return !isDark(light) && shares(own, light);
}

/** What a row needs to light and be lit. */
export function useLit(own: Light) {
  const { light, show } = useContext(LightingContext);
  return { lit: lights(light, own), handlers: pointing(() => show(own), show) };
}

export function useLitEquation(key: string, own: Light): boolean {
  const { light, term } = useContext(LightingContext);
  return term === null ? lights(light, own) : term.equation === key;
}

export function useLitTerm(key: TermKey, own: Light) {
  const { light, term, show } = useContext(LightingContext);
  const lit = term === null ? lights(light, own) : term.equation === key.equation && term.index === key.index;
  return { lit, handlers: pointing(() => show(own, key), show) };
}

function pointing(point: () => void, show: Lighting["show"]) {
  const out = () => show(null);
  return { onMouseEnter: point, onMouseLeave: out, onFocus: point, onBlur: out };
}
