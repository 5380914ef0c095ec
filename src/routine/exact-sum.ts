import { MOST_BITS, sumReals } from './exact-number'
import type { Quick } from './exact-quick'
import { addRationals, bitLength, type Rational, ratio, sumRationals } from './exact-rational'
import { type ExactValue, isReal, Real } from './exact-real'
import { encloseRational } from './exact-series'

/** A long sum: whole terms added at once, fractions by denominator and then by halves, reals as one. */
export class ExactSum {
  private small = 0
  private whole = 0n
  /** Sums of numerators by denominator. */
  private readonly fractions = new Map<bigint, bigint>()
  private readonly reals: Real[] = []

  add(term: Quick): void {
    if (typeof term === 'number') {
      const sum = this.small + term
      if (Number.isSafeInteger(sum)) this.small = sum
      else this.whole += BigInt(term)
    } else if (typeof term === 'bigint') this.whole += term
    else if (isReal(term)) this.reals.push(term)
    else this.fractions.set(term.denominator, (this.fractions.get(term.denominator) ?? 0n) + term.numerator)
  }

  total(): ExactValue {
    const whole = this.whole + BigInt(this.small)
    const fractions = sumFractions([...this.fractions].map(([bottom, top]) => ratio(top, bottom)))
    if (this.reals.length > 0) return sumReals([whole, fractions, ...this.reals])
    return isReal(fractions) ? sumReals([whole, fractions]) : addRationals(whole, fractions)
  }
}

/** Fractions whose common denominator would pass the largest size are enclosed, as reals are. */
function sumFractions(fractions: readonly Rational[]): ExactValue {
  const bits = fractions.reduce(
    (sum, each) => sum + (typeof each === 'bigint' ? 0 : bitLength(each.denominator)),
    0,
  )
  if (bits <= MOST_BITS) return sumRationals(fractions)
  return new Real(bits => {
    let low = 0n
    let high = 0n
    for (const fraction of fractions) {
      const own = encloseRational(fraction, bits)
      low += own.low
      high += own.high
    }
    return { low, high }
  }, fractions.length)
}
