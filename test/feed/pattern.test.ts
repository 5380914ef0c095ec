import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import installed from '../../node_modules/pure-rand/package.json'
import type { Bounds } from '../../src/feed/bounds'
import { GENERATOR, openSource } from '../../src/feed/generator'
import { type ArrayOrder, drawArray, FEED_PATTERNS, type FeedPattern } from '../../src/feed/pattern'
import { hashText, trialSeed } from '../../src/feed/seed'

function draw(pattern: FeedPattern, order: Partial<ArrayOrder> & { width: number; length: number }, seed = 1) {
  const bounds: Bounds = { kind: 'same', low: 0n, high: (1n << BigInt(order.width)) - 1n }
  return drawArray(pattern, { distinct: false, bounds, ...order }, openSource(seed, 'a'))
}

function wordsOf(pattern: FeedPattern, order: Partial<ArrayOrder> & { width: number; length: number }, seed = 1) {
  const drawn = draw(pattern, order, seed)
  if ('problem' in drawn) throw new Error(drawn.problem)
  return Array.from(drawn.words, BigInt)
}

const WIDTHS = [2, 5, 8, 16, 31, 32, 33, 47, 63, 64, 65, 100, 128, 200, 4096]

test('records name the generator that is installed', () => {
  expect(GENERATOR.version).toBe(installed.version)
})

test('seeds and words stay what they are from version to version', () => {
  expect(hashText('')).toBe(3323002737)
  expect(
    [0, 1, 2].map(trial => trialSeed(1, { width: 64, sizes: { n: 1024, m: 8 } }, trial)),
  ).toMatchInlineSnapshot(`
    [
      2180789021,
      155150482,
      1958112666,
    ]
  `)
  expect(wordsOf('uniform', { width: 16, length: 4 })).toMatchInlineSnapshot(`
    [
      13039n,
      11841n,
      62560n,
      55599n,
    ]
  `)
  expect(wordsOf('uniform', { width: 64, length: 2 })).toMatchInlineSnapshot(`
    [
      3670164797770543435n,
      17609101991503418401n,
    ]
  `)
  expect(wordsOf('uniform', { width: 100, length: 2 })).toMatchInlineSnapshot(`
    [
      252000215432832212285250294817n,
      1189170105988056416845642677380n,
    ]
  `)
})

test('a seed depends on each coordinate, and not on the order of sizes', () => {
  const base = { width: 64, sizes: { n: 10, m: 20 } }
  const seeds = [
    trialSeed(1, base, 0),
    trialSeed(2, base, 0),
    trialSeed(1, base, 1),
    trialSeed(1, { ...base, width: 32 }, 0),
    trialSeed(1, { ...base, sizes: { n: 20, m: 10 } }, 0),
  ]
  expect(new Set(seeds).size).toBe(seeds.length)
  expect(trialSeed(1, { width: 64, sizes: { m: 20, n: 10 } }, 0)).toBe(seeds[0])
})

describe('every pattern', () => {
  test('keeps to its range, whatever the width', () => {
    const cases = fc.record({
      width: fc.constantFrom(...WIDTHS),
      length: fc.integer({ min: 0, max: 40 }),
      pattern: fc.constantFrom(...FEED_PATTERNS),
      seed: fc.nat(),
      ends: fc.tuple(
        fc.bigInt({ min: 0n, max: (1n << 4096n) - 1n }),
        fc.bigInt({ min: 0n, max: (1n << 4096n) - 1n }),
      ),
      distinct: fc.boolean(),
    })
    fc.assert(
      fc.property(cases, ({ width, length, pattern, seed, ends, distinct }) => {
        const [a, b] = ends.map(end => BigInt.asUintN(width, end)) as [bigint, bigint]
        const [low, high] = a < b ? [a, b] : [b, a]
        const drawn = draw(pattern, { width, length, distinct, bounds: { kind: 'same', low, high } }, seed)
        const legal = high - low + 1n
        const different = distinct || pattern === 'permutation'
        const impossible = (different && legal < length) || (distinct && pattern === 'equal' && length > 1)
        expect('problem' in drawn).toBe(impossible)
        if ('problem' in drawn) return
        const words = Array.from(drawn.words, BigInt)
        expect(words.length).toBe(length)
        expect(words.every(word => low <= word && word <= high)).toBe(true)
        if (different) expect(new Set(words).size).toBe(length)
        if (pattern === 'equal') expect(new Set(words).size).toBeLessThanOrEqual(1)
        const inOrder = [...words].sort((x, y) => (x < y ? -1 : x > y ? 1 : 0))
        if (pattern === 'sorted') expect(words).toEqual(inOrder)
        if (pattern === 'reversed') expect(words).toEqual(inOrder.reverse())
        if (pattern === 'permutation') expect(inOrder).toEqual(inOrder.map((_, place) => low + BigInt(place)))
      }),
    )
  })

  test('gives the same words for the same seed, others for another', () => {
    for (const pattern of FEED_PATTERNS) {
      const order = { width: 64, length: 50 }
      expect(wordsOf(pattern, order, 7)).toEqual(wordsOf(pattern, order, 7))
      expect(wordsOf(pattern, order, 7)).not.toEqual(wordsOf(pattern, order, 8))
    }
  })

  test('reaches both ends of its range', () => {
    for (const width of WIDTHS) {
      const top = (1n << BigInt(width)) - 1n
      for (const bounds of [
        { low: 0n, high: 2n },
        { low: top - 2n, high: top },
      ]) {
        const words = wordsOf('uniform', { width, length: 200, bounds: { kind: 'same', ...bounds } })
        expect(new Set(words)).toEqual(new Set([bounds.low, bounds.low + 1n, bounds.high]))
      }
    }
  })
})

test('uniform draws are even: chi-squared over ranges that are no powers of two', () => {
  for (const [width, span] of [
    [16, 9n],
    [32, 6n],
    [64, 10n],
    [128, 12n],
  ] as const) {
    // Wide spans take the paths of wide words; ten bins each.
    for (const factor of [1n, 1n << BigInt(width - 5)]) {
      const high = span * factor - 1n
      const length = 20_000
      const words = wordsOf('uniform', { width, length, bounds: { kind: 'same', low: 0n, high } })
      const bins = new Array<number>(Number(span)).fill(0)
      for (const word of words) bins[Number(word / factor)]! += 1
      const expected = length / Number(span)
      const chi = bins.reduce((sum, bin) => sum + (bin - expected) ** 2 / expected, 0)
      // 0.1% points of chi-squared lie below 33 for at most 11 degrees of freedom.
      expect(chi).toBeLessThan(33)
    }
  }
})

test('every order of a permutation comes up about as often', () => {
  const counts = new Map<string, number>()
  for (let seed = 0; seed < 6000; seed++) {
    const order = wordsOf('permutation', { width: 8, length: 3 }, seed).join()
    counts.set(order, (counts.get(order) ?? 0) + 1)
  }
  expect(counts.size).toBe(6)
  for (const count of counts.values()) expect(Math.abs(count - 1000)).toBeLessThan(150)
})

describe('where each element has its own range', () => {
  const rising: Bounds = { kind: 'each', low: [0n, 1n, 2n, 3n], high: [3n, 4n, 5n, 6n] }
  const order = { width: 8, length: 4, bounds: rising }

  test('each draw keeps to it, sorted ones too where the ends rise', () => {
    for (let seed = 0; seed < 200; seed++)
      for (const pattern of ['uniform', 'sorted'] as const)
        for (const [place, word] of wordsOf(pattern, order, seed).entries()) {
          expect(word).toBeGreaterThanOrEqual(rising.low[place]!)
          expect(word).toBeLessThanOrEqual(rising.high[place]!)
        }
  })

  test('equal words lie in all ranges', () => {
    expect(wordsOf('equal', order)).toEqual([3n, 3n, 3n, 3n])
  })

  test('distinct words are found where they are scarce', () => {
    const bounds: Bounds = { kind: 'each', low: [0n, 0n, 0n, 0n], high: [0n, 1n, 2n, 3n] }
    expect(wordsOf('uniform', { ...order, bounds, distinct: true })).toEqual([0n, 1n, 2n, 3n])
  })

  test('what cannot be is a problem with its reason', () => {
    const apart: Bounds = { kind: 'each', low: [0n, 5n], high: [1n, 6n] }
    expect(draw('equal', { width: 8, length: 2, bounds: apart })).toEqual({
      problem: 'cannot be equal: no word is legal at every element',
    })
    expect(draw('permutation', { width: 8, length: 2, bounds: apart })).toEqual({
      problem: 'cannot be a permutation of 2 words: only 0 are legal at every element',
    })
    expect(draw('reversed', { width: 8, length: 2, bounds: apart })).toEqual({
      problem: 'cannot be reversed: element 0 would leave its own range',
    })
    const crowded: Bounds = { kind: 'each', low: [0n, 0n], high: [0n, 0n] }
    expect(draw('uniform', { width: 8, length: 2, bounds: crowded, distinct: true })).toEqual({
      problem: "is declared distinct, and no such words were found in its elements' ranges in 64 attempts",
    })
  })
})

test('a distinct array of a small range needs as many words as it has', () => {
  expect(draw('uniform', { width: 4, length: 17, distinct: true })).toEqual({
    problem: 'is declared distinct, but only 16 words are legal for its 17',
  })
  expect(wordsOf('uniform', { width: 4, length: 16, distinct: true }).sort()).toEqual(
    Array.from({ length: 16 }, (_, word) => BigInt(word)).sort(),
  )
})

test('2^20 words of 64 bits are drawn in well under a second', () => {
  draw('uniform', { width: 64, length: 1 << 18 })
  const start = performance.now()
  draw('uniform', { width: 64, length: 1 << 20 })
  const took = performance.now() - start
  expect(took).toBeLessThan(1000)
})
