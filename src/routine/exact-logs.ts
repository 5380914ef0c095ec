import {
  addRationals,
  bitLength,
  compareRationals,
  denominatorOf,
  divideRationals,
  exactRoot,
  exponentOfTwo,
  greatestDivisor,
  multiplyRationals,
  negateRational,
  numeratorOf,
  type Rational,
  ratio,
} from './exact-rational'
import { type ExactValue, isReal, type LogTerm, Real, type RealForm } from './exact-real'
import { type Enclosure, encloseLg, encloseRational, encloseRoot, shiftDown, shiftUp } from './exact-series'

export type Logs = RealForm & { kind: 'logs' }
export type Root = RealForm & { kind: 'root' }

/** Bits of the numbers that are worked out to see whether logarithms cancel. */
const MOST_CANCEL_BITS = 1 << 16
/** Bits of an argument that further ones are multiplied into. */
const MOST_ARGUMENT_BITS = 1 << 22
/** Bits of numbers whose logarithms are tried for a rational quotient: as many steps as there are bits, at most. */
const MOST_QUOTIENT_BITS = 1 << 10
/** Roots of a higher degree are worked out through logarithms. */
export const MOST_ROOT_DEGREE = 16
/** Bits of a radicand that factors are taken into. */
const MOST_RADICAND_BITS = 1 << 16

/** lg(x), x > 0: rational where x is a power of two. */
export function logarithm(x: Rational): ExactValue {
  const exponent = exponentOfTwo(x)
  return exponent === undefined ? realLogs(0n, [{ factor: 1n, argument: x }]) : BigInt(exponent)
}

function realLogs(constant: Rational, terms: readonly LogTerm[]): Real {
  return new Real(bits => encloseLogs(constant, terms, bits), terms.length, { kind: 'logs', constant, terms })
}

/** A number as a sum of logarithms: rational ones and those that came from logarithms. */
export function logsOf(value: ExactValue): Logs | undefined {
  if (!isReal(value)) return { kind: 'logs', constant: value, terms: [] }
  return value.form?.kind === 'logs' ? value.form : undefined
}

export function addLogs(all: readonly Logs[]): ExactValue {
  const constant = all.reduce<Rational>((sum, logs) => addRationals(sum, logs.constant), 0n)
  return logsValue({ kind: 'logs', constant, terms: all.flatMap(logs => logs.terms) })
}

export function scaleLogs(logs: Logs, by: Rational): ExactValue {
  return logsValue({
    kind: 'logs',
    constant: multiplyRationals(logs.constant, by),
    terms: logs.terms.map(term => ({ ...term, factor: multiplyRationals(term.factor, by) })),
  })
}

/** x / y where both are one logarithm times a rational number, and their quotient is rational: lg(8)/lg(4) = 3/2. */
export function divideLogs(x: Real, y: Real): Rational | undefined {
  const [left, right] = [singleLog(x), singleLog(y)]
  if (!left || !right) return undefined
  const quotient = quotientOfLogs(left.argument, right.argument)
  return quotient && multiplyRationals(divideRationals(left.factor, right.factor), quotient)
}

function singleLog({ form }: Real): { factor: Rational; argument: bigint } | undefined {
  if (form?.kind !== 'logs' || form.constant !== 0n || form.terms.length > 1) return undefined
  const { factor, argument } = form.terms[0]!
  if (typeof argument !== 'bigint') return undefined
  return bitLength(argument) > MOST_QUOTIENT_BITS ? undefined : { factor, argument }
}

/**
 * lg(x) / lg(y) for whole numbers above 1, where it is rational: Euclid's algorithm on the exponents. Powers of one
 * number divide each other all the way down to it, and others do not.
 */
function quotientOfLogs(x: bigint, y: bigint): Rational | undefined {
  if (x === y) return 1n
  if (x < y) {
    const inverse = quotientOfLogs(y, x)
    return inverse && divideRationals(1n, inverse)
  }
  if (x % y !== 0n) return undefined
  const rest = quotientOfLogs(x / y, y)
  return rest && addRationals(1n, rest)
}

/** Gathers terms of one factor into one logarithm of a product, then sees whether what is left is rational. */
function logsValue(logs: Logs): ExactValue {
  const groups = new Map<string, { factor: Rational; arguments: Rational[] }>()
  for (const { factor, argument } of logs.terms) {
    const sign = compareRationals(factor, 0n)
    if (sign === 0) continue
    const size = sign > 0 ? factor : negateRational(factor)
    const key = `${numeratorOf(size)}/${denominatorOf(size)}`
    const group = groups.get(key) ?? { factor: size, arguments: [] }
    group.arguments.push(sign > 0 ? argument : divideRationals(1n, argument))
    groups.set(key, group)
  }
  let { constant } = logs
  const terms: LogTerm[] = []
  for (const group of groups.values()) {
    for (const argument of productsOf(group.arguments)) {
      const exponent = exponentOfTwo(argument)
      if (exponent === undefined) terms.push({ factor: group.factor, argument })
      else constant = addRationals(constant, multiplyRationals(group.factor, BigInt(exponent)))
    }
  }
  if (terms.length === 0) return constant
  const cancelled = terms.length > 1 ? cancel(terms) : undefined
  if (cancelled !== undefined) return addRationals(constant, cancelled)
  return realLogs(constant, terms)
}

/** The product, as one number or as several where one would pass the largest size. */
function productsOf(factors: readonly Rational[]): Rational[] {
  if (factors.length === 1) return [factors[0]!]
  const products: Rational[] = []
  let from = 0
  let bits = 0
  for (const [at, factor] of factors.entries()) {
    bits += bitLength(numeratorOf(factor)) + bitLength(denominatorOf(factor))
    if (bits < MOST_ARGUMENT_BITS && at < factors.length - 1) continue
    products.push(productOf(factors.slice(from, at + 1)))
    from = at + 1
    bits = 0
  }
  return products
}

/** The product, by halves, so that large numbers meet only large ones. */
function productOf(factors: readonly Rational[]): Rational {
  if (factors.length === 1) return factors[0]!
  const middle = factors.length >> 1
  return multiplyRationals(productOf(factors.slice(0, middle)), productOf(factors.slice(middle)))
}

/**
 * The rational value of a sum of logarithms, where it has one: with the factors as whole multiples k of 1/d the sum is
 * lg(the product of argument^k) / d, and rational exactly where that product is a power of two.
 */
function cancel(terms: readonly LogTerm[]): Rational | undefined {
  const d = terms.reduce((shared, { factor }) => {
    const bottom = denominatorOf(factor)
    return (shared * bottom) / greatestDivisor(shared, bottom)
  }, 1n)
  const multiples = terms.map(({ factor }) => numeratorOf(factor) * (d / denominatorOf(factor)))
  const shared = multiples.reduce(greatestDivisor)
  const exponents = multiples.map(multiple => multiple / shared)
  const bits = terms.reduce((sum, { argument }, at) => {
    const size = bitLength(numeratorOf(argument)) + bitLength(denominatorOf(argument))
    return sum + Number(exponents[at]!) * size
  }, 0)
  if (bits > MOST_CANCEL_BITS) return undefined
  const product = productOf(
    terms.map(({ argument }, at) =>
      ratio(numeratorOf(argument) ** exponents[at]!, denominatorOf(argument) ** exponents[at]!),
    ),
  )
  const exponent = exponentOfTwo(product)
  return exponent === undefined ? undefined : ratio(BigInt(exponent) * shared, d)
}

function encloseLogs(constant: Rational, terms: readonly LogTerm[], bits: number): Enclosure {
  const sum = encloseRational(constant, bits)
  let { low, high } = sum
  for (const { factor, argument } of terms) {
    const extra = bitLength(numeratorOf(factor) / denominatorOf(factor)) + 1
    const lg = encloseLg(argument, bits + extra)
    const scale = encloseRational(factor, bits + extra)
    const products = [lg.low * scale.low, lg.low * scale.high, lg.high * scale.low, lg.high * scale.high]
    const shift = -(bits + 2 * extra)
    low += shiftDown(least(products), shift)
    high += shiftUp(most(products), shift)
  }
  return { low, high }
}

export function least(numbers: readonly bigint[]): bigint {
  return numbers.reduce((a, b) => (b < a ? b : a))
}

export function most(numbers: readonly bigint[]): bigint {
  return numbers.reduce((a, b) => (b > a ? b : a))
}

/** The root of `degree` of radicand > 0, or its negative: rational where it comes out. */
export function rootValue({ negative, radicand, degree }: Omit<Root, 'kind'>): ExactValue {
  const exact = exactRoot(radicand, degree)
  if (exact !== undefined) return negative ? negateRational(exact) : exact
  const work = (bits: number): Enclosure => {
    const { low, high } = encloseRoot(radicand, degree, bits)
    return negative ? { low: -high, high: -low } : { low, high }
  }
  return new Real(work, 1, { kind: 'root', negative, radicand, degree })
}

/** The product of a root and a root or rational number, as a root; undefined where that would be too large. */
export function multiplyRoots(x: ExactValue, y: ExactValue): ExactValue | undefined {
  const left = rootOf(x)
  const right = rootOf(y)
  if (!left || !right) return undefined
  const degree = (left.degree * right.degree) / Number(greatestDivisor(BigInt(left.degree), BigInt(right.degree)))
  if (degree > MOST_ROOT_DEGREE) return undefined
  const raised = [left, right].map(root => {
    const size = Math.max(bitLength(numeratorOf(root.radicand)), bitLength(denominatorOf(root.radicand)))
    const times = degree / root.degree
    return size * times > MOST_RADICAND_BITS ? undefined : raise(root.radicand, times)
  })
  if (raised[0] === undefined || raised[1] === undefined) return undefined
  const negative = left.negative !== right.negative
  return rootValue({ negative, radicand: multiplyRationals(raised[0], raised[1]), degree })
}

/** 1 / x for a root. */
export function invertRoot(value: Real): ExactValue | undefined {
  if (value.form?.kind !== 'root') return undefined
  return rootValue({ ...value.form, radicand: divideRationals(1n, value.form.radicand) })
}

function raise(x: Rational, times: number): Rational {
  return ratio(numeratorOf(x) ** BigInt(times), denominatorOf(x) ** BigInt(times))
}

function rootOf(value: ExactValue): Omit<Root, 'kind'> | undefined {
  if (isReal(value)) return value.form?.kind === 'root' ? value.form : undefined
  const sign = compareRationals(value, 0n)
  return sign === 0
    ? undefined
    : { negative: sign < 0, radicand: sign < 0 ? negateRational(value) : value, degree: 1 }
}

/** 2^x for a sum of logarithms, as a root or rational number; undefined where that would be too large. */
export function raiseTwo(logs: Logs): ExactValue | undefined {
  let product: ExactValue | undefined = 1n
  for (const { factor, argument } of [...logs.terms, { factor: logs.constant, argument: 2n }]) {
    const degree = denominatorOf(factor)
    const times = numeratorOf(factor)
    const size = BigInt(bitLength(numeratorOf(argument)) + bitLength(denominatorOf(argument)))
    if (degree > BigInt(MOST_ROOT_DEGREE) || size * (times < 0n ? -times : times) > MOST_RADICAND_BITS)
      return undefined
    const raised =
      times < 0n ? divideRationals(1n, raise(argument, Number(-times))) : raise(argument, Number(times))
    const part = degree === 1n ? raised : rootValue({ negative: false, radicand: raised, degree: Number(degree) })
    if (!isReal(product) && !isReal(part)) product = multiplyRationals(product, part)
    else product = multiplyRoots(product, part)
    if (product === undefined) return undefined
  }
  return product
}
