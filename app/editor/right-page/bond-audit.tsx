import { useContext } from "react";
import type { BondView, ReasonView, VariableView } from "../audit-view.ts";
import { PlaceLink, Prose } from "./findings.tsx";
import { Typeset } from "./formula.tsx";
import { useLit } from "./lighting.ts";
import { QuestionsContext, useAnswer } from "./questions.ts";

/** Of a long chain the steps next to the bond are shown first. */
const NEAREST = 8;

/** One bond as a reviewer audits it: where power goes, what sets effort and flow, and why the stroke stands. */
export function BondAudit({ bond, onClose }: { bond: string; onClose(): void }) {
  const { system } = useContext(QuestionsContext);
  const answer = useAnswer(system === null ? null : { about: "bond", system, bond });
  if (answer == null) return null;
  return (
    <section className="bond-audit" aria-label={`Bond ${bond}`}>
      <header>
        <h3>
          Bond <code>{answer.id}</code>
        </h3>
        <PlaceLink place={answer.place} spelled />
        <button type="button" className="word no-print" onClick={onClose}>
          Close
        </button>
      </header>
      <p>
        Domain {answer.domain}. Power counts positive from <code>{answer.from}</code> to{" "}
        <code>{answer.to}</code>.{" "}
        {answer.effortBy !== null && answer.flowBy !== null ? (
          <>
            <code>{answer.effortBy}</code> sets the effort, <code>{answer.flowBy}</code> the flow: the stroke
            stands at <code>{answer.flowBy}</code>.
          </>
        ) : (
          "Its causality is open."
        )}
      </p>
      <Variable what="effort" variable={answer.effort} />
      <Variable what="flow" variable={answer.flow} />
      {answer.why.length > 0 && <Why answer={answer} />}
    </section>
  );
}

function Variable({ what, variable }: { what: string; variable: VariableView | null }) {
  if (variable === null) return null;
  return (
    <p className="variable" data-text={variable.equation.text}>
      <span className="note">{what}</span>
      <span className="formula">
        <Typeset formula={variable.equation} />
      </span>
      <span className="unit">{variable.unit}</span>
    </p>
  );
}

function Why({ answer }: { answer: BondView }) {
  const { why } = answer;
  const before = why.slice(0, Math.max(0, why.length - NEAREST));
  return (
    <>
      <h4>Why the stroke stands</h4>
      {before.length > 0 && (
        <details className="no-print">
          <summary>
            {before.length} step{before.length === 1 ? "" : "s"} before
          </summary>
          <Chain steps={before} first={1} />
        </details>
      )}
      <Chain steps={why.slice(before.length)} first={before.length + 1} />
    </>
  );
}

function Chain({ steps, first }: { steps: readonly ReasonView[]; first: number }) {
  return (
    <ol className="reasons" start={first}>
      {steps.map((step) => (
        <Reason key={step.bond} step={step} />
      ))}
    </ol>
  );
}

function Reason({ step }: { step: ReasonView }) {
  const { handlers } = useLit(step);
  return (
    <li {...handlers}>
      <Prose text={step.text} /> <PlaceLink place={step.place} spelled />
    </li>
  );
}
