import * as monaco from "monaco-editor/editor";
import "monaco-editor/features/bracketMatching/register";
import "monaco-editor/features/caretOperations/register";
import "monaco-editor/features/clipboard/register";
import "monaco-editor/features/codeAction/register";
import "monaco-editor/features/codeEditor/register";
import "monaco-editor/features/codicon/register";
import "monaco-editor/features/comment/register";
import "monaco-editor/features/contextmenu/register";
import "monaco-editor/features/cursorUndo/register";
import "monaco-editor/features/find/register";
import "monaco-editor/features/format/register";
import "monaco-editor/features/gotoError/register";
import "monaco-editor/features/gotoLine/register";
import "monaco-editor/features/gotoSymbol/register";
import "monaco-editor/features/hover/register";
import "monaco-editor/features/indentation/register";
import "monaco-editor/features/linesOperations/register";
import "monaco-editor/features/multicursor/register";
import "monaco-editor/features/quickCommand/register";
import "monaco-editor/features/quickOutline/register";
import "monaco-editor/features/rename/register";
import "monaco-editor/features/smartSelect/register";
// The feature of that name brings inline completions alone; the list of completions is this module.
import "monaco-editor/editor/contrib/suggest/browser/suggestController.js";
import "monaco-editor/features/toggleTabFocusMode/register";
import "monaco-editor/features/tokenization/register";
import "monaco-editor/features/wordHighlighter/register";
import "monaco-editor/features/wordOperations/register";
import editorWorkerUrl from "monaco-editor/editor/editor.worker?worker&url";
import { NOTATION } from "./notation/language-id.ts";
import { notationConfiguration, notationTokens } from "./notation/tokens.ts";
import { workerAddress } from "./worker-address.ts";

self.MonacoEnvironment = {
  getWorker: () => new Worker(workerAddress(editorWorkerUrl), { type: "module" }),
};

monaco.languages.register({ id: NOTATION, extensions: [".wright"] });
monaco.languages.setMonarchTokensProvider(NOTATION, notationTokens);
monaco.languages.setLanguageConfiguration(NOTATION, notationConfiguration);

const SYMBOLS = "class variable object keyword struct unit function field enumerator".split(" ");

/* Typography rather than colour: what the language gives is bold, what is said beside it is faded. */
function theme(
  base: "vs" | "vs-dark",
  ink: string,
  faded: string,
  paper: string,
  shade: string,
  selection: string,
) {
  return {
    base,
    inherit: false,
    rules: [
      { token: "", foreground: ink },
      { token: "comment", foreground: faded, fontStyle: "italic" },
      { token: "unit", foreground: faded },
      { token: "keyword", foreground: ink, fontStyle: "bold" },
      { token: "kind", foreground: ink, fontStyle: "bold" },
      { token: "arrow", foreground: ink, fontStyle: "bold" },
    ],
    colors: {
      "editor.background": `#${paper}`,
      "editor.foreground": `#${ink}`,
      "editorLineNumber.foreground": `#${faded}`,
      "editorLineNumber.activeForeground": `#${ink}`,
      "editor.lineHighlightBackground": `#${shade}`,
      "editor.lineHighlightBorder": "#00000000",
      "editor.selectionBackground": `#${selection}`,
      "editorCursor.foreground": `#${ink}`,
      "editorWidget.background": `#${paper}`,
      "editorWidget.border": `#${faded}`,
      "editorHoverWidget.background": `#${paper}`,
      "editorSuggestWidget.background": `#${paper}`,
      "editorSuggestWidget.foreground": `#${ink}`,
      "editorSuggestWidget.selectedBackground": `#${selection}`,
      "editorSuggestWidget.selectedForeground": `#${ink}`,
      ...Object.fromEntries(
        [1, 2, 3, 4, 5, 6].map((depth) => [`editorBracketHighlight.foreground${depth}`, `#${ink}`]),
      ),
      "editor.rangeHighlightBackground": `#${shade}`,
      "editor.symbolHighlightBackground": `#${shade}`,
      "quickInput.background": `#${paper}`,
      "quickInput.foreground": `#${ink}`,
      "quickInputList.focusBackground": `#${selection}`,
      "quickInputList.focusForeground": `#${ink}`,
      "list.highlightForeground": `#${ink}`,
      "list.focusHighlightForeground": `#${ink}`,
      "editorSuggestWidget.highlightForeground": `#${ink}`,
      "editorSuggestWidget.focusHighlightForeground": `#${ink}`,
      ...Object.fromEntries(SYMBOLS.map((symbol) => [`symbolIcon.${symbol}Foreground`, `#${faded}`])),
      focusBorder: "#00000000",
    },
  } satisfies monaco.editor.IStandaloneThemeData;
}

monaco.editor.defineTheme("ink-on-paper", theme("vs", "1f1c18", "5c554a", "fcfaf5", "f4f0e6", "cfe0f0"));
monaco.editor.defineTheme("ink-on-dark", theme("vs-dark", "ece6da", "b5ad9e", "191714", "211e1a", "2b4a68"));

/** Follows the reader's choice and the system's, as the style sheet does. */
function applyTheme() {
  const chosen = document.documentElement.dataset.theme;
  const dark = chosen === undefined ? systemIsDark.matches : chosen === "dark";
  monaco.editor.setTheme(dark ? "ink-on-dark" : "ink-on-paper");
}
const systemIsDark = matchMedia("(prefers-color-scheme: dark)");
systemIsDark.addEventListener("change", applyTheme);
new MutationObserver(applyTheme).observe(document.documentElement, { attributeFilter: ["data-theme"] });
applyTheme();
void document.fonts.ready.then(() => monaco.editor.remeasureFonts());

export { monaco };
