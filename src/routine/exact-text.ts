import { nearestDouble } from './exact-double'
import { absolute, floor, multiply } from './exact-number'
import { isProblem } from './exact-problem'
import { bitLength, denominatorOf, numeratorOf, type Ratio, ratio, reduceRatio } from './exact-rational'
import { type ExactValue, isReal } from './exact-real'

/** Whole numbers up to this many bits are written out: every power up to 2^16384. */
const WRITTEN_OUT_BITS = 1 << 14
/** Longest `p/q` that a reader takes in. */
const LONGEST_QUOTIENT = 40
const REDUCIBLE_BITS = 4096
/** Digits of a decimal before its `...`. */
const DIGITS = 15
/** Decimals with more places than these before or behind the point are written with an exponent. */
const MOST_WHOLE_PLACES = 18
const MOST_ZERO_PLACES = 5
const LG_10 = Math.log2(10)

/**
 * The exact text of a number: a whole number, `p/q` in lowest terms, or, for reals and for numbers too long to read, a
 * decimal cut off (not rounded) with `...`, past 10^18 as `1.04438888141315...e1233`.
 */
export function exactText(value: ExactValue): string {
  if (typeof value === 'bigint') return bitLength(value) <= WRITTEN_OUT_BITS ? String(value) : decimalText(value)
  if (isReal(value)) return decimalText(value)
  return quotientText(value) ?? decimalText(value)
}

function quotientText(value: Ratio): string | undefined {
  if (bitLength(value.numerator) + bitLength(value.denominator) > REDUCIBLE_BITS) return undefined
  const { numerator, denominator } = reduceRatio(value)
  const text = `${numerator}/${denominator}`
  return text.length <= LONGEST_QUOTIENT ? text : undefined
}

function decimalText(value: ExactValue): string {
  const size = absolute(value)
  const rough = nearestDouble(value)
  const sign = rough < 0 ? '-' : ''
  let exponent = roughExponent(size)
  let digits = cutDigits(size, DIGITS - 1 - exponent)
  if (digits === '0') return `0.${'0'.repeat(DIGITS - 1)}...`
  // The rough exponent may be one off; the digits say what it is.
  if (digits.length !== DIGITS) {
    exponent += digits.length - DIGITS
    digits = cutDigits(size, DIGITS - 1 - exponent)
  }
  if (exponent > MOST_WHOLE_PLACES || exponent < -MOST_ZERO_PLACES)
    return `${sign}${digits[0]}.${digits.slice(1)}...e${exponent}`
  if (exponent < 0) return `${sign}0.${'0'.repeat(-exponent - 1)}${digits}...`
  const padded = digits.padEnd(exponent + 1, '0')
  return `${sign}${padded.slice(0, exponent + 1)}.${padded.slice(exponent + 1)}...`
}

function roughExponent(size: ExactValue): number {
  const double = nearestDouble(size)
  if (double > 0 && double < Number.POSITIVE_INFINITY) return Math.floor(Math.log10(double))
  if (isReal(size)) return Math.floor((bitLength(size.enclose(64)?.high ?? 1n) - 65) / LG_10)
  const bits = bitLength(numeratorOf(size)) - (typeof size === 'bigint' ? 1 : bitLength(size.denominator))
  return Math.floor(bits / LG_10)
}

/** The digits of size * 10^places, cut off. */
function cutDigits(size: ExactValue, places: number): string {
  const shift = 10n ** BigInt(Math.abs(places))
  if (!isReal(size)) {
    const [top, bottom] = [numeratorOf(size), denominatorOf(size)]
    return String(places >= 0 ? (top * shift) / bottom : top / (bottom * shift))
  }
  const scaled = multiply(size, places >= 0 ? shift : ratio(1n, shift))
  if (isProblem(scaled) || !isReal(scaled)) return '0'
  const whole = floor(scaled)
  if (!isProblem(whole)) return String(whole)
  // Too close to a decimal to call: from above, so that 1 reads as 1.000, not as 0.999.
  return String((scaled.enclose(64)?.high ?? 0n) >> 64n)
}
