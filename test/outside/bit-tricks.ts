/**
 * Routines of S. E. Anderson's "Bit Twiddling Hacks" (1997-2005, individual snippets in the public domain), written
 * anew in our notation, each with the number of operations that its section gives. The collection counts any C operator as one
 * operation and intermediate assignments as none; charges `operators` do the same, but for comparisons and jumps,
 * which they price 0.
 */
export interface BitTrick {
  /** The collection's heading. */
  readonly section: string
  readonly width: 32 | 64
  readonly inputs: readonly string[]
  /** Values of the first input run from 0 to here; all words where absent. */
  readonly below?: bigint
  readonly constants?: string
  readonly body: string
  readonly expected: (...words: bigint[]) => bigint
  /** Operations as the collection states them. */
  readonly published: number
  /** Our count less the published one, and where the difference comes from. */
  readonly differs?: { readonly by: number; readonly because: string }
}

const ones = (x: bigint) => BigInt(x.toString(2).split('1').length - 1)
const reversed = (x: bigint, width: number) =>
  BigInt(`0b${[...x.toString(2).padStart(width, '0')].reverse().join('')}`)
const bytes = (x: bigint, width: number) =>
  Array.from({ length: width / 8 }, (_, i) => (x >> BigInt(8 * i)) & 0xffn)
const some = (found: boolean) => (found ? 1n : 0n)
const trailing = (x: bigint) => ones((x & -x) - 1n)
const truncated = {
  by: 1,
  because: 'the result goes to a C byte, which drops the bits above it for nothing; here that takes an `&`',
}

/** Tells a word that is not 0 by 1: a comparison and moves, priced 0 under `operators`. */
const flag = (test: string) => `
  r <- 0
  if ${test} != 0
    r <- 1
  end`

const interleaved = (x: bigint, y: bigint) => {
  let z = 0n
  for (let i = 0n; i < 8n; i += 1n) z |= (((x >> i) & 1n) << (2n * i)) | (((y >> i) & 1n) << (2n * i + 1n))
  return z
}

export const BIT_TRICKS: readonly BitTrick[] = [
  {
    section: 'Counting bits set, in parallel',
    width: 32,
    inputs: ['v'],
    body: `
  c <- v - ((v >> 1) & 0x55555555)
  c <- ((c >> 2) & 0x33333333) + (c & 0x33333333)
  c <- ((c >> 4) + c) & 0x0f0f0f0f
  c <- ((c >> 8) + c) & 0x00ff00ff
  r <- ((c >> 16) + c) & 0x0000ffff`,
    expected: ones,
    published: 16,
  },
  {
    section: 'Counting bits set, in parallel: the best method',
    width: 32,
    inputs: ['v'],
    body: `
  c <- v - ((v >> 1) & 0x55555555)
  c <- (c & 0x33333333) + ((c >> 2) & 0x33333333)
  r <- (((c + (c >> 4)) & 0x0f0f0f0f) * 0x01010101) >> 24`,
    expected: ones,
    published: 12,
  },
  {
    section: 'Counting bits set in 14-bit words using 64-bit instructions',
    width: 64,
    inputs: ['v'],
    below: 1n << 14n,
    body: `
  r <- ((v * 0x200040008001) & 0x111111111111111) mod 0xf`,
    expected: ones,
    published: 3,
  },
  {
    section: 'Counting bits set in 24-bit words using 64-bit instructions',
    width: 64,
    inputs: ['v'],
    below: 1n << 24n,
    body: `
  c <- (((v & 0xfff) * 0x1001001001001) & 0x84210842108421) mod 0x1f
  r <- c + (((((v & 0xfff000) >> 12) * 0x1001001001001) & 0x84210842108421) mod 0x1f)`,
    expected: ones,
    published: 10,
  },
  {
    section: 'Counting bits set in 32-bit words using 64-bit instructions',
    width: 64,
    inputs: ['v'],
    below: 1n << 32n,
    body: `
  c <- (((v & 0xfff) * 0x1001001001001) & 0x84210842108421) mod 0x1f
  c <- c + (((((v & 0xfff000) >> 12) * 0x1001001001001) & 0x84210842108421) mod 0x1f)
  r <- c + ((((v >> 24) * 0x1001001001001) & 0x84210842108421) mod 0x1f)`,
    expected: ones,
    published: 15,
  },
  {
    section: 'Compute parity of a byte using 64-bit multiply and modulus division',
    width: 64,
    inputs: ['v'],
    below: 1n << 8n,
    body: `
  r <- (((v * 0x0101010101010101) & 0x8040201008040201) mod 0x1ff) & 1`,
    expected: v => ones(v) & 1n,
    published: 4,
  },
  {
    section: 'Compute parity of word with a multiply, 32 bits',
    width: 32,
    inputs: ['v'],
    body: `
  x <- v xor (v >> 1)
  x <- x xor (x >> 2)
  x <- (x & 0x11111111) * 0x11111111
  r <- (x >> 28) & 1`,
    expected: v => ones(v) & 1n,
    published: 8,
  },
  {
    section: 'Compute parity of word with a multiply, 64 bits',
    width: 64,
    inputs: ['v'],
    body: `
  x <- v xor (v >> 1)
  x <- x xor (x >> 2)
  x <- (x & 0x1111111111111111) * 0x1111111111111111
  r <- (x >> 60) & 1`,
    expected: v => ones(v) & 1n,
    published: 8,
  },
  {
    section: 'Compute parity in parallel',
    width: 32,
    inputs: ['v'],
    body: `
  x <- v xor (v >> 16)
  x <- x xor (x >> 8)
  x <- x xor (x >> 4)
  x <- x & 0xf
  r <- (0x6996 >> x) & 1`,
    expected: v => ones(v) & 1n,
    published: 9,
  },
  {
    // "It may be optimized to work just on bytes in 5 operations."
    section: 'Compute parity in parallel, bytes alone',
    width: 32,
    inputs: ['v'],
    below: 1n << 8n,
    body: `
  x <- v xor (v >> 4)
  x <- x & 0xf
  r <- (0x6996 >> x) & 1`,
    expected: v => ones(v) & 1n,
    published: 5,
  },
  {
    section: 'Round up to the next highest power of 2',
    width: 32,
    inputs: ['v'],
    body: `
  x <- v - 1
  x <- x | (x >> 1)
  x <- x | (x >> 2)
  x <- x | (x >> 4)
  x <- x | (x >> 8)
  x <- x | (x >> 16)
  r <- x + 1`,
    expected: v =>
      v === 0n ? 0n : BigInt.asUintN(32, 1n << BigInt((v - 1n).toString(2).length - (v === 1n ? 1 : 0))),
    published: 12,
  },
  {
    section: 'Find the log base 2 of an N-bit integer in O(lg(N)) operations with multiply and lookup',
    width: 32,
    inputs: ['v'],
    constants: `fix position[32] = 0, 9, 1, 10, 13, 21, 2, 29, 11, 14, 16, 18, 22, 25, 3, 30, 8, 12, 20, 28, 15, 17, 24, 7, \
19, 27, 23, 6, 26, 5, 4, 31`,
    body: `
  x <- v | (v >> 1)
  x <- x | (x >> 2)
  x <- x | (x >> 4)
  x <- x | (x >> 8)
  x <- x | (x >> 16)
  r <- position[(x * 0x07c4acdd) >> 27]`,
    expected: v => BigInt(v.toString(2).length - 1),
    published: 13,
  },
  {
    section: 'Count the consecutive zero bits (trailing) on the right with modulus division and lookup',
    width: 32,
    inputs: ['v'],
    constants: `fix position[37] = 32, 0, 1, 26, 2, 23, 27, 0, 3, 16, 24, 30, 28, 11, 0, 13, 4, 7, 17, 0, 25, 22, 31, 15, \
29, 10, 12, 6, 0, 21, 14, 9, 5, 20, 8, 19, 18`,
    body: `
  r <- position[(-v & v) mod 37]`,
    expected: v => (v === 0n ? 32n : trailing(v)),
    published: 4,
  },
  {
    // "It requires one more operation than the earlier one involving modulus division."
    section: 'Count the consecutive zero bits (trailing) on the right with multiply and lookup',
    width: 32,
    inputs: ['v'],
    constants: `fix position[32] = 0, 1, 28, 2, 29, 14, 24, 3, 30, 22, 20, 15, 25, 17, 4, 8, 31, 27, 13, 23, 21, 19, 16, 7, \
26, 12, 18, 6, 11, 5, 10, 9`,
    body: `
  r <- position[((v & -v) * 0x077cb531) >> 27]`,
    expected: v => (v === 0n ? 0n : trailing(v)),
    published: 5,
  },
  {
    section: 'Reverse the bits in a byte with 3 operations (64-bit multiply and modulus division)',
    width: 64,
    inputs: ['v'],
    below: 1n << 8n,
    body: `
  r <- ((v * 0x0202020202) & 0x010884422010) mod 1023`,
    expected: v => reversed(v, 8),
    published: 3,
  },
  {
    section: 'Reverse the bits in a byte with 4 operations (64-bit multiply, no division)',
    width: 64,
    inputs: ['v'],
    below: 1n << 8n,
    body: `
  r <- ((((v * 0x80200802) & 0x0884422110) * 0x0101010101) >> 32) & 0xff`,
    expected: v => reversed(v, 8),
    published: 4,
    differs: truncated,
  },
  {
    section: 'Reverse the bits in a byte with 7 operations (no 64-bit)',
    width: 32,
    inputs: ['v'],
    below: 1n << 8n,
    body: `
  r <- (((((v * 0x0802) & 0x22110) | ((v * 0x8020) & 0x88440)) * 0x10101) >> 16) & 0xff`,
    expected: v => reversed(v, 8),
    published: 7,
    differs: truncated,
  },
  {
    // The heading's 5 * lg(N), with N = 32.
    section: 'Reverse an N-bit quantity in parallel in 5 * lg(N) operations',
    width: 32,
    inputs: ['v'],
    body: `
  x <- ((v >> 1) & 0x55555555) | ((v & 0x55555555) << 1)
  x <- ((x >> 2) & 0x33333333) | ((x & 0x33333333) << 2)
  x <- ((x >> 4) & 0x0f0f0f0f) | ((x & 0x0f0f0f0f) << 4)
  x <- ((x >> 8) & 0x00ff00ff) | ((x & 0x00ff00ff) << 8)
  r <- (x >> 16) | (x << 16)`,
    expected: v => reversed(v, 32),
    published: 25,
    differs: {
      by: -2,
      because:
        'the last step is printed without its two masks, which the heading counts: half a word has no neighbours',
    },
  },
  {
    section: 'Interleave bits with 64-bit multiply',
    width: 64,
    inputs: ['x', 'y'],
    below: 1n << 8n,
    body: `
  even <- ((((x * 0x0101010101010101) & 0x8040201008040201) * 0x0102040810204081) >> 49) & 0x5555
  odd  <- ((((y * 0x0101010101010101) & 0x8040201008040201) * 0x0102040810204081) >> 48) & 0xaaaa
  r <- even | odd`,
    expected: interleaved,
    published: 11,
  },
  {
    section: 'Determine if a word has a zero byte: fewer operations',
    width: 32,
    inputs: ['v'],
    body: flag('~((((v & 0x7f7f7f7f) + 0x7f7f7f7f) | v) | 0x7f7f7f7f)'),
    expected: v => some(bytes(v, 32).includes(0n)),
    published: 5,
  },
  {
    section: 'Determine if a word has a zero byte: hasless(v, 1)',
    width: 32,
    inputs: ['v'],
    body: flag('((v - 0x01010101) & ~v & 0x80808080)'),
    expected: v => some(bytes(v, 32).includes(0n)),
    published: 4,
  },
  {
    section: 'Determine if a word has a byte less than n, here 77',
    width: 64,
    inputs: ['v'],
    constants: 'fix limit = 77 * (2^64 - 1) / 255\n  fix high = 128 * (2^64 - 1) / 255',
    body: flag('((v - limit) & ~v & high)'),
    expected: v => some(bytes(v, 64).some(byte => byte < 77n)),
    published: 4,
  },
  {
    section: 'Determine if a word has a byte less than n: countless, here for 77',
    width: 32,
    inputs: ['v'],
    constants:
      'fix reach = (127 + 77) * (2^32 - 1) / 255\n  fix low = 127 * (2^32 - 1) / 255\n  fix high = 128 * (2^32 - 1) / 255',
    body: `
  r <- (((reach - (v & low)) & ~v & high) / 128) mod 255`,
    expected: v => BigInt(bytes(v, 32).filter(byte => byte < 77n).length),
    published: 7,
  },
  {
    section: 'Determine if a word has a byte greater than n, here 77',
    width: 32,
    inputs: ['v'],
    constants: 'fix rest = (127 - 77) * (2^32 - 1) / 255\n  fix high = 128 * (2^32 - 1) / 255',
    body: flag('(((v + rest) | v) & high)'),
    expected: v => some(bytes(v, 32).some(byte => byte > 77n)),
    published: 3,
  },
  {
    section: 'Determine if a word has a byte greater than n: countmore, here for 77',
    width: 32,
    inputs: ['v'],
    constants:
      'fix rest = (127 - 77) * (2^32 - 1) / 255\n  fix low = 127 * (2^32 - 1) / 255\n  fix high = 128 * (2^32 - 1) / 255',
    body: `
  r <- (((((v & low) + rest) | v) & high) / 128) mod 255`,
    expected: v => BigInt(bytes(v, 32).filter(byte => byte > 77n).length),
    published: 6,
  },
  {
    section: 'Determine if a word has a byte between m and n: hasbetween, here 20 and 99',
    width: 32,
    inputs: ['v'],
    constants: `fix reach = (127 + 99) * (2^32 - 1) / 255
  fix rest = (127 - 20) * (2^32 - 1) / 255
  fix low = 127 * (2^32 - 1) / 255
  fix high = 128 * (2^32 - 1) / 255`,
    body: flag('((reach - (v & low)) & ~v & ((v & low) + rest) & high)'),
    expected: v => some(bytes(v, 32).some(byte => byte > 20n && byte < 99n)),
    published: 8,
  },
  {
    section: 'Determine if a word has a byte between m and n: countbetween, here 20 and 99',
    width: 32,
    inputs: ['v'],
    constants: `fix reach = (127 + 99) * (2^32 - 1) / 255
  fix rest = (127 - 20) * (2^32 - 1) / 255
  fix low = 127 * (2^32 - 1) / 255
  fix high = 128 * (2^32 - 1) / 255`,
    body: `
  r <- (((reach - (v & low)) & ~v & ((v & low) + rest) & high) / 128) mod 255`,
    expected: v => BigInt(bytes(v, 32).filter(byte => byte > 20n && byte < 99n).length),
    published: 10,
  },
  {
    // "Shaves one operation from the obvious way", which has four operators: (a & ~mask) | (b & mask).
    section: 'Merge bits from two values according to a mask',
    width: 32,
    inputs: ['a', 'b', 'mask'],
    body: `
  r <- a xor ((a xor b) & mask)`,
    expected: (a, b, mask) => (a & ~mask) | (b & mask),
    published: 3,
  },
  {
    section: 'Sign extending from a constant bit-width, here 5, in two fast operations',
    width: 32,
    inputs: ['x'],
    below: 1n << 5n,
    body: `
  r <- (x xor 16) - 16`,
    expected: x => BigInt.asUintN(32, BigInt.asIntN(5, x)),
    published: 2,
  },
  {
    section: 'Sign extending from a variable bit-width, in four operations',
    width: 32,
    inputs: ['x'],
    below: 1n << 9n,
    constants: 'let b = 9',
    body: `
  m <- 1 << (b - 1)
  r <- (x xor m) - m`,
    expected: x => BigInt.asUintN(32, BigInt.asIntN(9, x)),
    published: 4,
  },
  {
    // "One operation faster than the obvious way, sign = -(v < 0)", which has two operators.
    section: 'Compute the sign of an integer',
    width: 32,
    inputs: ['v'],
    body: `
  r <- -(v >> 31)`,
    expected: v => BigInt.asUintN(32, BigInt.asIntN(32, v) < 0n ? -1n : 0n),
    published: 1,
    differs: {
      by: 1,
      because:
        'the C shift keeps the sign; ours, as on the word-RAM, brings in zeros, so the bit is negated afterwards',
    },
  },
  {
    // "The number of operations is the same" as that of (v < 0) ? -(unsigned)v : v, which has three operators.
    section: 'Compute the integer absolute value (abs) without branching',
    width: 32,
    inputs: ['v'],
    body: `
  mask <- -(v >> 31)
  r <- (v + mask) xor mask`,
    expected: v => BigInt.asUintN(32, BigInt.asIntN(32, v) < 0n ? -v : v),
    published: 3,
    differs: {
      by: 1,
      because: 'the C shift keeps the sign; ours brings in zeros, so the bit is negated afterwards',
    },
  },
  {
    // "Two more instructions" than (x < y) ? x : y, which has three operands and two operators, `<` and `?:`.
    section: 'Compute the minimum (min) or maximum (max) of two integers without branching',
    width: 32,
    inputs: ['x', 'y'],
    body: `
  less <- 0
  if signed(x) < signed(y)
    less <- 1
  end
  r <- y xor ((x xor y) & -less)`,
    expected: (x, y) => (BigInt.asIntN(32, x) < BigInt.asIntN(32, y) ? x : y),
    published: 5,
    differs: { by: -1, because: 'of its five operators one is a comparison, which charges `operators` price 0' },
  },
  {
    section: 'Determining if an integer is a power of 2',
    width: 32,
    inputs: ['v'],
    body: `
  r <- 0
  if (v & (v - 1)) = 0
    r <- 1
  end`,
    expected: v => some(v === 0n || ones(v) === 1n),
    published: 3,
    differs: {
      by: -1,
      because:
        'no figure is given beside it; of its three C operators one is a comparison, which `operators` price 0',
    },
  },
]
