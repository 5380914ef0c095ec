import { describe, expect, test } from 'vitest'
import wabt from 'wabt'
import { cornerWords, TwoWays } from './two-ways'

// Every operator at once; quotient and remainder apart, since a divisor of 0 fails the run.
const operators = new TwoWays(`
routine operators
  in  x, y
  out sum, difference, product, high, low, conjunction, disjunction, exclusive, left, right, negative, complement
  out ones, top, bottom, less, signedless
begin
  sum <- x + y
  difference <- x - y
  product <- x * y
  high, low <- x * y
  conjunction <- x & y
  disjunction <- x | y
  exclusive <- x xor y
  left <- x << y
  right <- x >> y
  negative <- -x
  complement <- ~x
  ones <- popcount(x)
  top <- msb(x)
  bottom <- lsb(x)
  less <- 0
  if x < y
    less <- 1
  end
  signedless <- 0
  if signed(x) < signed(y)
    signedless <- 1
  end
end
`)

const division = new TwoWays(`
routine division
  in  x, y
  out quotient, remainder
begin
  quotient  <- x / y
  remainder <- x mod y
end
`)

// Source: the WebAssembly Core Specification, 4.3.2 "Integer Operations", as the host carries them out.
const BINARY = {
  sum: 'add',
  difference: 'sub',
  product: 'mul',
  conjunction: 'and',
  disjunction: 'or',
  exclusive: 'xor',
  left: 'shl',
  right: 'shr_u',
  less: 'lt_u',
  signedless: 'lt_s',
  quotient: 'div_u',
  remainder: 'rem_u',
} as const
const UNARY = { ones: 'popcnt', leading: 'clz', trailing: 'ctz' } as const

type Word = number | bigint
type WasmOperation = (x: Word, y?: Word) => Word

/** WebAssembly's own operations on 32- or 64-bit words: a module of one-instruction functions. */
async function wasmOperations(width: 32 | 64) {
  const type = `i${width}`
  const extend = width === 64 ? '(i64.extend_i32_u' : '('
  const binary = Object.entries(BINARY).map(([name, operation]) => {
    const body = `(${type}.${operation} (local.get 0) (local.get 1))`
    const wide = operation.startsWith('lt') && width === 64 ? `${extend} ${body})` : body
    return `(func (export "${name}") (param ${type} ${type}) (result ${type}) ${wide})`
  })
  const unary = Object.entries(UNARY).map(
    ([name, operation]) =>
      `(func (export "${name}") (param ${type}) (result ${type}) (${type}.${operation} (local.get 0)))`,
  )
  const parsed = (await wabt()).parseWat('operations.wat', `(module ${[...binary, ...unary].join(' ')})`)
  const bytes = new Uint8Array(parsed.toBinary({}).buffer)
  const { exports } = new WebAssembly.Instance(new WebAssembly.Module(bytes))
  const functions = exports as unknown as Record<keyof typeof BINARY | keyof typeof UNARY, WasmOperation>
  const give = (word: bigint): Word => (width === 32 ? Number(word) : word)
  const take = (word: Word): bigint => BigInt.asUintN(width, BigInt(word))
  return (name: keyof typeof functions, x: bigint, y = 0n) => take(functions[name](give(x), give(y)))
}

describe.each([32, 64] as const)('words of %i bits against the host', width => {
  test('every operator agrees on corner values', async () => {
    const wasm = await wasmOperations(width)
    const w = BigInt(width)
    for (const x of cornerWords(width)) {
      for (const y of cornerWords(width)) {
        const { scalars } = operators.run({ width, scalars: { x, y } })
        const shift = (name: 'left' | 'right') => (y < w ? wasm(name, x, y) : 0n)
        expect(scalars, `${x}, ${y}`).toMatchObject({
          sum: wasm('sum', x, y),
          difference: wasm('difference', x, y),
          product: wasm('product', x, y),
          low: wasm('product', x, y),
          conjunction: wasm('conjunction', x, y),
          disjunction: wasm('disjunction', x, y),
          exclusive: wasm('exclusive', x, y),
          // The host takes a shift amount mod w; on the word-RAM a shift by w or more gives 0.
          left: shift('left'),
          right: shift('right'),
          negative: wasm('difference', 0n, x),
          complement: wasm('exclusive', x, wasm('difference', 0n, 1n)),
          ones: wasm('ones', x),
          top: x === 0n ? w : w - 1n - wasm('leading', x),
          bottom: wasm('trailing', x),
          less: wasm('less', x, y),
          signedless: wasm('signedless', x, y),
        })
        if (y === 0n) continue
        expect(division.run({ width, scalars: { x, y } }).scalars, `${x}, ${y}`).toEqual({
          quotient: wasm('quotient', x, y),
          remainder: wasm('remainder', x, y),
        })
      }
    }
  })
})

/** Arithmetic mod 2^w as BigInt has it (ECMA-262, 6.1.6.2 "The BigInt Type"). */
function bigintOperations(width: number, x: bigint, y: bigint) {
  const word = (value: bigint) => BigInt.asUintN(width, value)
  const w = BigInt(width)
  const binary = x.toString(2)
  const zero = word(w)
  return {
    sum: word(x + y),
    difference: word(x - y),
    product: word(x * y),
    high: (x * y) >> w,
    low: word(x * y),
    conjunction: x & y,
    disjunction: x | y,
    exclusive: x ^ y,
    left: y < w ? word(x << y) : 0n,
    right: y < w ? x >> y : 0n,
    negative: word(-x),
    complement: word(~x),
    ones: word(BigInt(binary.split('1').length - 1)),
    top: x === 0n ? zero : BigInt(binary.length - 1),
    bottom: x === 0n ? zero : BigInt(binary.length - 1 - binary.lastIndexOf('1')),
    less: x < y ? 1n : 0n,
    signedless: BigInt.asIntN(width, x) < BigInt.asIntN(width, y) ? 1n : 0n,
  }
}

describe.each([2, 3, 5, 8, 13, 16, 24, 31, 32, 33, 47, 63, 64])('words of %i bits against BigInt', width => {
  test('every operator agrees on corner values', () => {
    for (const x of cornerWords(width)) {
      for (const y of cornerWords(width)) {
        const given = { width, scalars: { x, y } }
        expect(operators.run(given).scalars, `${x}, ${y}`).toEqual(bigintOperations(width, x, y))
        if (y === 0n) {
          expect(division.fail(given)).toMatchObject({ kind: 'divide', value: x, span: { line: 6 } })
        } else {
          expect(division.run(given).scalars, `${x}, ${y}`).toEqual({ quotient: x / y, remainder: x % y })
        }
      }
    }
  })
})

test('all pairs of words at w = 2, 3 and 4', () => {
  for (const width of [2, 3, 4]) {
    const words = Array.from({ length: 1 << width }, (_, word) => BigInt(word))
    for (const x of words) {
      for (const y of words) {
        expect(operators.run({ width, scalars: { x, y } }).scalars).toEqual(bigintOperations(width, x, y))
      }
    }
  }
})

test('one pass over the operators costs one operation each', () => {
  const { tally } = operators.run({ width: 32, scalars: { x: 1, y: 2 } })
  expect(tally.byClass).toEqual({
    add: 3,
    logic: 4,
    shift: 2,
    multiply: 2,
    divide: 0,
    bitscan: 3,
    load: 0,
    store: 0,
    // less and signedless, each cleared and set.
    move: 4,
    compare: 2,
    jump: 0,
    call: 0,
  })
})
