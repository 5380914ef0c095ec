import fc from 'fast-check'
import { expect, test } from 'vitest'
import { ByteWriter } from '../../src/engine/bytes'

/** Reads one LEB128 number; the second is where it ends. */
function readNumber(bytes: Uint8Array, signed: boolean): [bigint, number] {
  let value = 0n
  let shift = 0n
  for (const [at, byte] of bytes.entries()) {
    value |= BigInt(byte & 0x7f) << shift
    shift += 7n
    if (byte & 0x80) continue
    return [signed && byte & 0x40 ? value - (1n << shift) : value, at + 1]
  }
  throw new Error('the number does not end')
}

function written(write: (bytes: ByteWriter) => void): Uint8Array {
  const bytes = new ByteWriter()
  write(bytes)
  return bytes.toBytes()
}

/** The fewest bytes that hold the number: seven bits each, the sign's bit included. */
function fewestBytes(value: bigint, signed: boolean): number {
  let count = 1
  while (signed ? BigInt.asIntN(7 * count, value) !== value : value >> BigInt(7 * count)) count++
  return count
}

test('unsigned numbers read back, in the fewest bytes', () => {
  fc.assert(
    fc.property(fc.integer({ min: 0, max: 0xffff_ffff }), value => {
      const bytes = written(into => into.unsigned(value))
      expect(readNumber(bytes, false)).toEqual([BigInt(value), bytes.length])
      expect(bytes.length).toBe(fewestBytes(BigInt(value), false))
    }),
  )
})

test('signed numbers of 32 bits read back, in the fewest bytes', () => {
  fc.assert(
    fc.property(fc.integer(), value => {
      const bytes = written(into => into.signed(value))
      expect(readNumber(bytes, true)).toEqual([BigInt(value), bytes.length])
      expect(bytes.length).toBe(fewestBytes(BigInt(value), true))
    }),
  )
})

test('words of 64 bits read back as two’s complement, in the fewest bytes', () => {
  const corners = fc.constantFrom(0n, 1n, 63n, 64n, 1n << 31n, (1n << 31n) - 1n, 1n << 63n, (1n << 64n) - 1n)
  fc.assert(
    fc.property(fc.oneof(corners, fc.bigInt({ min: 0n, max: (1n << 64n) - 1n })), value => {
      const bytes = written(into => into.signed64(value))
      expect(readNumber(bytes, true)).toEqual([BigInt.asIntN(64, value), bytes.length])
      expect(bytes.length).toBe(fewestBytes(BigInt.asIntN(64, value), true))
    }),
  )
})

test('a writer grows as needed and appends another', () => {
  const first = new ByteWriter()
  const second = new ByteWriter()
  for (let at = 0; at < 1000; at++) first.byte(at & 0xff)
  for (let at = 0; at < 3000; at++) second.byte((at * 7) & 0xff)
  first.append(second)
  const expected = [
    ...Array.from({ length: 1000 }, (_, at) => at & 0xff),
    ...Array.from({ length: 3000 }, (_, at) => (at * 7) & 0xff),
  ]
  expect([...first.toBytes()]).toEqual(expected)
})
