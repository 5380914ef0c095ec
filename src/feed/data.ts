import type { Binding, Input } from '../machine/run'
import type { Routine } from '../routine/routine'
import type { Words } from '../routine/words'
import { freshWords, setWord } from './draw'
import { junkOf } from './feed'

// Input that a user brings: {"a": [1, 2, "0xffff"], "x": 5}. Numbers, or strings for words past 2^53.

/** The data as read; not yet held against a routine. */
export type Data = Readonly<Record<string, unknown>>

/** Reads JSON text into data; the problem says where the text is no JSON, or what it holds instead of an object. */
export function readData(text: string): { data: Data } | { problem: string } {
  let value: unknown
  try {
    value = JSON.parse(text)
  } catch (error) {
    return { problem: `it is not JSON (${error instanceof Error ? error.message : error})` }
  }
  if (value === null || typeof value !== 'object' || Array.isArray(value))
    return { problem: 'it holds no object; write {"a": [1, 2, 3], "x": "0xffff"}' }
  return { data: value as Data }
}

/**
 * The sizes that the data settles: those that stand alone as the length of an array. Two arrays that disagree on a
 * size are a problem; a size that no such array has is left out.
 */
export function sizesOfData(data: Data, routine: Routine): { sizes: Record<string, number> } | { problem: string } {
  const sizes: Record<string, number> = {}
  const from: Record<string, string> = {}
  for (const { name, length, role } of routine.arrays) {
    const words = data[name]
    if ((role !== 'in' && role !== 'inout') || !Array.isArray(words) || length.kind !== 'name') continue
    const size = length.name.text
    if (!routine.sizes.includes(size)) continue
    const known = sizes[size]
    if (known !== undefined && known !== words.length)
      return {
        problem: `${from[size]} has ${known} words and ${name} has ${words.length}, but both lengths are ${size}`,
      }
    sizes[size] = words.length
    from[size] = name
  }
  return { sizes }
}

/**
 * Turns data (or JSON text) into the input of a bound program. Names that the routine does not have, names that are
 * missing, lengths and words that do not fit are problems, each with its place and value. `seed` fixes the junk.
 */
export function readInput(json: string | Data, binding: Binding, seed = 1): { input: Input } | { problem: string } {
  const read = typeof json === 'string' ? readData(json) : { data: json }
  if ('problem' in read) return read
  const { data } = read
  const { routine } = binding.program
  const taken = [...routine.arrays, ...routine.scalars].filter(({ role }) => role === 'in' || role === 'inout')
  const names = taken.map(({ name }) => name)
  const unknown = Object.keys(data).filter(name => !names.includes(name))
  const missing = names.filter(name => !Object.hasOwn(data, name))
  const has = names.length > 0 ? `routine ${routine.name} takes ${names.join(', ')}` : `${routine.name} takes none`
  if (unknown.length > 0) return { problem: `${unknown.join(', ')}: no input of that name; ${has}` }
  if (missing.length > 0) return { problem: `${missing.join(', ')}: missing; ${has}` }

  const { width } = binding.point
  const arrays: Record<string, Words> = {}
  for (const [number, { name, role }] of routine.arrays.entries()) {
    if (role !== 'in' && role !== 'inout') continue
    const length = binding.arrays[number]!.length
    const given = data[name]
    if (!Array.isArray(given)) return { problem: `${name} is an array: give a list of ${length} words` }
    if (given.length !== length)
      return { problem: `${name} has ${given.length} words in the data and ${length} at this point` }
    const words = freshWords(width, length)
    for (const [place, item] of given.entries()) {
      const word = readWord(item, width)
      if (typeof word === 'string') return { problem: `${name}[${place}] ${word}` }
      setWord(words, place, word)
    }
    arrays[name] = words
  }
  const scalars: Record<string, bigint> = {}
  for (const { name, role } of routine.scalars) {
    if (role === 'out') continue
    const given = data[name]
    if (Array.isArray(given)) return { problem: `${name} is a single word: give a number, not a list` }
    const word = readWord(given, width)
    if (typeof word === 'string') return { problem: `${name} ${word}` }
    scalars[name] = word
  }
  return { input: { arrays, scalars, junk: junkOf(seed) } }
}

const WORD_TEXT = /^(\d+|0x[0-9a-f]+)$/i

/** The word, or what is wrong with it, to follow its name. */
function readWord(item: unknown, width: number): bigint | string {
  let word: bigint
  if (typeof item === 'string') {
    if (!WORD_TEXT.test(item))
      return `is ${quote(item)}, which is no word: write digits, or 0x and hexadecimal digits`
    word = BigInt(item)
  } else if (typeof item === 'number') {
    if (!Number.isInteger(item) || item < 0) return `is ${item}: words are whole numbers from 0`
    if (!Number.isSafeInteger(item))
      return `is a number past 2^53, which JSON does not keep exactly: write it as a string`
    word = BigInt(item)
  } else return `is ${quote(item)}, which is no word: give a number, or a string for words past 2^53`
  if (word >> BigInt(width) === 0n) return word
  return `is ${item}, which does not fit in a word of ${width} bits (0 .. 2^${width} - 1)`
}

/** The start of what was given, as it stood in the JSON. */
function quote(item: unknown): string {
  const text = JSON.stringify(item)
  return text.length > 40 ? `${text.slice(0, 37)}...` : text
}
