import { type Binding, type RunResult, type Tally, weighTally } from '../machine'
import type { Words } from '../routine'
import { type GridPoint, plainCount, printCharges, type Setting, type Verdict } from '../sweep'
import { type Note, notesOf } from './notes'

/** One good run and all that is said of it. */
export interface CountReport {
  readonly binding: Binding
  readonly setting: Setting
  readonly point: GridPoint
  readonly result: Extract<RunResult, { ok: true }>
  readonly tally: Tally
  readonly verdicts: readonly Omit<Verdict, 'trial'>[]
  /** Where the input came from, for readers. */
  readonly fed: string
}

/**
 * The report as one JSON object. Counts are numbers, or strings past 2^53; words are decimal strings. A routine with
 * several sizes has them all in `sizes`.
 */
export function writeCountJson({ binding, setting, point, result, tally, verdicts }: CountReport): string {
  const { charges } = setting
  const weighed = weighTally(tally, charges)
  const report = {
    routine: binding.program.routine.name,
    n: point.n,
    ...(Object.keys(point.sizes).length > 1 ? { sizes: point.sizes } : {}),
    w: point.width,
    set: point.set,
    charges: printCharges(charges),
    time: plainCount(weighed.time),
    byClass: tally.byClass,
    byLine: weighed.byLine.map(({ line, count, time }) => ({ line, count, time: plainCount(time) })),
    space: tally.space,
    outputs: outputsOf(binding, result),
    audit: notesOf(binding, tally).map(plainNote),
    checks: verdicts,
  }
  return JSON.stringify(report, undefined, 2)
}

function plainNote({ kind, line, message }: Note) {
  return { kind, line, message }
}

/** Results by name: scalars as decimal strings, arrays as lists of them. */
export function outputsOf(binding: Binding, result: CountReport['result']): Record<string, string | string[]> {
  const { arrays, scalars } = binding.program.routine
  const outputs: Record<string, string | string[]> = {}
  for (const { name, role } of scalars) if (role !== 'in') outputs[name] = String(result.scalars[name])
  for (const { name, role } of arrays)
    if (role === 'out' || role === 'inout') outputs[name] = Array.from(result.arrays[name] as Words, String)
  return outputs
}
