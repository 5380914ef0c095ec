import type { Words } from './words'

// Sums, orders and multisets of words. 64-bit words are taken as two halves of 32 bits: arithmetic on halves stays in
// machine numbers, where a BigInt a word would cost ten times as much.

/** Which half of a 64-bit word comes first in memory. */
const LOW_FIRST = new Uint8Array(new Uint16Array([1]).buffer)[0] === 1
const LOW = LOW_FIRST ? 0 : 1
const HIGH = 1 - LOW

function halvesOf(words: BigUint64Array): Uint32Array {
  return new Uint32Array(words.buffer, words.byteOffset, words.length * 2)
}

/** So many words of 32 bits add up to less than 2^53, so that a sum of machine numbers is exact. */
const EXACT_RUN = 1 << 20

/** The sum of all words. */
export function sumWords(words: Words): bigint {
  if (words instanceof Uint32Array) return sumHalves(words, 0, 1)
  if (words instanceof BigUint64Array) {
    const halves = halvesOf(words)
    return sumHalves(halves, LOW, 2) + (sumHalves(halves, HIGH, 2) << 32n)
  }
  return words.reduce((sum, word) => sum + word, 0n)
}

function sumHalves(halves: Uint32Array, first: number, step: number): bigint {
  let total = 0n
  for (let start = first; start < halves.length; start += EXACT_RUN * step) {
    const end = Math.min(halves.length, start + EXACT_RUN * step)
    let sum = 0
    for (let at = start; at < end; at += step) sum += halves[at]!
    total += BigInt(sum)
  }
  return total
}

/** Whether no word is below the one before it. */
export function areSorted(words: Words): boolean {
  if (words instanceof Uint32Array) {
    for (let at = 1; at < words.length; at++) if (words[at - 1]! > words[at]!) return false
    return true
  }
  if (words instanceof BigUint64Array) {
    const halves = halvesOf(words)
    for (let at = 2; at < halves.length; at += 2) {
      const before = halves[at - 2 + HIGH]!
      const here = halves[at + HIGH]!
      if (before > here || (before === here && halves[at - 2 + LOW]! > halves[at + LOW]!)) return false
    }
    return true
  }
  for (let at = 1; at < words.length; at++) if (words[at - 1]! > words[at]!) return false
  return true
}

/** Whether two arrays hold the same words, each as often. */
export function areSame(left: Words, right: Words): boolean {
  if (left.length !== right.length) return false
  if (left instanceof Uint32Array && right instanceof Uint32Array)
    return equalHalves(sortedHalves(left, 1), sortedHalves(right, 1))
  if (left instanceof BigUint64Array && right instanceof BigUint64Array)
    return equalHalves(sortedHalves(halvesOf(left), 2), sortedHalves(halvesOf(right), 2))
  const [first, second] = [sortedBigints(left), sortedBigints(right)]
  return first.every((word, at) => word === second[at])
}

function sortedBigints(words: Words): bigint[] {
  const copy = Array.from(words as Iterable<bigint | number>, BigInt)
  return areSorted(copy) ? copy : copy.sort((a, b) => (a < b ? -1 : a > b ? 1 : 0))
}

function equalHalves(left: Uint32Array, right: Uint32Array): boolean {
  for (let at = 0; at < left.length; at++) if (left[at] !== right[at]) return false
  return true
}

const DIGIT_BITS = 11
const DIGITS = 1 << DIGIT_BITS
const DIGITS_A_HALF = Math.ceil(32 / DIGIT_BITS)

/**
 * Words of one half or two in some order that depends on their values alone: sorted from the least digit up, all digits
 * counted in one pass and those that never vary left out.
 */
function sortedHalves(words: Uint32Array, halves: 1 | 2): Uint32Array {
  const passes = halves * DIGITS_A_HALF
  const counts = new Uint32Array(passes * DIGITS)
  for (let at = 0; at < words.length; at += halves) {
    for (let half = 0; half < halves; half++) {
      const value = words[at + half]!
      for (let digit = 0; digit < DIGITS_A_HALF; digit++)
        counts[(half * DIGITS_A_HALF + digit) * DIGITS + digitOf(value, digit)]!++
    }
  }
  let from: Uint32Array = words
  let into: Uint32Array = new Uint32Array(words.length)
  for (let pass = 0; pass < passes; pass++) {
    const half = Math.floor(pass / DIGITS_A_HALF)
    const digit = pass % DIGITS_A_HALF
    const places = counts.subarray(pass * DIGITS, (pass + 1) * DIGITS)
    if (words.length > 0 && places[digitOf(words[half]!, digit)] === words.length / halves) continue
    let place = 0
    for (let value = 0; value < DIGITS; value++) {
      const count = places[value]!
      places[value] = place
      place += count * halves
    }
    for (let at = 0; at < from.length; at += halves) {
      const value = digitOf(from[at + half]!, digit)
      const to = places[value]!
      places[value] = to + halves
      into[to] = from[at]!
      if (halves === 2) into[to + 1] = from[at + 1]!
    }
    const spare = from === words ? new Uint32Array(words.length) : from
    from = into
    into = spare
  }
  return from
}

function digitOf(value: number, digit: number): number {
  return (value >>> (digit * DIGIT_BITS)) & (DIGITS - 1)
}
