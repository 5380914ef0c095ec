import { execFileSync, spawnSync } from 'node:child_process'
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import type { Words } from '../../src/routine'
import { median } from './statistics'

export const hasGcc = spawnSync('gcc', ['--version']).status === 0

/** What a C process timed: milliseconds of one run (the median of several), and a checksum of the result. */
export interface TwinTiming {
  readonly time: number
  readonly checksum: bigint
}

/** A C twin compiled for a width, with its input on file. Each call is a process of its own that times `runs` runs. */
export function prepareTwin(
  name: string,
  width: number,
  words: Words,
  runs: number,
  builds: string,
): () => TwinTiming {
  const program = join(builds, `${name}-${width}`)
  const source = join(import.meta.dirname, `${name}.c`)
  execFileSync('gcc', ['-O2', '-Wall', '-Wextra', `-DW=${width}`, '-o', program, source])
  const data = join(builds, `${name}-${width}.words`)
  if (!(words instanceof Uint32Array || words instanceof BigUint64Array))
    throw new Error('a twin takes words of at most 64 bits')
  writeFileSync(data, new Uint8Array(words.buffer, words.byteOffset, words.byteLength))
  return () => {
    const lines = execFileSync(program, [data, String(runs)], { encoding: 'utf8' })
      .trim()
      .split('\n')
    const timings = lines.map(line => line.split(' '))
    return { time: median(timings.map(([elapsed]) => Number(elapsed) / 1e6)), checksum: BigInt(timings[0]![1]!) }
  }
}

/** The checksum that twins print: over the words of a result, in order. */
export function checksumOf(words: Iterable<bigint | number>): bigint {
  let checksum = 0n
  for (const word of words) checksum = BigInt.asUintN(64, checksum * 31n + BigInt(word))
  return checksum
}
