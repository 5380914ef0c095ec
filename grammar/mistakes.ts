import type { Diagnostic } from './diagnostic'
import { FOREIGN_SLIPS } from './foreign'
import { lineSpan, markSpan } from './lines'
import { type Break, LINE_END } from './slip'
import { SLIPS } from './slips'
import type { Span } from './span'

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
