import { monaco } from "../monaco.client.ts";
import type { Place } from "../view-model.ts";

export function uriOf(path: string): monaco.Uri {
  return monaco.Uri.from({ scheme: "set", path: `/${path}` });
}

export function pathOf(uri: monaco.Uri): string {
  return uri.path.slice(1);
}

export function rangeOf(place: Place): monaco.IRange {
  return {
    startLineNumber: place.line,
    startColumn: place.column,
    endLineNumber: place.endLine,
    endColumn: place.endColumn,
  };
}
