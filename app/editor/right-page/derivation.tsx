import { useContext, useState } from "react";
import type { StepView } from "../audit-view.ts";
import { PlaceLink } from "./findings.tsx";
import { Typeset } from "./formula.tsx";
import { LightingContext } from "./lighting.ts";
import { QuestionsContext, useAnswer } from "./questions.ts";

const RULES: Record<StepView["rule"], string> = {
  rate: "rate of the store",
  "junction-sum": "sum at the junction",
  "junction-equal": "common at the junction",
  law: "law",
  transformer: "transformer",
  gyrator: "gyrator",
  substitution: "put in",
  collected: "collected",
  implicit: "found by the loop's solver",
};

/**
 * Under an equation: the steps that lead to it, worked out when somebody opens them. Equations that are not of the
 * newest text have none: the disclosure closes with them.
 */
export function Derivation({ equation, store }: { equation: string; store: string }) {
  const { system, current } = useContext(QuestionsContext);
  return system === null || !current ? null : (
    <Disclosure key={system} system={system} equation={equation} store={store} />
  );
}

interface Of {
  readonly system: string;
  readonly equation: string;
  readonly store: string;
}

function Disclosure(of: Of) {
  const [open, setOpen] = useState(false);
  return (
    <details className="derivation no-print" onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary>
        How it comes about<span className="sr-only">: {of.equation}</span>
      </summary>
      {open && <Steps {...of} />}
    </details>
  );
}

function Steps({ system, store, equation }: Of) {
  const answer = useAnswer({ about: "derivation", system, store });
  if (answer === undefined) return <p className="note">Working out the steps …</p>;
  if (answer === null) return <p className="note">There are no steps to this equation.</p>;
  return (
    <ol className="steps">
      {answer.steps.map((step, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a step is its place in the derivation
        <Step key={index} step={step} equation={equation} />
      ))}
    </ol>
  );
}

/** Pointing at a step, or reaching it by keyboard, lights its bonds in the drawing and its line. */
function Step({ step, equation }: { step: StepView; equation: string }) {
  const { show } = useContext(LightingContext);
  const [lit, setLit] = useState(false);
  const light = () => {
    setLit(true);
    show(step, { equation, index: -1 });
  };
  const out = () => {
    setLit(false);
    show(null);
  };
  return (
    <li
      className="step"
      data-text={step.equation.text}
      data-tied={lit ? "" : undefined}
      data-lit={lit}
      onMouseEnter={light}
      onMouseLeave={out}
      onFocus={light}
      onBlur={out}
    >
      <span className="formula">
        <Typeset formula={step.equation} />
      </span>
      <span className="rule">{RULES[step.rule]}</span>
      <span className="line">
        <PlaceLink place={step.place} spelled />
      </span>
    </li>
  );
}
