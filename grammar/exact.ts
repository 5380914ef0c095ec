import type { TokenType } from './chevrotain'
import { correctBang, isComparison, isConditional, readComparison, readJunction, refuseChain } from './condition'
import { editsFix, replaceFix } from './edits'
import { type Mark, markSpan } from './lines'
import type { Notes } from './notes'
import { readExactNumeral } from './numeral'
import { LEVEL, type Phrase } from './phrase'
import type { Span } from './span'
import * as T from './tokens'
import type { Content, Exact, ExactCondition, ExactFunction, ExactOperator } from './tree'
import { nameOf } from './word'

const OPERATORS = new Map<TokenType, ExactOperator>([
  [T.Plus, '+'],
  [T.Minus, '-'],
  [T.Times, '*'],
  [T.Slash, '/'],
  [T.Caret, '^'],
  [T.Mod, 'mod'],
])

/** Fewest and most arguments of each function. */
const FUNCTIONS: Readonly<Record<ExactFunction, readonly [number, number]>> = {
  lg: [1, 1],
  ceil: [1, 1],
  floor: [1, 1],
  abs: [1, 1],
  popcount: [1, 1],
  min: [1, Number.POSITIVE_INFINITY],
  max: [1, Number.POSITIVE_INFINITY],
}

/** Names that mean something before a bracket in exact expressions. */
export const EXACT_NAMES: ReadonlySet<string> = new Set([
  ...Object.keys(FUNCTIONS),
  'sum',
  'old',
  'all',
  'any',
  'sorted',
  'same',
])

/** What other notations call functions of exact expressions, and what to write. */
const SYNONYMS: Readonly<Record<string, string>> = {
  log: 'lg(x), the logarithm to base 2',
  log2: 'lg(x)',
  ln: 'lg(x), the logarithm to base 2, times a constant',
  sqrt: 'x^0.5',
  pow: 'x^y',
  exp: '2^x',
  ceiling: 'ceil(x)',
  round: 'floor(x + 1/2)',
  trunc: 'floor(x)',
  len: 'the size by its name, `n`',
  length: 'the size by its name, `n`',
  msb: 'floor(lg(x))',
  lsb: 'what is meant with mod: exact expressions work on numbers, not on bits',
  minimum: 'min(x, y)',
  maximum: 'max(x, y)',
}

function blank(span: Span): Exact {
  return { kind: 'number', numerator: 0n, denominator: 1n, span }
}

export function blankExactCondition(span: Span): ExactCondition {
  return { kind: 'compare', operator: '=', left: blank(span), right: blank(span), span }
}

/** Reads a phrase as an exact expression. What does not belong is said to `notes`. */
export function readExact(phrase: Phrase, notes: Notes): Exact {
  const { span } = phrase
  switch (phrase.kind) {
    case 'number':
      return { ...readExactNumeral(phrase.mark, notes), span }
    case 'name':
      return { kind: 'name', name: nameOf(phrase.mark), span }
    case 'element':
      return readElement(phrase, notes)
    case 'call':
      return readCall(phrase, notes)
    case 'binary':
      return readBinary(phrase, notes)
    case 'prefix':
      return readPrefix(phrase, notes)
    case 'rounded': {
      const name = phrase.mark.tokenType === T.LeftCeil ? 'ceil' : 'floor'
      return { kind: 'call', function: name, arguments: [readExact(phrase.operand, notes)], span }
    }
    case 'indirect':
      notes.refuse(span, 'Exact expressions know no addresses.', 'Name the array: `a[i]`.')
      return blank(span)
    case 'quantified':
      if (phrase.mark.tokenType === T.Sum) {
        const from = readExact(phrase.from, notes)
        const to = readExact(phrase.to, notes)
        const body = readExact(phrase.body, notes)
        return { kind: 'sum', index: nameOf(phrase.index), from, to, body, span }
      }
      refuseCondition(span, notes)
      return blank(span)
  }
}

function refuseCondition(span: Span, notes: Notes): void {
  notes.refuse(
    span,
    'A condition stands where a number is expected.',
    'Compare numbers; join comparisons with `and`, `or`, `not`.',
  )
}

/** `a` or `old(a)`, where the words of an array are meant. */
function readContent(phrase: Phrase): Content | undefined {
  const { span } = phrase
  if (phrase.kind === 'name') return { name: nameOf(phrase.mark), old: false, span }
  const inside = oldOperand(phrase)
  if (inside?.kind === 'name') return { name: nameOf(inside.mark), old: true, span }
  return undefined
}

/** The inside of `old(x)`. */
function oldOperand(phrase: Phrase): Phrase | undefined {
  return phrase.kind === 'call' && phrase.mark.image === 'old' && phrase.arguments.length === 1
    ? phrase.arguments[0]
    : undefined
}

function readElement(phrase: Phrase & { kind: 'element' }, notes: Notes): Exact {
  const { base, span } = phrase
  const index = readExact(phrase.index, notes)
  const array = readContent(base)
  if (array) return { kind: 'element', array, index, span }
  notes.refuse(
    span,
    base.kind === 'element' ? 'An array has one index.' : 'Only an array can have an index.',
    base.kind === 'element'
      ? 'Work the place out: `a[i * m + j]` for row i of m words.'
      : 'Write `a[i]`, or `old(a)[i]` for the content before the run.',
  )
  return blank(span)
}

function readCall(phrase: Phrase & { kind: 'call' }, notes: Notes): Exact {
  const { mark, span } = phrase
  const values = phrase.arguments
  const name = mark.image
  if (Object.hasOwn(FUNCTIONS, name)) return readFunction(phrase, name as ExactFunction, notes)
  const only = values.length === 1 ? values[0] : undefined
  if (name === 'sum') {
    const array = only && readContent(only)
    if (array) return { kind: 'total', array, span }
    notes.refuse(
      span,
      '`sum(...)` takes one array.',
      'Write `sum(a)`, or `sum i in 0..n-1 : E` for a sum over an index.',
    )
    return blank(span)
  }
  if (name === 'old') {
    if (only?.kind === 'name') return { kind: 'old', name: nameOf(only.mark), span }
    if (only?.kind === 'element' && only.base.kind === 'name') {
      const text = `old(${only.base.mark.image})[${notes.read(only.index.span)}]`
      notes.correct(
        span,
        '`old` takes a name; the index follows.',
        `Write \`${text}\`.`,
        replaceFix(`Write \`${text}\``, span, text),
      )
      const array: Content = { name: nameOf(only.base.mark), old: true, span }
      return { kind: 'element', array, index: readExact(only.index, notes), span }
    }
    notes.refuse(span, '`old` takes the name of an inout array or scalar.', 'Write `old(x)` or `old(a)[i]`.')
    return blank(span)
  }
  if (name === 'sorted' || name === 'same') {
    refuseCondition(span, notes)
    return blank(span)
  }
  if (name === 'all' || name === 'any') {
    notes.refuse(span, `\`${name}\` takes an index and its range.`, `Write \`${name} i in 0..n-1 : C\`.`)
    return blank(span)
  }
  if (['O', 'Theta', 'Omega', 'Θ', 'Ω', 'o'].includes(name)) {
    notes.refuse(
      span,
      `\`${name}(...)\` has no constant, and a bound that is checked exactly needs one.`,
      'Write the bound with its constants: `7*n + 5`.',
    )
    return blank(span)
  }
  const meant = Object.hasOwn(SYNONYMS, name) ? SYNONYMS[name] : undefined
  notes.refuse(
    markSpan(mark),
    meant ? `\`${name}\` is no function of exact expressions.` : `Exact expressions have no function \`${name}\`.`,
    meant
      ? `Write ${meant.startsWith('the ') || meant.startsWith('what ') ? meant : `\`${meant.replace(',', '`,')}${meant.includes(',') ? '' : '`'}`}.`
      : 'They have lg, ceil, floor, min, max, abs, popcount, sum and old.',
  )
  return blank(span)
}

function readFunction(phrase: Phrase & { kind: 'call' }, name: ExactFunction, notes: Notes): Exact {
  const values = phrase.arguments
  const [fewest, most] = FUNCTIONS[name]
  if (values.length >= fewest && values.length <= most)
    return {
      kind: 'call',
      function: name,
      arguments: values.map(value => readExact(value, notes)),
      span: phrase.span,
    }
  notes.refuse(
    phrase.span,
    most === 1 ? `\`${name}\` takes one number, not ${values.length}.` : `\`${name}\` takes at least one number.`,
    most === 1 ? `Write \`${name}(x)\`.` : `Write \`${name}(x, y)\`.`,
  )
  return blank(phrase.span)
}

const BITS_REMEDY = 'Write what is meant with `*`, `/`, `mod`, `floor` and powers of two.'

function readBinary(phrase: Phrase & { kind: 'binary' }, notes: Notes): Exact {
  const { mark, span } = phrase
  const operator = readOperator(phrase, notes)
  if (operator) {
    const left = readExact(phrase.left, notes)
    return { kind: 'binary', operator, left, right: readExact(phrase.right, notes), span }
  }
  if (operator === undefined && isConditional(phrase)) refuseCondition(span, notes)
  else if (mark.tokenType === T.ShiftLeft || mark.tokenType === T.ShiftRight || mark.tokenType === T.TripleShift) {
    const [left, right] = [notes.read(phrase.left.span), notes.read(phrase.right.span)]
    const power = phrase.right.kind === 'binary' || phrase.right.kind === 'prefix' ? `(${right})` : right
    const base = phrase.left.kind === 'binary' || phrase.left.kind === 'prefix' ? `(${left})` : left
    const text = mark.tokenType === T.ShiftLeft ? `${base} * 2^${power}` : `floor(${base} / 2^${power})`
    notes.refuse(
      markSpan(mark),
      `Exact expressions work on numbers, not on bits: they have no \`${mark.image}\`.`,
      `Write \`${text}\`.`,
      replaceFix(`Write \`${text}\``, span, text),
    )
  } else {
    const text = lowBits(phrase, notes)
    notes.refuse(
      markSpan(mark),
      `Exact expressions work on numbers, not on bits: they have no \`${mark.image}\`, only \`popcount\`.`,
      text ? `Write \`${text}\`.` : BITS_REMEDY,
      text ? replaceFix(`Write \`${text}\``, span, text) : undefined,
    )
  }
  return blank(span)
}

/** What `x & m` is in numbers, where m is a literal of low bits alone. */
function lowBits(phrase: Phrase & { kind: 'binary' }, notes: Notes): string | undefined {
  if (phrase.mark.tokenType !== T.Ampersand || phrase.right.kind !== 'number') return undefined
  const mask = readExactNumeral(phrase.right.mark, notes)
  if (mask.kind !== 'number' || mask.denominator !== 1n || (mask.numerator & (mask.numerator + 1n)) !== 0n)
    return undefined
  const left = notes.read(phrase.left.span)
  return `${phrase.left.kind === 'binary' && !left.startsWith('(') ? `(${left})` : left} mod ${mask.numerator + 1n}`
}

function readOperator(phrase: Phrase & { kind: 'binary' }, notes: Notes): ExactOperator | undefined {
  const { mark } = phrase
  const operator = OPERATORS.get(mark.tokenType)
  if (operator) return operator
  const span = markSpan(mark)
  switch (mark.tokenType) {
    case T.StarStar:
      notes.correct(span, '`**` is no operator of the notation.', 'Write `^`.', replaceFix('Write `^`', span, '^'))
      return '^'
    case T.Percent:
      notes.correct(
        span,
        '`%` is no operator of the notation.',
        'Write `mod`.',
        replaceFix('Write `mod`', span, 'mod'),
      )
      return 'mod'
    case T.SlashSlash: {
      const text = `floor(${notes.read(phrase.left.span)} / ${notes.read(phrase.right.span)})`
      notes.correct(
        span,
        '`//` is no operator of the notation, and `/` is exact here.',
        `Write \`${text}\` for the whole part.`,
        replaceFix(`Write \`${text}\``, phrase.span, text),
      )
      return '/'
    }
    default:
      return undefined
  }
}

function readPrefix(phrase: Phrase & { kind: 'prefix' }, notes: Notes): Exact {
  const { mark, span } = phrase
  if (mark.tokenType === T.Minus) return { kind: 'negate', operand: readExact(phrase.operand, notes), span }
  if (mark.tokenType === T.Plus) {
    notes.correct(
      markSpan(mark),
      'A `+` in front of an operand says nothing.',
      'Leave it out.',
      replaceFix('Leave `+` out', markSpan(mark), ''),
    )
    return readExact(phrase.operand, notes)
  }
  if (mark.tokenType === T.Not || mark.tokenType === T.Bang) refuseCondition(span, notes)
  else
    notes.refuse(
      markSpan(mark),
      `Exact expressions work on numbers, not on bits: they have no \`${mark.image}\` in front of an operand.`,
      mark.tokenType === T.Tilde ? 'Write `2^w - 1 - x` for the complement of a word.' : BITS_REMEDY,
    )
  return blank(span)
}

/** Reads a phrase as an exact condition. What does not belong is said to `notes`. */
export function readExactCondition(phrase: Phrase, notes: Notes): ExactCondition {
  const { span } = phrase
  switch (phrase.kind) {
    case 'binary': {
      const junction = readJunction(phrase.mark, notes)
      if (junction) {
        const left = readExactCondition(phrase.left, notes)
        return { kind: junction, left, right: readExactCondition(phrase.right, notes), span }
      }
      if (!isComparison(phrase.mark)) break
      if (refuseChain(phrase, notes)) return blankExactCondition(span)
      const operator = readComparison(phrase.mark, notes) ?? '='
      const left = readExact(phrase.left, notes)
      return { kind: 'compare', operator, left, right: readExact(phrase.right, notes), span }
    }
    case 'prefix':
      if (phrase.mark.tokenType === T.Bang) correctBang(phrase, notes)
      else if (phrase.mark.tokenType !== T.Not) break
      return { kind: 'not', operand: readExactCondition(phrase.operand, notes), span }
    case 'quantified':
      if (phrase.mark.tokenType !== T.Sum) {
        const from = readExact(phrase.from, notes)
        const to = readExact(phrase.to, notes)
        const body = readExactCondition(phrase.body, notes)
        const kind = phrase.mark.tokenType === T.All ? 'all' : 'any'
        return { kind, index: nameOf(phrase.index), from, to, body, span }
      }
      break
    case 'call':
      if (phrase.mark.image === 'sorted' || phrase.mark.image === 'same') return readTest(phrase, notes)
      break
    default:
  }
  refuseNumber(phrase, notes)
  return blankExactCondition(span)
}

/** `sorted(a)` and `same(a, b)`. */
function readTest(phrase: Phrase & { kind: 'call' }, notes: Notes): ExactCondition {
  const { span } = phrase
  const contents = phrase.arguments.map(value => readContent(value))
  const [left, right] = contents
  if (phrase.mark.image === 'sorted' && left && contents.length === 1) return { kind: 'sorted', array: left, span }
  if (phrase.mark.image === 'same' && left && right && contents.length === 2)
    return { kind: 'same', left, right, span }
  notes.refuse(
    span,
    phrase.mark.image === 'sorted' ? '`sorted` takes one array.' : '`same` takes two arrays.',
    phrase.mark.image === 'sorted' ? 'Write `sorted(a)`.' : 'Write `same(a, b)`, or `same(a, old(a))`.',
  )
  return blankExactCondition(span)
}

/** Says that a number stands where a condition is expected. */
function refuseNumber(phrase: Phrase, notes: Notes): void {
  const { span } = phrase
  const signed = phrase.kind === 'call' && phrase.mark.image === 'signed'
  const before = notes.lost
  notes.lost = false
  if (!signed) readExact(phrase, notes)
  if (!notes.lost) {
    const text = `${notes.read(span)} = 1`
    notes.refuse(
      span,
      `\`${notes.read(span)}\` is a number, and a condition compares two.`,
      `Write a comparison, such as \`${text}\`.`,
      editsFix(`Write \`${text}\``, [{ start: span.end, end: span.end, text: ' = 1' }]),
    )
  }
  notes.lost ||= before
}

/** Whether a mark is the name of a function of exact expressions. */
export function isExactFunction(mark: Mark): boolean {
  return Object.hasOwn(FUNCTIONS, mark.image)
}

/** The level at which an exact operator binds. */
export const EXACT_LEVELS: Readonly<Record<ExactOperator, number>> = {
  '+': LEVEL.plus,
  '-': LEVEL.plus,
  '*': LEVEL.times,
  '/': LEVEL.times,
  mod: LEVEL.times,
  '^': LEVEL.power,
}
