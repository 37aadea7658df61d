import { useContext, useState } from "react";
import type { DiagramModel } from "../../../grammar/writing/diagram-model.ts";
import { Diagram } from "../../diagram/diagram.tsx";
import { BondAudit } from "./bond-audit.tsx";
import { LightingContext } from "./lighting.ts";
import { Section } from "./section.tsx";

interface DiagramPartProps {
  readonly diagram: DiagramModel;
  onOpen(span: { readonly file: string; readonly start: number }): void;
}

export function DiagramPart({ diagram, onOpen }: DiagramPartProps) {
  const { light, show } = useContext(LightingContext);
  const [chosen, setChosen] = useState<string | null>(null);
  return (
    <Section title="Diagram">
      <Diagram
        model={diagram}
        lit={light}
        onLight={(part) =>
          show(
            part === null
              ? null
              : {
                  nodes: part.node === undefined ? [] : [part.node],
                  bonds: part.bond === undefined ? [] : [part.bond],
                  values: [],
                },
          )
        }
        onOpen={onOpen}
        chosen={chosen}
        onChoose={setChosen}
      />
      <div aria-live="polite">
        {chosen !== null && <BondAudit bond={chosen} onClose={() => setChosen(null)} />}
      </div>
    </Section>
  );
}
