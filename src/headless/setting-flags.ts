import { type Charges, INSTRUCTION_SETS, type InstructionSetName, type OffPolicy } from '../machine'
import { nearestName, type Program } from '../routine'
import {
  FEED_PATTERNS,
  type FeedPattern,
  findMismatch,
  type Misread,
  parseCharges,
  parseLets,
  parseSizes,
  parseWhole,
  parseWidths,
  type Setting,
  type SizeRange,
  type Way,
} from '../sweep'
import type { Arguments, Flag } from './flags'
import { misuse } from './terminal'

const SETS = Object.keys(INSTRUCTION_SETS) as InstructionSetName[]
const POLICIES: readonly OffPolicy[] = ['refuse', 'expand']
const WAYS: readonly Way[] = ['engine', 'reference']

/** What a setting is where no flag says otherwise; the help shows the same texts. */
const DEFAULTS = { n: '2^6..2^12', w: '64', set: 'full', charges: 'unit', feed: 'uniform', seed: '1' }

/** Flags that every verb takes which runs routines. */
export const RUN_FLAGS: readonly Flag[] = [
  { name: 'size', value: 'm=8', help: 'a further size, or one by its name', many: true },
  { name: 'let', value: 'k=8', help: 'a let, where not its default', many: true },
  { name: 'charges', value: 'unit', help: 'unit, operators, or prices: multiply=32,move=0' },
  { name: 'feed', value: 'uniform', help: FEED_PATTERNS.join(', ') },
  { name: 'seed', value: '1', help: 'the master seed; the same seed gives the same input' },
  { name: 'off', value: 'refuse', help: 'what becomes of classes that are off: refuse, expand' },
  { name: 'way', value: 'engine', help: 'engine (compiled) or reference (interpreted); the counts are the same' },
  { name: 'routine', value: 'NAME', help: 'which routine, where the file holds several' },
]

/** Flags of the verbs that run grids. */
export const GRID_FLAGS: readonly Flag[] = [
  { name: 'n', value: '2^6..2^16', help: `sizes: doubling, 100..1000 by 100, a list (default ${DEFAULTS.n})` },
  { name: 'w', value: '16,32,64', help: "widths, or expressions in the sizes: 'lg(n)^2' (default 64)", many: true },
  { name: 'set', value: 'full,no-multiply', help: `instruction sets: ${SETS.join(', ')}` },
  { name: 'trials', value: '5', help: 'runs a point, each on its own input (default 1)' },
  ...RUN_FLAGS,
]

/** The setting that the flags describe; what is left out takes its default. `sizes` come from input data. */
export function readSetting(
  given: Arguments,
  program: Program,
  sizes: Readonly<Record<string, number>> = {},
): Setting {
  const { routine } = program
  const setting: Setting = {
    sizes: readSizes(given, program, sizes),
    widths: take('--w', parseWidths(given.values('w').join(',') || DEFAULTS.w, routine.sizes)).widths,
    lets: take('--let', given.has('let') ? parseLets(given.values('let').join(',')) : { lets: {} }).lets,
    sets: (given.value('set') ?? DEFAULTS.set).split(',').map(name => choose('--set', name.trim(), SETS)),
    off: choose('--off', given.value('off') ?? 'refuse', POLICIES),
    charges: readCharges(given),
    pattern: choose<FeedPattern>('--feed', given.value('feed') ?? DEFAULTS.feed, FEED_PATTERNS),
    trials: readCount('--trials', given.value('trials') ?? '1', 1),
    seed: readCount('--seed', given.value('seed') ?? DEFAULTS.seed, 0),
  }
  const mismatch = findMismatch(setting, program)
  if (mismatch) throw misuse(mismatch.problem, mismatch.remedy)
  return setting
}

/** The way of running that is asked for; undefined leaves it to the width. */
export function readWay(given: Arguments): Way | undefined {
  const way = given.value('way')
  return way === undefined ? undefined : choose('--way', way, WAYS)
}

/** A whole number from `least` on. */
export function readCount(flag: string, text: string, least: number): number {
  const value = parseWhole(text, 'a whole number', `write ${flag} with a whole number from ${least}`)
  if (typeof value !== 'number') throw misuse(`${flag}: ${value.problem}`, value.remedy)
  if (value < least) throw misuse(`${flag} is ${text}`, `write a whole number from ${least}`)
  return value
}

function readCharges(given: Arguments): Charges {
  return take('--charges', parseCharges(given.value('charges') ?? DEFAULTS.charges)).charges
}

function readSizes(given: Arguments, program: Program, known: Readonly<Record<string, number>>) {
  const sizes: Record<string, SizeRange> = {}
  for (const [name, value] of Object.entries(known)) sizes[name] = { text: String(value), values: [value] }
  for (const text of given.values('size')) {
    const match = /^\s*([A-Za-z_]\w*)\s*=(.*)$/.exec(text)
    if (!match) throw misuse(`--size ${text} names no size`, 'write --size m=8')
    sizes[match[1]!] = take('--size', parseSizes(match[2]!)).range
  }
  const [first] = program.routine.sizes
  const n = given.value('n')
  if (n !== undefined && first === undefined)
    throw misuse(`${program.routine.name} has no size, so --n says nothing`, 'leave --n out')
  if (first !== undefined && (n !== undefined || !sizes[first]))
    sizes[first] = take('--n', parseSizes(n ?? DEFAULTS.n)).range
  return sizes
}

/** What was read, or misuse of the flag. */
export function take<T extends object>(flag: string, read: T | Misread): T {
  if ('problem' in read) throw misuse(`${flag}: ${read.problem}`, read.remedy)
  return read
}

function choose<T extends string>(flag: string, name: string, known: readonly T[]): T {
  const found = known.find(one => one === name)
  if (found !== undefined) return found
  const near = nearestName(name, known)
  throw misuse(
    `${flag} ${name}: there is no such choice`,
    near ? `did you mean ${near}?` : `choose ${known.join(', ')}`,
  )
}
