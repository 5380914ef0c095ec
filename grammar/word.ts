import type { TokenType } from './chevrotain'
import { correctBang, isComparison, isConditional, readComparison, readJunction, refuseChain } from './condition'
import { editsFix, replaceFix } from './edits'
import { type Mark, markSpan } from './lines'
import type { Notes } from './notes'
import { readWordNumeral } from './numeral'
import { LEVEL, type Phrase } from './phrase'
import type { Span } from './span'
import * as T from './tokens'
import type { Name, Target, WordCondition, WordExpression, WordFunction, WordOperator } from './tree'

const OPERATORS = new Map<TokenType, WordOperator>([
  [T.Plus, '+'],
  [T.Minus, '-'],
  [T.Times, '*'],
  [T.Slash, '/'],
  [T.Mod, 'mod'],
  [T.Ampersand, '&'],
  [T.Bar, '|'],
  [T.Xor, 'xor'],
  [T.ShiftLeft, '<<'],
  [T.ShiftRight, '>>'],
])

/** The functions of word code: one word in, one out. */
export const WORD_FUNCTIONS: ReadonlySet<string> = new Set<WordFunction>(['popcount', 'msb', 'lsb'])
/** Names that mean something before a bracket in word code: no procedure is called so. */
export const WORD_NAMES: ReadonlySet<string> = new Set([...WORD_FUNCTIONS, 'addr', 'signed'])

/** What other notations call the functions of word code. */
const WORD_SYNONYMS: Readonly<Record<string, string>> = {
  popcnt: 'popcount',
  bitcount: 'popcount',
  weight: 'popcount',
  bsr: 'msb',
  bsf: 'lsb',
  ctz: 'lsb',
  tzcnt: 'lsb',
  ffs: 'lsb',
  address: 'addr',
}

export function nameOf(mark: Mark): Name {
  return { text: mark.image, span: markSpan(mark) }
}

/** What stands for a part that could not be read; its line is lost. */
function blank(span: Span): WordExpression {
  return { kind: 'number', value: 0n, span }
}

export function blankCondition(span: Span): WordCondition {
  return { kind: 'compare', operator: '=', signed: false, left: blank(span), right: blank(span), span }
}

/** Reads a phrase as an expression over words. What does not belong is said to `notes`. */
export function readWord(phrase: Phrase, notes: Notes): WordExpression {
  const { span } = phrase
  switch (phrase.kind) {
    case 'number': {
      const number = readWordNumeral(phrase.mark, notes)
      return { ...number, span }
    }
    case 'name':
      return { kind: 'name', name: nameOf(phrase.mark), span }
    case 'indirect':
      return { kind: 'indirect', address: readWord(phrase.address, notes), span }
    case 'element':
      return readElement(phrase, notes)
    case 'call':
      return readCall(phrase, notes)
    case 'binary':
      return readBinary(phrase, notes)
    case 'prefix':
      return readPrefix(phrase, notes)
    case 'rounded':
      notes.refuse(
        span,
        'Words are whole numbers: there is nothing to round.',
        'Write `/`, which divides and drops the remainder; `(x + y - 1) / y` rounds up.',
      )
      return blank(span)
    case 'quantified':
      refuseQuantifier(phrase, notes)
      return blank(span)
  }
}

function refuseQuantifier(phrase: Phrase & { kind: 'quantified' }, notes: Notes): void {
  notes.refuse(
    markSpan(phrase.mark),
    `\`${phrase.mark.image} ... in ... :\` belongs to exact expressions (claims, checks, asserts); word code has loops.`,
    'Write a `for` loop.',
  )
}

function readElement(phrase: Phrase & { kind: 'element' }, notes: Notes): WordExpression {
  const { base, span } = phrase
  const index = readWord(phrase.index, notes)
  if (base.kind === 'name') return { kind: 'element', base: nameOf(base.mark), index, span }
  if (base.kind === 'element')
    notes.refuse(
      span,
      'An array has one index.',
      'Lay rows one after another and work the place out: `a[i * m + j]` for row i of m words.',
    )
  else
    notes.refuse(
      span,
      'Only an array or a variable that holds an address can have an index.',
      'Move the address into a variable of its own, then index that.',
    )
  return blank(span)
}

function readCall(phrase: Phrase & { kind: 'call' }, notes: Notes): WordExpression {
  const { mark, span } = phrase
  const values = phrase.arguments
  const name = mark.image
  const only = values.length === 1 ? values[0] : undefined
  if (name === 'addr') {
    if (only?.kind === 'name') return { kind: 'address', array: nameOf(only.mark), span }
    const element = only?.kind === 'element' && only.base.kind === 'name' ? only : undefined
    const text = element && `addr(${notes.read(element.base.span)}) + ${notes.read(element.index.span)}`
    notes.refuse(
      span,
      '`addr` takes the name of an array.',
      text ? `Write \`${text}\`: the address of the first word, plus the index.` : 'Write `addr(a)`, `a` an array.',
      text ? replaceFix(`Write \`${text}\``, span, text) : undefined,
    )
    return blank(span)
  }
  if (WORD_FUNCTIONS.has(name)) {
    if (only) return { kind: 'call', function: name as WordFunction, argument: readWord(only, notes), span }
    notes.refuse(span, `\`${name}\` takes one word, not ${values.length}.`, `Write \`${name}(x)\`.`)
    return blank(span)
  }
  if (name === 'signed') {
    notes.refuse(
      span,
      '`signed` marks the sides of a comparison; it makes no word.',
      'Write `signed(x) < signed(y)` as a condition, or leave `signed` out.',
    )
    return blank(span)
  }
  const meant = WORD_SYNONYMS[name.toLowerCase()]
  if (meant) {
    notes.refuse(
      markSpan(mark),
      `\`${name}\` is no function of word code.`,
      `Write \`${meant}\`.`,
      replaceFix(`Write \`${meant}\``, markSpan(mark), meant),
    )
    return blank(span)
  }
  const exact = ['lg', 'ceil', 'floor', 'min', 'max', 'abs', 'sum', 'old'].includes(name)
  notes.refuse(
    span,
    exact
      ? `\`${name}\` belongs to exact expressions (declarations, claims, checks); word code does not have it.`
      : `\`${name}(...)\` stands inside an expression, and a call of a procedure is an instruction of its own.`,
    exact
      ? exactRemedy(name)
      : `Give the call a line of its own, \`t <- ${notes.read(span)}\`, and use \`t\` here.`,
  )
  return blank(span)
}

function exactRemedy(name: string): string {
  if (name === 'lg') return 'Write `msb(x)` for floor(lg(x)), or name a constant with `fix`.'
  if (name === 'min' || name === 'max') return 'Write an `if`: a comparison, and a move where it is needed.'
  return 'Write it out in instructions, or name a constant with `fix`.'
}

/** Says that a sign of another notation stands for one of ours; the reading goes on with ours. */
function correctOperator(mark: Mark, meant: string, why: string, notes: Notes): void {
  const span = markSpan(mark)
  notes.correct(span, why, `Write \`${meant}\`.`, replaceFix(`Write \`${meant}\``, span, meant))
}

function readOperator(mark: Mark, notes: Notes): WordOperator | undefined {
  const operator = OPERATORS.get(mark.tokenType)
  if (operator) return operator
  switch (mark.tokenType) {
    case T.Caret:
      correctOperator(mark, 'xor', '`^` is power, and only exact expressions have it.', notes)
      return 'xor'
    case T.StarStar:
      notes.refuse(
        markSpan(mark),
        'Word code has no power.',
        'Multiply in a loop, shift for a power of two (`1 << k`), or name a constant with `fix`.',
      )
      return '*'
    case T.Percent:
      correctOperator(mark, 'mod', '`%` is no operator of the notation.', notes)
      return 'mod'
    case T.SlashSlash:
      correctOperator(mark, '/', '`//` is no operator of the notation; `/` on words drops the remainder.', notes)
      return '/'
    case T.TripleShift:
      correctOperator(
        mark,
        '>>',
        '`>>>` is no operator of the notation; words have no sign, `>>` fills with 0.',
        notes,
      )
      return '>>'
    default:
      return undefined
  }
}

function readBinary(phrase: Phrase & { kind: 'binary' }, notes: Notes): WordExpression {
  const { mark, span } = phrase
  const operator = readOperator(mark, notes)
  if (operator) {
    const left = readWord(phrase.left, notes)
    return { kind: 'binary', operator, left, right: readWord(phrase.right, notes), span }
  }
  const bitwise = junctionAsBits(mark)
  if (bitwise && !isConditional(phrase.left) && !isConditional(phrase.right)) {
    correctOperator(
      mark,
      bitwise,
      `\`${mark.image}\` joins conditions; on words the operator is \`${bitwise}\`.`,
      notes,
    )
    const left = readWord(phrase.left, notes)
    return { kind: 'binary', operator: bitwise, left, right: readWord(phrase.right, notes), span }
  }
  notes.refuse(span, 'A condition gives no word.', 'Branch on it: `x <- 0`, then `if C`, `x <- 1`, `end`.')
  return blank(span)
}

function junctionAsBits(mark: Mark): '&' | '|' | undefined {
  if (mark.tokenType === T.And || mark.tokenType === T.AndAnd) return '&'
  return mark.tokenType === T.Or || mark.tokenType === T.OrOr ? '|' : undefined
}

function readPrefix(phrase: Phrase & { kind: 'prefix' }, notes: Notes): WordExpression {
  const { mark, span } = phrase
  switch (mark.tokenType) {
    case T.Minus:
      return { kind: 'negate', operand: readWord(phrase.operand, notes), span }
    case T.Tilde:
      return { kind: 'complement', operand: readWord(phrase.operand, notes), span }
    case T.Plus:
      notes.correct(
        markSpan(mark),
        'A `+` in front of an operand says nothing.',
        'Leave it out.',
        replaceFix('Leave `+` out', markSpan(mark), ''),
      )
      return readWord(phrase.operand, notes)
    case T.Times: {
      const text = `[${notes.read(phrase.operand.span)}]`
      notes.correct(
        span,
        '`*` does not follow an address here.',
        `Write \`${text}\` for the word at an address.`,
        replaceFix(`Write \`${text}\``, span, text),
      )
      return { kind: 'indirect', address: readWord(phrase.operand, notes), span }
    }
    case T.Ampersand: {
      const text = `addr(${notes.read(phrase.operand.span)})`
      notes.refuse(
        span,
        '`&` joins two words; it does not take an address.',
        `Write \`${text}\` for the address of an array.`,
        replaceFix(`Write \`${text}\``, span, text),
      )
      return blank(span)
    }
    default:
      if (isConditional(phrase.operand)) {
        notes.refuse(span, 'A condition gives no word.', 'Branch on it with `if`.')
        return blank(span)
      }
      correctOperator(mark, '~', `\`${mark.image}\` turns conditions round; on words the operator is \`~\`.`, notes)
      return { kind: 'complement', operand: readWord(phrase.operand, notes), span }
  }
}

/** Reads a phrase as a condition over words. What does not belong is said to `notes`. */
export function readCondition(phrase: Phrase, notes: Notes): WordCondition {
  const { span } = phrase
  if (phrase.kind === 'binary') {
    const junction = readJunction(phrase.mark, notes)
    if (junction) {
      const left = readCondition(phrase.left, notes)
      return { kind: junction, left, right: readCondition(phrase.right, notes), span }
    }
    if (isComparison(phrase.mark)) return readCompare(phrase, notes)
  }
  if (phrase.kind === 'prefix' && [T.Not, T.Bang].includes(phrase.mark.tokenType)) {
    if (phrase.mark.tokenType === T.Bang) correctBang(phrase, notes)
    return { kind: 'not', operand: readCondition(phrase.operand, notes), span }
  }
  if (phrase.kind === 'quantified') {
    refuseQuantifier(phrase, notes)
    return blankCondition(span)
  }
  if (phrase.kind === 'call' && ['sorted', 'same'].includes(phrase.mark.image)) {
    notes.refuse(
      span,
      `\`${phrase.mark.image}\` belongs to checks and asserts; no one operation tells it.`,
      'Write a loop, or move the condition into `check` or `assert`.',
    )
    return blankCondition(span)
  }
  const before = notes.lost
  notes.lost = false
  readWord(phrase, notes)
  if (!notes.lost) {
    const text = `${notes.read(span)} != 0`
    notes.refuse(
      span,
      `\`${notes.read(span)}\` is a word, and a condition compares two.`,
      `Write \`${text}\`, if that is meant.`,
      editsFix(`Write \`${text}\``, [{ start: span.end, end: span.end, text: ' != 0' }]),
    )
  }
  notes.lost ||= before
  return blankCondition(span)
}

/** The inside of `signed(x)`. */
function signedOperand(phrase: Phrase): Phrase | undefined {
  return phrase.kind === 'call' && phrase.mark.image === 'signed' && phrase.arguments.length === 1
    ? phrase.arguments[0]
    : undefined
}

function isLiteral(phrase: Phrase): boolean {
  return phrase.kind === 'number' || (phrase.kind === 'prefix' && phrase.operand.kind === 'number')
}

function readCompare(phrase: Phrase & { kind: 'binary' }, notes: Notes): WordCondition {
  const { span } = phrase
  if (refuseChain(phrase, notes)) return blankCondition(span)
  const operator = readComparison(phrase.mark, notes) ?? '='
  const left = signedOperand(phrase.left)
  const right = signedOperand(phrase.right)
  const signed = left !== undefined || right !== undefined
  if (signed) {
    // A literal means the same with and without the mark; anything else must say which order is meant.
    const bare = left === undefined ? phrase.left : right === undefined ? phrase.right : undefined
    if (bare && !isLiteral(bare)) {
      const text = `signed(${notes.read(bare.span)})`
      notes.correct(
        bare.span,
        'One side of this comparison is marked `signed`, the other is not.',
        `Write \`${text}\`.`,
        replaceFix(`Write \`${text}\``, bare.span, text),
      )
    }
  }
  const first = readWord(left ?? phrase.left, notes)
  return { kind: 'compare', operator, signed, left: first, right: readWord(right ?? phrase.right, notes), span }
}

/** Reads a phrase as what an arrow can point at. */
export function readTarget(phrase: Phrase, notes: Notes): Target | undefined {
  if (phrase.kind === 'name' || phrase.kind === 'element' || phrase.kind === 'indirect') {
    const target = readWord(phrase, notes)
    if (target.kind === 'name' || target.kind === 'element' || target.kind === 'indirect') return target
    return undefined
  }
  notes.refuse(
    phrase.span,
    `An arrow cannot point at \`${notes.read(phrase.span)}\`.`,
    'Write a variable, an array element `a[i]` or an address `[p]` on its left.',
  )
  return undefined
}

/** The level at which a word operator binds. */
export const WORD_LEVELS: Readonly<Record<WordOperator, number>> = {
  '|': LEVEL.bar,
  xor: LEVEL.xor,
  '&': LEVEL.ampersand,
  '<<': LEVEL.shift,
  '>>': LEVEL.shift,
  '+': LEVEL.plus,
  '-': LEVEL.plus,
  '*': LEVEL.times,
  '/': LEVEL.times,
  mod: LEVEL.times,
}
