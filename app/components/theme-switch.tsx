import { useState } from "react";
import { chooseTheme, type Theme } from "./theme.ts";

const CHOICES: readonly (readonly [theme: Theme, word: string])[] = [
  ["light", "Light"],
  ["dark", "Dark"],
  ["system", "As the system"],
];

/** The setting of the page, all three choices in sight; the chosen one is underlined and said to be pressed. */
export function ThemeSwitch({ initial }: { initial: Theme }) {
  const [theme, setTheme] = useState(initial);
  return (
    <fieldset className="theme-switch">
      <legend className="sr-only">Colours of the page</legend>
      {CHOICES.map(([choice, word]) => (
        <button
          key={choice}
          type="button"
          className="choice"
          aria-pressed={theme === choice}
          onClick={() => {
            setTheme(choice);
            chooseTheme(choice);
          }}
        >
          {word}
        </button>
      ))}
    </fieldset>
  );
}
