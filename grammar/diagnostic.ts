import type { Span } from './span'

/** A replacement of source text that carries out a remedy. */
export interface Edit {
  readonly start: number
  readonly end: number
  readonly text: string
}

/**
 * What a user's text got wrong: the place, what is wrong there, and what to do about it.
 * `fix`, where there is one, is the remedy as edits that a page can apply at a click; `label` names its outcome.
 * `path` lists further places that belong to the message (the way to a read before a write, say), in order.
 */
export interface Diagnostic {
  readonly severity: 'error' | 'warning'
  readonly span: Span
  readonly message: string
  readonly remedy: string
  readonly fix?: { readonly label: string; readonly edits: readonly Edit[] }
  readonly path?: readonly { readonly span: Span; readonly note: string }[]
}
