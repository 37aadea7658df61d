import type {
  DependentView,
  ExpectationView,
  ModelView,
  OutputView,
  StateView,
  ValueView,
} from "../view-model.ts";
import { Equation } from "./equations.tsx";
import { PlaceLink, Prose } from "./findings.tsx";
import { Typeset } from "./formula.tsx";
import { useLit } from "./lighting.ts";
import { Section } from "./section.tsx";

const KINDS: Record<string, string> = { p: "momentum", q: "displacement", e: "effort", f: "flow" };

function kindOf({ name, kind }: StateView): string {
  return kind === "tracked" ? kind : (KINDS[name.slice(name.lastIndexOf(".") + 1)] ?? KINDS[kind]);
}

export function States({ states }: { states: readonly StateView[] }) {
  return (
    <Section title="States" count={states.length}>
      {states.length > 0 && (
        <table className="ruled dense">
          <thead>
            <tr>
              <th scope="col">State</th>
              <th scope="col">Name</th>
              <th scope="col">Kind</th>
              <th scope="col" className="figure">
                Start
              </th>
              <th scope="col">Unit</th>
              <th scope="col">Line</th>
            </tr>
          </thead>
          <tbody>
            {states.map((state) => (
              <StateRow key={state.name} state={state} />
            ))}
          </tbody>
        </table>
      )}
    </Section>
  );
}

function StateRow({ state }: { state: StateView }) {
  const { lit, handlers } = useLit(state);
  return (
    <tr data-tied="" data-lit={lit} {...handlers}>
      <td>
        <Typeset formula={state.symbol} />
      </td>
      <th scope="row" className="notation">
        {state.name}
      </th>
      <td>{kindOf(state)}</td>
      <td className="figure">{state.start}</td>
      <td className="notation">{state.unit}</td>
      <td>
        <PlaceLink place={state.place} />
      </td>
    </tr>
  );
}

/** What the states settle: the outputs are read off, the dependent stores have no state of their own. */
export function DependentStores({ stores }: { stores: readonly DependentView[] }) {
  if (stores.length === 0) return null;
  return (
    <Section title="Dependent stores" count={stores.length}>
      <ul className="divide-y divide-rule">
        {stores.map((store) => (
          <li key={store.name} className="py-1">
            <p>
              <span className="notation font-semibold">{store.name}</span> in {store.unit}, settled by{" "}
              <span className="notation">{store.of.join(", ") || "the inputs"}</span>, line{" "}
              <PlaceLink place={store.place} />
            </p>
            <ul className="equations">
              <Equation equation={store.equation} />
            </ul>
          </li>
        ))}
      </ul>
    </Section>
  );
}

export function Outputs({ outputs }: { outputs: readonly OutputView[] }) {
  if (outputs.length === 0) return null;
  return (
    <Section title="Outputs" count={outputs.length}>
      <ol className="equations">
        {outputs.map((output) => (
          <Equation key={output.name} equation={output.equation} unit={output.unit} />
        ))}
      </ol>
    </Section>
  );
}

export function Inputs({ inputs }: { inputs: readonly ValueView[] }) {
  return inputs.length === 0 ? null : <Values title="Inputs" figure="Nominal" values={inputs} />;
}

export function Parameters({ parameters }: { parameters: readonly ValueView[] }) {
  return parameters.length === 0 ? null : <Values title="Parameters" figure="Value" values={parameters} />;
}

function Values({ title, figure, values }: { title: string; figure: string; values: readonly ValueView[] }) {
  const ranged = values.some(({ range }) => range !== null);
  return (
    <Section title={title} count={values.length}>
      <table className="ruled dense">
        <thead>
          <tr>
            <th scope="col">Name</th>
            <th scope="col" className="figure">
              {figure}
            </th>
            <th scope="col">Unit</th>
            {ranged && <th scope="col">Range</th>}
            <th scope="col">Meaning</th>
            <th scope="col">Line</th>
          </tr>
        </thead>
        <tbody>
          {values.map((value) => (
            <ValueRow key={value.name} value={value} ranged={ranged} />
          ))}
        </tbody>
      </table>
    </Section>
  );
}

function ValueRow({ value, ranged }: { value: ValueView; ranged: boolean }) {
  const { lit, handlers } = useLit(value);
  return (
    <tr data-tied="" data-lit={lit} {...handlers}>
      <th scope="row" className="notation">
        {value.name}
      </th>
      <td className="figure">{value.value}</td>
      <td className="notation">{value.unit}</td>
      {ranged && <td className="notation whitespace-nowrap">{value.range}</td>}
      <td>{value.description}</td>
      <td>
        <PlaceLink place={value.place} />
      </td>
    </tr>
  );
}

const VERDICTS = {
  passed: { sign: "✓", ink: "text-met" },
  failed: { sign: "✕", ink: "text-mistake" },
  "not judged": { sign: "–", ink: "text-warning" },
} as const;

export function Expectations({ expectations }: { expectations: readonly ExpectationView[] }) {
  if (expectations.length === 0) return null;
  return (
    <Section title="Expectations" count={expectations.length}>
      <table className="ruled dense">
        <thead>
          <tr>
            <th scope="col">Verdict</th>
            <th scope="col">Expected</th>
            <th scope="col">Measured</th>
            <th scope="col">Line</th>
          </tr>
        </thead>
        <tbody>
          {expectations.map(({ text, verdict, measured, message, place }) => (
            <tr key={`${place.line}:${text}`}>
              <td className={`whitespace-nowrap font-semibold ${VERDICTS[verdict].ink}`}>
                <span aria-hidden="true">{VERDICTS[verdict].sign} </span>
                {verdict}
              </td>
              <th scope="row" className="notation">
                {text}
              </th>
              <td>
                <span className="notation">{measured}</span> {message !== null && <Prose text={message} />}
              </td>
              <td>
                <PlaceLink place={place} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </Section>
  );
}

export function factsOf(model: ModelView): string {
  const counted = (count: number, one: string, many = `${one}s`) => `${count} ${count === 1 ? one : many}`;
  return [
    counted(model.states.length, "state"),
    counted(model.dependent.length, "dependent store"),
    counted(model.loops.length, "algebraic loop"),
  ].join(" · ");
}
