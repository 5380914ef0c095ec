import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { routineText, TwoWays } from './two-ways'

const ascending = (words: readonly number[]) => [...words].sort((x, y) => x - y).map(BigInt)

describe('straight insertion', () => {
  const insertion = new TwoWays(routineText('insertion.tally'))
  const shift = 'a[j] <- a[j - 1]'
  const sort = (a: readonly number[], width = 16) => insertion.run({ width, sizes: { n: a.length }, arrays: { a } })
  // A shift is a subtraction, a load and a store.
  const shifts = (a: readonly number[]) => sort(a).operationsAt(shift) / 3

  test.each([1, 2, 3, 10, 57, 200])('a reversed array of %i words takes n(n-1)/2 shifts', n => {
    // Source: D. E. Knuth, TAOCP vol. 3 (2nd ed., 1998), 5.2.1, Algorithm S: one move a shift, most when reversed.
    const reversed = Array.from({ length: n }, (_, i) => n - i)
    expect(shifts(reversed)).toBe((n * (n - 1)) / 2)
  })

  test('a sorted array takes none', () => {
    expect(shifts(Array.from({ length: 100 }, (_, i) => i))).toBe(0)
  })

  test('shifts are the inversions of the permutation', () => {
    // Source: D. E. Knuth, TAOCP vol. 3, 5.1.1 and 5.2.1: each shift removes one inversion.
    const permutation = fc.nat({ max: 40 }).chain(n =>
      fc.shuffledSubarray(
        Array.from({ length: n }, (_, i) => i),
        { minLength: n },
      ),
    )
    fc.assert(
      fc.property(permutation, a => {
        const inversions = a.reduce((sum, x, i) => sum + a.slice(i + 1).filter(y => y < x).length, 0)
        expect(shifts(a)).toBe(inversions)
        expect(sort(a).array('a')).toEqual(ascending(a))
      }),
      { numRuns: 100 },
    )
  })

  test('the mean number of inversions over all permutations of six is n(n-1)/4', () => {
    // Source: D. E. Knuth, TAOCP vol. 3, 5.1.1 (mean n(n-1)/4).
    const all = permutations([0, 1, 2, 3, 4, 5])
    const total = all.reduce((sum, a) => sum + shifts(a), 0)
    expect(total * 4).toBe(all.length * 6 * 5)
  })

  test.each([3, 5, 16, 33, 64])('sorts at w = %i', width => {
    const top = 2 ** Math.min(width, 30) - 1
    const a = [top, 0, top, 1, 2, 0]
    expect(sort(a, width).array('a')).toEqual(ascending(a))
  })
})

function permutations(items: readonly number[]): number[][] {
  if (items.length === 0) return [[]]
  return items.flatMap((item, i) => permutations(items.toSpliced(i, 1)).map(rest => [item, ...rest]))
}

describe('merge sort', () => {
  const merge = new TwoWays(routineText('merge.tally'))
  const sort = (a: readonly number[]) => merge.run({ width: 16, sizes: { n: a.length }, arrays: { a } })
  // Two loads and a compare for each comparison of words.
  const comparisons = (a: readonly number[]) => sort(a).operationsAt('if b[i] <= b[j]') / 3

  // Source: OEIS A001855, a(n) = n*ceil(lg n) - 2^ceil(lg n) + 1; Knuth vol. 3, 5.2.4 has the recurrence.
  const A001855 = [0, 1, 3, 5, 8, 11, 14, 17, 21, 25, 29, 33, 37, 41, 45, 49, 54]
  const worstCase = (n: number) => n * Math.ceil(Math.log2(n)) - 2 ** Math.ceil(Math.log2(n)) + 1

  test('the formula gives the published terms', () => {
    expect(A001855.map((_, i) => worstCase(i + 1))).toEqual(A001855)
  })

  test.each([1, 2, 3, 4, 5, 6])('worst case over all permutations of %i words', n => {
    const all = permutations(Array.from({ length: n }, (_, i) => i))
    expect(Math.max(...all.map(comparisons))).toBe(A001855[n - 1])
  })

  /** Undoes merges so that every one alternates between its halves and compares to the last word. */
  function worst(sorted: readonly number[]): number[] {
    if (sorted.length < 2) return [...sorted]
    const left = sorted.length >> 1
    // From the top: the greatest two words end up in different halves, and so on down.
    const odd = sorted.filter((_, i) => (sorted.length - 1 - i) % 2 === 0)
    const even = sorted.filter((_, i) => (sorted.length - 1 - i) % 2 === 1)
    const [low, high] = odd.length === left ? [odd, even] : [even, odd]
    return [...worst(low), ...worst(high)]
  }

  test.each([8, 13, 16, 17, 31, 64, 100, 255])('a worst input of %i words takes the published comparisons', n => {
    const a = worst(Array.from({ length: n }, (_, i) => i))
    const outcome = sort(a)
    expect(outcome.operationsAt('if b[i] <= b[j]') / 3).toBe(worstCase(n))
    expect(outcome.array('a')).toEqual(ascending(a))
  })

  test('frames in flight grow with the depth of the recursion', () => {
    // common practice, no source: halving n words down to one nests ceil(lg n) + 1 calls. A frame is lo, hi, mid, i,
    // j, k and the return address.
    for (const n of [1, 2, 3, 8, 9, 64, 100]) {
      const a = Array.from({ length: n }, (_, i) => n - i)
      expect(sort(a).frames, `n = ${n}`).toBe(7 * (Math.ceil(Math.log2(n)) + 1))
    }
  })
})
