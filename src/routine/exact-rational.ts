// Rational numbers without limit. Plain BigInt pairs instead of a library's fractions: those reduce at each step, which
// makes the 2^16th harmonic number (mean counts of quicksort have it) a matter of hours, not of milliseconds.

/** A number that is rational and not whole: denominator > 1. In lowest terms where both parts are small. */
export class Ratio {
  readonly kind = 'ratio'
  constructor(
    readonly numerator: bigint,
    readonly denominator: bigint,
  ) {}
}

/** A rational number; whole ones are always bigints. */
export type Rational = bigint | Ratio

/** Parts below this are reduced at once: up to here Euclid's algorithm is cheaper than growing products. */
const REDUCED_BELOW = 1n << 2048n

/** numerator / denominator; `denominator` is not 0. */
export function ratio(numerator: bigint, denominator: bigint): Rational {
  const [top, bottom] = denominator < 0n ? [-numerator, -denominator] : [numerator, denominator]
  if (bottom === 1n) return top
  if (top % bottom === 0n) return top / bottom
  if (bottom >= REDUCED_BELOW || top >= REDUCED_BELOW || -top >= REDUCED_BELOW) return new Ratio(top, bottom)
  const common = greatestDivisor(top < 0n ? -top : top, bottom)
  return new Ratio(top / common, bottom / common)
}

const SAFE = BigInt(Number.MAX_SAFE_INTEGER)

/** The greatest common divisor of numbers from 0. */
export function greatestDivisor(a: bigint, b: bigint): bigint {
  while (b > SAFE) [a, b] = [b, a % b]
  if (b === 0n) return a
  // The rest fits machine numbers, whose remainders are exact and far quicker.
  let [x, y] = [Number(b), Number(a % b)]
  while (y !== 0) [x, y] = [y, x % y]
  return BigInt(x)
}

/** The number in lowest terms; slow for parts of many thousand bits. */
export function reduceRatio({ numerator, denominator }: Ratio): Ratio {
  const common = greatestDivisor(numerator < 0n ? -numerator : numerator, denominator)
  return new Ratio(numerator / common, denominator / common)
}

export function numeratorOf(x: Rational): bigint {
  return typeof x === 'bigint' ? x : x.numerator
}

export function denominatorOf(x: Rational): bigint {
  return typeof x === 'bigint' ? 1n : x.denominator
}

export function addRationals(x: Rational, y: Rational): Rational {
  if (typeof x === 'bigint' && typeof y === 'bigint') return x + y
  const [a, b, c, d] = [numeratorOf(x), denominatorOf(x), numeratorOf(y), denominatorOf(y)]
  return b === d ? ratio(a + c, b) : ratio(a * d + c * b, b * d)
}

/** Parts of a long sum up to this size are brought to lowest terms: past it, products are cheaper than divisors. */
const SUMMED_BELOW = 1n << 256n

/** The sum of all, by halves, so that large numbers meet only large ones. */
export function sumRationals(numbers: readonly Rational[]): Rational {
  if (numbers.length === 0) return 0n
  const [top, bottom] = sumBetween(numbers, 0, numbers.length)
  return ratio(top, bottom)
}

function sumBetween(numbers: readonly Rational[], from: number, to: number): readonly [bigint, bigint] {
  if (to - from === 1) return [numeratorOf(numbers[from]!), denominatorOf(numbers[from]!)]
  const middle = (from + to) >> 1
  const [a, b] = sumBetween(numbers, from, middle)
  const [c, d] = sumBetween(numbers, middle, to)
  const [top, bottom] = [a * d + c * b, b * d]
  if (bottom >= SUMMED_BELOW) return [top, bottom]
  const common = greatestDivisor(top < 0n ? -top : top, bottom)
  return [top / common, bottom / common]
}

export function negateRational(x: Rational): Rational {
  return typeof x === 'bigint' ? -x : new Ratio(-x.numerator, x.denominator)
}

export function multiplyRationals(x: Rational, y: Rational): Rational {
  if (typeof x === 'bigint' && typeof y === 'bigint') return x * y
  return ratio(numeratorOf(x) * numeratorOf(y), denominatorOf(x) * denominatorOf(y))
}

/** x / y; y is not 0. */
export function divideRationals(x: Rational, y: Rational): Rational {
  return ratio(numeratorOf(x) * denominatorOf(y), denominatorOf(x) * numeratorOf(y))
}

/** Negative, zero or positive as x is below, equal to or above y. */
export function compareRationals(x: Rational, y: Rational): -1 | 0 | 1 {
  const left = numeratorOf(x) * denominatorOf(y)
  const right = numeratorOf(y) * denominatorOf(x)
  return left < right ? -1 : left > right ? 1 : 0
}

export function floorRational(x: Rational): bigint {
  return typeof x === 'bigint' ? x : floorDivide(x.numerator, x.denominator)
}

export function ceilRational(x: Rational): bigint {
  return typeof x === 'bigint' ? x : ceilDivide(x.numerator, x.denominator)
}

/** The quotient rounded down; the divisor is positive. */
export function floorDivide(dividend: bigint, divisor: bigint): bigint {
  const quotient = dividend / divisor
  return dividend < 0n && quotient * divisor !== dividend ? quotient - 1n : quotient
}

/** The quotient rounded up; the divisor is positive. */
export function ceilDivide(dividend: bigint, divisor: bigint): bigint {
  return -floorDivide(-dividend, divisor)
}

/** x mod y with the sign of y; y is not 0. */
export function moduloRationals(x: Rational, y: Rational): Rational {
  if (typeof x === 'bigint' && typeof y === 'bigint') {
    const rest = x % y
    return rest !== 0n && rest < 0n !== y < 0n ? rest + y : rest
  }
  return addRationals(x, negateRational(multiplyRationals(y, floorRational(divideRationals(x, y)))))
}

/** The number of bits of |x|; 0 for 0. */
export function bitLength(x: bigint): number {
  if (x === 0n) return 0
  const digits = (x < 0n ? -x : x).toString(16)
  return digits.length * 4 - (Math.clz32(Number.parseInt(digits[0]!, 16)) - 28)
}

/** k where x = 2^k, for x > 0; undefined for other numbers. */
export function exponentOfTwo(x: Rational): number | undefined {
  const top = numeratorOf(x)
  const bottom = denominatorOf(x)
  if (top <= 0n) return undefined
  const shift = bitLength(top) - bitLength(bottom)
  const exact = shift >= 0 ? bottom << BigInt(shift) === top : top << BigInt(-shift) === bottom
  return exact ? shift : undefined
}

/** The largest k with 2^k <= x, for x > 0. */
export function floorLogarithm(x: Rational): number {
  const top = numeratorOf(x)
  const bottom = denominatorOf(x)
  const shift = bitLength(top) - bitLength(bottom)
  const below = shift >= 0 ? top < bottom << BigInt(shift) : top << BigInt(-shift) < bottom
  return below ? shift - 1 : shift
}

/** The largest whole number whose `degree`th power is at most x; x >= 0, degree >= 1. Newton's iteration. */
export function floorRoot(x: bigint, degree: number): bigint {
  if (x < 2n || degree === 1) return x
  const bits = bitLength(x)
  if (degree >= bits) return 1n
  const q = BigInt(degree)
  let root = 1n << BigInt(Math.ceil(bits / degree))
  while (true) {
    const next = ((q - 1n) * root + x / root ** (q - 1n)) / q
    if (next >= root) return root
    root = next
  }
}

/** Parts of fractions up to this many bits are brought to lowest terms to see whether they have an exact root. */
const MOST_REDUCED_BITS = 1 << 14

/** The `degree`th root of x > 0 where it is found to be rational; of whole numbers none is missed. */
export function exactRoot(x: Rational, degree: number): Rational | undefined {
  if (typeof x !== 'bigint' && bitLength(x.numerator) + bitLength(x.denominator) > MOST_REDUCED_BITS)
    return undefined
  const root = (part: bigint) => {
    const near = floorRoot(part, degree)
    return near ** BigInt(degree) === part ? near : undefined
  }
  const lowest = typeof x === 'bigint' ? x : reduceRatio(x)
  const top = root(numeratorOf(lowest))
  if (top === undefined) return undefined
  const bottom = root(denominatorOf(lowest))
  return bottom === undefined ? undefined : ratio(top, bottom)
}
