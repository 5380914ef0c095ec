import { type Binding, type Input, JUNK_WORDS, junkBlock, type Limits } from '../machine'
import type { Words } from '../routine'
import type { ModulePlan } from './plan'
import type { RunLayout } from './slots'

// One memory for all runs of a thread: grown where a run needs more, never given back, refilled for each run.

const PAGE_BYTES = 65_536
/** The most that an i32 address, and the bound of the stack, reach. */
const MOST_PAGES = 65_535

let shared: WebAssembly.Memory | undefined

/** The memory of this thread, of at least so many bytes. Throws a RangeError where there is no more. */
export function takeMemory(bytes: number): WebAssembly.Memory {
  const pages = Math.ceil(bytes / PAGE_BYTES)
  if (pages > MOST_PAGES) throw new RangeError(`a run needs ${bytes} bytes of memory, and a module reaches 4 GiB`)
  shared ??= new WebAssembly.Memory({ initial: pages, maximum: MOST_PAGES })
  const more = pages - shared.buffer.byteLength / PAGE_BYTES
  if (more > 0) shared.grow(more)
  return shared
}

/** Where a run's parts stand: the head, the words in use, marks for writable words if any, the stack of frames. */
export function layOut(binding: Binding, input: Input, limits: Limits, plan: ModulePlan): Omit<RunLayout, 'end'> {
  const marks = plan.head + binding.words * plan.wordBytes
  const stack = Math.ceil((marks + markBytes(binding, plan)) / 8) * 8
  return { binding, input, limits, marks, stack }
}

function markBytes({ words, writable }: Binding, { marked }: ModulePlan): number {
  return marked ? words - writable : 0
}

/** Puts inputs, tables, junk and unset marks where a run expects them. */
export function fillMemory(memory: WebAssembly.Memory, run: RunLayout, plan: ModulePlan): void {
  const { binding, input } = run
  for (const [at, { name, role }] of binding.program.routine.arrays.entries()) {
    const { base, length } = binding.arrays[at]!
    const place = wordView(memory, plan.head + base * plan.wordBytes, length, plan.wordBytes)
    if (role === 'out' || role === 'work') fillJunk(place, base, input.junk, binding.point.width)
    else copyWords(role === 'table' ? binding.tables.get(at)! : input.arrays[name]!, place)
  }
  new Uint8Array(memory.buffer, run.marks, markBytes(binding, plan)).fill(0)
}

type NarrowArray = Uint32Array<ArrayBuffer> | BigUint64Array<ArrayBuffer>

/** The words from a place in memory on, as they are there: no copy. */
export function wordView(memory: WebAssembly.Memory, at: number, length: number, wordBytes: number): NarrowArray {
  return wordBytes === 4
    ? new Uint32Array(memory.buffer, at, length)
    : new BigUint64Array(memory.buffer, at, length)
}

function copyWords(from: Words, into: NarrowArray): void {
  if (into instanceof Uint32Array && from instanceof Uint32Array) into.set(from)
  else if (into instanceof BigUint64Array && from instanceof BigUint64Array) into.set(from)
  else throw new Error('words do not come in the array that their width calls for')
}

/** Throws where an input does not fit its binding, which is a fault of the caller's. */
export function checkWords(binding: Binding, input: Input): void {
  const { width } = binding.point
  const mask = (1n << BigInt(width)) - 1n
  for (const [at, { name, role }] of binding.program.routine.arrays.entries()) {
    if (role !== 'in' && role !== 'inout') continue
    const words = input.arrays[name]
    if (words?.length !== binding.arrays[at]!.length) throw new Error(`input array ${name} is not of its length`)
    if (!wordsFit(words, width)) throw new Error(`input array ${name} holds a word of more than ${width} bits`)
  }
  for (const { name, role } of binding.program.routine.scalars) {
    if (role === 'out') continue
    const word = input.scalars[name]
    if (word === undefined || (word & mask) !== word) throw new Error(`input ${name} is no word of ${width} bits`)
  }
}

/** Whether no word has a bit past the width. Looks at the halves that can: much faster than at BigInts. */
function wordsFit(words: Words, width: number): boolean {
  if (width === 32 || width === 64 || Array.isArray(words)) return true
  const { buffer, byteOffset, byteLength } = words as Uint32Array | BigUint64Array
  const halves = new Uint32Array(buffer, byteOffset, byteLength / 4)
  const [first, stride] = width < 32 ? [0, 1] : [1, 2]
  let bits = 0
  for (let at = first; at < halves.length; at += stride) bits |= halves[at]!
  return bits >>> (width % 32) === 0
}

/** The word at address A starts as word A mod 8192 of the block of junk, cut to w bits. */
function fillJunk(place: NarrowArray, base: number, seed: number, width: number): void {
  const block = cutBlock(seed, width)
  let from = base % JUNK_WORDS
  for (let at = 0; at < place.length; ) {
    const count = Math.min(JUNK_WORDS - from, place.length - at)
    copyWords(block.subarray(from, from + count), place.subarray(at, at + count))
    at += count
    from = 0
  }
}

/** Whether a word holds the junk that it began with. */
export function holdsJunk(place: NarrowArray, base: number, seed: number, width: number): boolean {
  const block = cutBlock(seed, width)
  const halves = place.BYTES_PER_ELEMENT / 4
  const words = new Uint32Array(place.buffer, place.byteOffset, place.length * halves)
  const junk = new Uint32Array(block.buffer)
  const length = junk.length
  let from = (base % JUNK_WORDS) * halves
  for (let at = 0; at < words.length; ) {
    const end = Math.min(words.length, at + length - from)
    const shift = from - at
    if (halves === 1) for (; at < end; at++) if (words[at] === junk[at + shift]) return true
    if (halves === 2)
      for (; at < end; at += 2)
        if (words[at] === junk[at + shift] && words[at + 1] === junk[at + shift + 1]) return true
    from = 0
  }
  return false
}

let cut: { seed: number; width: number; block: NarrowArray } | undefined

function cutBlock(seed: number, width: number): NarrowArray {
  if (cut?.seed !== seed || cut.width !== width) {
    const whole = junkBlock(seed)
    const mask = (1n << BigInt(width)) - 1n
    const block = width <= 32 ? new Uint32Array(JUNK_WORDS) : new BigUint64Array(whole)
    if (block instanceof Uint32Array) {
      const halves = new Uint32Array(whole.buffer, whole.byteOffset, 2 * JUNK_WORDS)
      for (let at = 0; at < JUNK_WORDS; at++) block[at] = (halves[2 * at]! & Number(mask)) >>> 0
    } else if (width < 64) for (let at = 0; at < JUNK_WORDS; at++) block[at]! &= mask
    cut = { seed, width, block }
  }
  return cut.block
}

/** Sum of the marks, each 0 or 1, of `length` bytes. */
export function countMarks(memory: WebAssembly.Memory, at: number, length: number): number {
  const marks = new Uint8Array(memory.buffer, at, length)
  const lead = (4 - (at % 4)) % 4
  const fours = Math.max(0, (length - lead) >> 2)
  let sum = 0
  for (let byte = 0; byte < Math.min(lead, length); byte++) sum += marks[byte]!
  for (let byte = lead + fours * 4; byte < length; byte++) sum += marks[byte]!
  if (fours === 0) return sum
  // Four marks at a time, each in a byte of its own that up to 255 of them fit.
  const wide = new Uint32Array(memory.buffer, at + lead, fours)
  for (let start = 0; start < fours; start += 255) {
    const end = Math.min(start + 255, fours)
    let lanes = 0
    for (let four = start; four < end; four++) lanes += wide[four]!
    sum += (lanes & 0xff) + ((lanes >>> 8) & 0xff) + ((lanes >>> 16) & 0xff) + ((lanes >>> 24) & 0xff)
  }
  return sum
}
