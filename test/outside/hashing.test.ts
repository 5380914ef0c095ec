import { createHash, randomBytes } from 'node:crypto'
import { crc32 as zlibCrc32 } from 'node:zlib'
import { describe, expect, test } from 'vitest'
import { routineText, TwoWays } from './two-ways'

/** The first `count` primes. */
function primes(count: number): bigint[] {
  const found: bigint[] = []
  for (let p = 2n; found.length < count; p += 1n) if (found.every(q => p % q !== 0n)) found.push(p)
  return found
}

/** The greatest integer whose k-th power is at most `value`. */
function rootOf(value: bigint, k: bigint): bigint {
  let low = 0n
  let high = value
  while (low < high) {
    const middle = (low + high + 1n) >> 1n
    if (middle ** k <= value) low = middle
    else high = middle - 1n
  }
  return low
}

/** The first 32 bits of the fraction of a prime's k-th root (FIPS 180-4, 4.2.2 and 5.3.3). */
const fraction = (prime: bigint, k: bigint) => rootOf(prime << (32n * k), k) & 0xffff_ffffn

describe('SHA-256', () => {
  const sha256 = new TwoWays(routineText('sha256.tally'))
  const initial = primes(8).map(prime => fraction(prime, 2n))

  /** Pads a message of at most 55 bytes to one block (FIPS 180-4, 5.1.1). */
  function oneBlock(message: Uint8Array): bigint[] {
    const block = Buffer.alloc(64)
    block.set(message)
    block[message.length] = 0x80
    block.writeUInt32BE(message.length * 8, 60)
    return Array.from({ length: 16 }, (_, word) => BigInt(block.readUInt32BE(word * 4)))
  }

  function digest(message: Uint8Array): string {
    const { array } = sha256.run({ width: 32, arrays: { m: oneBlock(message), h: initial } })
    const words = array('h').map(word => word.toString(16).padStart(8, '0'))
    return words.join('')
  }

  test('round constants are the fractions of the cube roots of the first 64 primes', () => {
    // Source: FIPS 180-4, 4.2.2.
    const { tables } = sha256.bind({ width: 32 })
    expect(tables.size).toBe(1)
    const [table] = tables.values()
    expect(Array.from(table!, BigInt)).toEqual(primes(64).map(prime => fraction(prime, 3n)))
  })

  test.each([
    // Source: NIST, "Examples with Intermediate Values", SHA-256, for FIPS 180-4.
    ['abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'],
    // Source: NIST Cryptographic Algorithm Validation Program, SHA256ShortMsg.rsp, Len = 0.
    ['', 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855'],
  ])('of "%s"', (message, expected) => {
    expect(digest(Buffer.from(message))).toBe(expected)
  })

  test('of random messages agrees with the host', () => {
    for (let length = 0; length <= 55; length += 5) {
      const message = randomBytes(length)
      expect(digest(message), message.toString('hex')).toBe(createHash('sha256').update(message).digest('hex'))
    }
  })

  test('of two blocks agrees with the published value', () => {
    // Source: NIST, "Examples with Intermediate Values", SHA-256, for FIPS 180-4; 448 bits take two blocks.
    const message = Buffer.from('abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq')
    const padded = Buffer.alloc(128)
    padded.set(message)
    padded[message.length] = 0x80
    padded.writeUInt32BE(message.length * 8, 124)
    const words = Array.from({ length: 32 }, (_, word) => padded.readUInt32BE(word * 4))
    const first = sha256.run({ width: 32, arrays: { m: words.slice(0, 16), h: initial } }).array('h')
    const second = sha256.run({ width: 32, arrays: { m: words.slice(16), h: first } }).array('h')
    expect(second.map(word => word.toString(16).padStart(8, '0')).join('')).toBe(
      '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1',
    )
  })

  test('takes the same operations whatever the message', () => {
    const times = [0, 3, 17, 55].map(length =>
      sha256.run({ width: 32, arrays: { m: oneBlock(randomBytes(length)), h: initial } }).time(),
    )
    expect(new Set(times).size).toBe(1)
  })
})

describe.each(['crc32.tally', 'crc32-table.tally'])('CRC-32 by %s', file => {
  const crc32 = new TwoWays(routineText(file))
  const of = (message: Uint8Array, width: number) =>
    crc32.run({ width, sizes: { n: message.length }, arrays: { a: [...message] } }).scalars.crc

  test.each([32, 33, 47, 64])('check value at w = %i', width => {
    // Source: G. Cook, "Catalogue of parametrised CRC algorithms", CRC-32/ISO-HDLC, check.
    expect(of(Buffer.from('123456789'), width)).toBe(0xcbf43926n)
  })

  test('of random messages agrees with the host', () => {
    for (const length of [0, 1, 2, 7, 64, 255]) {
      const message = randomBytes(length)
      expect(of(message, 32), message.toString('hex')).toBe(BigInt(zlibCrc32(message)))
    }
  })
})

describe('xorshift generators', () => {
  const xorshift = (a: number, b: number, c: number) =>
    new TwoWays(`
routine xorshift
  in  seed
  out draw[n]
begin
  x <- seed
  i <- 0
  while i < n
    x <- x xor (x << ${a})
    x <- x xor (x >> ${b})
    x <- x xor (x << ${c})
    draw[i] <- x
    i <- i + 1
  end
end
`)

  // Source: G. Marsaglia, "Xorshift RNGs", Journal of Statistical Software 8(14), 2003, sections 3 and 4 (triples and
  // seeds); the draws as commonly published for them.
  test('32 bits: (13, 17, 5) from seed 2463534242', () => {
    const { array } = xorshift(13, 17, 5).run({ width: 32, sizes: { n: 5 }, scalars: { seed: 2463534242 } })
    expect(array('draw')).toEqual([723471715n, 2497366906n, 2064144800n, 2008045182n, 3532304609n])
  })

  test('64 bits: (13, 7, 17) from seed 88172645463325252', () => {
    const { array } = xorshift(13, 7, 17).run({ width: 64, sizes: { n: 3 }, scalars: { seed: 88172645463325252n } })
    expect(array('draw')).toEqual([8748534153485358512n, 3040900993826735515n, 3453997556048239312n])
  })
})
