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

describe.each<[string, number, (random: () => bigint, at: number) => bigint]>([
  ['random words of 32 bits', 32, random => random() & 0xffffffffn],
  ['random words of 64 bits', 64, random => random()],
  ['words that differ in their low bits alone', 64, random => (7n << 60n) | (random() & 0xfffffffn)],
  ['words that crowd under few high bits', 64, random => random() & 0xc000_0000_0fff_ffffn],
  ['words of 32 bits that crowd', 32, random => random() & 0x8003_ffffn],
  ['falling words', 64, (_, at) => BigInt(10_000 - at) * 0x1_0001_0001n],
  ['few distinct words', 64, random => (random() & 3n) * 0x4000_0001_0000_0001n],
])('ten thousand %s', (_, width, draw) => {
  let state = 88172645463325252n
  const random = () => {
    // Marsaglia's xorshift: the words need to be many, not good.
    state ^= (state << 13n) & (2n ** 64n - 1n)
    state ^= state >> 7n
    state ^= (state << 17n) & (2n ** 64n - 1n)
    return state
  }
  const words = Array.from({ length: 10_000 }, (_, at) => draw(random, at))
  const pack = (list: readonly bigint[]) =>
    width === 32 ? Uint32Array.from(list, Number) : BigUint64Array.from(list)
  const turned = words.map((_, at) => words[(at * 7919 + 13) % words.length]!)

  test('are the same in another order, and left as they were', () => {
    const [left, right] = [pack(words), pack(turned)]
    expect(areSame(left, right)).toBe(true)
    expect(areSame(left, pack(sorted(words)))).toBe(true)
    expect(left).toEqual(pack(words))
    expect(right).toEqual(pack(turned))
  })

  test.each([0, 4_321, 9_999])('are not with the lowest bit of word %i changed', at => {
    const changed = turned.with(at, turned[at]! ^ 1n)
    expect(areSame(pack(words), pack(changed))).toBe(false)
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
