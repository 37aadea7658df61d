import { useCallback, useMemo, useRef, useState } from "react";
import type { Span } from "../../grammar/source/span.ts";
import type { DiagramModel } from "../../grammar/writing/diagram-model.ts";
import "./diagram.css";
import { DiagramTable } from "./diagram-table.tsx";
import { DrawingView } from "./drawing-view.tsx";
import type { Part } from "./nearest.ts";

export interface DiagramProps {
  readonly model: DiagramModel;
  /** Names of nodes and bonds that are lit. */
  readonly lit: { readonly nodes: readonly string[]; readonly bonds: readonly string[] };
  readonly onLight: (what: { readonly node?: string; readonly bond?: string } | null) => void;
  readonly onOpen: (span: Span) => void;
  /** The bond that was chosen to be looked at; it stays lit. */
  readonly chosen: string | null;
  readonly onChoose: (bond: string) => void;
}

/** More than this no page draws in useful time, and nobody reads. */
const MOST_ELEMENTS = 3000;

/** The bond graph of a system as the trade draws it, or the table that says the same. */
export function Diagram({ model, lit, onLight, onOpen, chosen, onChoose }: DiagramProps) {
  const [asTable, setAsTable] = useState(false);
  const litNodes = useMemo(() => new Set(lit.nodes), [lit.nodes]);
  const litBonds = useMemo(() => new Set(lit.bonds), [lit.bonds]);
  const isLit = useCallback(
    ({ kind, id }: Part) => (kind === "node" ? litNodes.has(id) : litBonds.has(id) || id === chosen),
    [litNodes, litBonds, chosen],
  );
  // What the page hands in may be new at every rendering; the parts of the drawing must not be drawn anew for that.
  const latest = useRef({ model, onLight, onOpen, onChoose });
  latest.current = { model, onLight, onOpen, onChoose };
  const onPoint = useCallback((part: Part | null) => {
    latest.current.onLight(part === null ? null : { [part.kind]: part.id });
  }, []);
  const openPart = useCallback(({ kind, id }: Part) => {
    const { model, onOpen, onChoose } = latest.current;
    if (kind === "bond") return onChoose(id);
    const found = model.nodes.find((one) => one.id === id);
    if (found !== undefined) onOpen(found.span);
  }, []);
  if (model.nodes.length > MOST_ELEMENTS) {
    return (
      <p className="note">
        {model.system} has {model.nodes.length} elements and {model.bonds.length} bonds: more than{" "}
        {MOST_ELEMENTS} elements are not drawn. Draw the systems it is made of instead.
      </p>
    );
  }
  const asTableButton = (
    <button type="button" className="button" aria-pressed={asTable} onClick={() => setAsTable(!asTable)}>
      As a table
    </button>
  );
  if (asTable) {
    return (
      <div className="diagram">
        <p className="no-print diagram-tools">{asTableButton}</p>
        <DiagramTable model={model} isLit={isLit} onPoint={onPoint} openPart={openPart} />
      </div>
    );
  }
  return (
    <DrawingView model={model} isLit={isLit} onPoint={onPoint} openPart={openPart}>
      {asTableButton}
    </DrawingView>
  );
}
