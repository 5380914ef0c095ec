import { describe, expect, test } from 'vitest'
import { junkBlock, junkWord, tallyRun } from '../../src/machine'
import { bound, type Given, program, run } from './given'

describe('a run fails', () => {
  const arrays = { a: [1n, 2n, 3n] }
  const sized = { sizes: { n: 3 }, arrays }
  test.each<[string, string, string, Given, string, bigint]>([
    [
      'outside an array',
      '  in a[n]',
      'i <- n\nx <- a[i]',
      sized,
      'line 5: index 3 is outside a, which has 3 words (n = 3, w = 16)',
      3n,
    ],
    [
      'storing outside an array',
      '  in a[n]\n  work b[1]',
      'b[n] <- 1',
      sized,
      'line 5: index 3 is outside b, which has 1 word (n = 3, w = 16)',
      3n,
    ],
    [
      'outside the memory in use',
      '  in a[n]\n  work b[1]',
      'x <- [n + 1]',
      sized,
      'line 5: address 4 is outside the memory in use, which has 4 words',
      4n,
    ],
    [
      'storing to an input by address',
      '  in a[n]\n  work b[1]',
      'p <- addr(a)\np[1] <- 5',
      sized,
      'line 6: address 1 is in an array that is only read; addresses from 3 on can be stored to',
      1n,
    ],
    ['dividing by 0', '  out z', 'z <- 0\nz <- 7 / z', {}, 'line 5: 7 is divided by 0 (w = 16)', 7n],
    ['taking a rest by 0', '  out z', 'z <- 0\nz <- 7 mod z', {}, 'line 5: 7 is divided by 0 (w = 16)', 7n],
    [
      'at a step of 0',
      '  out z',
      'z <- 0\nfor i from 1 to 2 by z\nend',
      {},
      'line 5: the loop has a step of 0 (w = 16)',
      0n,
    ],
    ['at a false assert', '  out z', 'z <- 3\nassert z + 1 = 5', {}, 'line 5: the assertion is false (w = 16)', 0n],
    [
      'at an assert without a value',
      '  out z',
      'z <- 0\nassert 1 / z = 5',
      {},
      'line 5: the assertion cannot be worked out',
      0n,
    ],
    [
      'at its limit of operations',
      '  out z',
      'z <- 0\nagain:\nz <- z + 1\ngoto again',
      { limits: { operations: 100 } },
      'the run passes its limit of 100 operations (w = 16)',
      100n,
    ],
    [
      'at its limit of frames',
      '  out z\n  procedure f(x) -> y\n    y <- f(x)\n  end',
      'z <- f(1)',
      { limits: { frames: 10 } },
      'line 4: the calls in flight need more than 10 words of frames (w = 16)',
      10n,
    ],
  ])('%s', (_, declarations, body, given, message, value) => {
    const result = run(program(declarations, body), given)
    expect(result.ok).toBe(false)
    if (result.ok) return
    expect(result.failure.message).toContain(message)
    expect(result.failure.value).toBe(value)
  })
})

describe('a run', () => {
  test('may use all the operations that it is allowed, and not one more', () => {
    const of = program('  out z', 'z <- 0\nwhile z < 10\nz <- z + 1\nend')
    // 1 move, 11 compares, 10 adds, 10 jumps.
    expect(run(of, { limits: { operations: 32 } }).ok).toBe(true)
    expect(run(of, { limits: { operations: 31 } }).ok).toBe(false)
  })

  test('takes address arithmetic mod 2^w', () => {
    const of = program('  in a[n]\n  out z', 'p <- addr(a) + 2\nz <- p[-1]')
    const result = run(of, { sizes: { n: 3 }, arrays: { a: [7n, 8n, 9n] } })
    expect(result.ok && result.scalars.z).toBe(8n)
  })

  test('recurses a million frames deep', () => {
    const of = program(
      '  out z\n  procedure f(x) -> y\n    y <- 0\n    if x != 0\n      y <- f(x - 1)\n      y <- y + 1\n    end\n  end',
      'z <- f(1000000)',
    )
    const result = run(of, { width: 32 })
    expect(result.ok && [result.scalars.z, result.frames]).toEqual([1000000n, 3 * 1000001])
  })

  test('starts out and work memory as junk, never as zeros', () => {
    const of = program('  in a[n]\n  out z\n  work b[2]', 'z <- b[1]')
    const result = run(of, { sizes: { n: 3 }, arrays: { a: [1n, 2n, 3n] }, junk: 9 })
    expect(result.ok && result.scalars.z).toBe(junkWord(junkBlock(9), 4, 16))
  })

  test('gives junk past 64 bits by limbs', () => {
    const block = junkBlock(3)
    expect(junkWord(block, 5, 128)).toBe((block[11]! << 64n) | block[10]!)
    expect(junkWord(block, 5, 100)).toBe(BigInt.asUintN(100, (block[11]! << 64n) | block[10]!))
  })

  test('runs at w = 4096', () => {
    const of = program('  in x\n  out z, t', 'z, t <- x * x')
    const x = (1n << 4096n) - 1n
    const result = run(of, { width: 4096, scalars: { x } })
    expect(result.ok && (result.scalars.z! << 4096n) + result.scalars.t!).toBe(x * x)
  })
})

describe('space', () => {
  test('counts work words once stored to, variables of the body, and frames at their peak', () => {
    const declarations = `  in    a[n], s
  inout x
  out   b[2], z
  work  c[10], d[5]
  fix   m = 3
  fix   t[4] = 1, 2, 3, 4
  procedure f(u) -> v
    q <- u + 1
    v <- q
  end`
    const body =
      'z <- f(s)\nz <- f(z)\nx <- x + m\nb[0] <- t[1]\nc[3] <- 1\nc[3] <- 2\nd[0] <- c[3]\np <- addr(d)\n[p] <- 4\np[4] <- a[0]\nh <- z'
    const given = { sizes: { n: 3 }, arrays: { a: [1n, 2n, 3n] }, scalars: { s: 1n, x: 2n } }
    const of = program(declarations, body)
    const result = run(of, given)
    if (!result.ok) throw new Error(result.failure.message)
    expect(tallyRun(bound(of, given), result).space).toEqual({
      input: 3 + 1 + 1 + 1, // a, s, x, n
      output: 2 + 1,
      working: 3 + 2 + 4, // c[3], d[0], d[4]; p, h; u, v, q and the return address
      declared: 15,
      constants: 5,
    })
  })
})
