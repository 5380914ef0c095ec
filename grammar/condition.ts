import type { TokenType } from './chevrotain'
import { editsFix, replaceFix } from './edits'
import { type Mark, markSpan } from './lines'
import type { Notes } from './notes'
import type { Phrase } from './phrase'
import * as T from './tokens'
import type { Comparison } from './tree'

// What conditions over words and exact conditions have in common.

const COMPARISONS = new Map<TokenType, Comparison>([
  [T.Equal, '='],
  [T.NotEqual, '!='],
  [T.Less, '<'],
  [T.LessEqual, '<='],
  [T.Greater, '>'],
  [T.GreaterEqual, '>='],
])

/** Comparisons of other languages, and ours. */
const WRONG_COMPARISONS = new Map<TokenType, Comparison>([
  [T.DoubleEqual, '='],
  [T.WrongNotEqual, '!='],
  [T.SlashEqual, '!='],
  [T.WrongLessEqual, '<='],
  [T.WrongGreaterEqual, '>='],
])

/** Takes the comparison an operator stands for; says so where another notation's sign stands in its place. */
export function readComparison(mark: Mark, notes: Notes): Comparison | undefined {
  const right = COMPARISONS.get(mark.tokenType)
  if (right) return right
  const meant = WRONG_COMPARISONS.get(mark.tokenType)
  if (meant)
    notes.correct(
      markSpan(mark),
      `\`${mark.image}\` is no comparison of the notation.`,
      `Write \`${meant}\`.`,
      replaceFix(`Write \`${meant}\``, markSpan(mark), meant),
    )
  return meant
}

export function isComparison(mark: Mark): boolean {
  return COMPARISONS.has(mark.tokenType) || WRONG_COMPARISONS.has(mark.tokenType)
}

/** `and` or `or`; says so where another notation's sign stands in its place. */
export function readJunction(mark: Mark, notes: Notes): 'and' | 'or' | undefined {
  if (mark.tokenType === T.And) return 'and'
  if (mark.tokenType === T.Or) return 'or'
  const meant = mark.tokenType === T.AndAnd ? 'and' : mark.tokenType === T.OrOr ? 'or' : undefined
  if (meant)
    notes.correct(
      markSpan(mark),
      `\`${mark.image}\` does not join conditions here.`,
      `Write \`${meant}\`.`,
      replaceFix(`Write \`${meant}\``, markSpan(mark), meant),
    )
  return meant
}

/** Whether a phrase can only be a condition. */
export function isConditional(phrase: Phrase): boolean {
  if (phrase.kind === 'binary')
    return isComparison(phrase.mark) || [T.And, T.Or, T.AndAnd, T.OrOr].includes(phrase.mark.tokenType)
  if (phrase.kind === 'prefix') return phrase.mark.tokenType === T.Not || phrase.mark.tokenType === T.Bang
  if (phrase.kind === 'quantified') return phrase.mark.tokenType !== T.Sum
  return phrase.kind === 'call' && ['sorted', 'same'].includes(phrase.mark.image)
}

export function correctBang(phrase: Phrase & { kind: 'prefix' }, notes: Notes): void {
  const span = markSpan(phrase.mark)
  notes.correct(span, '`!` does not turn a condition round here.', 'Write `not`.', {
    label: 'Write `not`',
    edits: [{ start: span.start, end: span.end, text: 'not ' }],
  })
}

/** Says that `a < b < c` is two comparisons. */
export function refuseChain(phrase: Phrase & { kind: 'binary' }, notes: Notes): boolean {
  const { left } = phrase
  if (
    left.kind === 'binary' &&
    left.mark.tokenType === T.WrongGreaterEqual &&
    refuseImplication(phrase, left, notes)
  )
    return true
  if (left.kind !== 'binary' || !isComparison(left.mark) || left.span.end !== left.right.span.end) return false
  const middle = notes.read(left.right.span)
  notes.refuse(
    phrase.span,
    'A comparison has two sides.',
    `Write two and join them: \`${notes.read(left.span)} and ${middle} ${phrase.mark.image} ${notes.read(phrase.right.span)}\`.`,
    editsFix('Write two comparisons', [{ start: left.span.end, end: left.span.end, text: ` and ${middle}` }]),
  )
  return true
}

/** Says that `A => B`, which reads as `(A => b) = c`, is written in other words. */
function refuseImplication(
  phrase: Phrase & { kind: 'binary' },
  left: Phrase & { kind: 'binary' },
  notes: Notes,
): boolean {
  if (left.left.kind !== 'binary' || !isComparison(left.left.mark)) return false
  const after = notes.text.slice(left.right.span.start, phrase.span.end)
  const text = `not ${notes.read(left.left.span)} or ${after}`
  notes.refuse(
    markSpan(left.mark),
    '`=>` joins no conditions.',
    `Write \`${text}\`.`,
    replaceFix(`Write \`${text}\``, phrase.span, text),
  )
  return true
}
