import type { Diagnostic } from './diagnostic'
import { EXACT_NAMES } from './exact'
import { type Line, lineSpan, type Mark, markSpan } from './lines'
import { editsFix, replaceFix } from './notes'
import type { Span } from './span'
import * as T from './tokens'
import { WORD_NAMES } from './word'

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

type Slip = Pick<Diagnostic, 'message' | 'remedy' | 'fix'> & { readonly span?: Span }

/** Says what is wrong with a line that could not be parsed: a known slip, or what was found and what was expected. */
export function explainBreak(broken: Break): Diagnostic {
  const place = breakSpan(broken)
  for (const recognise of SLIPS) {
    const slip = recognise(broken)
    if (!slip) continue
    const { span, ...rest } = slip
    return { severity: 'error', span: span ?? place, ...rest }
  }
  const { tokens, at, expected, form } = broken
  const found = tokens[at]
  const previous = tokens[at - 1]
  const message = found
    ? expected === 'the end of the line'
      ? `Found \`${found.image}\`${previous ? ` after \`${previous.image}\`` : ''}, where the line should end.`
      : `Found \`${found.image}\` where ${expected} was expected.`
    : `The line ends where ${expected} was expected.`
  return { severity: 'error', span: place, message, remedy: `Write ${form}.` }
}

function breakSpan({ line, tokens, at }: Break): Span {
  const found = tokens[at]
  if (found) return markSpan(found)
  const last = tokens[tokens.length - 1]
  if (!last) return lineSpan(line)
  return markSpan(last)
}

/** An operand may end with it. */
function endsOperand(mark: Mark | undefined): boolean {
  if (!mark) return false
  const type = mark.tokenType
  return type === T.Numeral || T.isOf(type, T.Name) || type === T.RightParen || type === T.RightSquare
}

function beginsOperand(mark: Mark): boolean {
  const type = mark.tokenType
  return type === T.Numeral || T.isOf(type, T.Name) || type === T.LeftParen
}

function touches(left: Mark, right: Mark): boolean {
  return left.startOffset + left.image.length === right.startOffset
}

const ALL_WORDS: ReadonlySet<string> = new Set([...T.RESERVED_WORDS, ...T.PLACED_WORDS])
const RESERVED: ReadonlySet<string> = new Set(T.RESERVED_WORDS)

/** Words that begin an instruction elsewhere, and what to write here. */
const FOREIGN: Readonly<Record<string, readonly [remedy: string, text?: string]>> = {
  call: ['Leave `call` out: a call is `f(x)` or `u <- f(x)`.', ''],
  set: ['Write `x <- E`.'],
  stop: ['Write `halt`.', 'halt'],
  exit: ['Write `halt`.', 'halt'],
  quit: ['Write `halt`.', 'halt'],
  break: ['Put a label after the loop, and write `goto` with its name.'],
  continue: ['Put a label before the end of the loop, and write `goto` with its name.'],
  jump: ['Write `goto L`.', 'goto'],
  jmp: ['Write `goto L`.', 'goto'],
  br: ['Write `goto L`.', 'goto'],
  unless: ['Write `if not C`.', 'if not'],
  loop: ['Write `repeat` ... `until C`, or `while C` ... `end`.'],
  foreach: ['Write `for i from 0 to n - 1`.'],
  switch: ['Write `if C` ... `else if C` ... `end`.'],
  case: ['Write `if C` ... `else if C` ... `end`.'],
  function: ['Write `procedure f(x) -> u`.'],
  def: ['Write `procedure f(x) -> u`.'],
  proc: ['Write `procedure f(x) -> u`.', 'procedure'],
  sub: ['Write `procedure f(x) -> u`.'],
  algorithm: ['Write `routine NAME`.', 'routine'],
  program: ['Write `routine NAME`.', 'routine'],
  var: ['Leave it out: a variable needs no declaration, only a value before it is read.'],
  int: ['Leave it out: a variable needs no declaration, only a value before it is read.'],
  uint: ['Leave it out: a variable needs no declaration, only a value before it is read.'],
  unsigned: ['Leave it out: a variable needs no declaration, only a value before it is read.'],
  word: ['Leave it out: a variable needs no declaration, only a value before it is read.'],
  const: ['Write `fix m = E` among the declarations.'],
  array: ['Write `work a[n]` among the declarations.'],
  input: ['Write `in a[n]` among the declarations.', 'in'],
  output: ['Write `out b[n]` among the declarations.', 'out'],
  param: ['Write `let k = 8` among the declarations.', 'let'],
  require: ['Write `need C` among the declarations.', 'need'],
  requires: ['Write `need C` among the declarations.', 'need'],
  ensure: ['Write `check C` among the declarations.', 'check'],
  ensures: ['Write `check C` among the declarations.', 'check'],
  pass: ['Leave the line out: a form may be empty.'],
  nop: ['Leave the line out: a form may be empty.'],
  print: ['Name what is to be seen in `out`.'],
}

/** Known slips, the surest first. */
const SLIPS: readonly ((broken: Break) => Slip | undefined)[] = [
  function foreignComment({ tokens, line }) {
    const [first, second] = tokens
    if (!first) return undefined
    const type = first.tokenType
    const pair = second && touches(first, second)
    const sign =
      type === T.SlashSlash || type === T.Percent || (type === T.Semicolon && tokens.length > 1)
        ? first.image
        : pair && type === T.Minus && second.tokenType === T.Minus
          ? '--'
          : pair && type === T.Slash && second.tokenType === T.Times
            ? '/*'
            : type === T.MinusMinus
              ? '--'
              : undefined
    if (!sign) return undefined
    const place = { start: first.startOffset, end: first.startOffset + sign.length }
    return {
      span: { ...lineSpan(line), ...place },
      message: `\`${sign}\` opens no comment.`,
      remedy: 'Write `#`; a comment runs to the end of its line.',
      fix: replaceFix('Write `#`', place, '#'),
    }
  },

  function trailingComment({ tokens, at }) {
    const place = tokens.findIndex(token => token.tokenType === T.SlashSlash)
    if (place < 0 || at <= place) return undefined
    const span = markSpan(tokens[place]!)
    return {
      span,
      message: '`//` opens no comment.',
      remedy: 'Write `#`; a comment runs to the end of its line.',
      fix: replaceFix('Write `#`', span, '#'),
    }
  },

  function brace({ tokens, at }) {
    const found = tokens[at]
    if (found?.tokenType !== T.LeftBrace && found?.tokenType !== T.RightBrace) return undefined
    const opens = found.tokenType === T.LeftBrace
    const span = markSpan(found)
    const last = at === tokens.length - 1
    return {
      message: `Braces hold nothing together here: \`${found.image}\`.`,
      remedy: 'A form opens with its first line and closes with `end` on a line of its own.',
      ...(last && {
        fix: opens ? replaceFix('Delete the brace', span, '') : replaceFix('Write `end`', span, '\nend'),
      }),
    }
  },

  function semicolon({ tokens, at, line }) {
    const found = tokens[at]
    if (found?.tokenType !== T.Semicolon) return undefined
    const span = markSpan(found)
    const last = at === tokens.length - 1
    return {
      message: 'A line ends without `;`, and one line holds one instruction.',
      remedy: last ? 'Delete `;`.' : 'Put the next instruction on a line of its own.',
      fix: last
        ? replaceFix('Delete `;`', span, '')
        : replaceFix(
            'Begin a new line',
            { start: span.start, end: tokens[at + 1]!.startOffset },
            `\n${' '.repeat(line.column - 1)}`,
          ),
    }
  },

  function capitalWord({ tokens }) {
    const wrong = tokens.filter(token => {
      const small = token.image.toLowerCase()
      return token.tokenType === T.Name && small !== token.image && ALL_WORDS.has(small)
    })
    const [first] = wrong
    if (!first) return undefined
    const edits = wrong.map(token => ({ ...pick(markSpan(token)), text: token.image.toLowerCase() }))
    return {
      span: markSpan(first),
      message: `\`${first.image}\` is written with capitals; the words of the notation are small.`,
      remedy: `Write \`${first.image.toLowerCase()}\`.`,
      fix: editsFix('Write small letters', edits),
    }
  },

  function goTo({ tokens }) {
    const place = tokens.findIndex((token, at) => token.image === 'go' && tokens[at + 1]?.tokenType === T.To)
    if (place < 0) return undefined
    const span = { ...markSpan(tokens[place]!), end: markSpan(tokens[place + 1]!).end }
    return {
      span,
      message: '`go to` is one word here.',
      remedy: 'Write `goto`.',
      fix: replaceFix('Write `goto`', span, 'goto'),
    }
  },

  function foreignWord({ tokens, text }) {
    const [first] = tokens
    if (!first || first.tokenType !== T.Name || !Object.hasOwn(FOREIGN, first.image.toLowerCase())) return undefined
    const [remedy, replacement] = FOREIGN[first.image.toLowerCase()]!
    const span = markSpan(first)
    const end = replacement === '' ? skipBlanks(text, span.end) : span.end
    return {
      span,
      message: `\`${first.image}\` is no word of the notation.`,
      remedy,
      ...(replacement !== undefined && {
        fix: replaceFix(replacement ? `Write \`${replacement}\`` : 'Leave it out', { ...span, end }, replacement),
      }),
    }
  },

  function instructionAfterCondition({ tokens, at, line, text }) {
    if (tokens[0]?.tokenType !== T.If) return undefined
    const found = tokens[at]
    const arrow = tokens.findIndex(token => token.tokenType === T.Arrow || token.tokenType === T.ColonEqual)
    const acts =
      found && ([T.Halt, T.Return].includes(found.tokenType) || (arrow > at && T.isOf(found.tokenType, T.Name)))
    if (!found || !acts) return undefined
    const margin = ' '.repeat(line.column - 1)
    const body = text.slice(found.startOffset, line.end)
    const before = tokens[at - 1]
    const start = before ? markSpan(before).end : found.startOffset
    return {
      span: { ...markSpan(found), end: line.end },
      message: 'Only `goto L` may follow a condition on its line.',
      remedy: 'Write the instruction on the next line, and `end` below it.',
      fix: replaceFix('Make it a block', { start, end: line.end }, `\n${margin}  ${body}\n${margin}end`),
    }
  },

  function arrowInCondition({ tokens, at, text }) {
    const found = tokens[at]
    const head = tokens[0]?.tokenType
    if (found?.tokenType !== T.Arrow) return undefined
    if (
      head !== T.If &&
      head !== T.While &&
      head !== T.Until &&
      head !== T.Else &&
      !tokens[0]!.image.match(/^(need|check|assert)$/)
    )
      return undefined
    const span = markSpan(found)
    return {
      message: '`<-` is the arrow of an assignment, and a condition assigns nothing.',
      remedy: 'Put a blank between `<` and `-` where less than a negative is meant; write `=` to compare.',
      ...(text.slice(span.start, span.end) === '<-' && { fix: replaceFix('Write `< -`', span, '< -') }),
    }
  },

  function secondArrow({ tokens, at }) {
    const found = tokens[at]
    if (!found || found.tokenType !== T.Arrow || at < 2) return undefined
    if (!tokens.slice(0, at).some(token => T.isOf(token.tokenType, T.Assign))) return undefined
    return {
      message: 'An instruction has one arrow.',
      remedy: 'Write one line for each variable that is set.',
    }
  },

  function numberThenName({ tokens, at }) {
    const found = tokens[at]
    const before = tokens[at - 1]
    if (!found || before?.tokenType !== T.Numeral || !T.isOf(found.tokenType, T.Name)) return undefined
    const span = { ...markSpan(before), end: markSpan(found).end }
    if (before.image === '0' && touches(before, found) && /^[xXbBoO]/.test(found.image))
      return {
        span,
        message: `\`${before.image}${found.image}\` is no number.`,
        remedy: 'Write digits 0-9 and a-f after `0x`, and 0 and 1 after `0b`.',
      }
    return {
      span,
      message: `An operator is missing between \`${before.image}\` and \`${found.image}\`.`,
      remedy: `Write \`${before.image}*${found.image}\`, if the product is meant.`,
      fix: replaceFix('Insert `*`', { start: markSpan(before).end, end: found.startOffset }, '*'),
    }
  },

  function functionWithoutBrackets({ tokens, at }) {
    const found = tokens[at]
    const before = tokens[at - 1]
    if (!found || !before || !(WORD_NAMES.has(before.image) || EXACT_NAMES.has(before.image))) return undefined
    if (found.tokenType !== T.Numeral && !T.isOf(found.tokenType, T.Name)) return undefined
    const span = { ...markSpan(before), end: markSpan(found).end }
    const text = `${before.image}(${found.image})`
    return {
      span,
      message: `\`${before.image}\` takes what it works on in brackets.`,
      remedy: `Write \`${text}\`.`,
      fix: replaceFix(`Write \`${text}\``, span, text),
    }
  },

  function reservedName({ tokens, at, expected }) {
    const found = tokens[at]
    if (!found || !RESERVED.has(found.image) || !expected.startsWith('a name')) return undefined
    if (expected !== 'a name' && [T.And, T.Or, T.Mod, T.Xor].includes(found.tokenType)) return undefined
    return {
      message: `\`${found.image}\` is a word of the notation, and stands where ${expected} was expected.`,
      remedy: `Put what is missing before it; or, if \`${found.image}\` was to be a name, take another one.`,
    }
  },

  function leadingOperator({ tokens, at }) {
    const [first] = tokens
    if (at !== 0 || !first || !T.isOf(first.tokenType, T.Infix)) return undefined
    return {
      message: `The line begins with \`${first.image}\`, which joins it to nothing.`,
      remedy: `End the line before with \`${first.image}\`: a line goes on in the next when it ends in an operator.`,
    }
  },

  function openBracket({ tokens, at, expected }) {
    const found = tokens[at]
    if (!['`)`', '`]`', '`⌉`', '`⌋`'].includes(expected)) return undefined
    const sign = expected.slice(1, -1)
    const opener = { ')': '(', ']': '[', '⌉': '⌈', '⌋': '⌊' }[sign]
    let depth = 0
    let place = at - 1
    for (; place >= 0; place--) {
      const { image } = tokens[place]!
      if (image === sign) depth++
      else if (image === opener && depth-- === 0) break
    }
    const open = tokens[place]
    const end = tokens[tokens.length - 1]
    if (found && !beginsOperand(found)) {
      return {
        message: `Found \`${found.image}\` where \`${sign}\` was expected.`,
        remedy: `Close the bracket${open ? ` opened at column ${open.startColumn}` : ''} with \`${sign}\` first.`,
      }
    }
    if (found || !end) return undefined
    const last = markSpan(end).end
    return {
      ...(open && { span: markSpan(open) }),
      message: `The bracket \`${opener}\` is not closed.`,
      remedy: `Close it with \`${sign}\`.`,
      fix: editsFix(`Insert \`${sign}\``, [{ start: last, end: last, text: sign }]),
    }
  },

  function strayBracket({ tokens, at, expected }) {
    const found = tokens[at]
    if (!found || expected !== 'the end of the line') return undefined
    if (![')', ']', '⌉', '⌋'].includes(found.image)) return undefined
    return {
      message: `\`${found.image}\` closes nothing.`,
      remedy: 'Delete it, or open the bracket.',
      fix: replaceFix(`Delete \`${found.image}\``, markSpan(found), ''),
    }
  },

  function missingOperator({ tokens, at }) {
    const found = tokens[at]
    const before = tokens[at - 1]
    if (!found || at < 2 || !endsOperand(before) || !beginsOperand(found)) return undefined
    if (!tokens.slice(0, at).some(token => T.isOf(token.tokenType, T.Assign) || T.isOf(token.tokenType, T.Infix)))
      return undefined
    return {
      message: `An operator is missing between \`${before!.image}\` and \`${found.image}\`.`,
      remedy: 'Write the operator that is meant; begin a new line for a new instruction.',
    }
  },
]

function pick(span: Span): { start: number; end: number } {
  return { start: span.start, end: span.end }
}

function skipBlanks(text: string, from: number): number {
  let at = from
  while (text[at] === ' ' || text[at] === '\t') at++
  return at
}
