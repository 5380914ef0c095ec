import type { TokenType } from './chevrotain'
import { replaceFix } from './edits'
import { type Line, lineSpan, type Mark, type Stray } from './lines'
import { explainBreak } from './mistakes'
import type { Notes } from './notes'
import { type LineForm, LineParser } from './parser'
import type { Phrase } from './phrase'
import * as T from './tokens'

/** The deepest that brackets and quantifiers may stand inside each other on a line. */
export const MOST_BRACKETS = 100
/** The most operators of one expression. */
export const MOST_OPERATORS = 1000

type LineRule =
  | 'routineLine'
  | 'itemsLine'
  | 'letLine'
  | 'fixLine'
  | 'needLine'
  | 'checkLine'
  | 'feedLine'
  | 'claimLine'
  | 'procedureLine'
  | 'ifLine'
  | 'elseLine'
  | 'whileLine'
  | 'untilLine'
  | 'forLine'
  | 'beginLine'
  | 'endLine'
  | 'repeatLine'
  | 'haltLine'
  | 'gotoLine'
  | 'returnLine'
  | 'assertLine'
  | 'assignLine'

/** The rule for a line by its first word, and how such a line is written. */
const DECLARATION_RULES = new Map<TokenType, readonly [LineRule, string]>([
  [T.In, ['itemsLine', '`in a[n]` or `in x, y`']],
  [T.Out, ['itemsLine', '`out b[n]` or `out x, y`']],
  [T.Inout, ['itemsLine', '`inout a[n]` or `inout x`']],
  [T.Work, ['itemsLine', '`work c[E]`']],
  [T.Let, ['letLine', '`let k = E`']],
  [T.Fix, ['fixLine', '`fix m = E`, `fix t[E] = E, E, ...` or `fix t[i in F .. T] = E`']],
  [T.Need, ['needLine', '`need C`, one condition']],
  [T.Check, ['checkLine', '`check C`, one condition']],
  [
    T.Feed,
    ['feedLine', '`feed a[i] in F .. T`, `feed x in F .. T` or `feed a distinct`, each on a line of its own'],
  ],
  [T.Claim, ['claimLine', '`claim time <= E` or `claim space <= E`']],
])
const INSTRUCTION_RULES = new Map<TokenType, readonly [LineRule, string]>([
  [T.Routine, ['routineLine', '`routine NAME`; inputs and results are declared below it, with `in` and `out`']],
  [T.Procedure, ['procedureLine', '`procedure f(x, y) -> u, v`']],
  [T.If, ['ifLine', '`if C goto L`, or `if C` with instructions and `end` below']],
  [T.Else, ['elseLine', '`else` or `else if C`, and the instructions below']],
  [T.While, ['whileLine', '`while C`, and the instructions below']],
  [T.Until, ['untilLine', '`until C`']],
  [
    T.For,
    ['forLine', '`for i from E to F`, `for i from E downto F`, with `by S` after it where the step is not 1'],
  ],
  [T.Begin, ['beginLine', '`begin` alone on its line']],
  [T.End, ['endLine', '`end` alone on its line']],
  [T.Repeat, ['repeatLine', '`repeat` alone on its line, and `until C` below']],
  [T.Halt, ['haltLine', '`halt` alone on its line']],
  [T.Goto, ['gotoLine', '`goto L`']],
  [T.Return, ['returnLine', '`return` or `return e, f`']],
  [T.Assert, ['assertLine', '`assert C`, one condition']],
])
const ASSIGNMENT = [
  'assignLine',
  'an instruction, such as `x <- y + z`, `u, v <- f(x)`, `f(x)`, `goto L` or `if C goto L`',
] as const

/** Characters that look like a sign of the notation, and the sign. */
const LOOKALIKES: Readonly<Record<string, string>> = {
  '–': '-',
  '—': '-',
  '‐': '-',
  '‑': '-',
  '÷': '/',
  '∕': '/',
  '∙': '*',
  '•': '*',
  '∨': 'or',
  '⩵': '=',
  '＝': '=',
  '≈': '=',
  '≡': '=',
  '≪': '<<',
  '∶': ':',
  '，': ',',
  '（': '(',
  '）': ')',
  '⇐': '<-',
  '↚': '<-',
  '∞': '2^w - 1',
  '∑': 'sum',
  '∀': 'all',
  '∃': 'any',
  '∈': 'in',
  '²': '^2',
  '³': '^3',
  '\\': 'mod',
}

/** Reads the lines of one text, one at a time. */
export class LineReader {
  constructor(readonly notes: Notes) {}

  /** The tokens of `line` from `from` on as a declaration. Undefined where nothing can be made of it, which is said. */
  readDeclaration(line: Line, from: number): LineForm | undefined {
    const first = line.tokens[from]
    const [rule, form] = (first && DECLARATION_RULES.get(first.tokenType)) ?? ASSIGNMENT
    return this.parse(line, from, rule, form)
  }

  /** The tokens of `line` from `from` on as an instruction or the first or last line of a form. */
  readInstruction(line: Line, from: number): LineForm | undefined {
    const first = line.tokens[from]
    const [rule, form] = (first && INSTRUCTION_RULES.get(first.tokenType)) ?? ASSIGNMENT
    return this.parse(line, from, rule, form)
  }

  /** The whole of `line` as one phrase. */
  readPhrase(line: Line): Phrase | undefined {
    if (!this.admit(line)) return undefined
    const parser = sharedParser()
    parser.input = line.tokens as Mark[]
    parser.quantifiers = true
    const phrase = parser.phrase()
    return this.accepted(line, 0, 'one expression') ? phrase : undefined
  }

  private parse(line: Line, from: number, rule: LineRule, form: string): LineForm | undefined {
    if (!this.admit(line)) return undefined
    const parser = sharedParser()
    parser.input = (from === 0 ? line.tokens : line.tokens.slice(from)) as Mark[]
    parser.quantifiers = rule !== 'forLine'
    const read = parser[rule]()
    return this.accepted(line, from, form) ? read : undefined
  }

  /** Whether the parser took the line; else says why not. */
  private accepted(line: Line, from: number, form: string): boolean {
    const [error] = sharedParser().errors
    if (!error) return true
    const tokens = line.tokens.slice(from)
    const place = tokens.indexOf(error.token as Mark)
    const at = place < 0 ? tokens.length : place
    const expected = error.message || form
    const { span, message, remedy, fix } = explainBreak({ text: this.notes.text, line, tokens, at, expected, form })
    this.notes.refuse(span, message, remedy, fix)
    return false
  }

  /** Whether a line can be parsed at all: no strange characters, no depth that nobody means. */
  private admit(line: Line): boolean {
    if (line.strays.length > 0) {
      for (const stray of line.strays) this.refuseStray(stray)
      return false
    }
    let open = 0
    let deepest = 0
    let quantifiers = 0
    let operators = 0
    let most = 0
    for (const { tokenType } of line.tokens) {
      if (T.isOf(tokenType, T.Infix) || T.isOf(tokenType, T.Prefix)) {
        if (++operators > most) most = operators
      } else if (tokenType === T.Comma) operators = 0
      else if (isOpening(tokenType)) {
        if (++open > deepest) deepest = open
      } else if (isClosing(tokenType)) open--
      else if (T.isOf(tokenType, T.Quantifier)) quantifiers++
    }
    if (deepest + quantifiers > MOST_BRACKETS) {
      this.notes.refuse(
        lineSpan(line),
        `More than ${MOST_BRACKETS} brackets stand inside each other on this line.`,
        'Split the expression: give its parts names of their own.',
      )
      return false
    }
    if (most > MOST_OPERATORS) {
      this.notes.refuse(
        lineSpan(line),
        `An expression on this line has more than ${MOST_OPERATORS} operators.`,
        'Split the expression: give its parts names of their own.',
      )
      return false
    }
    return true
  }

  /** A point that stands neither between digits nor beside another one. */
  private refusePoint({ span }: Stray): void {
    const { text } = this.notes
    const [before, after] = [isDigit(text[span.start - 1]), isDigit(text[span.end])]
    this.notes.refuse(
      span,
      'A lone `.` means nothing.',
      after && !before
        ? 'Write a digit before the decimal point as well.'
        : before && !after
          ? 'Delete it, or write a digit after it.'
          : 'Write `..` for a range; delete it elsewhere.',
      after && !before
        ? replaceFix('Write `0.`', span, '0.')
        : before && !after
          ? replaceFix('Delete `.`', span, '')
          : undefined,
    )
  }

  private refuseStray(stray: Stray): void {
    if (stray.text === '.') {
      this.refusePoint(stray)
      return
    }
    const meant = Object.hasOwn(LOOKALIKES, stray.text) ? LOOKALIKES[stray.text] : undefined
    const code = stray.text.codePointAt(0)!
    const shown = code < 32 || code === 127 ? `the character with code ${code}` : `\`${stray.text}\``
    this.notes.refuse(
      stray.span,
      `The notation has no use for ${shown}.`,
      meant ? `Write \`${meant}\`.` : 'Delete it, or move it into a comment: a comment begins with `#`.',
      meant ? replaceFix(`Write \`${meant}\``, stray.span, meant) : undefined,
    )
  }
}

function isDigit(character: string | undefined): boolean {
  return character !== undefined && character >= '0' && character <= '9'
}

function isOpening(type: TokenType): boolean {
  return type === T.LeftParen || type === T.LeftSquare || type === T.LeftCeil || type === T.LeftFloor
}

function isClosing(type: TokenType): boolean {
  return type === T.RightParen || type === T.RightSquare || type === T.RightCeil || type === T.RightFloor
}

let parser: LineParser | undefined

/** The one parser: making it costs as much as parsing thousands of lines. */
function sharedParser(): LineParser {
  parser ??= new LineParser()
  return parser
}
