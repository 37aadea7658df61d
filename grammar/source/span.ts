/**
 * A stretch of one file's text. Offsets count UTF-16 code units from 0; `end` is exclusive.
 * Stages pass spans along untouched; only `SourceText` turns them into lines and columns.
 */
export interface Span {
  readonly file: string;
  readonly start: number;
  readonly end: number;
}

/** A stretch inside a file that is known from the context, as the syntax tree keeps it. */
export interface Range {
  readonly start: number;
  readonly end: number;
}

/** 1-based, columns in UTF-16 code units: the form of every machine-readable output. */
export interface Position {
  readonly line: number;
  readonly column: number;
}
