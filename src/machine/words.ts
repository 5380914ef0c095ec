import type { Words } from '../routine/words'

/** Widest word of a Uint32Array, and of a BigUint64Array. */
const SMALL_WIDTH = 32
const LARGE_WIDTH = 64

/** Words of width w from a length (all 0) or from values below 2^w, in the array that the width calls for. */
export function makeWords(width: number, from: number | readonly bigint[]): Words {
  if (width > LARGE_WIDTH) return typeof from === 'number' ? new Array<bigint>(from).fill(0n) : from.slice()
  if (width > SMALL_WIDTH) return typeof from === 'number' ? new BigUint64Array(from) : BigUint64Array.from(from)
  return typeof from === 'number' ? new Uint32Array(from) : Uint32Array.from(from, Number)
}

/** Bytes that one word takes in memory: 4 up to w = 32, 8 up to 64, limbs of 8 past that. */
export function bytesOfWord(width: number): number {
  return width <= SMALL_WIDTH ? 4 : 8 * limbsOf(width)
}

/** 64-bit limbs of a word. */
export function limbsOf(width: number): number {
  return Math.ceil(width / LARGE_WIDTH)
}
