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

interface Digit {
  readonly half: number
  readonly shift: number
}

/** Moves a word on average that the end of a sort by insertion may make, before digits are the better way after all. */
const MOST_MOVES = 8

/**
 * The halves of words in the order of their values. `order` gives the place of each half in a word, the lowest first.
 * Sorted by their two highest digits, random words stand all but in place, and insertion does the rest; words that it
 * does not suit are sorted digit by digit, the lowest first.
 */
function sortHalves(words: Words, halves: Uint32Array, order: readonly number[]): Uint32Array {
  if (areSorted(words)) return halves
  const digits = varyingDigits(halves, order)
  const spares: Spares = { places: new Uint32Array(DIGITS), spare: new Uint32Array(halves.length) }
  if (digits.length <= 2) return sortDigits(halves, halves, order.length, digits, spares)
  const rough = sortDigits(halves, halves, order.length, digits.slice(-2), spares)
  const most = (MOST_MOVES * halves.length) / order.length
  const isSorted = order.length === 1 ? insertHalves(rough, most) : insertPairs(rough, most)
  return isSorted ? rough : sortDigits(rough, halves, order.length, digits, spares)
}

/** The digits that are not the same in all words, the lowest first. */
function varyingDigits(halves: Uint32Array, order: readonly number[]): Digit[] {
  return order.flatMap(half => {
    const first = halves[half]!
    let varying = 0
    for (let at = half; at < halves.length; at += order.length) varying |= halves[at]! ^ first
    const shifts = [0, DIGIT_BITS, 2 * DIGIT_BITS].filter(shift => (varying >>> shift) & (DIGITS - 1))
    return shifts.map(shift => ({ half, shift }))
  })
}

interface Spares {
  readonly places: Uint32Array
  spare: Uint32Array
}

/** Sorts by some digits, stably. `kept` is an array that is left as it is. */
function sortDigits(
  halves: Uint32Array,
  kept: Uint32Array,
  step: number,
  digits: readonly Digit[],
  spares: Spares,
): Uint32Array {
  let from = halves
  for (const { half, shift } of digits) {
    const into = spares.spare
    placeDigits(from, step, half, shift, spares.places)
    if (step === 1) moveHalves(from, into, shift, spares.places)
    else movePairs(from, into, half, shift, spares.places)
    spares.spare = from === kept ? new Uint32Array(halves.length) : from
    from = into
  }
  return from
}

/** Where the words of each digit begin in order. */
function placeDigits(words: Uint32Array, step: number, half: number, shift: number, places: Uint32Array): void {
  places.fill(0)
  for (let at = half; at < words.length; at += step) places[(words[at]! >>> shift) & (DIGITS - 1)]!++
  let place = 0
  for (let digit = 0; digit < DIGITS; digit++) {
    const next = place + places[digit]!
    places[digit] = place
    place = next
  }
}

/** Sorts by insertion; false, and in some order, where that takes more than `most` moves. */
function insertHalves(words: Uint32Array, most: number): boolean {
  let moves = 0
  for (let at = 1; at < words.length; at++) {
    const word = words[at]!
    let to = at
    while (to > 0 && words[to - 1]! > word) {
      words[to] = words[to - 1]!
      to--
    }
    words[to] = word
    moves += at - to
    if (moves > most) return false
  }
  return true
}

function insertPairs(words: Uint32Array, most: number): boolean {
  let moves = 0
  for (let at = 2; at < words.length; at += 2) {
    const high = words[at + HIGH]!
    const low = words[at + LOW]!
    let to = at
    while (to > 0) {
      const before = words[to - 2 + HIGH]!
      if (before < high || (before === high && words[to - 2 + LOW]! <= low)) break
      words[to] = words[to - 2]!
      words[to + 1] = words[to - 1]!
      to -= 2
    }
    words[to + HIGH] = high
    words[to + LOW] = low
    moves += (at - to) / 2
    if (moves > most) return false
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
