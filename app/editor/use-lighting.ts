import { useCallback, useMemo, useRef, useState } from "react";
import {
  DARK,
  isDark,
  type Light,
  lightOfLine,
  litLines,
  sameLight,
  shares,
  type TiedLine,
} from "./light.ts";
import type { TermKey } from "./right-page/lighting.ts";

const NO_LINES: readonly number[] = [];

/** What is lit: what one points at in either page, and else what follows from the line with the cursor. */
export function useLighting(tied: readonly TiedLine[]) {
  const [cursor, setCursor] = useState<number | null>(null);
  const [pointed, setPointed] = useState<Light | null>(null);
  const [term, setTerm] = useState<TermKey | null>(null);
  const redrawFold = useRef<() => void>(() => {});

  const wanted = pointed ?? (cursor === null ? DARK : lightOfLine(tied, cursor));
  const kept = useRef(wanted);
  if (!sameLight(kept.current, wanted)) kept.current = wanted;
  const light = kept.current;

  const show = useCallback((next: Light | null, key?: TermKey) => {
    setPointed(next);
    setTerm(key ?? null);
  }, []);
  const pointAtLine = useCallback(
    (line: number | null) => {
      const next = line === null ? DARK : lightOfLine(tied, line);
      setPointed(isDark(next) ? null : next);
      setTerm(null);
    },
    [tied],
  );
  const linesOf = useCallback(
    (own: Light) => tied.filter((line) => shares(own, line)).map(({ line }) => line),
    [tied],
  );
  const redraw = useCallback(() => redrawFold.current(), []);
  const tiedLines = useMemo(() => (tied.length === 0 ? NO_LINES : tied.map(({ line }) => line)), [tied]);
  const lit = useMemo(() => litLines(tied, light), [tied, light]);

  return { light, term, litLines: lit, tiedLines, linesOf, show, pointAtLine, setCursor, redraw, redrawFold };
}
