import type { Source } from './generator'

/** Words that are still being made. */
export type FreshWords = Uint32Array | BigUint64Array | bigint[]

const LIMB_BITS = 32
const LIMB = 1n << 32n
const LIMB_MASK = LIMB - 1n

/** Words of `width` bits, all 0. */
export function freshWords(width: number, length: number): FreshWords {
  if (width <= 32) return new Uint32Array(length)
  if (width <= 64) return new BigUint64Array(length)
  return new Array<bigint>(length).fill(0n)
}

/** Sets one word. */
export function setWord(words: FreshWords, place: number, value: bigint): void {
  if (words instanceof Uint32Array) words[place] = Number(value)
  else words[place] = value
}

/**
 * Fills `words` with independent draws, each uniform over low .. high, both ends included. Draws of just enough bits
 * are thrown away while they are too large, so no word is favoured; it takes less than two draws a word on average.
 */
export function drawWords(words: FreshWords, low: bigint, high: bigint, source: Source): void {
  if (words instanceof Uint32Array) drawShort(words, Number(low), Number(high), source)
  else if (words instanceof BigUint64Array) drawLong(words, low, high, source)
  else for (let place = 0; place < words.length; place++) words[place] = drawWord(low, high, source)
}

function drawShort(words: Uint32Array, low: number, high: number, source: Source): void {
  const span = high - low
  for (let place = 0; place < words.length; place++) words[place] = low + drawBelow(span, source)
}

/** Uniform over 0 .. span, span < 2^32. The generator's upper bits are its better ones. */
export function drawBelow(span: number, source: Source): number {
  if (span === 0) return 0
  const spare = Math.clz32(span)
  for (;;) {
    const draw = source.next() >>> spare
    if (draw <= span) return draw
  }
}

/** As two halves of 32 bits: a BigInt a word would take several times as long. */
function drawLong(words: BigUint64Array, low: bigint, high: bigint, source: Source): void {
  const span = high - low
  const spanHigh = Number(span >> 32n)
  const spanLow = Number(span & LIMB_MASK)
  if (spanHigh === 0) {
    for (let place = 0; place < words.length; place++) words[place] = low + BigInt(drawBelow(spanLow, source))
    return
  }
  const spare = Math.clz32(spanHigh)
  const lowHigh = Number(low >> 32n)
  const lowLow = Number(low & LIMB_MASK)
  // Typed arrays keep the order of the machine's bytes, which is little-endian wherever this runs.
  const halves = new Uint32Array(words.buffer, words.byteOffset, words.length * 2)
  for (let place = 0; place < halves.length; place += 2) {
    let upper: number
    let lower: number
    do {
      upper = source.next() >>> spare
      lower = source.next() >>> 0
    } while (upper > spanHigh || (upper === spanHigh && lower > spanLow))
    const sum = lower + lowLow
    halves[place] = sum
    halves[place + 1] = upper + lowHigh + (sum > 0xffffffff ? 1 : 0)
  }
}

/** One draw, uniform over low .. high, both ends included, of any number of bits. */
export function drawWord(low: bigint, high: bigint, source: Source): bigint {
  const span = high - low
  if (span < LIMB) return low + BigInt(drawBelow(Number(span), source))
  const bits = span.toString(2).length
  const limbs = Math.ceil(bits / LIMB_BITS)
  const spare = limbs * LIMB_BITS - bits
  for (;;) {
    // Hexadecimal text is the one way to a long BigInt that takes linear time.
    let digits = (source.next() >>> spare).toString(16)
    for (let limb = 1; limb < limbs; limb++) digits += (source.next() >>> 0).toString(16).padStart(8, '0')
    const draw = BigInt(`0x${digits}`)
    if (draw <= span) return low + draw
  }
}

/** Puts words in random order, every order as likely (R. A. Fisher, F. Yates; D. E. Knuth, TAOCP vol. 2, 3.4.2 P). */
export function shuffleWords(words: FreshWords, source: Source): void {
  const places = words as { [place: number]: bigint | number }
  for (let last = words.length - 1; last > 0; last--) {
    const other = drawBelow(last, source)
    const held = places[last]!
    places[last] = places[other]!
    places[other] = held
  }
}

/** Ascending, in place. */
export function sortWords(words: FreshWords): void {
  if (Array.isArray(words)) words.sort((a, b) => (a < b ? -1 : a > b ? 1 : 0))
  else words.sort()
}
