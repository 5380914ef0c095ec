import type { Diagnostic } from './diagnostic'
import type { Line, Mark } from './lines'
import type { Span } from './span'

/** A line that the parser could not take: where it stopped, and what it would have taken there. */
export interface Break {
  readonly text: string
  readonly line: Line
  /** Its tokens from the first that was parsed on. */
  readonly tokens: readonly Mark[]
  /** Place of the token that does not fit; `tokens.length` where the line ends too early. */
  readonly at: number
  /** In plain words, such as "`]`" or "a name". */
  readonly expected: string
  /** How a line of this kind is written. */
  readonly form: string
}

/** What `expected` says where nothing more may come. */
export const LINE_END = 'the end of the line'

/** A known slip: what is wrong and what to do about it; `span` where it is not the token that does not fit. */
export type Slip = Pick<Diagnostic, 'message' | 'remedy' | 'fix'> & { readonly span?: Span }

/** Tells a known slip in a broken line, or undefined. */
export type Recogniser = (broken: Break) => Slip | undefined
