/** A stretch of source text. Offsets count UTF-16 units from 0, `end` exclusive; line and column count from 1. */
export interface Span {
  readonly start: number
  readonly end: number
  readonly line: number
  readonly column: number
}

/** The span from the start of `a` to the end of `b`. */
export function joinSpans(a: Span, b: Span): Span {
  return { start: a.start, end: Math.max(a.end, b.end), line: a.line, column: a.column }
}
