import type { TokenType } from './chevrotain'
import { type Line, type Mark, readLines } from './lines'
import { isDeclaration, labelTokens } from './roles'
import * as T from './tokens'

export type TokenKind =
  | 'keyword'
  /** The word that opens a declaration. */
  | 'declaration'
  | 'name'
  | 'number'
  | 'operator'
  /** A function of the notation, or a procedure, by the bracket that follows. */
  | 'function'
  | 'comment'
  /** A label where it stands, or where a jump names it. */
  | 'label'
  /** What the notation has no use for. */
  | 'unknown'

/** A stretch of source text and what it is, for colouring. Offsets count UTF-16 units from 0, `end` exclusive. */
export interface Token {
  readonly start: number
  readonly end: number
  readonly kind: TokenKind
}

/**
 * The tokens of a text, in order, brackets and blanks left out: the same tokens as the parser's, and what each is in
 * its place. Never throws, and takes broken text as it stands.
 */
export function tokenizeText(text: string): Token[] {
  const { lines, comments } = readLines(text)
  const tokens: Token[] = []
  const asides = readAsides(lines, comments)
  let aside = 0
  for (const line of lines) {
    const labels = labelTokens(line)
    const declares = isDeclaration(line.tokens)
    // Whether an operand stands before, so that an operator or a word that links two may follow.
    let after = false
    for (let at = 0; at < line.tokens.length; at++) {
      const mark = line.tokens[at]!
      const start = mark.startOffset
      for (; (asides[aside]?.start ?? start) < start; aside++) tokens.push(asides[aside]!)
      const kind = kindOf(line, at, labels, declares, after)
      after = kind === 'name' || kind === 'number' || CLOSING.has(mark.tokenType)
      if (kind) tokens.push({ start, end: start + mark.image.length, kind })
    }
  }
  for (; aside < asides.length; aside++) tokens.push(asides[aside]!)
  return tokens
}

/** What stands between the tokens of the notation: comments and strays, in order. */
function readAsides(lines: readonly Line[], comments: readonly { start: number; end: number }[]): Token[] {
  const asides: Token[] = comments.map(({ start, end }) => ({ start, end, kind: 'comment' }))
  const before = asides.length
  for (const { strays } of lines)
    for (const { span } of strays) asides.push({ start: span.start, end: span.end, kind: 'unknown' })
  return asides.length === before ? asides : asides.sort((a, b) => a.start - b.start)
}

const KINDS = new Map<unknown, TokenKind | undefined>([
  [T.Numeral, 'number'],
  [T.And, 'keyword'],
  [T.Or, 'keyword'],
  [T.Not, 'keyword'],
  [T.Mod, 'operator'],
  [T.Xor, 'operator'],
  [T.Arrow, 'operator'],
  [T.Gives, 'operator'],
  [T.Tilde, 'operator'],
  [T.Range, 'operator'],
  [T.PlusPlus, 'unknown'],
  [T.MinusMinus, 'unknown'],
  [T.CompoundAssign, 'unknown'],
  [T.ColonEqual, 'unknown'],
  [T.DoubleEqual, 'unknown'],
  [T.WrongNotEqual, 'unknown'],
  [T.SlashEqual, 'unknown'],
  [T.WrongLessEqual, 'unknown'],
  [T.WrongGreaterEqual, 'unknown'],
  [T.AndAnd, 'unknown'],
  [T.OrOr, 'unknown'],
  [T.StarStar, 'unknown'],
  [T.SlashSlash, 'unknown'],
  [T.Percent, 'unknown'],
  [T.TripleShift, 'unknown'],
  [T.Bang, 'unknown'],
  [T.LeftBrace, 'unknown'],
  [T.RightBrace, 'unknown'],
  [T.Semicolon, 'unknown'],
])
const WORDS: ReadonlySet<unknown> = new Set([
  T.Routine,
  T.Begin,
  T.End,
  T.If,
  T.Else,
  T.While,
  T.Repeat,
  T.Until,
  T.For,
  T.Goto,
  T.Halt,
  T.Return,
  T.Procedure,
  T.Assert,
])
const CLOSING: ReadonlySet<unknown> = new Set([T.RightParen, T.RightSquare, T.RightCeil, T.RightFloor])

/** What a token is in its place; undefined for brackets and commas. `after`: an operand stands before it. */
function kindOf(line: Line, at: number, labels: number, declares: boolean, after: boolean): TokenKind | undefined {
  const { tokens } = line
  const type = tokens[at]!.tokenType
  if (at < labels) return at % 2 === 0 ? 'label' : undefined
  if (at === 0 && declares) return 'declaration'
  if (T.isOf(type, T.Name)) {
    if (after && links(type, tokens[labels]!.tokenType)) return 'keyword'
    return nameKind(tokens, at, declares)
  }
  if (WORDS.has(type)) return 'keyword'
  if (KINDS.has(type)) return KINDS.get(type)
  return T.isOf(type, T.Infix) || T.isOf(type, T.Assign) ? 'operator' : undefined
}

/** Whether a word that can be a name links two operands on a line that begins with `head`. */
function links(type: TokenType, head: TokenType): boolean {
  switch (type) {
    case T.In:
      return true
    case T.From:
    case T.To:
    case T.Downto:
    case T.By:
      return head === T.For
    case T.Then:
      return head === T.If || head === T.Else
    case T.Do:
      return head === T.While || head === T.For
    case T.Distinct:
      return head === T.Feed
    default:
      return false
  }
}

function nameKind(tokens: readonly Mark[], at: number, declares: boolean): TokenKind {
  const next = tokens[at + 1]?.tokenType
  if (tokens[at - 1]?.tokenType === T.Goto) return 'label'
  if (declares && at === 1 && tokens[0]!.tokenType === T.Claim) return 'keyword'
  if (next === T.LeftParen) return 'function'
  const quantifies = T.isOf(tokens[at]!.tokenType, T.Quantifier) && tokens[at + 2]?.tokenType === T.In
  return quantifies && next && T.isOf(next, T.Name) ? 'function' : 'name'
}
