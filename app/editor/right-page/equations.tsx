import { useContext, useState } from "react";
import type { EquationView, LoopView, ModelView, TermView, Variables } from "../view-model.ts";
import { Derivation } from "./derivation.tsx";
import { Typeset } from "./formula.tsx";
import { LightingContext, useLit, useLitEquation, useLitTerm } from "./lighting.ts";
import { Section } from "./section.tsx";

interface EquationsProps {
  readonly model: ModelView;
  onVariables(variables: Variables): void;
}

export function Equations({ model, onVariables }: EquationsProps) {
  const { variables, equations: shown } = model;
  return (
    <Section
      title="Equations"
      count={shown.length}
      tools={
        <>
          <fieldset className="flex gap-3 items-baseline">
            <legend className="sr-only">States as</legend>
            <Choice chosen={variables === "energy"} choose={() => onVariables("energy")}>
              energy p, q
            </Choice>
            <Choice chosen={variables === "co-energy"} choose={() => onVariables("co-energy")}>
              co-energy f, e
            </Choice>
          </fieldset>
          <Copy what="text" of={shown.map(({ left, text }) => `${left.text} = ${text}`)} />
          <Copy what="LaTeX" of={shown.map(({ leftLatex, latex }) => `${leftLatex} = ${latex}`)} />
        </>
      }
    >
      {shown.length === 0 ? (
        <p className="note">No stores: the outputs below are functions of the inputs alone.</p>
      ) : (
        <ol className="equations">
          {model.coupled && (
            <li className="note pb-1">
              The rates stay coupled, M(x)·ẋ = h(x, u, t): they are solved for at each step.
            </li>
          )}
          {shown.map((equation) => (
            <Equation key={equation.state} equation={equation} />
          ))}
        </ol>
      )}
    </Section>
  );
}

function Choice({
  chosen,
  choose,
  children,
}: {
  chosen: boolean;
  choose(): void;
  children: React.ReactNode;
}) {
  return (
    <button type="button" className="choice" aria-pressed={chosen} onClick={choose}>
      {children}
    </button>
  );
}

function Copy({ what, of }: { what: string; of: readonly string[] }) {
  const [copied, setCopied] = useState(false);
  const copy = async () => {
    await navigator.clipboard.writeText(`${of.join("\n")}\n`);
    setCopied(true);
    setTimeout(() => setCopied(false), 2000);
  };
  return (
    <button type="button" className="word no-print" onClick={copy}>
      {copied ? "Copied" : `Copy ${what}`}
      <span role="status" className="sr-only">
        {copied ? `Equations copied as ${what}` : ""}
      </span>
    </button>
  );
}

/** One equation; it wraps between its terms, and each term can be pointed at and reached by keyboard. */
export function Equation({ equation, unit }: { equation: EquationView; unit?: string }) {
  const key = equation.left.text;
  const lit = useLitEquation(key, equation);
  return (
    <li
      className="equation"
      data-tied=""
      data-lit={lit}
      data-coupled={equation.leftTerms !== null}
      data-text={`${key} = ${equation.text}`}
    >
      <span className="left">
        {equation.leftTerms === null ? (
          <Typeset formula={equation.left} />
        ) : (
          equation.leftTerms.map(({ sign, formula }, index) => (
            <span key={formula.text} className="whitespace-nowrap">
              {(index > 0 || sign === "-") && <span className="sign">{sign === "-" ? "−" : "+"}</span>}
              <Typeset formula={formula} />
            </span>
          ))
        )}
        <span className="sign" aria-hidden="true">
          =
        </span>
        <span className="sr-only">equals</span>
      </span>
      <span className="right">
        {equation.terms.map((term, index) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: the terms of one equation have no other identity
          <Term key={index} equation={key} index={index} term={term} />
        ))}
        {unit !== undefined && <span className="unit">shown in {unit}</span>}
      </span>
      {equation.store !== null && <Derivation equation={key} store={equation.store} />}
    </li>
  );
}

function Term({ equation, index, term }: { equation: string; index: number; term: TermView }) {
  const { path, open, linesOf } = useContext(LightingContext);
  const { lit, handlers } = useLitTerm({ equation, index }, term);
  const lines = linesOf(term);
  const sign = term.sign === "-" ? "−" : index === 0 ? "" : "+";
  const from = lines.length === 0 ? "" : `, from line${lines.length > 1 ? "s" : ""} ${lines.join(", ")}`;
  return (
    <button
      type="button"
      className="term"
      data-term={`${term.sign}${term.formula.text}`}
      data-lit={lit}
      aria-label={`${sign} ${term.formula.text}${from}`}
      onClick={() => lines.length > 0 && open({ file: path, line: lines[0], column: 1 })}
      {...handlers}
    >
      {sign !== "" && <span className="sign">{sign}</span>}
      <Typeset formula={term.formula} />
    </button>
  );
}

export function Loops({ loops }: { loops: readonly LoopView[] }) {
  if (loops.length === 0) return null;
  return (
    <Section title="Algebraic loops" count={loops.length}>
      <ol className="divide-y divide-rule">
        {loops.map((loop) => (
          <Loop key={loop.variables.join()} loop={loop} />
        ))}
      </ol>
    </Section>
  );
}

function Loop({ loop }: { loop: LoopView }) {
  const { lit, handlers } = useLit(loop);
  return (
    <li className="py-2 settles" data-tied="" data-lit={lit} {...handlers}>
      <p>
        {loop.linear ? "Linear" : "Nonlinear"}, {loop.solved ? "solved in closed form" : "solved numerically"}
        , in <span className="font-mono text-small">{loop.variables.join(", ")}</span>
      </p>
      {loop.residuals.map((residual) => (
        <p key={residual.text} className="overflow-x-auto py-1">
          <span className="typeset">0 = </span>
          <Typeset formula={residual} />
        </p>
      ))}
    </li>
  );
}
