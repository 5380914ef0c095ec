import type { Diagnostic } from './diagnostic'
import { FOREIGN_SLIPS } from './foreign'
import { type Line, lineSpan, type Mark, markSpan } from './lines'
import { SLIPS } from './slips'
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

/** Says what is wrong with a line that could not be parsed: a known slip, or what was found and what was expected. */
export function explainBreak(broken: Break): Diagnostic {
  const place = breakSpan(broken)
  for (const recognise of [...FOREIGN_SLIPS, ...SLIPS]) {
    const slip = recognise(broken)
    if (slip) return { severity: 'error', span: place, ...slip }
  }
  const { tokens, at, expected, form } = broken
  const found = tokens[at]
  const previous = tokens[at - 1]
  const message = found
    ? expected === LINE_END
      ? `Found \`${found.image}\`${previous ? ` after \`${previous.image}\`` : ''}, where the line should end.`
      : `Found \`${found.image}\` where ${expected} was expected.`
    : `The line ends where ${expected} was expected.`
  return { severity: 'error', span: place, message, remedy: `Write ${form}.` }
}

function breakSpan({ line, tokens, at }: Break): Span {
  const found = tokens[at] ?? tokens[tokens.length - 1]
  return found ? markSpan(found) : lineSpan(line)
}
