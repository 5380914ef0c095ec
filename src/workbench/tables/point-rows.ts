import type { Count } from '../../machine'
import { weighTally } from '../../machine'
import type { GridPoint, PointResult } from '../../sweep/result'
import { SHORT_SET_WORDS } from '../store/point-words'
import { type PointOutcome, pointOutcome, type SweepRecord } from '../store/record'

/** A point as the table shows it. Figures are of all its trials. */
export interface PointRow {
  readonly point: GridPoint
  readonly set: string
  readonly outcome: PointOutcome
  readonly trials: number
  readonly least?: Count
  readonly mean?: number
  readonly most?: Count
  /** The most over trials. */
  readonly working?: number
  /** Why it was not run or went wrong. */
  readonly reason: string
}

export const COLUMNS = ['n', 'w', 'set', 'least', 'mean', 'most', 'words', 'verdict'] as const
export type Column = (typeof COLUMNS)[number]

export const OUTCOME_WORDS: Readonly<Record<PointOutcome, string>> = {
  waiting: 'waiting',
  holds: 'holds',
  broken: 'broken',
  undecided: 'undecided',
  refused: 'not run',
  failed: 'failed',
}

export function pointRows(record: SweepRecord): PointRow[] {
  return record.points.map((point, at) => rowOf(record, point, record.results[at]))
}

function rowOf(record: SweepRecord, point: GridPoint, result: PointResult | undefined): PointRow {
  const head = { point, set: SHORT_SET_WORDS[point.set], outcome: pointOutcome(result) }
  if (!result) return { ...head, trials: 0, reason: '' }
  if (result.status !== 'done') return { ...head, trials: 0, reason: result.reason }
  const times = result.trials.map(({ tally }) => weighTally(tally, record.setting.charges).time)
  const sum = times.reduce<bigint>((total, time) => total + BigInt(time), 0n)
  return {
    ...head,
    trials: times.length,
    least: times.reduce((low, time) => (time < low ? time : low)),
    mean: Number(sum) / times.length,
    most: times.reduce((high, time) => (time > high ? time : high)),
    working: Math.max(...result.trials.map(({ tally }) => tally.space.working)),
    reason: '',
  }
}

const KEYS: Readonly<Record<Column, (row: PointRow) => number | string>> = {
  n: row => row.point.n,
  w: row => row.point.width,
  set: row => row.set,
  least: row => Number(row.least ?? -1),
  mean: row => row.mean ?? -1,
  most: row => Number(row.most ?? -1),
  words: row => row.working ?? -1,
  verdict: row => OUTCOME_WORDS[row.outcome],
}

/** Rows by a column; rows that are alike there keep the grid's order. */
export function sortRows(rows: readonly PointRow[], column: Column, down: boolean): PointRow[] {
  const key = KEYS[column]
  return rows.toSorted((a, b) => {
    const [left, right] = [key(a), key(b)]
    const order = left < right ? -1 : left > right ? 1 : a.point.index - b.point.index
    return down ? -order : order
  })
}
