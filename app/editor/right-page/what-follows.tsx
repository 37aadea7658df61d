import { type Ref, useMemo } from "react";
import type { CoreState, useCore } from "../use-core.ts";
import type { FindingView, Variables } from "../view-model.ts";
import "./right-page.css";
import { Behaviour } from "./behaviour.tsx";
import { DiagramPart } from "./diagram-part.tsx";
import { Equations, Loops } from "./equations.tsx";
import { Findings } from "./findings.tsx";
import { QuestionsContext } from "./questions.ts";
import { idOf } from "./section.tsx";
import { DependentStores, Expectations, factsOf, Inputs, Outputs, Parameters, States } from "./tables.tsx";

interface WhatFollowsProps {
  readonly core: ReturnType<typeof useCore>;
  readonly path: string;
  readonly mayFix: boolean;
  readonly ref: Ref<HTMLElement>;
  onVariables(variables: Variables): void;
  onSystem(name: string): void;
  onFix(finding: FindingView): void;
  onOpenSpan(span: { readonly file: string; readonly start: number }): void;
  onOpen(place: { readonly file: string; readonly line: number; readonly column: number }): void;
}

/** The right page: all that follows from the text beside it. */
export function WhatFollows(props: WhatFollowsProps) {
  const { core, path, ref } = props;
  const { view, system, fault, stale, ask } = core;
  const graphed = view?.system?.diagram == null ? null : view.system.name;
  const questions = useMemo(
    () => ({ system: graphed, current: !stale, text: system, ask }),
    [graphed, system, stale, ask],
  );
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: a page that scrolls must be reachable by keyboard
    <section className="page right-page" aria-label="What follows" ref={ref} tabIndex={0}>
      {fault !== null && (
        <p role="alert" className="text-mistake py-2">
          ✕ The core stopped on this text: {fault}. It starts again with the next change; your text is safe.
        </p>
      )}
      {view === null ? (
        <p className="note py-8">
          <noscript>The equations are worked out in the browser, which needs JavaScript.</noscript>
          Working out what follows from {path} …
        </p>
      ) : (
        <>
          <Title view={view} core={core} onSystem={props.onSystem} />
          <Findings
            path={path}
            findings={view.findings}
            mayFix={props.mayFix}
            onFix={props.onFix}
            onOpen={props.onOpen}
          />
          {system !== null && (
            <QuestionsContext value={questions}>
              <Results {...props} system={system} />
            </QuestionsContext>
          )}
        </>
      )}
    </section>
  );
}

function Title({
  view,
  core,
  onSystem,
}: Pick<WhatFollowsProps, "core" | "onSystem"> & { view: NonNullable<CoreState["view"]> }) {
  const { system } = core;
  if (system === null) {
    return (
      <p className="note py-4">
        This file declares no system: what it holds is used by other files of the set.
      </p>
    );
  }
  const parts = [
    "Findings",
    "Diagram",
    ...(system.expectations.length > 0 ? ["Expectations"] : []),
    ...(system.model !== null ? ["Equations", "States", "Outputs", "Behaviour"] : []),
    "Parameters",
  ];
  return (
    <header className="pt-3 pb-1">
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <h1 className="font-mono text-[1.25rem]">{system.name}</h1>
        {view.systems.length > 1 && (
          <label className="note no-print flex items-baseline gap-1">
            System
            <select
              className="field w-auto! min-h-7! py-0!"
              value={system.name}
              onChange={(event) => onSystem(event.target.value)}
            >
              {view.systems.map((name) => (
                <option key={name}>{name}</option>
              ))}
            </select>
          </label>
        )}
        {system.model !== null && <p className="note">{factsOf(system.model)}</p>}
      </div>
      {system.description !== null && (
        <p className="max-w-[60ch] text-faded mt-0.5 leading-snug">{system.description}</p>
      )}
      <nav aria-label="Parts of this page" className="part-list no-print">
        {parts.map((part) => (
          <a key={part} href={`#${idOf(part)}`}>
            {part}
          </a>
        ))}
      </nav>
    </header>
  );
}

function Results(props: WhatFollowsProps & { system: NonNullable<CoreState["system"]> }) {
  const { system, core } = props;
  const { model } = system;
  return (
    <>
      {system.diagram !== null && <DiagramPart diagram={system.diagram} onOpen={props.onOpenSpan} />}
      <Expectations expectations={system.expectations} />
      {system.diagram === null && model === null && (
        <p className="note border-t border-rule py-2">
          The errors leave no graph of {system.name} to draw, and no equations to derive.
        </p>
      )}
      {core.stale && (
        <p className="stale-note" role="status">
          Equations, states and outputs are from the last text without errors.
        </p>
      )}
      {model !== null && (
        <div className={core.stale ? "stale settles" : "settles"}>
          <Equations model={model} onVariables={props.onVariables} />
          <States states={model.states} />
          <DependentStores stores={model.dependent} />
          <Loops loops={model.loops} />
          <Outputs outputs={model.outputs} />
          <Behaviour system={system.name} />
        </div>
      )}
      <Inputs inputs={system.inputs} />
      <Parameters parameters={system.parameters} />
    </>
  );
}
