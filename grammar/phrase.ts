import type { TokenType } from './chevrotain'
import { type Mark, markSpan } from './lines'
import { joinSpans, type Span } from './span'
import * as T from './tokens'

/**
 * An expression or condition as it stands, before anything is known of whether it is word code or exact: the parser
 * takes whatever has the shape, and the reading of it as one or the other says what does not belong.
 */
export type Phrase =
  | { readonly kind: 'number'; readonly mark: Mark; readonly span: Span }
  | { readonly kind: 'name'; readonly mark: Mark; readonly span: Span }
  /** `base[i]`, `base(args)[i]` and, wrongly, `base[i][j]`. */
  | {
      readonly kind: 'element'
      readonly base: Phrase
      readonly index: Phrase
      readonly span: Span
    }
  | { readonly kind: 'indirect'; readonly address: Phrase; readonly span: Span }
  | { readonly kind: 'call'; readonly mark: Mark; readonly arguments: readonly Phrase[]; readonly span: Span }
  | {
      readonly kind: 'binary'
      readonly mark: Mark
      readonly left: Phrase
      readonly right: Phrase
      readonly span: Span
    }
  | { readonly kind: 'prefix'; readonly mark: Mark; readonly operand: Phrase; readonly span: Span }
  /** `⌈x⌉` and `⌊x⌋`. */
  | { readonly kind: 'rounded'; readonly mark: Mark; readonly operand: Phrase; readonly span: Span }
  | {
      readonly kind: 'quantified'
      readonly mark: Mark
      readonly index: Mark
      readonly from: Phrase
      readonly to: Phrase
      readonly body: Phrase
      readonly span: Span
    }

/** How tightly operators bind, loosest first; one table for word code and exact expressions. */
export const LEVEL = {
  or: 1,
  and: 2,
  not: 3,
  compare: 4,
  bar: 5,
  xor: 6,
  ampersand: 7,
  shift: 8,
  plus: 9,
  times: 10,
  sign: 11,
  power: 12,
} as const

const INFIX_LEVELS = new Map<TokenType, number>([
  [T.Or, LEVEL.or],
  [T.OrOr, LEVEL.or],
  [T.And, LEVEL.and],
  [T.AndAnd, LEVEL.and],
  [T.Bar, LEVEL.bar],
  [T.Xor, LEVEL.xor],
  [T.Ampersand, LEVEL.ampersand],
  [T.ShiftLeft, LEVEL.shift],
  [T.ShiftRight, LEVEL.shift],
  [T.TripleShift, LEVEL.shift],
  [T.Plus, LEVEL.plus],
  [T.Minus, LEVEL.plus],
  [T.Times, LEVEL.times],
  [T.Slash, LEVEL.times],
  [T.SlashSlash, LEVEL.times],
  [T.Percent, LEVEL.times],
  [T.Mod, LEVEL.times],
  [T.Caret, LEVEL.power],
  [T.StarStar, LEVEL.power],
])

function infixLevel(mark: Mark): number {
  return INFIX_LEVELS.get(mark.tokenType) ?? LEVEL.compare
}

function prefixLevel(mark: Mark): number {
  return mark.tokenType === T.Not || mark.tokenType === T.Bang ? LEVEL.not : LEVEL.sign
}

/** What the parser collects of an expression: operators and operands in the order of the text. */
export type Part = Phrase | Mark

/** Puts a chain of operands and operators into a tree by what binds tightest. Equals go to the left, `^` to the right. */
export function arrangeParts(parts: readonly Part[]): Phrase {
  return parts.length === 1 ? (parts[0] as Phrase) : readChain({ parts, at: 0 }, 0)
}

interface Cursor {
  readonly parts: readonly Part[]
  at: number
}

function readOperand(cursor: Cursor): Phrase {
  const part = cursor.parts[cursor.at++]!
  if ('kind' in part) return part
  const operand = readChain(cursor, prefixLevel(part) + 1)
  return { kind: 'prefix', mark: part, operand, span: joinSpans(markSpan(part), operand.span) }
}

/** Reads on while operators bind at least as tightly as `least`. */
function readChain(cursor: Cursor, least: number): Phrase {
  let left = readOperand(cursor)
  while (cursor.at < cursor.parts.length) {
    const mark = cursor.parts[cursor.at] as Mark
    const level = infixLevel(mark)
    if (level < least) break
    cursor.at++
    const right = readChain(cursor, level === LEVEL.power ? level : level + 1)
    left = { kind: 'binary', mark, left, right, span: joinSpans(left.span, right.span) }
  }
  return left
}
