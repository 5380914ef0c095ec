import { type Bounds, commonEnds, endsOf } from './bounds'
import { drawWithoutRepeats } from './distinct'
import { drawWord, drawWords, type FreshWords, freshWords, setWord, shuffleWords, sortWords } from './draw'
import type { Source } from './generator'

/**
 * How an array is filled within its legal words: independent uniform draws, those sorted or reversed, one draw
 * throughout, or a random order of consecutive words from the lowest legal one on. Scalars are uniform under each.
 */
export const FEED_PATTERNS = ['uniform', 'sorted', 'reversed', 'equal', 'permutation'] as const
export type FeedPattern = (typeof FEED_PATTERNS)[number]

/** What an array is to hold. */
export interface ArrayOrder {
  readonly width: number
  readonly length: number
  readonly bounds: Bounds
  readonly distinct: boolean
}

export type Drawn = { readonly words: FreshWords } | { readonly problem: string }

/** An array's words by a pattern; the problem says why there can be none, in words that follow the array's name. */
export function drawArray(pattern: FeedPattern, order: ArrayOrder, source: Source): Drawn {
  if (order.length === 0) return { words: freshWords(order.width, 0) }
  switch (pattern) {
    case 'uniform':
      return drawUniform(order, source)
    case 'sorted':
    case 'reversed': {
      const drawn = drawUniform(order, source)
      if ('problem' in drawn) return drawn
      sortWords(drawn.words)
      if (pattern === 'reversed') drawn.words.reverse()
      const misfit = findMisfit(drawn.words, order.bounds)
      return misfit === undefined
        ? drawn
        : { problem: `cannot be ${pattern}: element ${misfit} would leave its own range` }
    }
    case 'equal':
      return drawEqual(order, source)
    case 'permutation':
      return drawPermutation(order, source)
  }
}

function drawUniform({ width, length, bounds, distinct }: ArrayOrder, source: Source): Drawn {
  if (distinct) return drawWithoutRepeats(width, length, bounds, source)
  const words = freshWords(width, length)
  if (bounds.kind === 'same') drawWords(words, bounds.low, bounds.high, source)
  else
    for (let place = 0; place < length; place++) {
      const { low, high } = endsOf(bounds, place)
      setWord(words, place, drawWord(low, high, source))
    }
  return { words }
}

function drawEqual({ width, length, bounds, distinct }: ArrayOrder, source: Source): Drawn {
  if (distinct && length > 1) return { problem: `is declared distinct, so its ${length} words cannot be equal` }
  const { low, high } = commonEnds(bounds)
  if (low > high) return { problem: 'cannot be equal: no word is legal at every element' }
  const words = freshWords(width, length)
  const word = drawWord(low, high, source)
  for (let place = 0; place < length; place++) setWord(words, place, word)
  return { words }
}

function drawPermutation({ width, length, bounds }: ArrayOrder, source: Source): Drawn {
  const { low, high } = commonEnds(bounds)
  const legal = high < low ? 0n : high - low + 1n
  if (legal < BigInt(length)) {
    const at = bounds.kind === 'same' ? '' : ' at every element'
    return { problem: `cannot be a permutation of ${length} words: only ${legal} are legal${at}` }
  }
  const words = freshWords(width, length)
  for (let place = 0; place < length; place++) setWord(words, place, low + BigInt(place))
  shuffleWords(words, source)
  return { words }
}

/** The first element whose word is outside its own range. */
function findMisfit(words: FreshWords, bounds: Bounds): number | undefined {
  if (bounds.kind === 'same') return undefined
  for (let place = 0; place < words.length; place++) {
    const { low, high } = endsOf(bounds, place)
    const word = BigInt(words[place]!)
    if (word < low || word > high) return place
  }
  return undefined
}
