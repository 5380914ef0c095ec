import type { TokenType } from './chevrotain'
import { FOREIGN_ENDS, type Line, type Mark } from './lines'
import * as T from './tokens'

/** The forms that reach from an opening line to a closing one. */
export type FormKind = 'routine' | 'procedure' | 'if' | 'while' | 'for' | 'repeat'

/** What a line does to the forms around it, told by its first words. */
export type Role =
  | { readonly kind: 'open'; readonly form: FormKind }
  /** `else`, `else if`. */
  | { readonly kind: 'middle' }
  /** `end`, or `until` (of a repeat). */
  | { readonly kind: 'close'; readonly until: boolean }
  | { readonly kind: 'begin' }
  | { readonly kind: 'declaration' }
  | { readonly kind: 'instruction' }

/** Words with which other languages say `else if`. */
const MIDDLES = /^(?:elif|elsif|elseif)$/i

const FORMS = new Map<TokenType, FormKind>([
  [T.Routine, 'routine'],
  [T.Procedure, 'procedure'],
  [T.While, 'while'],
  [T.For, 'for'],
  [T.Repeat, 'repeat'],
])
/** After a condition these show that the line is an instruction, no block. */
const ACTIONS: ReadonlySet<TokenType> = new Set([T.Goto, T.Halt, T.Return, T.ColonEqual, T.PlusPlus, T.MinusMinus])

/** How many tokens of a line are labels: two each, a name and a colon. */
export function labelTokens(line: Line): number {
  let at = 0
  while (at + 1 < line.tokens.length && isName(line.tokens[at]!) && line.tokens[at + 1]!.tokenType === T.Colon)
    at += 2
  return at
}

export function isName(mark: Mark): boolean {
  return T.isOf(mark.tokenType, T.Name)
}

/** Whether a line says that a declaration stands in it: its first word, and no sign of an assignment to that name. */
export function isDeclaration(tokens: readonly Mark[]): boolean {
  const [first, second] = tokens
  if (!first || !T.DECLARATION_WORDS.has(first.tokenType)) return false
  if (!second) return true
  const type = second.tokenType
  if (T.isOf(type, T.Assign) || type === T.Comma || type === T.PlusPlus || type === T.MinusMinus) return false
  // `work[i] <- x` stores; `check [p] = 1` is a slip of a check.
  return type !== T.LeftSquare || !tokens.some(token => token.tokenType === T.Arrow)
}

/** The role of a line whose labels are taken off. */
export function roleOf(line: Line): Role {
  const at = labelTokens(line)
  const first = line.tokens[at]
  if (!first) return { kind: 'instruction' }
  const type = first.tokenType
  const second = line.tokens[at + 1]?.tokenType
  // `end <- 5`: a variable that cannot be called so, no form.
  if (second && type !== T.Until && T.isOf(second, T.Assign) && !isName(first)) return { kind: 'instruction' }
  if (type === T.If) return isOneLine(line, at) ? { kind: 'instruction' } : { kind: 'open', form: 'if' }
  const form = FORMS.get(type)
  if (form) return { kind: 'open', form }
  if (type === T.Else) return { kind: 'middle' }
  if (type === T.End) return { kind: 'close', until: false }
  if (type === T.Until) return { kind: 'close', until: true }
  if (type === T.Begin) return { kind: 'begin' }
  if (isDeclaration(at === 0 ? line.tokens : line.tokens.slice(at))) return { kind: 'declaration' }
  const alone = line.tokens.length === at + 1
  if (type === T.RightBrace) {
    if (line.tokens[at + 1]?.tokenType === T.Else) return { kind: 'middle' }
    if (alone) return { kind: 'close', until: false }
  }
  if (type === T.Name && alone && FOREIGN_ENDS.test(first.image)) return { kind: 'close', until: false }
  if (type === T.Name && !alone && MIDDLES.test(first.image)) return { kind: 'middle' }
  return { kind: 'instruction' }
}

/** Whether an `if` has what it does on its own line. */
function isOneLine(line: Line, at: number): boolean {
  for (let next = at + 1; next < line.tokens.length; next++) {
    const { tokenType } = line.tokens[next]!
    if (ACTIONS.has(tokenType)) return true
    // `x<-1` is a slip of `x < -1`, an arrow elsewhere an assignment.
    if (tokenType === T.Arrow && line.tokens[next + 1]?.tokenType !== T.Numeral) return true
    if (tokenType === T.Arrow && line.tokens.slice(at, next).some(token => isComparing(token.tokenType)))
      return true
  }
  return false
}

const COMPARING: ReadonlySet<TokenType> = new Set([
  T.Equal,
  T.DoubleEqual,
  T.Less,
  T.LessEqual,
  T.Greater,
  T.GreaterEqual,
  T.NotEqual,
  T.WrongNotEqual,
])

function isComparing(type: TokenType): boolean {
  return COMPARING.has(type)
}
