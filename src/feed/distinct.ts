import { type Bounds, endsOf } from './bounds'
import { drawBelow, drawWord, drawWords, type FreshWords, freshWords, setWord, sortWords } from './draw'
import type { Source } from './generator'
import type { Drawn } from './pattern'

/** Up to this many legal words for each wanted one, they are dealt from a full deck instead of drawn until new. */
const DECK_FACTOR = 4n

/** Draws for one element, and whole arrays begun anew, before ranges that differ are given up. */
const DRAWS_OF_ELEMENT = 64
const ARRAYS = 64

/** Uniform draws without repeats: every sequence of different legal words as likely, where all share one range. */
export function drawWithoutRepeats(width: number, length: number, bounds: Bounds, source: Source): Drawn {
  if (bounds.kind === 'each') return drawEach(width, length, bounds, source)
  const { low, high } = bounds
  const legal = high - low + 1n
  const wanted = BigInt(length)
  if (legal < wanted)
    return { problem: `is declared distinct, but only ${legal} words are legal for its ${length}` }
  const words = freshWords(width, length)
  if (legal <= wanted * DECK_FACTOR) dealWords(words, low, Number(legal), source)
  else {
    // In a long range repeats are rare: draw freely first, and one by one only where two came out the same.
    drawWords(words, low, high, source)
    if (hasRepeat(words)) drawUntilNew(words, low, high, source)
  }
  return { words }
}

/** The first cards of a shuffled deck that holds low, low + 1, ... */
function dealWords(words: FreshWords, low: bigint, legal: number, source: Source): void {
  const deck = Uint32Array.from({ length: legal }, (_, card) => card)
  for (let place = 0; place < words.length; place++) {
    const other = place + drawBelow(legal - 1 - place, source)
    setWord(words, place, low + BigInt(deck[other]!))
    deck[other] = deck[place]!
  }
}

function hasRepeat(words: FreshWords): boolean {
  const sorted = words.slice()
  sortWords(sorted)
  return sorted.some((word, place) => place > 0 && word === sorted[place - 1])
}

function drawUntilNew(words: FreshWords, low: bigint, high: bigint, source: Source): void {
  const seen = new Set<bigint>()
  for (let place = 0; place < words.length; place++) {
    let word: bigint
    do word = drawWord(low, high, source)
    while (seen.has(word))
    seen.add(word)
    setWord(words, place, word)
  }
}

/** Where each element has its own range: in order, each from what is left; begun anew where nothing seems left. */
function drawEach(width: number, length: number, bounds: Bounds, source: Source): Drawn {
  for (let array = 0; array < ARRAYS; array++) {
    const words = freshWords(width, length)
    const seen = new Set<bigint>()
    while (seen.size < length) {
      const place = seen.size
      const { low, high } = endsOf(bounds, place)
      const word = drawNew(low, high, seen, source)
      if (word === undefined) break
      seen.add(word)
      setWord(words, place, word)
    }
    if (seen.size === length) return { words }
  }
  return {
    problem: `is declared distinct, and no such words were found in its elements' ranges in ${ARRAYS} attempts`,
  }
}

/** A legal word that is not taken yet; by draws, then by search, which needs one step more than words are taken. */
function drawNew(low: bigint, high: bigint, seen: ReadonlySet<bigint>, source: Source): bigint | undefined {
  for (let draw = 0; draw < DRAWS_OF_ELEMENT; draw++) {
    const word = drawWord(low, high, source)
    if (!seen.has(word)) return word
  }
  for (let word = low; word <= high; word++) if (!seen.has(word)) return word
  return undefined
}
