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
    for (let at = 0; at < line.tokens.length; at++) {
      const mark = line.tokens[at]!
      const start = mark.startOffset
      for (; (asides[aside]?.start ?? start) < start; aside++) tokens.push(asides[aside]!)
      const kind = kindOf(line, at, labels, declares)
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
/** Words that stand between two operands in their place, and are names where an operand stands. */
const LINKING: ReadonlySet<unknown> = new Set([T.From, T.To, T.Downto, T.By, T.Then, T.Do, T.In])

/** What a token is in its place; undefined for brackets and commas. */
function kindOf(line: Line, at: number, labels: number, declares: boolean): TokenKind | undefined {
  const { tokens } = line
  const mark = tokens[at]!
  const type = mark.tokenType
  if (at < labels) return at % 2 === 0 ? 'label' : undefined
  if (at === 0 && declares) return 'declaration'
  if (T.isOf(type, T.Name)) return nameKind(tokens, at, labels, declares)
  if (WORDS.has(type)) return 'keyword'
  if (KINDS.has(type)) return KINDS.get(type)
  return T.isOf(type, T.Infix) || T.isOf(type, T.Assign) ? 'operator' : undefined
}

function nameKind(tokens: readonly Mark[], at: number, labels: number, declares: boolean): TokenKind {
  const type = tokens[at]!.tokenType
  const before = tokens[at - 1]
  const next = tokens[at + 1]
  const head = tokens[labels]?.tokenType
  if (before?.tokenType === T.Goto) return 'label'
  if (LINKING.has(type) && before && endsOperand(before) && (declares || head !== tokens[at]!.tokenType)) {
    const place =
      type === T.In
        ? declares || head === T.Assert || follows(tokens, at)
        : type === T.Then
          ? head === T.If || head === T.Else
          : type === T.Do
            ? head === T.While || head === T.For
            : head === T.For
    if (place) return 'keyword'
  }
  if (T.isOf(type, T.Quantifier) && next && tokens[at + 2]?.tokenType === T.In && T.isOf(next.tokenType, T.Name))
    return 'function'
  if (declares && at === labels + 1 && tokens[0]!.tokenType === T.Claim) return 'keyword'
  if (declares && type === T.Distinct && at === tokens.length - 1 && tokens[0]!.tokenType === T.Feed)
    return 'keyword'
  return next?.tokenType === T.LeftParen ? 'function' : 'name'
}

/** Whether the `in` at `at` belongs to a quantifier: `sum i in`. */
function follows(tokens: readonly Mark[], at: number): boolean {
  const word = tokens[at - 2]
  return word !== undefined && T.isOf(word.tokenType, T.Quantifier)
}

function endsOperand(mark: Mark): boolean {
  const type = mark.tokenType
  return T.isOf(type, T.Name) || type === T.Numeral || type === T.RightParen || type === T.RightSquare
}
