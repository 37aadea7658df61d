/** What one file may hold; beyond it there is the finding `too-large`, before anything can run out of room. */
export const LIMITS = {
  /** Bytes of a file, as UTF-8. */
  fileBytes: 2_000_000,
  /** Brackets within brackets, blocks within blocks, and operators that wait for their right side. */
  depth: 200,
  /** Operands of one expression. */
  terms: 20_000,
  /** Syntax findings told of one file; a text with more is hardly notation at all. */
  syntaxFindings: 500,
} as const;
