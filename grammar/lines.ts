import { type IToken, Lexer, type TokenType } from './chevrotain'
import type { Span } from './span'
import * as T from './tokens'
import type { Comment } from './tree'

/** A token with its place in the text. `end` is exclusive; line and column count from 1. */
export interface Mark extends IToken {
  startLine: number
  startColumn: number
}

/** A run of characters that the notation has no use for. */
export interface Stray {
  readonly text: string
  readonly span: Span
}

/** One instruction's worth of text: a source line, or several where the first ones go on. */
export interface Line {
  readonly tokens: readonly Mark[]
  readonly strays: readonly Stray[]
  /** Of its first token, from 1. */
  readonly line: number
  readonly column: number
  /** Where its first token starts and its last one ends. */
  readonly start: number
  readonly end: number
}

/** A text cut into lines, with what stands between them. */
export interface Reading {
  readonly text: string
  readonly lines: readonly Line[]
  readonly comments: readonly (Comment & { readonly start: number; readonly end: number })[]
  /** Source lines with nothing on them. */
  readonly blanks: readonly number[]
}

const lexer = new Lexer([...T.VOCABULARY], { positionTracking: 'onlyOffset', ensureOptimizations: true })

export function markSpan(mark: Mark): Span {
  const start = mark.startOffset
  return { start, end: start + mark.image.length, line: mark.startLine, column: mark.startColumn }
}

/** The span of a whole line. */
export function lineSpan(line: Line): Span {
  return { start: line.start, end: line.end, line: line.line, column: line.column }
}

/** The span of a line from its token number `from` on. */
export function restSpan(line: Line, from: number): Span {
  const first = line.tokens[from]
  return first ? { ...markSpan(first), end: line.end } : lineSpan(line)
}

/** Words that begin an instruction or a form: where a source line starts with one, nothing before it goes on. */
const STARTERS: ReadonlySet<TokenType> = new Set([
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
/** Words with which other languages close a form. */
export const FOREIGN_ENDS = /^(?:end_?(?:if|while|for|do|loop|procedure|proc|function|routine|repeat)|fi|od|wend)$/i
const OPENING: ReadonlySet<TokenType> = new Set([T.LeftParen, T.LeftSquare, T.LeftCeil, T.LeftFloor])
const CLOSING: ReadonlySet<TokenType> = new Set([T.RightParen, T.RightSquare, T.RightCeil, T.RightFloor])
/** Besides infix operators: what a line may end in and go on. */
const LINKS: ReadonlySet<TokenType> = new Set([T.Comma, T.Gives, T.Range, T.Not, T.Tilde])

/** Words that stand between operands, though they can be names as well. */
const BETWEEN: ReadonlySet<TokenType> = new Set([T.In, T.From, T.To, T.Downto, T.By, T.Then, T.Do])

function endsOperand(type: TokenType): boolean {
  return type === T.Numeral || type === T.RightParen || type === T.RightSquare || T.isOf(type, T.Name)
}

function beginsOperand(type: TokenType): boolean {
  return type === T.Numeral || (T.isOf(type, T.Name) && !BETWEEN.has(type))
}

/** Whether a line of tokens, ending as it does with `open` brackets open, goes on in a line that begins with `next`. */
function goesOn(tokens: readonly Mark[], open: number, next: TokenType): boolean {
  const last = tokens[tokens.length - 1]
  if (!last) return open > 0
  const type = last.tokenType
  // Nothing joins two operands: the bracket has been forgotten.
  if (open > 0) return !(endsOperand(type) && beginsOperand(next))
  if (LINKS.has(type) || T.isOf(type, T.Infix) || T.isOf(type, T.Assign)) return true
  return type === T.Colon && tokens.some(token => T.isOf(token.tokenType, T.Quantifier)) && tokens.length > 2
}

/** Whether the source line at `from` can only be a new instruction, however the line before it ends. */
function startsAnew(tokens: readonly Mark[], from: number): boolean {
  const first = tokens[from]!.tokenType
  if (STARTERS.has(first)) return true
  const second = tokens[from + 1]?.tokenType
  if (first === T.Name && (!second || second === T.Newline) && FOREIGN_ENDS.test(tokens[from]!.image)) return true
  if (second === T.Colon && T.isOf(first, T.Name)) return true
  if (second && T.DECLARATION_WORDS.has(first)) {
    const condition = first === T.Need || first === T.Check
    if (T.isOf(second, T.Name) || (condition && (second === T.Not || second === T.Numeral))) return true
  }
  for (let at = from; at < tokens.length; at++) {
    const type = tokens[at]!.tokenType
    if (type === T.Newline) return false
    if (type === T.Arrow) return true
  }
  return false
}

/**
 * Cuts a text into lines. A line that ends in a comma or an infix operator, or inside open brackets, goes on in the
 * next, unless the next can only be a new instruction.
 */
export function readLines(text: string): Reading {
  const lexed = lexer.tokenize(text)
  const tokens = lexed.tokens as Mark[]
  const strays = lexed.errors
  const lines: Line[] = []
  const starts = [0]
  /** By source line, from 0: whether anything but a comment stands on it. */
  const filled: boolean[] = [false]

  let current: Mark[] = []
  let open = 0
  let stray = 0
  // Strays of the line being read.
  let found: Stray[] = []
  let line = 1
  let lineStart = 0

  const takeStrays = (before: number): void => {
    while (stray < strays.length && strays[stray]!.offset < before) {
      const { offset, length } = strays[stray]!
      const span = { start: offset, end: offset + length, line, column: offset - lineStart + 1 }
      found.push({ text: text.slice(offset, offset + length), span })
      filled[line - 1] = true
      stray++
    }
  }
  const close = (): void => {
    const first = current[0]
    const last = current[current.length - 1]
    const firstStray = found[0]?.span
    const lastStray = found[found.length - 1]?.span
    const opening = first ? markSpan(first) : firstStray
    if (opening) {
      const at = firstStray && firstStray.start < opening.start ? firstStray : opening
      const end = Math.max(last ? markSpan(last).end : 0, lastStray?.end ?? 0)
      lines.push({ tokens: current, strays: found, line: at.line, column: at.column, start: at.start, end })
    }
    current = []
    found = []
    open = 0
  }

  for (let at = 0; at < tokens.length; at++) {
    const token = tokens[at]!
    takeStrays(token.startOffset)
    if (token.tokenType === T.Newline) {
      const next = token.startOffset + token.image.length
      if (current.length + found.length > 0) {
        // Blank lines and comments in between do not end a line that goes on.
        let ahead = at + 1
        while (tokens[ahead]?.tokenType === T.Newline) ahead++
        const following = tokens[ahead]
        if (!following || !goesOn(current, open, following.tokenType) || startsAnew(tokens, ahead)) close()
      }
      line++
      lineStart = next
      starts.push(next)
      filled.push(false)
      continue
    }
    filled[line - 1] = true
    token.startLine = line
    token.startColumn = token.startOffset - lineStart + 1
    if (OPENING.has(token.tokenType)) open++
    else if (CLOSING.has(token.tokenType)) open = Math.max(0, open - 1)
    current.push(token)
  }
  takeStrays(text.length + 1)
  close()

  const comments: Reading['comments'][number][] = []
  const commented = new Set<number>()
  let place = 0
  for (const { startOffset, image } of lexed.groups.comments ?? []) {
    while (place + 1 < starts.length && starts[place + 1]! <= startOffset) place++
    const body = image.slice(1).trimEnd()
    comments.push({
      text: body.startsWith(' ') ? body.slice(1) : body,
      line: place + 1,
      own: !filled[place],
      start: startOffset,
      end: startOffset + image.length,
    })
    commented.add(place + 1)
  }
  const blanks: number[] = []
  for (let at = 0; at < filled.length; at++) if (!filled[at] && !commented.has(at + 1)) blanks.push(at + 1)
  return { text, lines, comments, blanks }
}
