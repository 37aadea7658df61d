import { useContext, useState } from "react";
import type { BehaviourView, ChannelView, ModeView } from "../behaviour-view.ts";
import { QuestionsContext, useAnswer } from "./questions.ts";
import { ResponsePlot } from "./response-plot.tsx";
import { Section } from "./section.tsx";

/** Long enough that no one who types waits for it, short enough that no one who reads does. */
const AFTER_TYPING = 300;

/** How the model moves about its operating point; asked for once the equations stand. */
export function Behaviour({ system }: { system: string }) {
  const { current } = useContext(QuestionsContext);
  const behaviour = useAnswer({ about: "behaviour", system }, AFTER_TYPING);
  return (
    <Section title="Behaviour" count={behaviour?.modes.length}>
      {behaviour === undefined || behaviour === null ? (
        <p className="note">
          {current
            ? "Working out the operating point …"
            : "The numbers come back with the next text without errors."}
        </p>
      ) : behaviour.refusal !== null ? (
        <p className="note">{behaviour.refusal}</p>
      ) : (
        <Numbers behaviour={behaviour} />
      )}
    </Section>
  );
}

function Numbers({ behaviour }: { behaviour: BehaviourView }) {
  const { note, states, modes, channels, stable } = behaviour;
  return (
    <>
      <p>
        {note === null ? "About the equilibrium under the nominal inputs" : "At the start values"}
        {stable !== null && (
          <>
            : <span className="font-semibold">{stable ? "stable" : "not stable"}</span>
          </>
        )}
        .{note !== null && <span className="note"> There is no equilibrium. {note}</span>}
      </p>
      {modes.length > 0 && <Modes modes={modes} />}
      {channels.length > 0 && <Channels channels={channels} />}
      {states.length > 0 && (
        <table className="ruled dense">
          <caption className="note text-left">{note === null ? "Equilibrium" : "Start"}</caption>
          <thead>
            <tr>
              <th scope="col">State</th>
              <th scope="col" className="figure">
                Value
              </th>
              <th scope="col">Unit</th>
            </tr>
          </thead>
          <tbody>
            {states.map(({ name, value, unit }) => (
              <tr key={name}>
                <th scope="row" className="notation">
                  {name}
                </th>
                <td className="figure">{value}</td>
                <td className="notation">{unit}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </>
  );
}

function Modes({ modes }: { modes: readonly ModeView[] }) {
  return (
    <div className="overflow-x-auto">
      <table className="ruled dense">
        <caption className="note text-left">Modes</caption>
        <thead>
          <tr>
            <th scope="col">Mode</th>
            <th scope="col">Eigenvalue, 1/s</th>
            <th scope="col" className="figure">
              Frequency, Hz
            </th>
            <th scope="col" className="figure">
              Damping
            </th>
            <th scope="col" className="figure">
              Time constant, s
            </th>
            <th scope="col">States that take part</th>
          </tr>
        </thead>
        <tbody>
          {modes.map((mode) => (
            <tr key={mode.number}>
              <th scope="row">{mode.number}</th>
              <td className="notation whitespace-nowrap">{mode.eigenvalue}</td>
              <td className="figure">{mode.frequency}</td>
              <td className="figure">{mode.damping}</td>
              <td className="figure">{mode.timeConstant}</td>
              <td>{mode.states}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function Channels({ channels }: { channels: readonly ChannelView[] }) {
  const keyOf = ({ input, output }: ChannelView) => `${input} to ${output}`;
  const drawn = channels.filter(({ response }) => response.length > 1);
  const [chosen, choose] = useState<string | null>(null);
  const shown = drawn.find((channel) => keyOf(channel) === chosen) ?? drawn.at(0);
  return (
    <>
      <table className="ruled dense">
        <caption className="note text-left">Gains at zero frequency</caption>
        <thead>
          <tr>
            <th scope="col">From</th>
            <th scope="col">To</th>
            <th scope="col">Gain</th>
            <th scope="col" className="figure">
              Bandwidth, Hz
            </th>
          </tr>
        </thead>
        <tbody>
          {channels.map((channel) => (
            <tr key={keyOf(channel)}>
              <td className="notation">{channel.input}</td>
              <th scope="row" className="notation">
                {channel.output}
              </th>
              <td className="notation">{channel.gain}</td>
              <td className="figure">{channel.bandwidth}</td>
            </tr>
          ))}
        </tbody>
      </table>
      {shown !== undefined && (
        <>
          <label className="note no-print flex items-baseline gap-1 mt-2">
            Frequency response from
            <select
              className="field w-auto! min-h-7! py-0!"
              value={keyOf(shown)}
              onChange={(event) => choose(event.target.value)}
            >
              {drawn.map((channel) => (
                <option key={keyOf(channel)}>{keyOf(channel)}</option>
              ))}
            </select>
          </label>
          <ResponsePlot channel={shown} />
        </>
      )}
    </>
  );
}
