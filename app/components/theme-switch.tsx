import { useState } from "react";
import { chooseTheme, type Theme } from "./theme.ts";

const NEXT: Record<Theme, Theme> = { system: "light", light: "dark", dark: "system" };
const WORDS: Record<Theme, string> = { system: "as the system", light: "light", dark: "dark" };

export function ThemeSwitch({ initial }: { initial: Theme }) {
  const [theme, setTheme] = useState(initial);
  const choose = () => {
    setTheme(NEXT[theme]);
    chooseTheme(NEXT[theme]);
  };
  return (
    <button type="button" className="word" onClick={choose}>
      Paper: {WORDS[theme]}
    </button>
  );
}
