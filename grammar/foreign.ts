import { editsFix, replaceFix } from './edits'
import { lineSpan, type Mark, markSpan } from './lines'
import type { Recogniser } from './slip'
import * as T from './tokens'

const SMALL_WORDS: ReadonlySet<string> = new Set([...T.RESERVED_WORDS, ...T.PLACED_WORDS])

/** The word of the notation that a name is but for its capitals. */
export function smallWord(mark: Mark): string | undefined {
  const small = mark.image.toLowerCase()
  return mark.tokenType === T.Name && small !== mark.image && SMALL_WORDS.has(small) ? small : undefined
}

const NO_DECLARATION = 'Leave it out: a variable needs no declaration, only a value before it is read.'
const IF_CHAIN = 'Write `if C` ... `else if C` ... `end`.'
const PROCEDURE = 'Write `procedure f(x) -> u`, and its instructions below.'
const EMPTY = 'Leave the line out: a form may be empty.'

/** Words that begin a line elsewhere: what to write here, and the text that does it where that is one word. */
const FOREIGN: Readonly<Record<string, readonly [remedy: string, text?: string]>> = {
  call: ['Leave `call` out: a call is `f(x)` or `u <- f(x)`.', ''],
  set: ['Write `x <- E`.'],
  stop: ['Write `halt`.', 'halt'],
  exit: ['Write `halt`.', 'halt'],
  quit: ['Write `halt`.', 'halt'],
  ret: ['Write `return`.', 'return'],
  break: ['Put a label after the loop, and write `goto` with its name.'],
  continue: ['Put a label before the end of the loop, and write `goto` with its name.'],
  jump: ['Write `goto L`.', 'goto'],
  jmp: ['Write `goto L`.', 'goto'],
  br: ['Write `goto L`.', 'goto'],
  unless: ['Write `if not C`.', 'if not'],
  do: ['Write `repeat`, and `until C` at the end of the loop.', 'repeat'],
  loop: ['Write `repeat` ... `until C`, or `while C` ... `end`.'],
  foreach: ['Write `for i from 0 to n - 1`.'],
  switch: [IF_CHAIN],
  case: [IF_CHAIN],
  function: [PROCEDURE],
  def: [PROCEDURE],
  proc: [PROCEDURE, 'procedure'],
  sub: [PROCEDURE],
  var: [NO_DECLARATION],
  int: [NO_DECLARATION],
  uint: [NO_DECLARATION],
  unsigned: [NO_DECLARATION],
  word: [NO_DECLARATION],
  pass: [EMPTY],
  nop: [EMPTY],
  print: ['Name what is to be seen in `out`.'],
}
/** Words that open a declaration elsewhere. */
const FOREIGN_DECLARATIONS: Readonly<Record<string, readonly [remedy: string, text?: string]>> = {
  const: ['Write `fix m = E`, or `let k = E` for a tunable.', 'fix'],
  array: ['Write `work a[E]` for working memory.', 'work'],
  input: ['Write `in a[n]`.', 'in'],
  inputs: ['Write `in a[n]`.', 'in'],
  output: ['Write `out b[n]`.', 'out'],
  outputs: ['Write `out b[n]`.', 'out'],
  temp: ['Write `work c[E]`.', 'work'],
  scratch: ['Write `work c[E]`.', 'work'],
  param: ['Write `let k = E`.', 'let'],
  parameter: ['Write `let k = E`.', 'let'],
  require: ['Write `need C`.', 'need'],
  requires: ['Write `need C`.', 'need'],
  assume: ['Write `need C`.', 'need'],
  ensure: ['Write `check C`.', 'check'],
  ensures: ['Write `check C`.', 'check'],
}
/** Words that open a routine elsewhere. */
const FOREIGN_HEADS: ReadonlySet<string> = new Set([
  'program',
  'algorithm',
  'module',
  'proc',
  'function',
  'subroutine',
])

function foreignWord(mark: Mark | undefined): readonly [remedy: string, text?: string] | undefined {
  const word = mark?.image.toLowerCase()
  if (!mark || !word || (mark.tokenType !== T.Name && mark.tokenType !== T.Do)) return undefined
  if (Object.hasOwn(FOREIGN, word)) return FOREIGN[word]
  return Object.hasOwn(FOREIGN_DECLARATIONS, word) ? FOREIGN_DECLARATIONS[word] : undefined
}

/** What to write in place of a word that another language would have alone on a line. */
export function foreignRemedy(mark: Mark): readonly [remedy: string, text?: string] | undefined {
  return foreignWord(mark)
}

/** Whether a line opens as a declaration does elsewhere, or as ours do but for capitals. */
export function opensForeignDeclaration(tokens: readonly Mark[]): boolean {
  const [first, second] = tokens
  if (first?.tokenType !== T.Name || !second || !T.isOf(second.tokenType, T.Name)) return false
  const small = smallWord(first)
  if (small) return ['in', 'out', 'inout', 'work', 'let', 'fix', 'need', 'feed', 'claim', 'check'].includes(small)
  return Object.hasOwn(FOREIGN_DECLARATIONS, first.image.toLowerCase())
}

/** Whether a line opens a routine as other languages do, or as ours but for capitals: `program NAME`. */
export function opensForeignRoutine(tokens: readonly Mark[]): boolean {
  const [first, second] = tokens
  if (tokens.length !== 2 || first?.tokenType !== T.Name || second?.tokenType !== T.Name) return false
  return smallWord(first) === 'routine' || FOREIGN_HEADS.has(first.image.toLowerCase())
}

function touches(left: Mark, right: Mark): boolean {
  return left.startOffset + left.image.length === right.startOffset
}

/** How a line opens a comment in other languages. */
function commentSign(tokens: readonly Mark[]): string | undefined {
  const [first, second] = tokens
  if (!first) return undefined
  const type = first.tokenType
  const pair = second !== undefined && touches(first, second)
  if (type === T.SlashSlash || type === T.Percent) return first.image
  if (type === T.Semicolon && second) return first.image
  if (type === T.MinusMinus || (pair && type === T.Minus && second.tokenType === T.Minus)) return '--'
  return pair && type === T.Slash && second.tokenType === T.Times ? '/*' : undefined
}

/** What other languages have, and this notation writes in another way. */
export const FOREIGN_SLIPS: readonly Recogniser[] = [
  function comment({ tokens, line }) {
    const sign = commentSign(tokens)
    if (!sign) return undefined
    const start = tokens[0]!.startOffset
    const place = { start, end: start + sign.length }
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

  function loopInBrackets({ tokens }) {
    if (tokens[0]?.tokenType !== T.For || tokens[1]?.tokenType !== T.LeftParen) return undefined
    return {
      span: { ...markSpan(tokens[0]), end: markSpan(tokens[tokens.length - 1]!).end },
      message: 'A `for` says where its variable begins and ends, without brackets.',
      remedy: 'Write `for i from 0 to n - 1`, with `by S` after it where the step is not 1.',
    }
  },

  function loopWords({ tokens }) {
    if (tokens[0]?.tokenType !== T.For) return undefined
    const step = tokens.findIndex((token, at) => at > 3 && token.image === 'step')
    const down = tokens.findIndex((token, at) => token.image === 'down' && tokens[at + 1]?.tokenType === T.To)
    if (step < 0 && down < 0) return undefined
    const first = tokens[down < 0 ? step : down]!
    const last = down < 0 ? first : tokens[down + 1]!
    const span = { ...markSpan(first), end: markSpan(last).end }
    const text = down < 0 ? 'by' : 'downto'
    return {
      span,
      message: `\`${down < 0 ? first.image : 'down to'}\` is no word of the notation.`,
      remedy: `Write \`${text}\`.`,
      fix: replaceFix(`Write \`${text}\``, span, text),
    }
  },

  function brace({ tokens, at }) {
    const found = tokens[at]
    if (found?.tokenType !== T.LeftBrace && found?.tokenType !== T.RightBrace) return undefined
    const span = markSpan(found)
    const last = at === tokens.length - 1
    const fix =
      found.tokenType === T.LeftBrace
        ? replaceFix('Delete the brace', span, '')
        : replaceFix('Write `end`', span, '\nend')
    return {
      message: `Braces hold nothing together here: \`${found.image}\`.`,
      remedy: 'A form opens with its first line and closes with `end` on a line of its own.',
      ...(last && { fix }),
    }
  },

  function semicolon({ tokens, at, line }) {
    const found = tokens[at]
    if (found?.tokenType !== T.Semicolon) return undefined
    const span = markSpan(found)
    const next = tokens[at + 1]
    return {
      message: 'A line ends without `;`, and one line holds one instruction.',
      remedy: next ? 'Put the next instruction on a line of its own.' : 'Delete `;`.',
      fix: next
        ? replaceFix(
            'Begin a new line',
            { start: span.start, end: next.startOffset },
            `\n${' '.repeat(line.column - 1)}`,
          )
        : replaceFix('Delete `;`', span, ''),
    }
  },

  function colon({ tokens, at }) {
    const found = tokens[at]
    const head = tokens[0]?.tokenType
    if (found?.tokenType !== T.Colon || at !== tokens.length - 1) return undefined
    if (![T.If, T.Else, T.While, T.For, T.Repeat, T.Until, T.Procedure, T.Routine, T.Begin].includes(head!))
      return undefined
    return {
      message: `No \`:\` follows \`${tokens[0]!.image}\`; a name with \`:\` is a label.`,
      remedy: 'Delete `:`.',
      fix: replaceFix('Delete `:`', markSpan(found), ''),
    }
  },

  function capitals({ tokens }) {
    const wrong = tokens.filter(smallWord)
    const [first] = wrong
    const small = first && smallWord(first)
    if (!small) return undefined
    const edits = wrong.map(token => {
      const { start, end } = markSpan(token)
      return { start, end, text: smallWord(token)! }
    })
    return {
      span: markSpan(first),
      message: `\`${first.image}\` is written with capitals; the words of the notation are small.`,
      remedy: `Write \`${small}\`.`,
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

  function quantifier({ tokens }) {
    const words: Readonly<Record<string, string>> = {
      forall: 'all',
      every: 'all',
      exists: 'any',
      some: 'any',
      exist: 'any',
    }
    const mark = tokens.find((token, at) => words[token.image] && tokens[at + 2]?.tokenType === T.In)
    if (!mark) return undefined
    const text = words[mark.image]!
    return {
      span: markSpan(mark),
      message: `\`${mark.image}\` is no word of the notation.`,
      remedy: `Write \`${text}\`.`,
      fix: replaceFix(`Write \`${text}\``, markSpan(mark), text),
    }
  },

  function word({ tokens, text }) {
    const [first] = tokens
    const known = foreignWord(first)
    if (!first || !known) return undefined
    const [remedy, replacement] = known
    const span = markSpan(first)
    let { end } = span
    if (replacement === '') while (text[end] === ' ' || text[end] === '\t') end++
    return {
      span,
      message: `\`${first.image}\` is no word of the notation.`,
      remedy,
      ...(replacement !== undefined && {
        fix: replaceFix(replacement ? `Write \`${replacement}\`` : 'Leave it out', { ...span, end }, replacement),
      }),
    }
  },
]
