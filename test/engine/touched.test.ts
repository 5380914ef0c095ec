import { describe, expect, test } from 'vitest'
import { compileProgramSync } from '../../src/engine'
import { DEFAULT_LIMITS, junkBlock, junkWord } from '../../src/machine'
import { TwoWays } from '../outside/two-ways'

const stores = new TwoWays(`routine stores
  in    a[n], shift
  inout c[n]
  work  b[m0], d[n]
  let   m0 = 40
begin
  p <- addr(b)
  for i from 0 to n - 1
    p[(a[i] + shift) & 31] <- a[i]
    b[i] <- p[i]
    d[i] <- d[i]
    c[i] <- 1
  end
end
`)

describe('words of work memory that are stored to', () => {
  test.each([6, 7, 12, 16, 32, 33, 64])('are counted, w = %i', width => {
    for (const n of [0, 1, 5, 31]) {
      for (const m0 of [33n, 40n, 61n]) {
        const arrays = {
          a: Array.from({ length: n }, (_, at) => (at * 7) % 50),
          c: Array.from({ length: n }, () => 0),
        }
        for (const shift of [0, 9]) {
          const given = { width, sizes: { n }, lets: { m0 }, scalars: { shift }, arrays }
          const { reference, engine } = stores.results(given)
          expect(engine).toEqual(reference)
        }
      }
    }
  })

  test('are all of them where each is stored to, if only with the junk it held', () => {
    const routine = new TwoWays(`routine same
  out y
  work b[50], c[3]
begin
  for i from 0 to 49
    b[i] <- b[i]
  end
  y <- b[7]
  c[1] <- 2
end
`)
    for (const width of [6, 32, 64]) expect(routine.run({ width }).tally.space.working).toBe(51 + 1)
  })

  test('are none where nothing stores', () => {
    const routine = new TwoWays('routine none\n  out y\n  work b[5]\nbegin\n  y <- b[3]\nend\n')
    const { scalars, tally } = routine.run({ width: 64, junk: 12 })
    expect(scalars.y).toBe(junkWord(junkBlock(12), 3, 64))
    expect(tally.space.working).toBe(0)
  })
})

describe('junk', () => {
  const copy = new TwoWays(`routine junk
  in   a[n]
  out  b[m0]
  work c[m0]
  let  m0 = 20000
begin
  p <- addr(c)
  for i from 0 to m0 - 1
    if i & 1 = 0 goto skip
    b[i] <- p[i]
skip:
  end
end
`)
  test.each([16, 20, 32, 33, 47, 64])('is the block’s, by address, w = %i', width => {
    for (const n of [0, 3, 9000]) {
      const m0 = width === 16 ? 9000n : 20_000n
      const { reference, engine } = copy.results({
        width,
        sizes: { n },
        lets: { m0 },
        arrays: { a: new Array(n).fill(0) },
        junk: n + 5,
      })
      expect(engine).toEqual(reference)
    }
  })

  test('does not depend on the runs before', () => {
    const given = { width: 64, sizes: { n: 3 }, arrays: { a: [0, 0, 0] } }
    const compiled = compileProgramSync(copy.program, 64)
    const run = (junk: number) =>
      compiled.run(copy.bind(given), { arrays: { a: new BigUint64Array(3) }, scalars: {}, junk }, DEFAULT_LIMITS)
    const first = run(1)
    expect(run(2)).not.toEqual(first)
    expect(run(1)).toEqual(first)
  })
})
