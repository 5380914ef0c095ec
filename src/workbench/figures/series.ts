import type { Charges, InstructionSetName } from '../../machine/machine'
import type { Tally } from '../../machine/tally'
import { OPERATION_CLASSES } from '../../routine/block'
import type { FigureRow } from '../../sheet'
import type { PointResult, Verdict } from '../../sweep/result'
import { printWidth } from '../../sweep/widths'
import { SHORT_SET_WORDS } from '../store/point-words'
import { type PointOutcome, pointOutcome, type SweepRecord } from '../store/record'

/** What runs along the bottom of a figure: the size, or the word width at the size read. */
export type Axis = 'n' | 'w'

export interface PlotPoint {
  readonly x: number
  /** Mean over trials; `low` and `high` are the least and the most. Doubles, for drawing alone. */
  readonly y: number
  readonly low: number
  readonly high: number
  readonly outcome: PointOutcome
  /** Place in `setting.widths`: the marker. */
  readonly width: number
  readonly set: InstructionSetName
  /** Index of the grid point. */
  readonly index: number
}

export interface PlotSeries {
  readonly key: string
  /** Stands at the end of the line. */
  readonly label: string
  /** Place in `setting.widths` of all its points; undefined where they differ (along w). */
  readonly width: number | undefined
  readonly set: InstructionSetName
  /** In order of x. */
  readonly points: readonly PlotPoint[]
}

type Done = Extract<PointResult, { status: 'done' }>

/** A figure of one trial; undefined where it has none. */
export type Measure = (tally: Tally, result: Done, trial: number) => number | undefined

/** The time of a tally as a double. */
export function timeOf(tally: Tally, charges: Charges): number {
  let time = tally.indexed * charges.index
  for (const each of OPERATION_CLASSES) time += tally.byClass[each] * charges[each]
  return time
}

/** One series a width and set along n; one a set along w, of the points with the size read. */
export function plotSeries(record: SweepRecord, axis: Axis, n: number, measure: Measure): PlotSeries[] {
  const series = new Map<string, { series: Omit<PlotSeries, 'points'>; points: PlotPoint[] }>()
  for (const result of record.results) {
    if (result?.status !== 'done') continue
    const { point } = result
    if (axis === 'w' && point.n !== n) continue
    const drawn = drawPoint(result, axis, measure)
    if (!drawn) continue
    const key = axis === 'n' ? `${point.set} ${point.widthChoice}` : point.set
    const known = series.get(key)
    if (known) known.points.push(drawn)
    else series.set(key, { series: seriesHead(record, axis, result, key), points: [drawn] })
  }
  return [...series.values()].map(({ series: head, points }) => ({
    ...head,
    points: points.sort((a, b) => a.x - b.x),
  }))
}

function seriesHead(record: SweepRecord, axis: Axis, { point }: Done, key: string): Omit<PlotSeries, 'points'> {
  const width = printWidth(record.setting.widths[point.widthChoice]!)
  const set = record.setting.sets.length > 1 ? SHORT_SET_WORDS[point.set] : ''
  const label = axis === 'n' ? `${width} ${set}`.trim() : set
  return { key, label, width: axis === 'n' ? point.widthChoice : undefined, set: point.set }
}

function drawPoint(result: Done, axis: Axis, measure: Measure): PlotPoint | undefined {
  const values: number[] = []
  for (const [trial, { tally }] of result.trials.entries()) {
    const value = measure(tally, result, trial)
    if (value !== undefined && Number.isFinite(value)) values.push(value)
  }
  if (values.length === 0) return undefined
  const { point } = result
  return {
    x: axis === 'n' ? point.n : point.width,
    y: values.reduce((sum, value) => sum + value, 0) / values.length,
    low: Math.min(...values),
    high: Math.max(...values),
    outcome: pointOutcome(result),
    width: point.widthChoice,
    set: point.set,
    index: point.index,
  }
}

/** The claim of time that figures show: the first that is broken anywhere, else the first. Place among the claims. */
export function shownClaim(record: SweepRecord, measure: 'time' | 'space'): number | undefined {
  const { claims } = record.program.routine
  const places = claims.flatMap((claim, place) => (claim.measure === measure ? [place] : []))
  const isBroken = (place: number) =>
    record.results.some(result => result?.status === 'done' && claimVerdict(result, place)?.outcome === 'broken')
  return places.find(isBroken) ?? places[0]
}

/** The verdict on a claim at a point. */
export function claimVerdict(result: Done, place: number): Verdict | undefined {
  return result.verdicts.find(verdict => verdict.kind !== 'check' && verdict.place === place)
}

/** The bound of a claim along the points of one series, from its verdicts; doubles, for drawing alone. */
export function boundPoints(record: SweepRecord, series: PlotSeries, place: number): { x: number; y: number }[] {
  return series.points.flatMap(({ x, index }) => {
    const result = record.results[index]
    const bound = result?.status === 'done' ? claimVerdict(result, place)?.bound : undefined
    const y = bound === undefined ? Number.NaN : doubleOfText(bound)
    return Number.isFinite(y) ? [{ x, y }] : []
  })
}

/** The double nearest to an exact text: `12`, `7/3`, `3.16...`, `1.04...e1233`. */
export function doubleOfText(text: string): number {
  const [numerator, denominator] = text.replace('...', '').split('/')
  return Number(numerator) / (denominator === undefined ? 1 : Number(denominator))
}

/** The drawn points as rows of a figure's CSV. */
export function plotRows(record: SweepRecord, series: readonly PlotSeries[], quantity: string): FigureRow[] {
  return series.flatMap(({ points }) =>
    points.map(({ y, low, high, outcome, index }) => {
      const { n, width, set } = record.points[index]!
      return { n, width, set, quantity, mean: y, least: low, most: high, verdict: outcome }
    }),
  )
}
