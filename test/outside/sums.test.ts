import { describe, expect, test } from 'vitest'
import { cornerWords, TwoWays } from './two-ways'

const total = new TwoWays(`
# Two-word sum of n words.
routine total
  in    a[n]
  out   lo, hi
  claim time  <= 7*n + 5
  check hi * 2^w + lo = sum(a)
begin
  lo <- 0
  hi <- 0
  i  <- 0
again:
  if i >= n goto done
  x  <- a[i]
  lo <- lo + x
  if lo >= x goto next
  hi <- hi + 1
next:
  i  <- i + 1
  goto again
done:
  halt
end
`)

describe('two-word sum', () => {
  // common practice, no source: the sum of n words of w bits needs w + lg(n) bits, so with n <= 2^w two words hold it.
  test.each([2, 3, 5, 8, 13, 16, 31, 32, 33, 47, 63, 64])('exact with every word all ones, w = %i', width => {
    const top = (1n << BigInt(width)) - 1n
    const longest = Math.min(2 ** width - 1, 300)
    for (const n of [...new Set([0, 1, 2, 3, longest])].filter(n => n <= longest)) {
      const { scalars } = total.run({ width, sizes: { n }, arrays: { a: Array(n).fill(top) } })
      expect((scalars.hi! << BigInt(width)) + scalars.lo!, `n = ${n}`).toBe(BigInt(n) * top)
    }
  })

  test('carries as often as the low word wraps', () => {
    const width = 8
    const a = [255, 1, 128, 128, 7, 250]
    const { scalars, tally, time, operationsAt } = total.run({ width, sizes: { n: 6 }, arrays: { a } })
    const wraps = 3
    expect(scalars).toEqual({ hi: 3n, lo: 1n })
    expect(operationsAt('hi <- hi + 1')).toBe(wraps)
    // By hand: 3 moves, n + 1 end tests, 5 operations a word (load, add, compare, add, jump), 1 a carry.
    expect(time()).toBe(3 + 7 + 5 * 6 + wraps)
    expect(tally.byClass).toMatchObject({ move: 3, load: 6, add: 6 + 6 + wraps, compare: 7 + 6, jump: 6 })
  })

  test('7n + 3 operations where every sum but the first carries, within the claimed 7n + 5', () => {
    for (const n of [1, 2, 50, 255]) {
      const { time } = total.run({ width: 8, sizes: { n }, arrays: { a: Array(n).fill(255) } })
      expect(time()).toBe(3 + (n + 1) + 5 * n + (n - 1))
      expect(time()).toBeLessThanOrEqual(7 * n + 5)
    }
  })
})

describe('two-word product', () => {
  const product = new TwoWays(`
routine product
  in  x, y
  out hi, lo
begin
  hi, lo <- x * y
end
`)

  test.each([2, 3, 5, 8, 13, 16, 24, 31, 32, 33, 47, 48, 63, 64])('against BigInt at w = %i', width => {
    for (const x of cornerWords(width)) {
      for (const y of cornerWords(width)) {
        const { scalars, tally } = product.run({ width, scalars: { x, y } })
        expect((scalars.hi! << BigInt(width)) + scalars.lo!, `${x} * ${y}`).toBe(x * y)
        expect(tally.byClass.multiply).toBe(1)
      }
    }
  })

  test('the square of all ones is 2^2w - 2^(w+1) + 1', () => {
    // common practice, no source: no carry is left over when two words are added to a two-word product.
    for (const width of [2, 13, 32, 47, 64]) {
      const top = (1n << BigInt(width)) - 1n
      const { scalars } = product.run({ width, scalars: { x: top, y: top } })
      expect(scalars).toEqual({ hi: top - 1n, lo: 1n })
    }
  })
})
