import type { Diagnostic } from './diagnostic'
import type { Fix } from './edits'
import type { Span } from './span'

/** The most diagnostics that one text is given; past it a last one says that there are more. */
const MOST_NOTES = 200

/** What is said of a text while it is read. */
export class Notes {
  private readonly kept: Diagnostic[] = []
  private dropped = 0
  private firstDropped: Span | undefined
  /** Set by `refuse`: the line at hand means nothing. The reader of lines clears it. */
  lost = false

  constructor(readonly text: string) {}

  /** Says what is wrong where the meaning is plain all the same: reading goes on as the remedy has it. */
  correct(span: Span, message: string, remedy: string, fix?: Fix): void {
    this.add({ severity: 'error', span, message, remedy, ...(fix && { fix }) })
  }

  /** Says what is wrong where nothing can be made of the line. */
  refuse(span: Span, message: string, remedy: string, fix?: Fix): void {
    this.lost = true
    this.correct(span, message, remedy, fix)
  }

  private add(diagnostic: Diagnostic): void {
    if (this.kept.length < MOST_NOTES) this.kept.push(diagnostic)
    else {
      this.firstDropped ??= diagnostic.span
      this.dropped++
    }
  }

  /** The source text under a span. */
  read(span: { readonly start: number; readonly end: number }): string {
    return this.text.slice(span.start, span.end)
  }

  /** Everything said, in the order of the text. */
  diagnostics(): Diagnostic[] {
    const sorted = [...this.kept].sort((a, b) => a.span.start - b.span.start)
    if (this.firstDropped)
      sorted.push({
        severity: 'error',
        span: this.firstDropped,
        message: `${this.dropped} more errors are not listed.`,
        remedy: 'Correct those above first.',
      })
    return sorted
  }
}
