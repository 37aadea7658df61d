import { holderAt } from "../holder.ts";
import { monaco } from "../monaco.client.ts";
import type { NameAnswer, NameQuestion } from "../names/rename.ts";
import type { FileView, OutlineEntry } from "../view-model.ts";
import { suggestionsAt } from "./completion.ts";
import { NOTATION } from "./language-id.ts";
import { nameServices } from "./names.client.ts";
import { pathOf, rangeOf, uriOf } from "./positions.client.ts";

/** What the services ask of the page that holds the editor. */
export interface ServiceSource {
  view(): FileView | null;
  format(path: string, text: string): Promise<string | null>;
  names(question: NameQuestion): Promise<NameAnswer>;
}

type Provided<T> = T | null | undefined;

/** Completion, hover, definition, outline, fixes and formatting, all out of what the core said last. */
export function registerServices(source: ServiceSource): monaco.IDisposable {
  const { languages } = monaco;
  const services = [
    languages.registerCompletionItemProvider(NOTATION, {
      triggerCharacters: [".", " ", ">"],
      provideCompletionItems: (model, position) => ({
        suggestions: completions(source.view(), model, position),
      }),
    }),
    languages.registerHoverProvider(NOTATION, {
      async provideHover(model, position): Promise<Provided<monaco.languages.Hover>> {
        const view = source.view();
        const contents = [...declared(view, model, position), ...(await explained(view, model, position))];
        return contents.length === 0 ? null : { contents };
      },
    }),
    languages.registerDefinitionProvider(NOTATION, {
      provideDefinition(model, position): Provided<monaco.languages.Definition> {
        const used = /\buse\b[^"]*"([^"@]+)"/.exec(model.getLineContent(position.lineNumber));
        if (used !== null) return { uri: uriOf(used[1]), range: new monaco.Range(1, 1, 1, 1) };
        const entry = entryAt(source.view(), model, position);
        return entry === null ? null : { uri: uriOf(entry.place.file), range: rangeOf(entry.place) };
      },
    }),
    languages.registerDocumentSymbolProvider(NOTATION, {
      provideDocumentSymbols: (model) => symbols(source.view(), pathOf(model.uri)),
    }),
    languages.registerCodeActionProvider(NOTATION, {
      provideCodeActions: (model, range) => ({ actions: fixes(source.view(), model, range), dispose() {} }),
    }),
    languages.registerDocumentFormattingEditProvider(NOTATION, {
      async provideDocumentFormattingEdits(model) {
        const text = await source.format(pathOf(model.uri), model.getValue());
        return text === null || text === model.getValue() ? [] : [{ range: model.getFullModelRange(), text }];
      },
    }),
  ];
  services.push(...nameServices(source));
  return {
    dispose() {
      for (const service of services) service.dispose();
    },
  };
}

function completions(view: FileView | null, model: monaco.editor.ITextModel, position: monaco.Position) {
  if (view === null) return [];
  const before = model.getLineContent(position.lineNumber).slice(0, position.column - 1);
  if (/^\s*#|\s--(\s|$)/.test(before)) return [];
  const unit = /[\p{L}%µΩ°/*^\d]*$/u.exec(before)?.[0] ?? "";
  const word = model.getWordUntilPosition(position);
  const { CompletionItemKind: Kind } = monaco.languages;
  const kinds = {
    name: Kind.Variable,
    kind: Kind.Struct,
    statement: Kind.Keyword,
    unit: Kind.Unit,
    function: Kind.Function,
    variable: Kind.Field,
    domain: Kind.Enum,
  };
  return suggestionsAt(before, view.outline, holderAt(view, position.lineNumber)?.name ?? null).map(
    (suggestion) => {
      const start = suggestion.sort === "unit" ? position.column - unit.length : word.startColumn;
      return {
        label: { label: suggestion.label, description: suggestion.detail },
        insertText: suggestion.insert,
        kind: kinds[suggestion.sort],
        range: new monaco.Range(position.lineNumber, start, position.lineNumber, position.column),
      };
    },
  );
}

function entryAt(
  view: FileView | null,
  model: monaco.editor.ITextModel,
  position: monaco.Position,
): OutlineEntry | null {
  const word = model.getWordAtPosition(position);
  if (view === null || word === null) return null;
  const within = holderAt(view, position.lineNumber)?.name ?? null;
  const meant = view.outline.filter(
    ({ name, within: holder }) => name === word.word && (holder === within || holder === null),
  );
  // A node and a value may share a name: on a wiring line, and before a dot, the node is meant.
  const line = model.getLineContent(position.lineNumber);
  const node = line.includes("->") || line[word.endColumn - 1] === ".";
  const declared = meant.find(
    ({ place }) => place.line === position.lineNumber && place.column === word.startColumn,
  );
  return declared ?? meant.find(({ space }) => (space === "node") === node) ?? meant[0] ?? null;
}

/** What a name was declared as. */
function declared(
  view: FileView | null,
  model: monaco.editor.ITextModel,
  position: monaco.Position,
): monaco.IMarkdownString[] {
  const entry = entryAt(view, model, position);
  if (entry === null) return [];
  const code = `\`\`\`${NOTATION}\n${entry.declaration}\n\`\`\``;
  const where = entry.place.file === pathOf(model.uri) ? `line ${entry.place.line}` : entry.place.file;
  return [{ value: code }, { value: [entry.description, where].filter(Boolean).join("  \n") }];
}

/** What the findings here mean, and where to read on; the pages are loaded when somebody first asks. */
async function explained(
  view: FileView | null,
  model: monaco.editor.ITextModel,
  position: monaco.Position,
): Promise<monaco.IMarkdownString[]> {
  const path = pathOf(model.uri);
  const here = (view?.findings ?? []).filter(
    ({ place }) => place.file === path && monaco.Range.containsPosition(rangeOf(place), position),
  );
  if (here.length === 0) return [];
  const { pageOf } = await import("../../../grammar/diagnostics/pages.ts");
  return [...new Set(here.map(({ name }) => name))].map((name) => {
    const address = new URL(`/reference/findings/${name}`, window.location.href);
    return { value: `${pageOf(name)?.what ?? ""} [More about ${name}](${address})` };
  });
}

function symbols(view: FileView | null, path: string): monaco.languages.DocumentSymbol[] {
  const { SymbolKind: Kind } = monaco.languages;
  const own = (view?.outline ?? []).filter(({ place }) => place.file === path);
  const symbol = (entry: OutlineEntry): monaco.languages.DocumentSymbol => ({
    name: entry.name,
    detail: entry.word,
    kind: entry.within === null ? Kind.Class : entry.space === "node" ? Kind.Object : Kind.Variable,
    tags: [],
    range: { ...rangeOf(entry.place), endLineNumber: Math.max(entry.place.endLine, entry.lastLine) },
    selectionRange: rangeOf(entry.place),
    children: entry.within === null ? own.filter(({ within }) => within === entry.name).map(symbol) : [],
  });
  return own.filter(({ within }) => within === null).map(symbol);
}

function fixes(
  view: FileView | null,
  model: monaco.editor.ITextModel,
  range: monaco.Range,
): monaco.languages.CodeAction[] {
  const path = pathOf(model.uri);
  return (view?.findings ?? []).flatMap(({ fix, place }) => {
    if (fix === null || place.file !== path || !monaco.Range.areIntersectingOrTouching(range, rangeOf(place)))
      return [];
    const edits = fix.edits.map(({ place: at, text }) => ({
      resource: uriOf(at.file),
      versionId: undefined,
      textEdit: { range: rangeOf(at), text },
    }));
    return [{ title: fix.title, kind: "quickfix", isPreferred: true, edit: { edits } }];
  });
}
