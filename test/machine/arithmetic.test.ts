import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { applyBinary, applyUnary, compareWords, multiplyWords } from '../../src/machine'

const widthAndWords = fc
  .integer({ min: 2, max: 4096 })
  .chain(width =>
    fc.tuple(
      fc.constant(width),
      fc.bigInt(0n, (1n << BigInt(width)) - 1n),
      fc.bigInt(0n, (1n << BigInt(width)) - 1n),
    ),
  )

const law = (title: string, holds: (width: number, x: bigint, y: bigint) => void) =>
  test(title, () => fc.assert(fc.property(widthAndWords, ([width, x, y]) => holds(width, x, y))))

describe('words of any width', () => {
  law('add and subtract undo each other mod 2^w', (width, x, y) => {
    expect(applyBinary('subtract', applyBinary('add', x, y, width), y, width)).toBe(x)
  })

  law('a two-word product is the product', (width, x, y) => {
    const { high, low } = multiplyWords(x, y, width)
    expect((high << BigInt(width)) + low).toBe(x * y)
    expect(applyBinary('multiply', x, y, width)).toBe(low)
  })

  law('quotient and rest make up the dividend', (width, x, y) => {
    if (y === 0n) return
    const rest = applyBinary('modulo', x, y, width)
    expect(applyBinary('divide', x, y, width) * y + rest).toBe(x)
    expect(rest < y).toBe(true)
  })

  law('x + ~x is the word of ones, -x is ~x + 1', (width, x) => {
    const turned = applyUnary('complement', x, width)
    expect(x + turned).toBe((1n << BigInt(width)) - 1n)
    expect(applyUnary('negate', x, width)).toBe(applyBinary('add', turned, 1n, width))
  })

  law('xor is or without and', (width, x, y) => {
    const both = applyBinary('and', x, y, width)
    expect(applyBinary('xor', x, y, width)).toBe(applyBinary('or', x, y, width) - both)
  })

  law('msb and lsb frame a word', (width, x) => {
    if (x === 0n) return
    const high = applyUnary('msb', x, width)
    const low = applyUnary('lsb', x, width)
    expect(x >> high).toBe(1n)
    expect((x >> low) & 1n).toBe(1n)
    expect(x & ((1n << low) - 1n)).toBe(0n)
  })

  law('popcount of a word and of its complement add up to w', (width, x) => {
    const turned = applyUnary('complement', x, width)
    expect(applyUnary('popcount', x, width) + applyUnary('popcount', turned, width)).toBe(BigInt(width))
  })

  law('a shift multiplies or divides by a power of two', (width, x, y) => {
    const amount = y % BigInt(width + 2)
    expect(applyBinary('shift-right', x, amount, width)).toBe(x / (1n << amount))
    expect(applyBinary('shift-left', x, amount, width)).toBe((x * (1n << amount)) % (1n << BigInt(width)))
  })

  law('signed order is the order of two’s complement', (width, x, y) => {
    const half = 1n << BigInt(width - 1)
    const moved = (word: bigint) => (word + half) % (1n << BigInt(width))
    expect(compareWords('<', true, x, y, width)).toBe(moved(x) < moved(y))
    expect(compareWords('>=', true, x, y, width)).toBe(moved(x) >= moved(y))
  })

  test.each(['msb', 'lsb'] as const)('%s of 0 is w', name => {
    expect(applyUnary(name, 0n, 13)).toBe(13n)
  })

  test('a shift by w or more gives 0', () => {
    for (const name of ['shift-left', 'shift-right'] as const) {
      expect(applyBinary(name, 5n, 8n, 8)).toBe(0n)
      expect(applyBinary(name, 5n, 200n, 8)).toBe(0n)
    }
  })
})
