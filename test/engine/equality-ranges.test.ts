import { expect, test } from 'vitest'
import { TwoWays } from '../outside/two-ways'

// What tests and operations tell of a word's size decides where a result is cut to w bits, where a shift is looked at
// and where an index is: so every bound, every word and both ways out of each test.

const COMPARISONS = ['=', '!=', '<', '<=', '>', '>=']

/** On both ways out of `x OP bound` and of `bound OP x`: results that wrap, or do not, by how large x can be. */
function branches(operator: string, bound: number | bigint): TwoWays {
  const results = (side: string) => `
    twice${side} <- x + x
    next${side}  <- x + 1
    square${side} <- x * x
    left${side}  <- 1 << x
    right${side} <- y >> x
    sum${side}   <- x + y`
  const names = ['a', 'b'].flatMap(side =>
    ['twice', 'next', 'square', 'left', 'right', 'sum'].map(name => name + side),
  )
  return new TwoWays(`
routine branches
  in  x, y
  out ${names.join(', ')}
begin
${names.map(name => `  ${name} <- 0`).join('\n')}
  if x ${operator} ${bound}${results('a')}
  else${results('a')}
  end
  if ${bound} ${operator} x${results('b')}
  else${results('b')}
  end
end
`)
}

test.each([3, 4])('every bound and word at w = %i', width => {
  const size = 1 << width
  for (const operator of COMPARISONS) {
    for (let bound = 0; bound < size; bound += 1) {
      const routine = branches(operator, bound)
      for (let x = 0; x < size; x += 1) {
        const y = (x * 7 + bound) % size
        const { scalars } = routine.run({ width, scalars: { x, y } })
        const expected = { twice: 2 * x, next: x + 1, square: x * x, left: x < width ? 1 << x : 0, sum: x + y }
        for (const [name, value] of Object.entries(expected)) {
          for (const side of ['a', 'b'])
            expect(scalars[name + side], `${name}: x = ${x}, ${operator} ${bound}`).toBe(BigInt(value % size))
        }
        expect(scalars.righta).toBe(BigInt(x < width ? y >> x : 0))
      }
    }
  }
})

test.each([5, 13, 31, 33, 47, 63])('bounds around half the word and its root at w = %i', width => {
  const size = 2n ** BigInt(width)
  const root = BigInt(Math.floor(Math.sqrt(Number(size))))
  const centres = [size / 2n, root, size - 1n, BigInt(width), 32n, 64n].filter(centre => centre < size)
  const near = (centre: bigint) =>
    [-2n, -1n, 0n, 1n, 2n].map(by => centre + by).filter(word => word >= 0n && word < size)
  for (const centre of centres) {
    for (const operator of ['<', '<=', '>', '=']) {
      for (const bound of near(centre)) {
        const routine = branches(operator, bound)
        for (const x of near(centre)) {
          const { scalars } = routine.run({ width, scalars: { x, y: size - 2n } })
          for (const side of ['a', 'b']) {
            expect(scalars[`twice${side}`]).toBe((x + x) % size)
            expect(scalars[`next${side}`]).toBe((x + 1n) % size)
            expect(scalars[`square${side}`]).toBe((x * x) % size)
            expect(scalars[`left${side}`]).toBe(x < BigInt(width) ? 1n << x : 0n)
          }
        }
      }
    }
  }
})

test('bounds by operations: masks, remainders, quotients, shifts, products', () => {
  const routine = new TwoWays(`
routine made
  in  x, y
  out r1, r2, r3, r4, r5, r6, r7, r8, r9
begin
  m  <- x & 6
  r1 <- m + m
  r2 <- m * m
  q  <- x mod 5
  r3 <- (q + q) + q
  h  <- x >> 2
  r4 <- h * 4
  r5 <- h + h + h + h
  d  <- x / 3
  r6 <- d + d + d
  p  <- popcount(x) + popcount(y)
  r7 <- y << p
  o  <- (x & 3) | (y & 4)
  r8 <- (o xor 1) << o
  r9 <- (x & y) + (x | y)
end
`)
  for (const width of [3, 4, 5]) {
    const size = 1 << width
    const ones = (word: number) => word.toString(2).split('1').length - 1
    for (let x = 0; x < size; x += 1) {
      for (let y = 0; y < size; y += 1) {
        const [m, q, h, d, p, o] = [x & 6, x % 5, x >> 2, Math.floor(x / 3), ones(x) + ones(y), (x & 3) | (y & 4)]
        const shifted = (word: number, by: number) => (by >= width ? 0 : word << by)
        const expected = [2 * m, m * m, 3 * q, 4 * h, 4 * h, 3 * d, shifted(y, p), shifted(o ^ 1, o), x + y]
        const { scalars } = routine.run({ width, scalars: { x, y } })
        expect(Object.values(scalars), `w = ${width}: ${x}, ${y}`).toEqual(
          expected.map(value => BigInt(value % size)),
        )
      }
    }
  }
})

test.each([8, 13, 31, 32, 33, 47, 63, 64])('shifts by amounts that are known in part, w = %i', width => {
  const masks = [7, 31, 32, 63, 64, 127]
  const names = masks.flatMap((_, at) => [`l${at}`, `r${at}`, `t${at}`])
  const routine = new TwoWays(`
routine shifts
  in  x, y
  out ${names.join(', ')}
begin
${masks
  .map(
    (mask, at) => `  amount <- x & ${mask}
  l${at} <- y << amount
  r${at} <- y >> amount
  t${at} <- y >> (x mod ${mask + 1})`,
  )
  .join('\n')}
end
`)
  const w = BigInt(width)
  const y = BigInt.asUintN(width, 0xdead_beef_cafe_f00dn)
  const by = (amount: bigint, left: boolean) =>
    amount >= w ? 0n : left ? BigInt.asUintN(width, y << amount) : y >> amount
  for (let x = 0n; x < 128n; x += 1n) {
    const { scalars } = routine.run({ width, scalars: { x, y } })
    const expected = masks.flatMap(mask => {
      const amount = x & BigInt(mask)
      return [by(amount, true), by(amount, false), by(x % BigInt(mask + 1), false)]
    })
    expect(Object.values(scalars), `x = ${x}`).toEqual(expected)
  }
})

test('indices by loops of every form, in range and one past it', () => {
  const loops = [
    'for i from F to T',
    'for i from T downto F',
    'i <- F\n  while i <= T',
    'i <- F\n  while i < T + 1',
  ]
  for (const [form, head] of loops.entries()) {
    for (const length of [1, 2, 5]) {
      for (const past of [0, 1]) {
        for (const offset of [0, 1]) {
          const step = head.includes('while') ? '\n    i <- i + 1' : ''
          const text = `
routine indices
  inout a[n]
  out   sum
begin
  sum <- 0
  last <- n - 1 + ${past}
  ${head.replaceAll('F', '0').replaceAll('T', 'last')}
    sum <- sum + a[i${offset === 1 ? ' + 1' : ''}]
    a[i] <- sum${step}
  end
end
`
          const routine = new TwoWays(text)
          const words = Array.from({ length }, (_, at) => at + 3)
          for (const width of [4, 13, 32, 64]) {
            const given = { width, sizes: { n: length }, arrays: { a: words } }
            const message = `form ${form}, length ${length}, past ${past}, offset ${offset}, w = ${width}`
            if (past + offset > 0) {
              const failure = routine.fail(given)
              expect(failure.kind, message).toBe('index')
              // Downwards the first index is the greatest; past both ends it is two too far.
              const first = head.includes('downto') ? length - 1 + past + offset : length
              expect(failure.value, message).toBe(BigInt(first))
            } else {
              const { scalars } = routine.run(given)
              const sum = BigInt(words.reduce((total, word) => total + word, 0))
              expect(scalars.sum, message).toBe(BigInt.asUintN(width, sum))
            }
          }
        }
      }
    }
  }
})
