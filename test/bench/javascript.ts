/** What a person would write in JavaScript to count by hand: one counter, raised by what each stretch performs. */
export interface HandCounted {
  readonly sorted: BigUint64Array
  readonly operations: number
}

/** Radix sort of 64-bit words by 8-bit digits on BigInts. */
export function radixOnBigInts(input: BigUint64Array): HandCounted {
  const n = input.length
  let source = input.slice()
  let target = new BigUint64Array(n)
  const count = new Uint32Array(256)
  let operations = 5
  for (let s = 0n; s < 64n; s += 8n) {
    count.fill(0)
    for (let i = 0; i < n; i += 1) {
      const digit = Number((source[i]! >> s) & 255n)
      count[digit] = count[digit]! + 1
      operations += 9
    }
    sumUp(count)
    for (let i = 0; i < n; i += 1) {
      const word = source[i]!
      const digit = Number((word >> s) & 255n)
      const place = count[digit]!
      target[place] = word
      count[digit] = place + 1
      operations += 10
    }
    ;[source, target] = [target, source]
    operations += PASS_OVERHEAD
  }
  return { sorted: source, operations: operations + 1 }
}

/** The same on Uint32Arrays, a word being two halves. */
export function radixOnHalves(input: BigUint64Array): HandCounted {
  const n = input.length
  const halves = new Uint32Array(input.buffer, input.byteOffset, 2 * n)
  let source = [new Uint32Array(n), new Uint32Array(n)] as [Uint32Array, Uint32Array]
  let target = [new Uint32Array(n), new Uint32Array(n)] as [Uint32Array, Uint32Array]
  for (let i = 0; i < n; i += 1) {
    source[0][i] = halves[2 * i]!
    source[1][i] = halves[2 * i + 1]!
  }
  const count = new Uint32Array(256)
  let operations = 5
  for (let s = 0; s < 64; s += 8) {
    const digits = source[s >> 5]!
    const [low, high] = source
    const [lowTarget, highTarget] = target
    const shift = s & 31
    count.fill(0)
    for (let i = 0; i < n; i += 1) {
      const digit = (digits[i]! >>> shift) & 255
      count[digit] = count[digit]! + 1
      operations += 9
    }
    sumUp(count)
    for (let i = 0; i < n; i += 1) {
      const digit = (digits[i]! >>> shift) & 255
      const place = count[digit]!
      lowTarget[place] = low[i]!
      highTarget[place] = high[i]!
      count[digit] = place + 1
      operations += 10
    }
    ;[source, target] = [target, source]
    operations += PASS_OVERHEAD
  }
  const sorted = new BigUint64Array(n)
  const out = new Uint32Array(sorted.buffer)
  for (let i = 0; i < n; i += 1) {
    out[2 * i] = source[0][i]!
    out[2 * i + 1] = source[1][i]!
  }
  return { sorted, operations: operations + 1 }
}

/** Turns counts of digits into places, in order. */
function sumUp(count: Uint32Array): void {
  let sum = 0
  for (let digit = 0; digit < 256; digit += 1) {
    const here = count[digit]!
    count[digit] = sum
    sum += here
  }
}

/**
 * What a pass of radix.tally performs besides its two loops over the words: clearing 256 counts (4 each: store, add,
 * jump, compare) and summing them up (6 each), four loops' moves and first tests, one subtraction each for n - 1,
 * a move to clear the sum, three to change the buffers, add, jump and test of the pass.
 */
const PASS_OVERHEAD = 256 * (4 + 6) + 4 * 2 + 2 + 1 + 3 + 3
