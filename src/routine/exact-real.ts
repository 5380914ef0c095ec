import { compareRationals, type Rational } from './exact-rational'
import { type Enclosure, encloseRational } from './exact-series'

/** Bits after the point that a decision starts with and stops at. */
const FIRST_BITS = 64
export const MOST_BITS_AFTER_POINT = 8192
/** Parts times bits that one enclosure may work out: keeps a sum of many thousand logarithms from running for hours. */
const MOST_WORK = 1 << 22

/** A form in which a real number is known exactly, so that equal numbers are told from near ones. */
export type RealForm =
  /** constant + the sum of factor * lg(argument): factors positive and different, arguments > 0 and not 1. */
  | { readonly kind: 'logs'; readonly constant: Rational; readonly terms: readonly LogTerm[] }
  /** The root of `degree` >= 2 of radicand > 0, or its negative. */
  | { readonly kind: 'root'; readonly negative: boolean; readonly radicand: Rational; readonly degree: number }

export interface LogTerm {
  readonly factor: Rational
  readonly argument: Rational
}

/**
 * A real number that is not known to be rational: an enclosure to any number of bits. `work` gives an enclosure in
 * units of 2^-bits that shrinks as the bits grow, or none while the bits are too few for one.
 */
export class Real {
  readonly kind = 'real'
  private known: { readonly bits: number; readonly enclosure: Enclosure | undefined } | undefined

  constructor(
    private readonly work: (bits: number) => Enclosure | undefined,
    /** How many logarithms, roots and rationals it is made of. */
    readonly parts: number,
    readonly form?: RealForm,
  ) {}

  enclose(bits: number): Enclosure | undefined {
    if (this.known?.bits !== bits) this.known = { bits, enclosure: this.work(bits) }
    return this.known!.enclosure
  }

  /** The first answer that `decide` gives as the enclosure shrinks; undefined where it gives none up to the cap. */
  refine<T>(decide: (enclosure: Enclosure, bits: number) => T | undefined): T | undefined {
    const most = Math.max(FIRST_BITS, Math.min(MOST_BITS_AFTER_POINT, MOST_WORK / this.parts))
    for (let bits = FIRST_BITS; bits <= most; bits *= 2) {
      const enclosure = this.enclose(bits)
      const answer = enclosure && decide(enclosure, bits)
      if (answer !== undefined) return answer
    }
    return undefined
  }

  /** -1 or 1 as the number is below or above a rational one; undefined where the bits allowed do not tell. */
  side(of: Rational): -1 | 1 | undefined {
    return this.refine((own, bits) => {
      const other = encloseRational(of, bits)
      return own.high < other.low ? -1 : own.low > other.high ? 1 : undefined
    })
  }
}

/** A number that an exact expression can come to. Whole numbers are bigints, and nothing else is one. */
export type ExactValue = Rational | Real

export function isReal(value: ExactValue): value is Real {
  return typeof value !== 'bigint' && value.kind === 'real'
}

/** An enclosure of any number. */
export function encloseValue(value: ExactValue, bits: number): Enclosure | undefined {
  return isReal(value) ? value.enclose(bits) : encloseRational(value, bits)
}

export function partsOf(value: ExactValue): number {
  return isReal(value) ? value.parts : 1
}

/** Whether a rational number is 0 < x. */
export function isPositive(x: Rational): boolean {
  return compareRationals(x, 0n) > 0
}
