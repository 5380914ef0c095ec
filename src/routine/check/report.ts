import type { Diagnostic } from '../../../grammar/diagnostic'
import { lineEnd, lineStart } from '../../../grammar/edits'
import type { Span } from '../../../grammar/span'

export type Fix = NonNullable<Diagnostic['fix']>

export interface Remark {
  readonly span: Span
  readonly message: string
  readonly remedy: string
  readonly fix?: Fix | undefined
  /** Further places that belong to the message. */
  readonly path?: Diagnostic['path']
  /** Remarks of one cause are made once, at the first place. */
  readonly cause?: string
}

/** The most errors that one routine is given; past it a last one says that there are more. */
const MOST_ERRORS = 200

/** What is said of one routine while it is checked. */
export class Report {
  private readonly errors: Diagnostic[] = []
  private readonly warnings: Diagnostic[] = []
  private readonly causes = new Set<string>()
  private readonly lostNames: ReadonlySet<string>

  /** `broken` are the places of errors of the parser: what stood on their lines is not known. */
  constructor(
    readonly text: string,
    private readonly broken: readonly Span[],
  ) {
    this.lostNames = new Set(broken.flatMap(span => this.namesOnLine(span)))
  }

  error(remark: Remark): void {
    this.add('error', this.errors, remark)
  }

  /** For what is odd and yet runs. Left unsaid where there are errors: it mostly follows from them. */
  warn(remark: Remark): void {
    this.add('warning', this.warnings, remark)
  }

  /** Whether a name stands on a line that the parser could not read, and may well be set or declared there. */
  mayBeLost(name: string): boolean {
    return this.lostNames.has(name)
  }

  get hasErrors(): boolean {
    return this.errors.length > 0
  }

  /** Everything said, in the order of the text. */
  diagnostics(): Diagnostic[] {
    const all = this.hasErrors || this.broken.length > 0 ? this.errors : [...this.errors, ...this.warnings]
    const sorted = [...all].sort((a, b) => a.span.start - b.span.start)
    const dropped = sorted.length - MOST_ERRORS
    if (dropped <= 0) return sorted
    const { severity, span } = sorted[MOST_ERRORS]!
    const message = `${dropped} more like these are not listed.`
    return [...sorted.slice(0, MOST_ERRORS), { severity, span, message, remedy: 'Correct those above first.' }]
  }

  private add(severity: Diagnostic['severity'], to: Diagnostic[], remark: Remark): void {
    const { span, message, remedy, fix, path, cause } = remark
    if (cause !== undefined && this.causes.has(cause)) return
    if (cause !== undefined) this.causes.add(cause)
    to.push({ severity, span, message, remedy, ...(fix && { fix }), ...(path && { path }) })
  }

  private namesOnLine(span: Span): string[] {
    return this.text.slice(lineStart(span), lineEnd(this.text, span.end)).match(/[\p{L}_][\p{L}\p{N}_]*/gu) ?? []
  }
}

/** A fix that writes `text` in place of what stands under `span`. */
export function replaceWith(text: string, { start, end }: Span): Fix {
  return { label: `Write \`${text}\``, edits: [{ start, end, text }] }
}
