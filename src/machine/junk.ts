import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus'
import { limbsOf } from './words'

/** Words of the block that junk repeats: 64 KiB. */
export const JUNK_WORDS = 8192

/** The junk that memory starts with: 8192 random 64-bit words, the same for the same seed. */
export function junkBlock(seed: number): BigUint64Array {
  const generator = xoroshiro128plus(seed)
  const halves = new Uint32Array(2 * JUNK_WORDS)
  for (let at = 0; at < halves.length; at++) halves[at] = generator.next()
  return new BigUint64Array(halves.buffer)
}

/** What the word at an address starts as: block[A mod 8192] mod 2^w; past 64 bits limb j is block[(A*limbs + j) mod 8192]. */
export function junkWord(block: BigUint64Array, address: number, width: number): bigint {
  const limbs = limbsOf(width)
  let word = 0n
  for (let limb = limbs - 1; limb >= 0; limb--) word = (word << 64n) | block[(address * limbs + limb) % JUNK_WORDS]!
  return BigInt.asUintN(width, word)
}
