import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { CHARGES } from '../../src/machine'
import { BIT_TRICKS, type BitTrick } from './bit-tricks'
import { cornerWords, TwoWays } from './two-ways'

function routineOf({ inputs, constants, body }: BitTrick): TwoWays {
  const fixed = constants ? `\n  ${constants}` : ''
  return new TwoWays(`routine trick\n  in ${inputs.join(', ')}\n  out r${fixed}\nbegin${body}\nend\n`)
}

/** Inputs to try: the trick's corner words in every combination where they are few, and random words. */
function inputsOf({ width, inputs, below }: BitTrick): bigint[][] {
  const limit = below ?? 1n << BigInt(width)
  const corners = cornerWords(width).filter(word => word < limit)
  const word = fc.bigInt({ min: 0n, max: limit - 1n })
  const random = fc.sample(fc.array(word, { minLength: inputs.length, maxLength: inputs.length }), {
    numRuns: 60,
    seed: 1,
  })
  const combined = inputs.reduce<bigint[][]>((rows, _) => rows.flatMap(row => corners.map(c => [...row, c])), [[]])
  const everyByte = limit === 256n && inputs.length === 1
  return [
    ...combined.slice(0, 250),
    ...random,
    ...(everyByte ? Array.from({ length: 256 }, (_, b) => [BigInt(b)]) : []),
  ]
}

// Source: S. E. Anderson, "Bit Twiddling Hacks", section by section as in the table.
describe('operation counts of a bit-trick collection', () => {
  test.each(BIT_TRICKS.map(trick => [trick.section, trick.published, trick] as const))(
    '%s: %i',
    (_, published, trick) => {
      const routine = routineOf(trick)
      for (const words of inputsOf(trick)) {
        if (trick.section.includes('log base 2') && words[0] === 0n) continue
        const scalars = Object.fromEntries(trick.inputs.map((name, i) => [name, words[i]!]))
        const outcome = routine.run({ width: trick.width, scalars })
        expect(outcome.scalars.r, words.join(', ')).toBe(trick.expected(...words))
        expect(outcome.time(CHARGES.operators)).toBe(published + (trick.differs?.by ?? 0))
      }
    },
  )

  test("Brian Kernighan's count goes through as many passes as there are bits set", () => {
    const kernighan = new TwoWays(`
routine kernighan
  in  v
  out c
begin
  x <- v
  c <- 0
  while x != 0
    x <- x & (x - 1)
    c <- c + 1
  end
end
`)
    for (const width of [8, 13, 32, 64]) {
      for (const v of cornerWords(width)) {
        const set = v.toString(2).split('1').length - 1
        const { scalars, tally, time } = kernighan.run({ width, scalars: { v } })
        expect(scalars.c).toBe(BigInt(set))
        // One test more than passes; the three operators -, & and ++ a pass.
        expect(tally.byClass.compare).toBe(set + 1)
        expect(time(CHARGES.operators)).toBe(3 * set)
      }
    }
  })

  test('modulus by (1 << s) - 1 stays within the published worst case', () => {
    // "At most 5 + (4 + 5 * ceil(N / s)) * ceil(lg(N / s)) operations", comparisons counted.
    const modulus = new TwoWays(`
routine modulus
  in  v
  out m
  let s = 4
  fix d = 2^s - 1
begin
  x <- v
  m <- v
  while x > d
    m <- 0
    while x != 0
      m <- m + (x & d)
      x <- x >> s
    end
    x <- m
  end
  if m = d
    m <- 0
  end
end
`)
    for (const s of [2, 3, 4, 8, 11]) {
      const most = 5 + (4 + 5 * Math.ceil(32 / s)) * Math.ceil(Math.log2(32 / s))
      for (const v of cornerWords(32)) {
        const { scalars, time } = modulus.run({ width: 32, lets: { s: BigInt(s) }, scalars: { v } })
        expect(scalars.m, `${v} mod 2^${s} - 1`).toBe(v % ((1n << BigInt(s)) - 1n))
        expect(time({ ...CHARGES.operators, compare: 1 })).toBeLessThanOrEqual(most)
      }
    }
  })

  test('the next bit permutation follows the published sequence', () => {
    // "If the bit pattern is 00010011, the next patterns would be ..."; eleven C operators, no figure given beside it.
    const permutation = new TwoWays(`
routine permutation
  in  v
  out next
begin
  t    <- (v | (v - 1)) + 1
  next <- t | ((((t & -t) / (v & -v)) >> 1) - 1)
end
`)
    const patterns = ['00010011', '00010101', '00010110', '00011001', '00011010', '00011100', '00100011']
    for (const [i, pattern] of patterns.slice(0, -1).entries()) {
      const { scalars, time } = permutation.run({ width: 8, scalars: { v: BigInt(`0b${pattern}`) } })
      expect(scalars.next).toBe(BigInt(`0b${patterns[i + 1]}`))
      expect(time(CHARGES.operators)).toBe(11)
    }
  })
})
