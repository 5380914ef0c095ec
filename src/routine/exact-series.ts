import { bitLength, ceilDivide, denominatorOf, floorRoot, numeratorOf, type Rational } from './exact-rational'

/** The ends of an interval that holds a number, in units of 2^-bits: low / 2^bits <= number <= high / 2^bits. */
export interface Enclosure {
  readonly low: bigint
  readonly high: bigint
}

/** Bits worked with past those asked for: what rounding at each of some thousand terms can spoil. */
const GUARD = 32

/** x * 2^shift, rounded down. */
export function shiftDown(x: bigint, shift: number): bigint {
  return shift >= 0 ? x << BigInt(shift) : x >> BigInt(-shift)
}

/** x * 2^shift, rounded up. */
export function shiftUp(x: bigint, shift: number): bigint {
  return -shiftDown(-x, shift)
}

/** Encloses a rational number. */
export function encloseRational(x: Rational, bits: number): Enclosure {
  if (typeof x === 'bigint') {
    const scaled = x << BigInt(bits)
    return { low: scaled, high: scaled }
  }
  const high = ceilDivide(x.numerator << BigInt(bits), x.denominator)
  return { low: high - 1n, high }
}

/** Encloses lg(x), x > 0. */
export function encloseLg(x: Rational, bits: number): Enclosure {
  const top = numeratorOf(x)
  const bottom = denominatorOf(x)
  return encloseLgBetween({ top, bottom }, { top, bottom }, bits)
}

interface Fraction {
  readonly top: bigint
  readonly bottom: bigint
}

/** Encloses lg of every number between two positive ones. */
export function encloseLgBetween(low: Fraction, high: Fraction, bits: number): Enclosure {
  const inner = bits + GUARD
  const two = lnTwo(inner)
  const lower = normalise(low, inner)
  const upper =
    low === high || (low.top === high.top && low.bottom === high.bottom) ? lower : normalise(high, inner)
  const fractionLow = (lnLow(lower.mantissa, inner) << BigInt(inner)) / two.high
  const fractionHigh = ceilDivide(lnHigh(upper.mantissa + upper.slack, inner) << BigInt(inner), two.low)
  const whole = (exponent: number) => BigInt(exponent) << BigInt(inner)
  return {
    low: shiftDown(whole(lower.exponent) + fractionLow, -GUARD),
    high: shiftUp(whole(upper.exponent) + fractionHigh, -GUARD),
  }
}

/** x = mantissa * 2^exponent with mantissa in 1 .. 2, cut after `bits`; `slack` is 1 unit where bits were cut off. */
function normalise({ top, bottom }: Fraction, bits: number) {
  let exponent = bitLength(top) - bitLength(bottom)
  const below = exponent >= 0 ? top < bottom << BigInt(exponent) : top << BigInt(-exponent) < bottom
  if (below) exponent--
  const shift = bits - exponent
  const scaled = bottom === 1n ? shiftDown(top, shift) : quotient(top, bottom, shift)
  return { mantissa: scaled, slack: 1n, exponent }
}

function quotient(top: bigint, bottom: bigint, shift: number): bigint {
  return shift >= 0 ? (top << BigInt(shift)) / bottom : top / (bottom << BigInt(-shift))
}

// ln m = 2 artanh((m - 1) / (m + 1)), each bound by its own series, rounded its own way throughout.

function lnLow(mantissa: bigint, bits: number): bigint {
  const one = 1n << BigInt(bits)
  const z = ((mantissa - one) << BigInt(bits)) / (mantissa + one)
  return 2n * artanhLow(z, bits)
}

function lnHigh(mantissa: bigint, bits: number): bigint {
  const one = 1n << BigInt(bits)
  const z = ceilDivide((mantissa - one) << BigInt(bits), mantissa + one)
  return 2n * artanhHigh(z, bits)
}

function artanhLow(z: bigint, bits: number): bigint {
  const shift = BigInt(bits)
  const square = (z * z) >> shift
  let sum = 0n
  for (let power = z, k = 1n; power > 0n; k += 2n) {
    sum += power / k
    power = (power * square) >> shift
  }
  return sum
}

/** z <= 1/3 and a little: the terms left out when a power is down to one unit come to less than two units. */
function artanhHigh(z: bigint, bits: number): bigint {
  const square = shiftUp(z * z, -bits)
  let sum = 2n
  for (let power = z, k = 1n; power > 1n; k += 2n) {
    sum += power / k + 1n
    power = shiftUp(power * square, -bits)
  }
  return sum
}

const knownLnTwo = new Map<number, Enclosure>()
/** Precisions double from 64, so few are ever asked for; past this many the memory is let go. */
const KEPT = 64

function lnTwo(bits: number): Enclosure {
  let known = knownLnTwo.get(bits)
  if (!known) {
    const third = (1n << BigInt(bits)) / 3n
    known = { low: 2n * artanhLow(third, bits), high: 2n * artanhHigh(third + 1n, bits) }
    if (knownLnTwo.size >= KEPT) knownLnTwo.clear()
    knownLnTwo.set(bits, known)
  }
  return known
}

/** Encloses 2^y for every y between `low` and `high`, which are in units of 2^-given. */
export function enclosePowerOfTwo(low: bigint, high: bigint, given: number, bits: number): Enclosure {
  return { low: powerOfTwo(low, given, bits, false), high: powerOfTwo(high, given, bits, true) }
}

/** 2^y rounded down or up: the whole part by a shift, the rest by the series of exp. */
function powerOfTwo(y: bigint, given: number, bits: number, up: boolean): bigint {
  const whole = Number(y >> BigInt(given))
  if (whole + bits < -1) return up ? 1n : 0n
  const inner = bits + Math.max(0, whole) + GUARD
  const fraction = y - (BigInt(whole) << BigInt(given))
  const two = lnTwo(inner)
  const t = up ? shiftUp(fraction * two.high, -given) : shiftDown(fraction * two.low, -given)
  const one = 1n << BigInt(inner)
  let sum = one
  // Once a term is down to one unit, t < 0.7 leaves less than two units for all that follow.
  const least = up ? 1n : 0n
  for (let term = one, k = 1n; ; k++) {
    term = up ? ceilDivide(shiftUp(term * t, -inner), k) : shiftDown(term * t, -inner) / k
    if (term <= least) break
    sum += term
  }
  if (up && t > 0n) sum += 3n
  const shift = whole + bits - inner
  return up ? shiftUp(sum, shift) : shiftDown(sum, shift)
}

/** Encloses the `degree`th root of x > 0. */
export function encloseRoot(x: Rational, degree: number, bits: number): Enclosure {
  const low = floorRoot((numeratorOf(x) << BigInt(degree * bits)) / denominatorOf(x), degree)
  return { low, high: low + 1n }
}
