import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import wabt from 'wabt'
import { adoptModule, compileProgram, compileProgramSync } from '../../src/engine'
import { planModule } from '../../src/engine/plan'
import { bindProgram, DEFAULT_LIMITS, interpretProgram, makeWords } from '../../src/machine'
import { readProgram } from '../../src/routine'
import { TwoWays } from '../outside/two-ways'

const BENCH = ['radix', 'radix-named', 'insertion', 'merge', 'gcd', 'product', 'sha256', 'sum', 'fib']
const benchText = (name: string) => readFileSync(new URL(`../bench/${name}.tally`, import.meta.url), 'utf8')

const asserting = `routine asserting
  inout a[n]
  work  b[n]
  let   k = 3
procedure f(x) -> y
  if x = 0
    return 1
  end
  y <- f(x - 1)
  assert y >= 1
  y <- y * k
end
begin
  s <- 0
  for i from 0 to n - 1
    b[i] <- f(i & 3)
    p <- addr(b)
    p[i] <- b[i] / (i + 1) + s
    s <- popcount(a[i]) + lsb(s) + msb(s)
    a[i] <- p[i] mod k
  end
end
`

describe('modules', () => {
  const texts = { ...Object.fromEntries(BENCH.map(name => [name, benchText(name)])), asserting }
  test.each(Object.entries(texts))('of %s are valid', async (_, text) => {
    const { readWasm } = await wabt()
    const { program } = readProgram(text)
    for (const width of [2, 17, 32, 33, 64]) {
      for (const marked of [false, true]) {
        const { bytes } = planModule(program!, width, marked)
        expect(WebAssembly.validate(bytes)).toBe(true)
        readWasm(bytes, {}).validate()
      }
    }
  })

  test('are the same for every size', () => {
    const { program } = readProgram(asserting)
    const compiled = compileProgramSync(program!, 32)
    for (const [n, k] of [
      [0, 5n],
      [1, 1n],
      [7, 9n],
      [100, 2n],
    ] as const) {
      const bound = bindProgram(program!, { width: 32, sizes: { n }, lets: { k } }, DEFAULT_LIMITS)
      if ('refusal' in bound) throw new Error(bound.refusal.reason)
      const a = makeWords(
        32,
        Array.from({ length: n }, (_, at) => BigInt(at * at + 1)),
      )
      const input = { arrays: { a }, scalars: {}, junk: n }
      const expected = interpretProgram(bound.binding, input, DEFAULT_LIMITS)
      expect(compiled.run(bound.binding, input, DEFAULT_LIMITS)).toEqual(expected)
    }
  })

  test('of words past 64 bits are refused in so many words', () => {
    const { program } = readProgram(asserting)
    expect(() => compileProgramSync(program!, 65)).toThrow(/65 bits/)
  })
})

describe('runs', () => {
  const { program } = readProgram(benchText('radix'))
  const bound = bindProgram(program!, { width: 64, sizes: { n: 500 }, lets: {} }, DEFAULT_LIMITS)
  if ('refusal' in bound) throw new Error(bound.refusal.reason)
  const { binding } = bound
  const a = BigUint64Array.from({ length: 500 }, (_, at) => BigInt.asUintN(64, BigInt(at) * 0x9e37_79b9_7f4a_7c15n))
  const input = { arrays: { a }, scalars: {}, junk: 7 }

  test('repeat to the last count, with others between', async () => {
    const compiled = await compileProgram(program!, 64)
    const first = compiled.run(binding, input, DEFAULT_LIMITS)
    new TwoWays(asserting).run({ width: 8, sizes: { n: 9 }, arrays: { a: [1, 2, 3, 4, 5, 6, 7, 8, 9] } })
    expect(compiled.run(binding, input, { ...DEFAULT_LIMITS, operations: 100 }).ok).toBe(false)
    expect(compiled.run(binding, input, DEFAULT_LIMITS)).toEqual(first)
    expect(first).toEqual(interpretProgram(binding, input, DEFAULT_LIMITS))
  })

  test('leave the input as it was, and give arrays of their own', () => {
    const before = a.slice()
    const compiled = compileProgramSync(program!, 64)
    const first = compiled.run(binding, input, DEFAULT_LIMITS)
    const kept = first.ok && first.arrays.a!.slice()
    compiled.run(binding, { ...input, arrays: { a: a.slice().reverse() } }, DEFAULT_LIMITS)
    expect(a).toEqual(before)
    expect(first.ok && first.arrays.a).toEqual(kept)
  })

  test('of a module taken up elsewhere are the same', () => {
    const compiled = compileProgramSync(program!, 64)
    const again = readProgram(benchText('radix')).program!
    const adopted = adoptModule(again, 64, compiled.module)
    expect(adopted.run(binding, input, DEFAULT_LIMITS)).toEqual(compiled.run(binding, input, DEFAULT_LIMITS))
  })

  test('refuse what is not for them', () => {
    const compiled = compileProgramSync(program!, 32)
    expect(() => compiled.run(binding, input, DEFAULT_LIMITS)).toThrow(/width/)
    const other = compileProgramSync(readProgram(benchText('sum')).program!, 64)
    expect(() => other.run(binding, input, DEFAULT_LIMITS)).toThrow(/program/)
    const wide = compileProgramSync(program!, 64)
    expect(() => wide.run(binding, { ...input, arrays: { a: a.slice(1) } }, DEFAULT_LIMITS)).toThrow(/length/)
  })

  test('refuse words that the width does not hold', () => {
    const routine = new TwoWays('routine r\n  in a[n]\n  out y\nbegin\n  y <- a[0]\nend\n')
    for (const [width, words] of [
      [8, new Uint32Array([256])],
      [40, new BigUint64Array([2n ** 40n])],
    ] as const) {
      const { binding } = { binding: routine.bind({ width, sizes: { n: 1 } }) }
      const compiled = compileProgramSync(routine.program, width)
      const run = () => compiled.run(binding, { arrays: { a: words }, scalars: {}, junk: 1 }, DEFAULT_LIMITS)
      expect(run).toThrow(/bits/)
    }
  })
})

describe('a long first run', () => {
  // It starts over once the better code is there; nothing of that may show.
  const routine = new TwoWays(`routine long
  in  n0
  out y
  work b[8]
begin
  y <- 0
  i <- 0
  while i < n0
    b[i & 7] <- y
    y <- y + b[(i + y) & 7] xor i
    i <- i + 1
  end
  assert i = n0
end
`)
  test.each([1 << 16, 300_000, 1 << 20])('of %i passes counts as any other', n0 => {
    const given = { width: 32, scalars: { n0 } }
    const compiled = compileProgramSync(routine.program, 32)
    const input = { arrays: {}, scalars: { n0: BigInt(n0) }, junk: 1 }
    const first = compiled.run(routine.bind(given), input, DEFAULT_LIMITS)
    const second = compiled.run(routine.bind(given), input, DEFAULT_LIMITS)
    expect(first).toEqual(second)
    expect(first.ok && first.visits.includes(n0)).toBe(true)
    const limits = { ...DEFAULT_LIMITS, operations: 5_000_000 }
    const fresh = compileProgramSync(routine.program, 32).run(routine.bind(given), input, limits)
    expect(fresh.ok).toBe(n0 * 10 < 5_000_000)
    expect(fresh).toEqual(compiled.run(routine.bind(given), input, limits))
  })
})
