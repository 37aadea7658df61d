import { createContext, useContext } from "react";
import { DARK, isDark, type Light, shares } from "../light.ts";

export interface Lighting {
  readonly light: Light;
  /** Lights what shares something with it; null puts it out. */
  show(light: Light | null): void;
  /** Goes to a line of the shown file. */
  open(line: number): void;
  /** The lines tied to a thing, for saying in words what the threads show. */
  linesOf(light: Light): readonly number[];
}

export const LightingContext = createContext<Lighting>({
  light: DARK,
  show() {},
  open() {},
  linesOf: () => [],
});

/** What a row, an equation or a term needs to light and be lit. */
export function useLit(own: Light) {
  const lighting = useContext(LightingContext);
  const lit = !isDark(lighting.light) && shares(own, lighting.light);
  return {
    lit,
    lighting,
    handlers: {
      onMouseEnter: () => lighting.show(own),
      onMouseLeave: () => lighting.show(null),
      onFocus: () => lighting.show(own),
      onBlur: () => lighting.show(null),
    },
  };
}
