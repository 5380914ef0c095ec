import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { junkBlock, junkWord } from '../../src/machine'
import { type Given, routineText, TwoWays } from '../outside/two-ways'

const benchText = (file: string) =>
  readFileSync(fileURLToPath(new URL(`../bench/${file}`, import.meta.url)), 'utf8')

/** Runs both ways and expects the same, good or not. */
function same(routine: TwoWays, given: Given) {
  const { reference, engine } = routine.results(given)
  expect(engine, JSON.stringify(given.limits)).toEqual(reference)
  return engine
}

// Loops of every form, so that each has checkpoints of its own weight.
const loops = `
routine loops
  in  n
  out x
begin
  x <- 0
  for i from 1 to n
    x <- x + i
    for j from i downto 1 by 2
      x <- x xor j
    end
  end
  i <- 0
  while i < n
    i <- i + 1
    x <- x + i * i
  end
  repeat
    x <- x + 3
    i <- i - 1
  until i = 0
again:
  i <- i + 1
  if (i & 1) = 0 goto even
  x <- x << 1
  goto next
even:
  x <- x >> 1
next:
  if i < n goto again
end
`

const entries = `
routine entries
  in  n
  out x
begin
  x <- 0
  i <- n
  if (n & 1) = 1 goto second
first:
  x <- x + 1
  i <- i - 1
  if i = 0 goto done
second:
  x <- x + 5
  if (x & 3) = 0 goto first
  i <- i - 1
  if i != 0 goto first
done:
  halt
end
`

const recursion = `
routine recursion
  in  n
  out x
procedure f(k) -> r
  if k < 2
    return k
  end
  s <- f(k - 1)
  t <- g(k - 2)
  return s + t
end
procedure g(k) -> r
  r <- 1
  while k > 1
    k <- k - 1
    r <- r + k
    if (k & 3) = 0
      r <- f(k)
      return
    end
  end
end
begin
  x <- f(n)
end
`

describe('limits stop both ways at the same place', () => {
  test.each([
    ['loops', 6, loops],
    ['loops', 1, loops],
    ['a loop of two entries', 8, entries],
    ['a loop of two entries', 9, entries],
    ['recursion', 9, recursion],
  ])('%s of size %i: every operation limit up to the end', (_, n, text) => {
    const routine = new TwoWays(text)
    for (const width of [8, 13, 64]) {
      let ended = false
      for (let operations = 0; !ended; operations += 1) {
        const result = same(routine, { width, scalars: { n }, limits: { operations } })
        ended = result.ok
        if (!result.ok) expect(result.failure.kind).toBe('operation-limit')
        if (operations > 5000) throw new Error('the run never ends')
      }
    }
  })

  test('every frame limit up to the end', () => {
    const routine = new TwoWays(recursion)
    const kinds = new Set<string>()
    for (let frames = 0; frames < 80; frames += 1) {
      const result = same(routine, { width: 16, scalars: { n: 9 }, limits: { frames } })
      kinds.add(result.ok ? 'good' : result.failure.kind)
    }
    expect([...kinds]).toEqual(['frame-limit', 'good'])
  })

  test('a recursion 60,000 levels deep', () => {
    const deep = new TwoWays(`
routine deep
  in  n
  out x
procedure down(k) -> r
  r <- 0
  if k > 0
    r <- down(k - 1)
    r <- r + k
  end
end
begin
  x <- down(n)
end
`)
    for (const width of [17, 32, 64]) {
      const result = same(deep, { width, scalars: { n: 60_000 } })
      // A frame is k, r and the return address.
      expect(result).toMatchObject({ ok: true, frames: 3 * 60_001 })
    }
  })
})

describe('memory is the same both ways', () => {
  const junk = new TwoWays(`
routine junk
  in   a[n]
  out  sum
  work c[m * n]
  let  m = 1
begin
  sum <- 0
  i <- 0
  last <- m * n
  while i < last
    sum <- (sum << 1) xor c[i] xor (sum >> (w - 1))
    i <- i + 1
  end
end
`)

  test.each([13, 16, 32, 47, 64])('junk of more words than a block of it has, w = %i', width => {
    const n = 7
    const m = Math.min(3000, Math.floor(2 ** width / n) - 2)
    const result = same(junk, {
      width,
      sizes: { n },
      lets: { m: BigInt(m) },
      arrays: { a: Array(n).fill(1) },
      junk: 77,
    })
    if (!result.ok) throw new Error(result.failure.message)
    const block = junkBlock(77)
    let sum = 0n
    for (let i = 0; i < n * m; i += 1) {
      const word = junkWord(block, n + i, width)
      sum = BigInt.asUintN(width, (sum << 1n) ^ word ^ (sum >> BigInt(width - 1)))
    }
    expect(result.scalars.sum).toBe(sum)
    expect(result.touched).toBe(0)
  })

  const touch = new TwoWays(`
routine touch
  in   a[n]
  work c[n]
  work d[n]
begin
  i <- 0
  while i < n
    x <- a[i]
    p <- addr(d)
    if x = 1
      c[i] <- c[i]   # its own junk again
    else if x = 2
      p[i] <- x
    else if x = 3
      d[i] <- 0
      [addr(d)] <- 0
    end
    i <- i + 1
  end
end
`)

  test('words of work memory count as touched once stored to, whatever is stored', () => {
    for (const width of [2, 3, 5, 8, 32, 47, 64]) {
      const most = Math.min(40, Math.floor(2 ** width / 4))
      const inputs = fc.sample(fc.array(fc.nat(3), { minLength: 1, maxLength: most }), { numRuns: 40, seed: width })
      for (const a of inputs) {
        const result = same(touch, { width, sizes: { n: a.length }, arrays: { a }, junk: a.length })
        if (!result.ok) throw new Error(result.failure.message)
        const places = a.flatMap((x, i) => [[], [`c${i}`], [`d${i}`], [`d${i}`, 'd0']][x]!)
        expect(result.touched, `${width}: ${a}`).toBe(new Set(places).size)
      }
    }
  })
})

describe('whole routines at many sizes', () => {
  test.each([
    ['insertion', routineText('insertion.tally'), [5, 8, 13, 32, 47, 64]],
    ['merge sort', routineText('merge.tally'), [6, 8, 13, 32, 47, 64]],
    ['radix sort', benchText('radix.tally'), [16, 32, 48, 64]],
    ['radix sort by name', benchText('radix-named.tally'), [16, 32, 48, 64]],
    ['binary gcds', benchText('gcd.tally'), [5, 13, 32, 47, 64]],
    ['products', benchText('product.tally'), [5, 13, 32, 47, 64]],
  ] as const)('%s', (_, text, widths) => {
    const routine = new TwoWays(text)
    for (const width of widths) {
      const most = Math.min(70, 2 ** (width - 1) - 1)
      const word = fc.bigInt({ min: 0n, max: (1n << BigInt(width)) - 1n })
      for (const a of fc.sample(fc.array(word, { minLength: 1, maxLength: most, size: 'max' }), {
        numRuns: 12,
        seed: width,
      })) {
        const result = same(routine, { width, sizes: { n: a.length }, arrays: { a } })
        if (!result.ok) throw new Error(result.failure.message)
        const sorted = result.arrays.a
        if (sorted) expect(Array.from(sorted, BigInt)).toEqual(a.toSorted((x, y) => (x < y ? -1 : x > y ? 1 : 0)))
      }
    }
  })
})
