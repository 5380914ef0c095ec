import {
  addLogs,
  divideLogs,
  invertRoot,
  least,
  logarithm,
  logsOf,
  MOST_ROOT_DEGREE,
  most,
  multiplyRoots,
  raiseTwo,
  rootValue,
  scaleLogs,
} from './exact-logs'
import { type ExactProblem, exactProblem, isProblem } from './exact-problem'
import {
  addRationals,
  bitLength,
  ceilDivide,
  ceilRational,
  compareRationals,
  denominatorOf,
  divideRationals,
  exactRoot,
  floorDivide,
  floorLogarithm,
  floorRational,
  moduloRationals,
  multiplyRationals,
  negateRational,
  numeratorOf,
  type Ratio,
  type Rational,
  ratio,
} from './exact-rational'
import { type ExactValue, encloseValue, isReal, partsOf, Real } from './exact-real'
import { encloseLgBetween, enclosePowerOfTwo, shiftDown, shiftUp } from './exact-series'

/** Bits of the largest numbers that are worked out: half a megabyte each. */
export const MOST_BITS = 1 << 22
const HALF_SIZE = 1n << BigInt(MOST_BITS / 2)
const MINUS_HALF_SIZE = -HALF_SIZE
const UNDECIDED = 'It lies too close to call: the bits worked out do not tell'

export type Answer = ExactValue | ExactProblem

export function negate(x: ExactValue): ExactValue {
  if (!isReal(x)) return negateRational(x)
  const logs = logsOf(x)
  if (logs) return scaleLogs(logs, -1n)
  if (x.form?.kind === 'root') return rootValue({ ...x.form, negative: !x.form.negative })
  return new Real(bits => {
    const own = x.enclose(bits)
    return own && { low: -own.high, high: -own.low }
  }, x.parts)
}

export function add(x: ExactValue, y: ExactValue): Answer {
  if (!isReal(x) && !isReal(y)) return tooLarge(x, y) ?? addRationals(x, y)
  return sumRoots(x, y) ?? sumReals([x, y])
}

/** The sum of two roots of which one is a rational multiple of the other. */
function sumRoots(x: ExactValue, y: ExactValue): ExactValue | undefined {
  if (!isReal(x) || !isReal(y) || y.form?.kind !== 'root') return undefined
  const inverse = invertRoot(x)
  const multiple = inverse && multiplyRoots(y, inverse)
  return multiple === undefined || isReal(multiple) ? undefined : scale(x, addRationals(multiple, 1n))
}

/** The sum of numbers of which some are real. */
export function sumReals(numbers: readonly ExactValue[]): ExactValue {
  const logs = numbers.map(logsOf)
  if (logs.every(form => form !== undefined)) return addLogs(logs)
  const parts = numbers.reduce((count, number) => count + partsOf(number), 0)
  return new Real(bits => {
    let low = 0n
    let high = 0n
    for (const number of numbers) {
      const own = encloseValue(number, bits)
      if (!own) return undefined
      low += own.low
      high += own.high
    }
    return { low, high }
  }, parts)
}

export function subtract(x: ExactValue, y: ExactValue): Answer {
  return add(x, negate(y))
}

export function multiply(x: ExactValue, y: ExactValue): Answer {
  if (!isReal(x)) return isReal(y) ? scale(y, x) : (tooLarge(x, y) ?? multiplyRationals(x, y))
  if (!isReal(y)) return scale(x, y)
  const root = multiplyRoots(x, y)
  if (root !== undefined) return root
  return new Real(bits => {
    const left = x.enclose(bits)
    const right = left && y.enclose(bits)
    if (!right) return undefined
    const ends = [left.low * right.low, left.low * right.high, left.high * right.low, left.high * right.high]
    return { low: shiftDown(least(ends), -bits), high: shiftUp(most(ends), -bits) }
  }, x.parts + y.parts)
}

function scale(x: Real, by: Rational): ExactValue {
  if (by === 0n) return 0n
  const logs = logsOf(x)
  if (logs) return scaleLogs(logs, by)
  const root = multiplyRoots(x, by)
  if (root !== undefined) return root
  const top = numeratorOf(by)
  const bottom = denominatorOf(by)
  const extra = Math.max(0, bitLength(top) - bitLength(bottom)) + 1
  return new Real(bits => {
    const own = x.enclose(bits + extra)
    if (!own) return undefined
    const ends = [own.low * top, own.high * top]
    const unit = bottom << BigInt(extra)
    return { low: floorDivide(least(ends), unit), high: ceilDivide(most(ends), unit) }
  }, x.parts)
}

export function divide(x: ExactValue, y: ExactValue): Answer {
  if (!isReal(y)) {
    if (y === 0n) return exactProblem('undefined', 'It divides by zero.')
    if (!isReal(x)) return tooLarge(x, y) ?? divideRationals(x, y)
    return scale(x, divideRationals(1n, y))
  }
  const sign = y.side(0n)
  if (sign === undefined) return exactProblem('undecided', `${UNDECIDED} whether the divisor is zero.`)
  const inverse = invertRoot(y)
  if (inverse !== undefined) return multiply(x, inverse)
  const quotient = isReal(x) ? divideLogs(x, y) : undefined
  if (quotient !== undefined) return quotient
  return new Real(bits => {
    const top = encloseValue(x, bits)
    const bottom = top && y.enclose(bits)
    if (!bottom || (bottom.low <= 0n && bottom.high >= 0n)) return undefined
    const turn = sign < 0 ? -1n : 1n
    const divisors = [bottom.low * turn, bottom.high * turn]
    const ends = [top.low, top.high].flatMap(end => divisors.map(divisor => ({ end: end * turn, divisor })))
    return {
      low: least(ends.map(({ end, divisor }) => floorDivide(end << BigInt(bits), divisor))),
      high: most(ends.map(({ end, divisor }) => ceilDivide(end << BigInt(bits), divisor))),
    }
  }, partsOf(x) + y.parts)
}

/** x mod y = x - y * floor(x / y): it has the sign of y. */
export function modulo(x: ExactValue, y: ExactValue): Answer {
  if (!isReal(x) && !isReal(y)) {
    if (y === 0n) return exactProblem('undefined', 'It takes a remainder by zero.')
    return tooLarge(x, y) ?? moduloRationals(x, y)
  }
  const quotient = divide(x, y)
  if (isProblem(quotient)) return quotient
  const whole = floor(quotient)
  if (isProblem(whole)) return whole
  const multiple = multiply(y, whole)
  return isProblem(multiple) ? multiple : subtract(x, multiple)
}

export function power(base: ExactValue, exponent: ExactValue): Answer {
  if (typeof exponent === 'bigint') return isReal(base) ? powerOfReal(base, exponent) : wholePower(base, exponent)
  const sign = compare(base, 0n)
  if (isProblem(sign)) return sign
  if (sign < 0) return exactProblem('undefined', 'It raises a negative number to a power that is not whole.')
  if (sign === 0) {
    const side = compare(exponent, 0n)
    if (isProblem(side)) return side
    return side > 0 ? 0n : exactProblem('undefined', 'It raises zero to a negative power.')
  }
  if (base === 1n) return 1n
  if (!isReal(base) && !isReal(exponent)) {
    const root = rationalPower(base, exponent)
    if (root !== undefined) return root
  }
  if (isReal(base) && base.form?.kind === 'root' && !isReal(exponent)) {
    const { radicand, degree } = base.form
    return power(radicand, divideRationals(exponent, BigInt(degree)))
  }
  const lg = logarithmOf(base)
  if (isProblem(lg)) return lg
  const product = multiply(exponent, lg)
  return isProblem(product) ? product : raiseTwoTo(product)
}

function wholePower(base: Rational, exponent: bigint): Answer {
  if (exponent === 0n) return 1n
  if (base === 0n) return exponent > 0n ? 0n : exactProblem('undefined', 'It raises zero to a negative power.')
  if (base === 1n) return 1n
  if (base === -1n) return exponent % 2n === 0n ? 1n : -1n
  const times = exponent < 0n ? -exponent : exponent
  const bits = Math.max(bitLength(numeratorOf(base)), bitLength(denominatorOf(base))) - 1
  if (times > MOST_BITS || Number(times) * Math.max(bits, 1) > MOST_BITS)
    return exactProblem('too-large', `It is a power of more than ${MOST_BITS} bits, past what is worked out.`)
  const top = numeratorOf(base) ** times
  const bottom = denominatorOf(base) ** times
  return exponent > 0n ? ratio(top, bottom) : ratio(bottom, top)
}

/** x^(p/q) where it is rational or a root of low degree. */
function rationalPower(base: Rational, exponent: Ratio): Answer | undefined {
  const degree = exponent.denominator
  if (degree > BigInt(MOST_BITS)) return undefined
  const exact = exactRoot(base, Number(degree))
  if (exact !== undefined) return wholePower(exact, exponent.numerator)
  if (degree > BigInt(MOST_ROOT_DEGREE)) return undefined
  const radicand = wholePower(base, exponent.numerator)
  if (isProblem(radicand)) return radicand
  return isReal(radicand) ? undefined : rootValue({ negative: false, radicand, degree: Number(degree) })
}

function powerOfReal(base: Real, exponent: bigint): Answer {
  if (exponent === 0n) return 1n
  if (exponent < 0n) {
    const raised = powerOfReal(base, -exponent)
    return isProblem(raised) ? raised : divide(1n, raised)
  }
  let product: ExactValue = 1n
  let square: ExactValue = base
  const rough = base.enclose(64)
  const bits = rough ? Math.max(1, bitLength(rough.high), bitLength(rough.low)) - 64 : 1
  if (exponent > MOST_BITS || Number(exponent) * Math.max(1, bits) > MOST_BITS)
    return exactProblem('too-large', `It is a power of more than ${MOST_BITS} bits, past what is worked out.`)
  for (let rest = exponent; ; rest >>= 1n) {
    if (rest & 1n) {
      const next = multiply(product, square)
      if (isProblem(next)) return next
      product = next
    }
    if (rest === 1n) return product
    const next = multiply(square, square)
    if (isProblem(next)) return next
    square = next
  }
}

function raiseTwoTo(exponent: ExactValue): Answer {
  if (typeof exponent === 'bigint') return wholePower(2n, exponent)
  const logs = isReal(exponent) ? logsOf(exponent) : undefined
  const exact = logs && raiseTwo(logs)
  if (exact !== undefined) return exact
  const rough = encloseValue(exponent, 64)
  if (!rough || rough.high >> 64n > BigInt(MOST_BITS) || -rough.low >> 64n > BigInt(MOST_BITS))
    return exactProblem('too-large', `It is a power of more than ${MOST_BITS} bits, past what is worked out.`)
  const extra = Math.max(0, Number(rough.high >> 64n)) + 2
  return new Real(bits => {
    const own = encloseValue(exponent, bits + extra)
    return own && enclosePowerOfTwo(own.low, own.high, bits + extra, bits)
  }, partsOf(exponent))
}

/** lg(x), to base 2. */
export function logarithmOf(x: ExactValue): Answer {
  const sign = compare(x, 0n)
  if (isProblem(sign)) return sign
  if (sign <= 0) return exactProblem('undefined', `It takes lg of ${sign === 0 ? 'zero' : 'a negative number'}.`)
  if (!isReal(x)) return logarithm(x)
  if (x.form?.kind === 'root') {
    const lg = logarithm(x.form.radicand)
    return divide(lg, BigInt(x.form.degree))
  }
  return new Real(bits => {
    const own = x.enclose(bits)
    if (!own || own.low <= 0n) return undefined
    const bottom = 1n << BigInt(bits)
    return encloseLgBetween({ top: own.low, bottom }, { top: own.high, bottom }, bits)
  }, x.parts)
}

export function floor(x: ExactValue): bigint | ExactProblem {
  if (!isReal(x)) return floorRational(x)
  const known = floorOfLogarithm(x)
  if (known !== undefined) return known
  const whole = x.refine(({ low, high }, bits) => {
    const [down, up] = [low >> BigInt(bits), high >> BigInt(bits)]
    return down === up ? down : undefined
  })
  return whole ?? exactProblem('undecided', `${UNDECIDED} which whole number is next below.`)
}

export function ceil(x: ExactValue): bigint | ExactProblem {
  if (!isReal(x)) return ceilRational(x)
  const known = floorOfLogarithm(x)
  // A real is not known to be whole, and a logarithm that is real is not whole.
  if (known !== undefined) return known + 1n
  const whole = x.refine(({ low, high }, bits) => {
    const [down, up] = [-(-low >> BigInt(bits)), -(-high >> BigInt(bits))]
    return down === up ? down : undefined
  })
  return whole ?? exactProblem('undecided', `${UNDECIDED} which whole number is next above.`)
}

/** floor(lg(x)) needs no enclosure: it is told by the length of x. */
function floorOfLogarithm({ form }: Real): bigint | undefined {
  if (form?.kind !== 'logs' || form.terms.length !== 1 || typeof form.constant !== 'bigint') return undefined
  const { factor, argument } = form.terms[0]!
  return factor === 1n ? form.constant + BigInt(floorLogarithm(argument)) : undefined
}

export function absolute(x: ExactValue): ExactValue {
  if (!isReal(x)) return compareRationals(x, 0n) < 0 ? negateRational(x) : x
  const sign = x.side(0n)
  if (sign !== undefined) return sign < 0 ? negate(x) : x
  return new Real(bits => {
    const own = x.enclose(bits)
    if (!own) return undefined
    if (own.low >= 0n) return own
    return own.high <= 0n ? { low: -own.high, high: -own.low } : { low: 0n, high: most([-own.low, own.high]) }
  }, x.parts)
}

/** The least (or the greatest) of two numbers: even where it is not told which of them that is, its value is. */
export function extreme(x: ExactValue, y: ExactValue, wanted: 'min' | 'max'): ExactValue {
  const order = compare(x, y)
  if (!isProblem(order)) return order <= 0 === (wanted === 'min') ? x : y
  const pick = wanted === 'min' ? least : most
  return new Real(bits => {
    const left = encloseValue(x, bits)
    const right = left && encloseValue(y, bits)
    return right && { low: pick([left.low, right.low]), high: pick([left.high, right.high]) }
  }, partsOf(x) + partsOf(y))
}

/** Negative, zero or positive as x is below, equal to or above y; a problem where they lie too close to call. */
export function compare(x: ExactValue, y: ExactValue): number | ExactProblem {
  if (!isReal(x) && !isReal(y)) return compareRationals(x, y)
  const sign = isReal(x) && !isReal(y) ? x.side(y) : sideOfZero(subtract(x, y))
  return sign ?? exactProblem('undecided', `${UNDECIDED} which of two numbers is larger.`)
}

function sideOfZero(difference: Answer): number | undefined {
  if (isProblem(difference)) return undefined
  return isReal(difference) ? difference.side(0n) : compareRationals(difference, 0n)
}

/** The number of ones of a whole number >= 0 in binary. */
export function popcount(x: ExactValue): Answer {
  if (typeof x !== 'bigint' || x < 0n)
    return exactProblem('undefined', 'popcount takes a whole number that is not negative.')
  let ones = 0
  for (const digit of x.toString(16)) ones += ONES[Number.parseInt(digit, 16)]!
  return BigInt(ones)
}

/** Ones in each hexadecimal digit. */
const ONES = [0, 1, 1, 2, 1, 2, 2, 3, 1, 2, 2, 3, 2, 3, 3, 4]

/** Refuses an operation on two rational numbers whose result might pass the largest size. */
function tooLarge(x: Rational, y: Rational): ExactProblem | undefined {
  if (isSmall(x) && isSmall(y)) return undefined
  const size = (n: Rational) => bitLength(numeratorOf(n)) + bitLength(denominatorOf(n))
  if (size(x) + size(y) <= MOST_BITS) return undefined
  return exactProblem('too-large', `It has more than ${MOST_BITS} bits, past what is worked out.`)
}

function isSmall(x: Rational): boolean {
  if (typeof x === 'bigint') return x < HALF_SIZE && x > MINUS_HALF_SIZE
  return x.denominator < HALF_SIZE && x.numerator < HALF_SIZE && x.numerator > MINUS_HALF_SIZE
}
