import { monaco } from "../monaco.client.ts";
import type { NameQuestion } from "../names/rename.ts";
import { NOTATION } from "./language-id.ts";
import { pathOf, rangeOf } from "./positions.client.ts";
import type { ServiceSource } from "./services.client.ts";

/** Rename, and all places of a name: out of the tree of the very text that stands in the editor. */
export function nameServices(source: ServiceSource): monaco.IDisposable[] {
  const ask = (
    model: monaco.editor.ITextModel,
    position: monaco.Position,
    of: Pick<NameQuestion, "renaming" | "wanted">,
  ) =>
    source.names({
      path: pathOf(model.uri),
      text: model.getValue(),
      offset: model.getOffsetAt(position),
      ...of,
    });
  return [
    monaco.languages.registerReferenceProvider(NOTATION, {
      async provideReferences(model, position) {
        const answer = await ask(model, position, { renaming: false, wanted: null });
        if ("refusal" in answer) return [];
        return answer.places.map((place) => ({ uri: model.uri, range: rangeOf(place) }));
      },
    }),
    monaco.languages.registerRenameProvider(NOTATION, {
      async resolveRenameLocation(model, position) {
        const answer = await ask(model, position, { renaming: true, wanted: null });
        const place =
          "places" in answer
            ? answer.places.find((one) => monaco.Range.containsPosition(rangeOf(one), position))
            : undefined;
        if ("refusal" in answer || place === undefined) {
          const rejectReason = "refusal" in answer ? plain(answer.refusal) : "There is no name here.";
          return { range: monaco.Range.fromPositions(position), text: "", rejectReason };
        }
        return { range: rangeOf(place), text: answer.name };
      },
      async provideRenameEdits(model, position, wanted) {
        const answer = await ask(model, position, { renaming: true, wanted });
        if ("refusal" in answer) {
          say(model, position, plain(answer.refusal));
          return { edits: [] };
        }
        return {
          edits: answer.places.map((place) => ({
            resource: model.uri,
            versionId: model.getVersionId(),
            textEdit: { range: rangeOf(place), text: wanted },
          })),
        };
      },
    }),
  ];
}

/** Beside the cursor. What the editor itself would do with a refusal of the new name nobody sees. */
function say(model: monaco.editor.ITextModel, position: monaco.Position, sentence: string): void {
  interface Messages extends monaco.editor.IEditorContribution {
    showMessage(message: string, position: monaco.IPosition): void;
  }
  const editor = monaco.editor.getEditors().find((one) => one.getModel() === model);
  editor?.getContribution<Messages>("editor.contrib.messageController")?.showMessage(sentence, position);
}

function plain(sentence: string): string {
  return sentence.replaceAll("`", "");
}
