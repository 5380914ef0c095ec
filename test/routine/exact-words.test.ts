import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { areSame, areSorted, sumWords } from '../../src/routine/exact-words'
import type { Words } from '../../src/routine/words'

const small = fc.array(fc.bigInt({ min: 0n, max: 2n ** 32n - 1n }))
/** Halves repeat, so that words that differ in one half alone come up. */
const half = fc.constantFrom(0n, 1n, 2n ** 31n, 2n ** 32n - 1n)
const wide = fc.array(
  fc.oneof(
    fc.bigInt({ min: 0n, max: 2n ** 64n - 1n }),
    fc.tuple(half, half).map(([high, low]) => (high << 32n) + low),
  ),
)

/** The same words in each of the forms that hold them. */
function forms(words: readonly bigint[]): Words[] {
  const fits = words.every(word => word < 2n ** 32n)
  return [...(fits ? [Uint32Array.from(words, Number)] : []), BigUint64Array.from(words), words.map(word => word)]
}

function sorted(words: readonly bigint[]): bigint[] {
  return [...words].sort((a, b) => (a < b ? -1 : a > b ? 1 : 0))
}

describe.each([
  ['words of 32 bits', small],
  ['words of 64 bits', wide],
])('%s', (_, arbitrary) => {
  test('add up to their sum', () => {
    fc.assert(
      fc.property(arbitrary, words => {
        const expected = words.reduce((sum, word) => sum + word, 0n)
        for (const form of forms(words)) expect(sumWords(form)).toBe(expected)
      }),
    )
  })

  test('are sorted where sorting leaves them as they are', () => {
    fc.assert(
      fc.property(arbitrary, words => {
        const expected = sorted(words).every((word, at) => word === words[at])
        for (const form of forms(words)) expect(areSorted(form)).toBe(expected)
        for (const form of forms(sorted(words))) expect(areSorted(form)).toBe(true)
      }),
    )
  })

  test('are the same in any order, and not with one changed', () => {
    fc.assert(
      fc.property(arbitrary, fc.nat(), (words, at) => {
        const others = sorted(words).reverse()
        const changed = words.map((word, place) => (place === at % words.length ? word ^ 1n : word))
        for (const [form, other] of forms(words).map((form, which) => [form, forms(others)[which]!] as const))
          expect(areSame(form, other)).toBe(true)
        if (words.length > 0)
          for (const [form, other] of forms(words).map((form, which) => [form, forms(changed)[which]!] as const))
            expect(areSame(form, other)).toBe(false)
      }),
    )
  })
})

test('sums past a run of 2^20 words stay exact', () => {
  const words = new Uint32Array((1 << 20) + 3).fill(2 ** 32 - 1)
  expect(sumWords(words)).toBe(BigInt(words.length) * (2n ** 32n - 1n))
  const doubles = new BigUint64Array((1 << 20) + 3).fill(2n ** 64n - 1n)
  expect(sumWords(doubles)).toBe(BigInt(doubles.length) * (2n ** 64n - 1n))
})

test('a part of an array is taken where it begins', () => {
  const words = BigUint64Array.of(9n, 1n, 2n, 3n).subarray(1)
  expect(sumWords(words)).toBe(6n)
  expect(areSorted(words)).toBe(true)
})
