import { type Ref, useEffect, useImperativeHandle, useRef } from "react";
import { monaco } from "./monaco.client.ts";
import { NOTATION } from "./notation/language-id.ts";
import { pathOf, rangeOf, uriOf } from "./notation/positions.client.ts";
import { registerServices, type ServiceSource } from "./notation/services.client.ts";
import type { FileView, FindingView, Place } from "./view-model.ts";

export interface TextPageHandle {
  focus(): void;
  reveal(line: number, column?: number): void;
  apply(edits: readonly { readonly place: Place; readonly text: string }[]): void;
  /** Lays the text out as the formatter does, or opens the list of all that is declared. */
  run(command: "format" | "outline"): void;
  /** Middle of a line in the window's coordinates; null while it is scrolled out of sight. */
  middleOf(line: number): number | null;
}

export interface TextPageProps {
  readonly path: string;
  readonly text: string;
  /** Grows when the text was set from outside the editor: a restored draft, the other's version. */
  readonly placed: number;
  /** The line the address names, to begin at. */
  readonly line: number | null;
  readonly readOnly: boolean;
  readonly view: FileView | null;
  readonly tiedLines: readonly number[];
  readonly litLines: readonly number[];
  readonly ref: Ref<TextPageHandle>;
  onText(path: string, text: string): void;
  /** The line with the cursor, when it moves while the text has the focus. */
  onCursor(line: number): void;
  /** The line under the pointer, and null when it leaves. */
  onPoint(line: number | null): void;
  onScroll(): void;
  onSave(): void;
  onOpen(place: { readonly file: string; readonly line: number; readonly column: number }): void;
  format: ServiceSource["format"];
  names: ServiceSource["names"];
}

const COMMANDS = { format: "editor.action.formatDocument", outline: "editor.action.quickOutline" } as const;

const SEVERITY = { error: "Error", warning: "Warning", note: "Info" } as const;

/** The left page: the text of one file in the editor, with the findings where they stand. */
export function TextPage(props: TextPageProps) {
  const host = useRef<HTMLDivElement>(null);
  const editor = useRef<monaco.editor.IStandaloneCodeEditor | null>(null);
  const decorations = useRef<monaco.editor.IEditorDecorationsCollection | null>(null);
  const current = useRef(props);
  current.current = props;

  useEffect(() => {
    const created = openEditor(host.current as HTMLDivElement, current);
    editor.current = created.editor;
    decorations.current = created.editor.createDecorationsCollection();
    return () => {
      created.dispose();
      editor.current = null;
    };
  }, []);

  // Not on every change of the text: while one types, the editor is ahead of what has been rendered.
  // biome-ignore lint/correctness/useExhaustiveDependencies: `placed` says when the text is not the editor's own
  useEffect(() => {
    const open = editor.current;
    if (open !== null) showText(open, props.path, current.current.text);
    current.current.onScroll();
  }, [props.path, props.placed]);

  // biome-ignore lint/correctness/useExhaustiveDependencies: the same line of another file is another place
  useEffect(() => {
    if (props.line === null || editor.current?.getPosition()?.lineNumber === props.line) return;
    editor.current?.setPosition({ lineNumber: props.line, column: 1 });
    editor.current?.revealLineInCenter(props.line);
  }, [props.path, props.line]);

  useEffect(() => editor.current?.updateOptions({ readOnly: props.readOnly }), [props.readOnly]);

  useEffect(() => {
    const model = editor.current?.getModel();
    if (!model || props.view === null || props.view.path !== pathOf(model.uri)) return;
    monaco.editor.setModelMarkers(
      model,
      "core",
      props.view.findings.flatMap((found) => markers(found, props.path)),
    );
  }, [props.view, props.path]);

  useEffect(() => {
    decorations.current?.set([
      ...props.tiedLines.map((line) => ({
        range: new monaco.Range(line, 1, line, 1),
        options: { linesDecorationsClassName: "tied-line" },
      })),
      ...props.litLines.map((line) => ({
        range: new monaco.Range(line, 1, line, 1),
        options: { isWholeLine: true, className: "lit-line", linesDecorationsClassName: "lit-mark" },
      })),
    ]);
  }, [props.tiedLines, props.litLines]);

  useImperativeHandle(props.ref, () => handleFor(editor, host), []);

  return <div ref={host} className="text-host" />;
}

function handleFor(
  editor: { readonly current: monaco.editor.IStandaloneCodeEditor | null },
  host: { readonly current: HTMLDivElement | null },
): TextPageHandle {
  return {
    focus: () => editor.current?.focus(),
    reveal(line, column = 1) {
      editor.current?.setPosition({ lineNumber: line, column });
      editor.current?.revealLineInCenterIfOutsideViewport(line);
      editor.current?.focus();
    },
    apply(edits) {
      editor.current?.pushUndoStop();
      editor.current?.executeEdits(
        "fix",
        edits.map(({ place, text }) => ({ range: rangeOf(place), text })),
      );
      editor.current?.pushUndoStop();
    },
    run(command) {
      editor.current?.focus();
      void editor.current?.getAction(COMMANDS[command])?.run();
    },
    middleOf(line) {
      const open = editor.current;
      const box = host.current?.getBoundingClientRect();
      if (open === null || box === undefined) return null;
      const height = open.getOption(monaco.editor.EditorOption.lineHeight);
      const y = open.getTopForLineNumber(line) - open.getScrollTop() + height / 2;
      return y < 0 || y > box.height ? null : box.top + y;
    },
  };
}

function openEditor(host: HTMLDivElement, current: { readonly current: TextPageProps }) {
  const editor = monaco.editor.create(host, {
    model: null,
    automaticLayout: true,
    fontFamily: '"Source Code Pro", ui-monospace, monospace',
    fontSize: 13.5,
    lineHeight: 21,
    lineNumbersMinChars: 3,
    lineDecorationsWidth: 14,
    glyphMargin: false,
    folding: false,
    minimap: { enabled: false },
    overviewRulerLanes: 0,
    overviewRulerBorder: false,
    hideCursorInOverviewRuler: true,
    scrollBeyondLastLine: false,
    padding: { top: 8, bottom: 24 },
    renderLineHighlight: "line",
    guides: { indentation: false },
    fixedOverflowWidgets: true,
    tabSize: 2,
    wordBasedSuggestions: "off",
    // Enter ends the line, whatever is on offer; Tab takes it.
    acceptSuggestionOnEnter: "off",
    scrollbar: {
      useShadows: false,
      verticalScrollbarSize: 10,
      horizontalScrollbarSize: 10,
      alwaysConsumeMouseWheel: false,
    },
    ariaLabel: "Text of the file. Press Escape, then Tab, to leave the editor.",
  });
  const parts: monaco.IDisposable[] = [
    editor,
    registerServices({
      view: () => current.current.view,
      format: (path, text) => current.current.format(path, text),
      names: (question) => current.current.names(question),
    }),
    editor.onDidChangeModelContent(() => {
      const model = editor.getModel();
      if (model !== null) current.current.onText(pathOf(model.uri), model.getValue());
    }),
    editor.onDidChangeCursorPosition(({ position }) => {
      if (editor.hasTextFocus()) current.current.onCursor(position.lineNumber);
    }),
    editor.onDidFocusEditorText(() => current.current.onCursor(editor.getPosition()?.lineNumber ?? 1)),
    editor.onMouseMove(({ target }) => current.current.onPoint(target.position?.lineNumber ?? null)),
    editor.onMouseLeave(() => current.current.onPoint(null)),
    editor.onDidScrollChange(() => current.current.onScroll()),
    editor.onDidLayoutChange(() => current.current.onScroll()),
    monaco.editor.registerEditorOpener({
      openCodeEditor(_source, resource, selection) {
        const at = selection ?? { lineNumber: 1, column: 1 };
        const line = "startLineNumber" in at ? at.startLineNumber : at.lineNumber;
        const column = "startColumn" in at ? at.startColumn : at.column;
        current.current.onOpen({ file: pathOf(resource), line, column });
        return true;
      },
    }),
  ];
  editor.addCommand(monaco.KeyMod.CtrlCmd | monaco.KeyCode.KeyS, () => current.current.onSave());
  leaveByKeyboard(editor);
  const dispose = () => {
    for (const part of [...parts, ...monaco.editor.getModels()]) part.dispose();
    places.clear();
  };
  return { editor, dispose };
}

/** Escape, then Tab, leaves the text; any other key takes Tab back to indenting. Ctrl+M switches for good. */
function leaveByKeyboard(editor: monaco.editor.IStandaloneCodeEditor): void {
  editor.onKeyDown(({ keyCode }) => {
    if (keyCode === monaco.KeyCode.Shift) return;
    const leaving = keyCode === monaco.KeyCode.Escape;
    const tabbing = keyCode === monaco.KeyCode.Tab;
    if (!tabbing) editor.updateOptions({ tabFocusMode: leaving });
  });
}

/** Undo and the place of the cursor belong to a file: each keeps its own model while the page is open. */
const places = new Map<string, monaco.editor.ICodeEditorViewState | null>();

function showText(editor: monaco.editor.IStandaloneCodeEditor, path: string, text: string): void {
  const uri = uriOf(path);
  const model = monaco.editor.getModel(uri) ?? monaco.editor.createModel(text, NOTATION, uri);
  if (model.getValue() !== text) {
    // A text that came from elsewhere (a restored draft, the other's version) can be undone like typing.
    model.pushEditOperations([], [{ range: model.getFullModelRange(), text }], () => null);
  }
  const before = editor.getModel();
  if (before === model) return;
  if (before !== null) places.set(before.uri.toString(), editor.saveViewState());
  editor.setModel(model);
  const known = places.get(uri.toString());
  if (known) editor.restoreViewState(known);
}

function markers(
  { name, severity, message, place, facts }: FindingView,
  path: string,
): monaco.editor.IMarkerData[] {
  if (place.file !== path) return [];
  const reasons = facts.map((fact) => `\n· ${fact.message}`).join("");
  return [
    {
      ...rangeOf(place),
      severity: monaco.MarkerSeverity[SEVERITY[severity]],
      message: `${message}${reasons}`.replaceAll("`", ""),
      source: `${severity} ${name}`,
    },
  ];
}
