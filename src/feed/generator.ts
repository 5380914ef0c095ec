import { xoroshiro128plusFromState } from 'pure-rand/generator/xoroshiro128plus'
import type { RandomGenerator } from 'pure-rand/types/RandomGenerator'
import { hashText } from './seed'

/** The generator behind every feed, for records: the same seed under the same version gives the same words. */
export const GENERATOR = { name: 'xoroshiro128plus', package: 'pure-rand', version: '8.4.2' } as const

/** Random bits, 32 at a time. */
export type Source = RandomGenerator

/** The stream of a seed for one name: what one array is fed does not depend on which others there are. */
export function openSource(seed: number, name: string): Source {
  // Four hashed words: seeds that stand close to one another start from states that do not.
  return xoroshiro128plusFromState([0, 1, 2, 3].map(part => hashText(`${seed};${name};${part}`) | 0))
}
