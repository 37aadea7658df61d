import type { DraftNode, Indices, Instance } from "./draft.ts";
import type { SourceFile } from "./files.ts";
import type { OwnVariable } from "./law-scope.ts";
import type { Typed } from "./typed.ts";

/** Where an expression stands: what its names can mean. */
export interface Scope {
  readonly file: SourceFile;
  /** null at file level. */
  readonly instance: Instance | null;
  readonly indices: Indices;
  /** In a law: the element, whose own variables come first and are no signals from outside. */
  readonly self: DraftNode | null;
  /** In a law: which variables of its own the element has used so far. */
  readonly used: OwnVariable[] | null;
  /** In the body of a function: what it was called with. */
  readonly bound: ReadonlyMap<string, Typed> | null;
  /** Params, bounds, starts: nothing that changes with time. */
  readonly fixed: boolean;
  /** Laws, lets, tracks and outputs: a unit there could have been meant as a value's name. */
  readonly warnsOfUnits: boolean;
}

/** Scope of a statement of a system, or of a file where there is no instance. */
export function plainScope(
  file: SourceFile,
  instance: Instance | null,
  indices: Indices,
  fixed: boolean,
): Scope {
  return { file, instance, indices, fixed, warnsOfUnits: !fixed, self: null, used: null, bound: null };
}
