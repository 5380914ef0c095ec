import { divide } from './exact-number'
import { isProblem } from './exact-problem'
import { bitLength, type Rational } from './exact-rational'
import { type ExactValue, isReal } from './exact-real'

/** Bits of a quotient before it is rounded: a double's 53, and enough that the last one only breaks ties. */
const QUOTIENT_BITS = 66
const MOST_SHIFT = 1000

/**
 * The nearest double, for plots alone: ties to even, past the largest double an infinity. No verdict comes from it.
 */
export function nearestDouble(value: ExactValue): number {
  if (!isReal(value)) return rationalDouble(value)
  const known = value.refine(({ low, high }, bits) => {
    const [below, above] = [scaledDouble(low, -bits), scaledDouble(high, -bits)]
    return below === above ? below : undefined
  })
  if (known !== undefined) return known
  const last = value.enclose(64)
  return last ? scaledDouble(last.high, -64) : Number.NaN
}

/** The nearest double of count / bound; undefined where the bound is 0 or lies too close to it to call. */
export function quotientDouble(count: bigint | number, bound: ExactValue): number | undefined {
  const quotient = divide(BigInt(count), bound)
  return isProblem(quotient) ? undefined : nearestDouble(quotient)
}

function rationalDouble(x: Rational): number {
  if (typeof x === 'bigint') return Number(x)
  const sign = x.numerator < 0n ? -1 : 1
  const top = x.numerator < 0n ? -x.numerator : x.numerator
  const shift = QUOTIENT_BITS - (bitLength(top) - bitLength(x.denominator))
  const dividend = shift >= 0 ? top << BigInt(shift) : top
  const divisor = shift >= 0 ? x.denominator : x.denominator << BigInt(-shift)
  const quotient = dividend / divisor
  // A last bit for whatever is cut off keeps a tie from being seen where there is none.
  const sticky = quotient * divisor === dividend ? quotient : quotient | 1n
  return sign * scaledDouble(sticky, -shift)
}

/** x * 2^shift, in steps that neither overflow nor vanish before the last. */
function scaledDouble(x: bigint, shift: number): number {
  const excess = bitLength(x) - MOST_SHIFT
  if (excess > 0) return scaledDouble(x >> BigInt(excess), shift + excess)
  let double = Number(x)
  let left = shift
  while (left !== 0 && double !== 0 && Number.isFinite(double)) {
    const step = Math.max(-MOST_SHIFT, Math.min(MOST_SHIFT, left))
    double *= 2 ** step
    left -= step
  }
  return double
}
