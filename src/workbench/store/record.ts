import type { Charges } from '../../machine/machine'
import type { Program } from '../../routine/block'
import type { GridPoint, PointResult } from '../../sweep/result'
import type { Setting } from '../../sweep/setting'

export type SweepStatus = 'running' | 'done' | 'cancelled' | 'crashed'

/**
 * One sweep: what was asked for, and what has come of it so far. Its draft and setting are those it was started with;
 * the page's own may have moved on (then `WorkbenchState.stale` is true). Charges alone follow the page at once: a change
 * re-weighs every result here, so `setting.charges` and every verdict are always those in force.
 */
export interface SweepRecord {
  /** Tells one sweep from the next. */
  readonly number: number
  /** The draft's file name. */
  readonly file: string
  readonly text: string
  readonly program: Program
  readonly setting: Setting
  /** The whole grid, in its order; `points[i].index` is i. */
  readonly points: readonly GridPoint[]
  /** By index of the point; undefined while it waits, and for good where the sweep was cancelled. */
  readonly results: readonly (PointResult | undefined)[]
  readonly status: SweepStatus
  /** Why it crashed: a fault of ours, told in full. */
  readonly crash?: string
  readonly startedAt: number
  /** Milliseconds until its end; of a running sweep, until the last result so far. */
  readonly elapsed: number
}

/** The part of a sweep's results that margin, tally, dotted line and ring show. */
export interface Reading {
  /** Index of the grid point. */
  readonly point: number
  /** From 0. */
  readonly trial: number
}

export type AxisScale = 'log' | 'linear'

/** By axis: sizes, widths, operations, words of space. */
export interface Scales {
  readonly n: AxisScale
  readonly w: AxisScale
  readonly operations: AxisScale
  readonly space: AxisScale
}

export const DEFAULT_SCALES: Scales = { n: 'log', w: 'log', operations: 'log', space: 'log' }

/** What one point of the grid shows. */
export type PointOutcome = 'waiting' | 'holds' | 'broken' | 'undecided' | 'refused' | 'failed'

export function pointOutcome(result: PointResult | undefined): PointOutcome {
  if (!result) return 'waiting'
  if (result.status !== 'done') return result.status
  if (result.verdicts.some(verdict => verdict.outcome === 'broken')) return 'broken'
  return result.verdicts.some(verdict => verdict.outcome === 'undecided') ? 'undecided' : 'holds'
}

/**
 * The reading that results ask for: the first broken point by n, then w; else the largest counted of a sweep that has
 * ended. While it runs the first counted one stands, so that figures in the margin don't flicker.
 */
export function firstReading(record: Pick<SweepRecord, 'results'>, ended: boolean): Reading | undefined {
  const counted = record.results.filter(result => result?.status === 'done') as PointResult[]
  const broken = counted
    .filter(result => pointOutcome(result) === 'broken')
    .sort((a, b) => a.point.n - b.point.n || a.point.width - b.point.width || a.point.index - b.point.index)[0]
  if (broken) return { point: broken.point.index, trial: brokenTrial(broken) }
  const [first] = counted
  if (!first) return undefined
  const shown = ended ? counted.reduce((most, each) => (each.point.n > most.point.n ? each : most)) : first
  return { point: shown.point.index, trial: 0 }
}

function brokenTrial(result: PointResult): number {
  if (result.status !== 'done') return 0
  return result.verdicts.find(verdict => verdict.outcome === 'broken' && verdict.trial !== undefined)?.trial ?? 0
}

/** Props that every part which shows results takes. */
export interface SweepView {
  readonly record: SweepRecord
  readonly reading: Reading | undefined
  readonly onRead: (reading: Reading) => void
  readonly scales: Scales
  readonly onScales: (scales: Scales) => void
  /** What is drawn now. */
  readonly theme: 'light' | 'dark'
  /** The draft or the setting has changed since: draw in grey. */
  readonly stale: boolean
}

/** Unit operations of each class at what they cost; the sum is the time of the tally. */
export type { Charges }
