import { printCondition } from '../../grammar'
import type { Span } from '../../grammar/span'
import type { Exact } from '../../grammar/tree'
import {
  type ArrayDeclaration,
  evaluateExact,
  holdsExact,
  isProblem,
  type Program,
  type Words,
  wholeNumber,
} from '../routine'
import { pointText } from './failure'
import { MAX_WIDTH, MIN_WIDTH } from './machine'
import type { Binding, Limits, Point, Refusal } from './run'
import { namesScope } from './scope'
import { bytesOfWord, makeWords } from './words'

/** Thrown inside `bindProgram` alone, where it becomes its answer. */
class Refused extends Error {
  constructor(
    reason: string,
    readonly span?: Span,
  ) {
    super(reason)
  }
}

/**
 * Works a program out at a point: lets, fixes, lengths, tables, constants and addresses. Refused, with the reason,
 * where a need fails, a length is no whole number from 0, a word does not fit in w bits or memory would not hold it all.
 */
export function bindProgram(
  program: Program,
  point: Point,
  limits: Limits,
): { binding: Binding } | { refusal: Refusal } {
  try {
    return { binding: bind(program, point, limits) }
  } catch (thrown) {
    if (!(thrown instanceof Refused)) throw thrown
    return { refusal: { reason: thrown.message, ...(thrown.span ? { span: thrown.span } : {}) } }
  }
}

function bind(program: Program, point: Point, limits: Limits): Binding {
  const { routine } = program
  const { width } = point
  if (!Number.isInteger(width) || width < MIN_WIDTH || width > MAX_WIDTH)
    throw new Refused(`w = ${width} is no width: it is a whole number from ${MIN_WIDTH} to ${MAX_WIDTH}`)
  const names = new Map<string, bigint>([['w', BigInt(width)]])
  const fits = (word: bigint, what: string, span?: Span) => {
    if (word < 0n) throw new Refused(`${what} = ${word} is below 0`, span)
    if (BigInt.asUintN(width, word) !== word)
      throw new Refused(`${what} = ${word} does not fit a word of ${width} bits`, span)
    return word
  }
  for (const size of routine.sizes) {
    const value = point.sizes[size]
    if (value === undefined || !Number.isSafeInteger(value) || value < 0)
      throw new Refused(`size ${size} has no value here: give it a whole number from 0`)
    if (BigInt.asUintN(width, BigInt(value)) !== BigInt(value))
      throw new Refused(`${size} = ${value} does not fit a word of ${width} bits: ${size} < 2^w fails`)
    names.set(size, BigInt(value))
  }
  const whole = (expression: Exact, what: string) => {
    const value = evaluateExact(expression, namesScope(names))
    const answer = isProblem(value) ? value : wholeNumber(value, what, expression.span)
    if (isProblem(answer))
      throw new Refused(
        `${what} cannot be worked out at ${pointText({ point })}: ${answer.message}`,
        answer.span ?? expression.span,
      )
    return answer
  }
  for (const each of routine.lets) {
    const given = Object.hasOwn(point.lets, each.name) ? point.lets[each.name] : undefined
    names.set(each.name, given ?? whole(each.value, `let ${each.name}`))
  }
  for (const each of routine.fixes) names.set(each.name, whole(each.value, `fix ${each.name}`))
  for (const need of routine.needs) {
    const holds = holdsExact(need.condition, namesScope(names))
    const text = `need ${printCondition(need.condition)}`
    if (isProblem(holds))
      throw new Refused(`${text} cannot be worked out at ${pointText({ point })}: ${holds.message}`, need.span)
    if (!holds) throw new Refused(`${text} fails at ${pointText({ point })} (line ${need.span.line})`, need.span)
  }

  const bytes = bytesOfWord(width)
  const arrays: { base: number; length: number }[] = []
  let words = 0
  let writable = 0
  for (const array of routine.arrays) {
    const length = whole(array.length, `the length of ${array.name}`)
    if (length < 0n) throw new Refused(`the length of ${array.name} is ${length}, below 0`, array.span)
    if (length * BigInt(bytes) > BigInt(limits.bytes))
      throw new Refused(
        `${array.name} of ${length} words of ${width} bits needs ${length * BigInt(bytes)} bytes, past the limit of ${limits.bytes}`,
        array.span,
      )
    arrays.push({ base: words, length: Number(length) })
    words += Number(length)
    if (array.role === 'in' || array.role === 'table') writable = words
  }
  const need = words * bytes + (words - writable)
  if (need > limits.bytes)
    throw new Refused(
      `memory of ${words} words of ${width} bits needs ${need} bytes, past the limit of ${limits.bytes}`,
    )

  const tables = new Map<number, Words>()
  for (const [at, array] of routine.arrays.entries()) {
    if (array.role === 'table') tables.set(at, tableWords(array, arrays[at]!.length, width, names, fits))
  }
  const constants = program.constants.map(constant => {
    switch (constant.kind) {
      case 'literal':
        return fits(constant.value, `a constant of line ${constant.span.line}`, constant.span)
      case 'width':
        return fits(BigInt(width), 'w')
      case 'exact':
        return fits(whole(constant.value, constant.name), constant.name, constant.span)
      case 'address': {
        const { name } = routine.arrays[constant.array]!
        return fits(BigInt(arrays[constant.array]!.base), `addr(${name})`, constant.span)
      }
      default:
        return fits(names.get(constant.name)!, `${constant.kind} ${constant.name}`, constant.span)
    }
  })
  return { program, point, constants, arrays, words, writable, tables, names }
}

function tableWords(
  { name, table, span }: ArrayDeclaration,
  length: number,
  width: number,
  names: ReadonlyMap<string, bigint>,
  fits: (word: bigint, what: string, span?: Span) => bigint,
): Words {
  const element = (expression: Exact, at: number, scope: ReadonlyMap<string, bigint>) => {
    const what = `${name}[${at}]`
    const value = evaluateExact(expression, namesScope(scope))
    const answer = isProblem(value) ? value : wholeNumber(value, what, expression.span)
    if (isProblem(answer)) throw new Refused(`${what} cannot be worked out: ${answer.message}`, expression.span)
    return fits(answer, what, expression.span)
  }
  if (table!.kind === 'list') {
    const { values } = table!
    if (values.length !== length)
      throw new Refused(`${name} has ${length} words, and its list gives ${values.length}`, span)
    return makeWords(
      width,
      values.map((value, at) => element(value, at, names)),
    )
  }
  const { index, from, value } = table!
  const first = evaluateExact(from, namesScope(names))
  const start = isProblem(first) ? first : wholeNumber(first, `the first index of ${name}`, from.span)
  if (isProblem(start)) throw new Refused(start.message, from.span)
  const scope = new Map(names)
  return makeWords(
    width,
    Array.from({ length }, (_, at) => element(value, at, scope.set(index.text, start + BigInt(at)))),
  )
}
