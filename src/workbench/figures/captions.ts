import type { InstructionSetName } from '../../machine/machine'
import type { PointResult } from '../../sweep/result'
import { SET_WORDS } from '../store/point-words'
import type { SweepRecord } from '../store/record'
import { plainLabel } from './ticks'

type Done = Extract<PointResult, { status: 'done' }>

/** `value` of a counted point, as figures draw it. */
export type PointFigure = (result: Done) => number | undefined

/**
 * How the second, third ... instruction sets compare with the first, point by point, in plain sentences: agreement, the
 * range of ratios, or why a set was not run. '' where there is one set alone.
 */
export function compareSets(record: SweepRecord, figure: PointFigure): string {
  const [first, ...others] = record.setting.sets
  if (first === undefined) return ''
  return others.map(other => compareSet(record, first, other, figure)).join(' ')
}

function compareSet(
  record: SweepRecord,
  first: InstructionSetName,
  other: InstructionSetName,
  figure: PointFigure,
): string {
  const mine = resultsOf(record, first)
  const theirs = resultsOf(record, other)
  const ratios: number[] = []
  let equal = 0
  for (const [at, result] of theirs.entries()) {
    const base = mine[at]
    if (result?.status !== 'done' || base?.status !== 'done') continue
    const [under, over] = [figure(base), figure(result)]
    if (under === undefined || over === undefined) continue
    if (under === over) equal += 1
    ratios.push(over / under)
  }
  if (ratios.length === 0) return notRun(theirs, other)
  const words = SET_WORDS[other]
  if (equal === ratios.length) return `${capital(words)} every point is the same.`
  const finite = ratios.filter(Number.isFinite)
  if (finite.length === 0) return ''
  const [least, most] = [Math.min(...finite), Math.max(...finite)]
  const [low, high] = [ratioText(least), ratioText(most)]
  return low === high ? `${low} times as many ${words}.` : `${low} to ${high} times as many ${words}.`
}

/** The results of one instruction set, in the grid's order. */
function resultsOf(record: SweepRecord, set: InstructionSetName): (PointResult | undefined)[] {
  return record.results.filter((_, at) => record.points[at]?.set === set)
}

function notRun(results: readonly (PointResult | undefined)[], set: InstructionSetName): string {
  const stopped = results.find(result => result !== undefined && result.status !== 'done')
  if (!stopped) return ''
  return `${capital(SET_WORDS[set])} no point is counted: ${stopped.reason.replace(/\.$/, '')}.`
}

/** Two or three digits, so that a difference shows. */
export function ratioText(ratio: number): string {
  if (ratio >= 100) return plainLabel(Math.round(ratio))
  if (ratio >= 10) return ratio.toFixed(1)
  return ratio.toFixed(2)
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

/** Whether every counted point of one size has the same figure, whatever its width and set. */
export function coincides(record: SweepRecord, figure: PointFigure): boolean {
  const known = new Map<number, number>()
  for (const result of record.results) {
    if (result?.status !== 'done') continue
    const value = figure(result)
    if (value === undefined) continue
    const before = known.get(result.point.n)
    if (before !== undefined && before !== value) return false
    known.set(result.point.n, value)
  }
  return true
}

/** Whether the trials of some point differ, so that a mean is drawn. */
export function trialsDiffer(record: SweepRecord, figure: (result: Done, trial: number) => number): boolean {
  return record.results.some(
    result =>
      result?.status === 'done' && result.trials.some((_, trial) => figure(result, trial) !== figure(result, 0)),
  )
}
