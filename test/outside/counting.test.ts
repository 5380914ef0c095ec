import { describe, expect, test } from 'vitest'
import { cornerWords, routineText, TwoWays } from './two-ways'

const bits = (x: number) => x.toString(2).split('1').length - 1

describe("Euclid's algorithm", () => {
  const euclid = new TwoWays(`
routine euclid
  in  x, y
  out g
begin
  u <- x
  v <- y
  while v != 0
    r <- u mod v
    u <- v
    v <- r
  end
  g <- u
end
`)
  const gcd = (x: bigint, y: bigint, width = 64) => euclid.run({ width, scalars: { x, y } })

  test('neighbouring Fibonacci numbers F(k+2), F(k+1) take k divisions', () => {
    // Source: G. Lame (1844); D. E. Knuth, TAOCP vol. 2 (3rd ed., 1997), 4.5.3, Theorem F.
    let [small, large] = [1n, 2n]
    for (let k = 1; large < 1n << 64n; k += 1) {
      const { tally, scalars } = gcd(large, small)
      expect(tally.byClass.divide, `F(${k + 2})`).toBe(k)
      expect(scalars.g).toBe(1n)
      ;[small, large] = [large, small + large]
    }
  })

  test('no smaller pair takes as many', () => {
    // Source: the same theorem: F(k+2), F(k+1) is the smallest pair u > v > 0 that takes k divisions.
    const first = new Map<number, [number, number]>()
    for (let x = 2; x <= 56; x += 1) {
      for (let y = 1; y < x; y += 1) {
        const divisions = gcd(BigInt(x), BigInt(y), 8).tally.byClass.divide
        if (!first.has(divisions)) first.set(divisions, [x, y])
      }
    }
    expect([...first].sort(([j], [k]) => j - k)).toEqual([
      [1, [2, 1]],
      [2, [3, 2]],
      [3, [5, 3]],
      [4, [8, 5]],
      [5, [13, 8]],
      [6, [21, 13]],
      [7, [34, 21]],
      [8, [55, 34]],
    ])
  })
})

describe('binary counter', () => {
  const counter = new TwoWays(`
routine counter
  in   m
  work bit[w]
begin
  for i from 0 to w - 1
    bit[i] <- 0
  end
  for t from 1 to m
    j <- 0
    while bit[j] = 1
      bit[j] <- 0   # carried
      j <- j + 1
    end
    bit[j] <- 1   # set
  end
end
`)

  test('m increments flip 2m - popcount(m) bits', () => {
    // Source: OEIS A005187: 0, 1, 3, 4, 7, 8, 10, 11, 15, 16, 18, 19, 22, 23, 25, 26, 31.
    const A005187 = [0, 1, 3, 4, 7, 8, 10, 11, 15, 16, 18, 19, 22, 23, 25, 26, 31]
    const flips = (m: number) => {
      const outcome = counter.run({ width: 16, scalars: { m } })
      return outcome.operationsAt('# carried') + outcome.operationsAt('# set')
    }
    expect(A005187.map((_, m) => flips(m))).toEqual(A005187)
    for (const m of [100, 255, 256, 257, 1000, 4095]) expect(flips(m)).toBe(2 * m - bits(m))
  })
})

describe('recursion', () => {
  test.each([1, 2, 3, 5, 10])('a tower of %i discs takes 2^n - 1 moves', n => {
    // Source: E. Lucas (1883); Graham, Knuth, Patashnik, "Concrete Mathematics" (2nd ed., 1994), 1.1.
    const hanoi = new TwoWays(routineText('hanoi.tally'))
    const { operationsAt, tally, array, frames } = hanoi.run({ width: 16, sizes: { n } })
    // A move of a disc is a subtraction and a store.
    expect(operationsAt('peg[k - 1] <- there') / 2).toBe(2 ** n - 1)
    // A tree of 2^(n+1) - 1 calls, each a jump there and a jump back.
    expect(tally.byClass.call).toBe(2 * (2 ** (n + 1) - 1))
    expect(array('peg')).toEqual(Array(n).fill(2n))
    // n + 1 frames of four parameters and a return address.
    expect(frames).toBe(5 * (n + 1))
  })

  const fibonacci = new TwoWays(`
routine fibonacci
  in  n
  out f
procedure fib(k) -> r
  if k < 2
    return k
  end
  x <- fib(k - 1)
  y <- fib(k - 2)
  return x + y
end
begin
  f <- fib(n)
end
`)

  test('Fibonacci by recursion makes the published number of calls', () => {
    // Source: OEIS A001595, a(n) = a(n-1) + a(n-2) + 1; and A000045 for the values.
    const A001595 = [1, 1, 3, 5, 9, 15, 25, 41, 67, 109, 177, 287, 465, 753, 1219, 1973]
    const A000045 = [0, 1, 1, 2, 3, 5, 8, 13, 21, 34, 55, 89, 144, 233, 377, 610]
    for (const [n, calls] of A001595.entries()) {
      const { scalars, tally, frames } = fibonacci.run({ width: 16, scalars: { n } })
      expect(scalars.f).toBe(BigInt(A000045[n]!))
      expect(tally.byClass.call, `n = ${n}`).toBe(2 * calls)
      // fib(n) waits on fib(n - 1) and so on down to fib(1): a frame is k, r, x, y and the return address.
      expect(frames, `n = ${n}`).toBe(5 * Math.max(n, 1))
    }
  })

  test('a recursion without end runs out of frames, or of operations', () => {
    const endless = new TwoWays(`
routine endless
  out f
procedure deeper(k) -> r
  r <- deeper(k + 1)
end
begin
  f <- deeper(0)
end
`)
    expect(endless.fail({ width: 32, limits: { frames: 300 } }).kind).toBe('frame-limit')
    expect(endless.fail({ width: 32, limits: { operations: 100 } }).kind).toBe('operation-limit')
  })
})

describe('bit counts', () => {
  const scans = new TwoWays(`
routine scans
  out ones[n]
  out ruler[n]
begin
  i <- 0
  while i < n
    ones[i]  <- popcount(i)
    ruler[i] <- lsb(i + 1)
    i <- i + 1
  end
end
`)

  test('popcount gives OEIS A000120, lsb the ruler function A007814', () => {
    const A000120 = [0, 1, 1, 2, 1, 2, 2, 3, 1, 2, 2, 3, 2, 3, 3, 4, 1, 2, 2, 3, 2, 3, 3, 4, 2, 3, 3, 4, 3, 4, 4, 5]
    const A007814 = [0, 1, 0, 2, 0, 1, 0, 3, 0, 1, 0, 2, 0, 1, 0, 4, 0, 1, 0, 2, 0, 1, 0, 3, 0, 1, 0, 2, 0, 1, 0, 5]
    for (const width of [6, 8, 13, 32, 47, 64]) {
      const { array, tally } = scans.run({ width, sizes: { n: 32 } })
      expect(array('ones')).toEqual(A000120.map(BigInt))
      expect(array('ruler')).toEqual(A007814.map(BigInt))
      expect(tally.byClass.bitscan).toBe(64)
    }
  })
})

describe('integer square root', () => {
  // Source: the digit-by-digit method in base 2; H. S. Warren, "Hacker's Delight" (2nd ed., 2012), 11-1.
  const root = new TwoWays(`
routine integer_root
  in  x
  out r
  check r * r <= x
  check (r + 1) * (r + 1) > x
begin
  rest <- x
  r    <- 0
  bit  <- 1 << ((w - 1) & ~1)
  while bit != 0
    try <- r + bit
    r <- r >> 1
    if rest >= try
      rest <- rest - try
      r <- r + bit
    end
    bit <- bit >> 2
  end
end
`)

  test.each([2, 5, 8, 13, 32, 47, 63, 64])('at w = %i against its definition', width => {
    const some = [4n, 15n, 16n, 17n, 99n, 100n].map(x => BigInt.asUintN(width, x))
    for (const x of [...cornerWords(width), ...some]) {
      const { r } = root.run({ width, scalars: { x } }).scalars
      expect(r! * r! <= x && (r! + 1n) * (r! + 1n) > x, `${x}: ${r}`).toBe(true)
    }
  })
})

describe('binary gcd', () => {
  // Source: J. Stein (1967); D. E. Knuth, TAOCP vol. 2 (3rd ed., 1997), 4.5.2, Algorithm B.
  const binary = new TwoWays(`
routine binary_gcd
  in  x, y
  out g
begin
  u <- x
  v <- y
  if u = 0
    g <- v
    halt
  end
  if v = 0
    g <- u
    halt
  end
  twos <- 0
  while ((u | v) & 1) = 0
    u <- u >> 1
    v <- v >> 1
    twos <- twos + 1
  end
  while (u & 1) = 0
    u <- u >> 1
  end
  repeat
    while (v & 1) = 0
      v <- v >> 1
    end
    if u > v
      t <- u
      u <- v
      v <- t
    end
    v <- v - u
  until v = 0
  g <- u << twos
end
`)
  const gcd = (x: bigint, y: bigint): bigint => (y === 0n ? x : gcd(y, x % y))

  test.each([2, 5, 13, 32, 47, 64])('at w = %i against Euclid on BigInt', width => {
    for (const x of cornerWords(width)) {
      for (const y of cornerWords(width)) {
        expect(binary.run({ width, scalars: { x, y } }).scalars.g, `${x}, ${y}`).toBe(gcd(x, y))
      }
    }
  })
})
