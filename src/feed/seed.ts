/** What of a grid point its input may depend on: the same words whatever the instruction set, lets and charges. */
export interface Coordinates {
  readonly width: number
  readonly sizes: Readonly<Record<string, number>>
}

/**
 * The seed of a trial, from 0 to 2^32 - 1: a stable hash of the master seed, the width, the sizes by name and the
 * trial's number, so that a point run alone gets the input that it gets in a sweep.
 */
export function trialSeed(master: number, { width, sizes }: Coordinates, trial: number): number {
  const named = Object.keys(sizes)
    .sort()
    .map(name => `${name}=${sizes[name]}`)
  return hashText(`${master};w=${width};${named.join(';')};trial=${trial}`)
}

const FNV_OFFSET = 0xcbf29ce484222325n
const FNV_PRIME = 0x100000001b3n

/**
 * 32 bits of a text. FNV-1a in 64 bits (G. Fowler, L. C. Noll, K.-P. Vo), folded, then the finishing step of
 * MurmurHash3 (A. Appleby), so that texts that differ in one digit share no pattern.
 */
export function hashText(text: string): number {
  let hash = FNV_OFFSET
  for (const byte of new TextEncoder().encode(text)) hash = BigInt.asUintN(64, (hash ^ BigInt(byte)) * FNV_PRIME)
  let folded = Number((hash >> 32n) ^ (hash & 0xffffffffn))
  folded = Math.imul(folded ^ (folded >>> 16), 0x85ebca6b)
  folded = Math.imul(folded ^ (folded >>> 13), 0xc2b2ae35)
  return (folded ^ (folded >>> 16)) >>> 0
}
