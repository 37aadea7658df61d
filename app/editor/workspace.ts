/** The texts of a set as they stand on the page, on top of the version they were read at. */
export interface Workspace {
  /** The version the unsaved texts were written on: what a save names as its parent. */
  readonly commit: string | null;
  readonly saved: Texts;
  readonly texts: Texts;
  /** Grows when texts are set otherwise than by typing. */
  readonly placed: number;
  /** When the texts of a draft were last kept, if this page began with one. */
  readonly restored: string | null;
}

export type Texts = ReadonlyMap<string, string>;

/** An unsaved text, with the one it was written on. */
export interface Unsaved {
  readonly path: string;
  readonly base: string | null;
  readonly text: string;
}

export interface Draft {
  readonly commit: string | null;
  readonly at: string;
  readonly files: readonly Unsaved[];
}

export type Step =
  | { readonly kind: "typed"; readonly path: string; readonly text: string }
  | { readonly kind: "restored"; readonly draft: Draft }
  | { readonly kind: "discarded" }
  | { readonly kind: "noted" }
  | { readonly kind: "loaded"; readonly commit: string | null; readonly files: Texts }
  | { readonly kind: "saved"; readonly commit: string; readonly files: readonly Unsaved[] }
  | { readonly kind: "settled"; readonly head: string; readonly files: readonly Settled[] };

/** A file that two people changed, and the text to go on with; null takes the file away. */
export interface Settled {
  readonly path: string;
  readonly theirs: string | null;
  readonly chosen: string | null;
}

export function opened(commit: string | null, files: Texts): Workspace {
  return { commit, saved: files, texts: files, placed: 0, restored: null };
}

export function unsaved({ saved, texts }: Workspace): Unsaved[] {
  return [...texts].flatMap(([path, text]) => {
    const base = saved.get(path) ?? null;
    return base === text ? [] : [{ path, base, text }];
  });
}

export function next(workspace: Workspace, step: Step): Workspace {
  const { saved, texts, placed } = workspace;
  switch (step.kind) {
    case "typed":
      if (texts.get(step.path) === step.text) return workspace;
      return { ...workspace, texts: withTexts(texts, [[step.path, step.text]]) };
    case "restored": {
      const restored = {
        ...workspace,
        commit: step.draft.commit,
        texts: withTexts(
          texts,
          step.draft.files.map(({ path, text }) => [path, text]),
        ),
        placed: placed + 1,
        restored: step.draft.at,
      };
      const unmoved = step.draft.files.every(({ path, base }) => (saved.get(path) ?? null) === base);
      return unmoved ? { ...restored, commit: workspace.commit } : restored;
    }
    case "discarded":
      return { ...workspace, texts: saved, placed: placed + 1, restored: null };
    case "noted":
      return { ...workspace, restored: null };
    case "loaded":
      return onTopOf(workspace, step.commit, step.files);
    case "saved":
      return {
        ...workspace,
        commit: step.commit,
        saved: withTexts(
          saved,
          step.files.map(({ path, text }) => [path, text]),
        ),
        restored: null,
      };
    case "settled":
      return {
        commit: step.head,
        saved: withTexts(
          saved,
          step.files.map(({ path, theirs }) => [path, theirs]),
        ),
        texts: withTexts(
          texts,
          step.files.map(({ path, chosen }) => [path, chosen]),
        ),
        placed: placed + 1,
        restored: null,
      };
  }
}

/**
 * A newer version underneath. Where someone else changed what is unsaved here, the old parent is kept, so that the
 * server sees the collision when this is saved; all other files are simply the newer ones.
 */
function onTopOf(workspace: Workspace, commit: string | null, files: Texts): Workspace {
  if (commit === workspace.commit && sameTexts(files, workspace.saved)) return workspace;
  const own = unsaved(workspace);
  const unmoved = own.every(({ path, base }) => (files.get(path) ?? null) === base);
  const texts = withTexts(
    files,
    own.map(({ path, text }) => [path, text]),
  );
  const placed = workspace.placed + 1;
  if (unmoved) return { ...workspace, commit, saved: files, texts, placed };
  const bases = own.map(({ path, base }): [string, string | null] => [path, base]);
  return { ...workspace, saved: withTexts(files, bases), texts, placed };
}

function withTexts(texts: Texts, changes: readonly (readonly [path: string, text: string | null])[]): Texts {
  const result = new Map(texts);
  for (const [path, text] of changes) {
    if (text === null) result.delete(path);
    else result.set(path, text);
  }
  return new Map([...result].sort(([a], [b]) => (a < b ? -1 : 1)));
}

function sameTexts(a: Texts, b: Texts): boolean {
  return a.size === b.size && [...a].every(([path, text]) => b.get(path) === text);
}
