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
    return areEqual(sortHalves(left, left, [0]), sortHalves(right, right, [0]))
  if (left instanceof BigUint64Array && right instanceof BigUint64Array)
    return areEqual(sortHalves(left, halvesOf(left), [LOW, HIGH]), sortHalves(right, halvesOf(right), [LOW, HIGH]))
  return areEqual(sortBigints(left), sortBigints(right))
}

function areEqual<T>(left: ArrayLike<T>, right: ArrayLike<T>): boolean {
  for (let at = 0; at < left.length; at++) if (left[at] !== right[at]) return false
  return true
}

function sortBigints(words: Words): bigint[] {
  return Array.from(words as Iterable<bigint | number>, BigInt).sort((a, b) => (a < b ? -1 : a > b ? 1 : 0))
}

const DIGIT_BITS = 11
const DIGITS = 1 << DIGIT_BITS

/**
 * The halves of words in the order of their values. `order` gives the place of each half in a word, the lowest first:
 * digit by digit, stable, those digits left out that never vary.
 */
function sortHalves(words: Words, halves: Uint32Array, order: readonly number[]): Uint32Array {
  if (areSorted(words)) return halves
  const places = new Uint32Array(DIGITS)
  let from = halves
  let spare: Uint32Array = new Uint32Array(halves.length)
  for (const half of order) {
    for (let shift = 0; shift < 32; shift += DIGIT_BITS) {
      if (!placeDigits(from, order.length, half, shift, places)) continue
      const into = spare
      if (order.length === 1) moveHalves(from, into, shift, places)
      else movePairs(from, into, half, shift, places)
      spare = from === halves ? new Uint32Array(halves.length) : from
      from = into
    }
  }
  return from
}

/** Where the words of each digit begin in order; false where all words have the same one. */
function placeDigits(words: Uint32Array, step: number, half: number, shift: number, places: Uint32Array): boolean {
  places.fill(0)
  for (let at = half; at < words.length; at += step) places[(words[at]! >>> shift) & (DIGITS - 1)]!++
  const count = words.length / step
  if (count === 0 || places[(words[half]! >>> shift) & (DIGITS - 1)] === count) return false
  let place = 0
  for (let digit = 0; digit < DIGITS; digit++) {
    const next = place + places[digit]!
    places[digit] = place
    place = next
  }
  return true
}

function moveHalves(from: Uint32Array, into: Uint32Array, shift: number, places: Uint32Array): void {
  for (let at = 0; at < from.length; at++) {
    const word = from[at]!
    into[places[(word >>> shift) & (DIGITS - 1)]!++] = word
  }
}

function movePairs(from: Uint32Array, into: Uint32Array, half: number, shift: number, places: Uint32Array): void {
  for (let at = 0; at < from.length; at += 2) {
    const to = 2 * places[(from[at + half]! >>> shift) & (DIGITS - 1)]!++
    into[to] = from[at]!
    into[to + 1] = from[at + 1]!
  }
}
