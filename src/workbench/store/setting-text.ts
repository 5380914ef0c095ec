import { type Charges, INSTRUCTION_SETS, type InstructionSetName, type OffPolicy } from '../../machine/machine'
import type { Program } from '../../routine/block'
import { parseCharges } from '../../sweep/charges'
import { parseLets } from '../../sweep/lets'
import type { Misread } from '../../sweep/misread'
import {
  FEED_PATTERNS,
  type FeedPattern,
  type Setting,
  type SizeRange,
  type WidthChoice,
} from '../../sweep/setting'
import { parseSizes, parseWhole } from '../../sweep/sizes'
import { parseWidths, printWidth } from '../../sweep/widths'

/** A setting as its user wrote it. Sizes and lets that a routine does not have are kept for the next that does. */
export interface SettingText {
  /** `16, 32, 64`, `lg(n)^2`. */
  readonly widths: string
  readonly sets: readonly InstructionSetName[]
  /** What becomes of a class that is off and used. */
  readonly off: OffPolicy
  /** `unit`, `operators`, `unit, multiply=32`. */
  readonly charges: string
  /** Values of the routine's first size, whatever it is called. */
  readonly first: string
  /** By name of a further size: its values; '' goes along with the first. */
  readonly others: Readonly<Record<string, string>>
  /** By name of a let: its value; '' is the one it is declared with. */
  readonly lets: Readonly<Record<string, string>>
  readonly pattern: FeedPattern
  readonly trials: string
  readonly seed: string
}

/** What a setting needs to know of a routine. */
export interface RoutineShape {
  readonly name: string
  readonly sizes: readonly string[]
  readonly lets: readonly string[]
}

/** The shape to read a setting for: that of a draft without errors, else the one before. */
export function shapeAfter(program: Program | undefined, before: RoutineShape): RoutineShape {
  if (!program) return before
  const { name, sizes, lets } = program.routine
  return { name, sizes, lets: lets.map(known => known.name) }
}

/** The field of an editor that a problem stands beside. */
export type SettingField = 'widths' | 'sets' | 'charges' | 'trials' | 'seed' | `size ${string}` | `let ${string}`

export interface SettingProblem extends Misread {
  readonly field: SettingField
}

export interface SettingParts {
  readonly widths?: readonly WidthChoice[]
  readonly charges?: Charges
  readonly sizes: Readonly<Record<string, SizeRange>>
  readonly lets: Readonly<Record<string, bigint>>
}

export interface SettingRead {
  /** Absent where there is a problem. */
  readonly setting?: Setting
  /** The parts that can be read, whatever is wrong with the others. */
  readonly parts: SettingParts
  readonly problems: readonly SettingProblem[]
}

/** More trials than this at each point are taken for a slip of the pen. */
export const MOST_TRIALS = 10_000
/** More points than this are more than the page could show. */
export const MOST_POINTS = 100_000
const MOST_SEED = 2 ** 31 - 1

/** Reads a setting for a routine of the given shape. */
export function readSetting(text: SettingText, shape: RoutineShape): SettingRead {
  const problems: SettingProblem[] = []
  function take<T extends object>(field: SettingField, read: T | Misread): T | undefined {
    if (!('problem' in read)) return read
    problems.push({ field, problem: read.problem, remedy: read.remedy })
    return undefined
  }

  const widths = take('widths', parseWidths(text.widths, shape.sizes))?.widths
  const charges = take('charges', parseCharges(text.charges))?.charges
  if (text.sets.length === 0)
    problems.push({
      field: 'sets',
      problem: 'No instruction set is picked',
      remedy: 'pick with, without or both',
    })
  const sizes: Record<string, SizeRange> = {}
  for (const [place, name] of shape.sizes.entries()) {
    const own = sizeText(text, shape, place)
    if (own === '' && place > 0) continue
    const range = take(`size ${name}`, parseSizes(own))?.range
    if (range) sizes[name] = range
  }
  const lets: Record<string, bigint> = {}
  for (const name of shape.lets) {
    const own = text.lets[name]?.trim() ?? ''
    if (own === '') continue
    const read = take(`let ${name}`, parseLets(`${name} = ${own}`))
    if (read) Object.assign(lets, read.lets)
  }
  const points = [...Object.values(sizes)].reduce(
    (product, { values }) => product * values.length,
    (widths?.length ?? 1) * text.sets.length,
  )
  if (points > MOST_POINTS)
    problems.push({
      field: `size ${shape.sizes[0] ?? ''}`,
      problem: `the grid would have ${points} points`,
      remedy: `take fewer sizes: up to ${MOST_POINTS} points are run at once`,
    })
  const trials = whole('trials', text.trials, 1, MOST_TRIALS)
  const seed = whole('seed', text.seed, 0, MOST_SEED)
  const parts: SettingParts = { ...(widths && { widths }), ...(charges && { charges }), sizes, lets }
  if (problems.length > 0 || !widths || !charges || trials === undefined || seed === undefined)
    return { parts, problems }
  const { sets, off, pattern } = text
  const setting: Setting = { sizes, widths, lets, sets, off, charges, pattern, trials, seed }
  return { setting, parts, problems }

  function whole(field: 'trials' | 'seed', written: string, least: number, most: number): number | undefined {
    const forms = `write a whole number from ${least} to ${most}`
    const value = parseWhole(written, `a number of ${field}`, forms)
    if (typeof value !== 'number') {
      take(field, value)
      return undefined
    }
    if (value >= least && value <= most) return value
    problems.push({ field, problem: `${value} is out of range`, remedy: forms })
    return undefined
  }
}

/** What is written for the size at a place among a routine's sizes. */
export function sizeText(text: SettingText, shape: RoutineShape, place: number): string {
  return (place === 0 ? text.first : (text.others[shape.sizes[place] ?? ''] ?? '')).trim()
}

/** The same for two settings that give the same runs: charges apart, which re-weigh runs but make none. */
export function runsKey(setting: Setting): string {
  const { sizes, widths, lets, sets, off, pattern, trials, seed } = setting
  return JSON.stringify([
    Object.entries(sizes).map(([name, { values }]) => [name, values]),
    widths.map(printWidth),
    Object.entries(lets).map(([name, value]) => [name, String(value)]),
    sets,
    off,
    pattern,
    trials,
    seed,
  ])
}

const SET_NAMES = Object.keys(INSTRUCTION_SETS) as InstructionSetName[]

/** Whether a value is a setting's text, whatever its parts say. For values that come from outside. */
export function isSettingText(value: unknown): value is SettingText {
  if (typeof value !== 'object' || value === null) return false
  const { widths, sets, off, charges, first, others, lets, pattern, trials, seed } = value as Record<
    string,
    unknown
  >
  return (
    [widths, charges, first, trials, seed].every(part => typeof part === 'string') &&
    Array.isArray(sets) &&
    sets.every(set => SET_NAMES.includes(set)) &&
    (off === 'refuse' || off === 'expand') &&
    FEED_PATTERNS.includes(pattern as FeedPattern) &&
    isTexts(others) &&
    isTexts(lets)
  )
}

function isTexts(value: unknown): boolean {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return false
  return Object.values(value).every(part => typeof part === 'string')
}
