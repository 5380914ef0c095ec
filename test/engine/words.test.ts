import { describe, expect, test } from 'vitest'
import { applyBinary, applyUnary, compareWords, makeWords, multiplyWords } from '../../src/machine'
import { cornerWords, TwoWays } from '../outside/two-ways'

const WIDTHS = [2, 3, 4, 5, 6, 7, 8, 13, 16, 24, 31, 32, 33, 34, 47, 48, 53, 62, 63, 64]

const BINARY = {
  add: '+',
  subtract: '-',
  multiply: '*',
  divide: '/',
  modulo: 'mod',
  and: '&',
  or: '|',
  xor: 'xor',
  'shift-left': '<<',
  'shift-right': '>>',
} as const

/** All pairs of words, one operation on each pair; divisors of 0 are passed over. */
const pairs = (operator: string) =>
  new TwoWays(`routine each
  in  a[n], b[n]
  out c[n]
begin
  for i from 0 to n - 1
    x <- a[i]
    y <- b[i]
    c[i] <- 0
    if y = 0 and ${/\/|mod/.test(operator) ? '0 = 0' : '0 = 1'} goto next
    c[i] <- x ${operator} y
next:
  end
end
`)

const operations = Object.fromEntries(Object.entries(BINARY).map(([name, operator]) => [name, pairs(operator)]))

const others = new TwoWays(`routine each
  in  a[n], b[n]
  out high[n], low[n], minus[n], flip[n], count[n], top[n], bottom[n], tests[n]
begin
  for i from 0 to n - 1
    x <- a[i]
    y <- b[i]
    h, l <- x * y
    high[i]   <- h
    low[i]    <- l
    minus[i]  <- -x
    flip[i]   <- ~x
    count[i]  <- popcount(x)
    top[i]    <- msb(x)
    bottom[i] <- lsb(x)
    t <- 0
    if signed(x) < signed(y) goto less
    t <- 1
less:
    if not (x < y) goto more
    t <- t xor 2
more:
    if signed(x) >= signed(y) and x != y goto last
    t <- t xor 1
last:
    tests[i] <- t
  end
end
`)

describe.each(WIDTHS)('w = %i', width => {
  const words = width <= 4 ? Array.from({ length: 2 ** width }, (_, word) => BigInt(word)) : cornerWords(width)
  // An index must fit a word, so narrow words are paired a few at a time.
  const most = Math.min(2 ** width - 1, 300)
  const all = words.flatMap(left => words.map(right => [left, right] as const))
  const lots = Array.from({ length: Math.ceil(all.length / most) }, (_, at) =>
    all.slice(at * most, (at + 1) * most),
  )
  const given = (lot: typeof all) => ({
    width,
    sizes: { n: lot.length },
    arrays: { a: lot.map(([left]) => left), b: lot.map(([, right]) => right) },
  })

  test.each(Object.keys(BINARY) as (keyof typeof BINARY)[])('%s', name => {
    for (const lot of lots) {
      const expected = lot.map(([left, right]) =>
        right === 0n && (name === 'divide' || name === 'modulo') ? 0n : applyBinary(name, left, right, width),
      )
      const { reference, engine } = operations[name]!.results(given(lot))
      expect(engine).toEqual(reference)
      expect(engine.ok && engine.arrays.c).toEqual(makeWords(width, expected))
    }
  })

  test('two-word products, unary operations and comparisons', () => {
    for (const lot of lots) {
      const { reference, engine } = others.results(given(lot))
      expect(engine).toEqual(reference)
      const column = (word: (left: bigint, right: bigint) => bigint) =>
        makeWords(
          width,
          lot.map(([left, right]) => word(left, right)),
        )
      expect(engine.ok && engine.arrays).toEqual({
        high: column((x, y) => multiplyWords(x, y, width).high),
        low: column((x, y) => multiplyWords(x, y, width).low),
        minus: column(x => applyUnary('negate', x, width)),
        flip: column(x => applyUnary('complement', x, width)),
        count: column(x => applyUnary('popcount', x, width)),
        top: column(x => applyUnary('msb', x, width)),
        bottom: column(x => applyUnary('lsb', x, width)),
        tests: column((x, y) => {
          let bits = compareWords('<', true, x, y, width) ? 0n : 1n
          if (compareWords('<', false, x, y, width)) bits ^= 2n
          return compareWords('>=', true, x, y, width) && x !== y ? bits : bits ^ 1n
        }),
      })
    }
  })
})

describe('operands are read before results are written', () => {
  const texts = {
    product: 'x, y <- x * y',
    'product of one word': 'y, x <- x * x',
    'shift by itself': 'x <- x << x',
    difference: 'x <- y - x',
    'swap by a procedure': 'x, y <- swap(x, y)',
  }
  test.each(Object.entries(texts))('%s', (_, line) => {
    const routine = new TwoWays(`routine alias
  inout x, y
procedure swap(p, q) -> s, t
  return q, p
end
begin
  ${line}
end
`)
    for (const width of [4, 32, 47, 64]) {
      for (const x of cornerWords(width)) routine.run({ width, scalars: { x, y: 11n } })
    }
  })
})

describe('known amounts and small words', () => {
  // Bounds of words are worked out from how they were made; a wrong one would show in a missing mask or select.
  const routine = new TwoWays(`routine bounds
  in  a[n]
  out b[n], c[n], d[n], e[n]
begin
  for i from 0 to n - 1
    x <- a[i]
    s <- x & 15
    b[i] <- (x << s) + (x >> (x mod 7))
    t <- x >> 2
    c[i] <- (t + t) + (x << 70)
    k <- i
    while k < w
      d[i] <- (x >> k) + (x << k)
      k <- k + 3
    end
    d[i] <- d[i] + (x >> k)
    k <- x
    if k <= 40 goto small
    k <- k + 1
small:
    e[i] <- (x << k) xor (x >> (s * 9))
  end
end
`)
  test.each(WIDTHS.filter(width => width >= 7))('w = %i', width => {
    const words = cornerWords(width)
    routine.run({ width, sizes: { n: words.length }, arrays: { a: words } })
  })
})
