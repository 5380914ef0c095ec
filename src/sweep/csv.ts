import { type Charges, type Tally, weighTally } from '../machine'
import { OPERATION_CLASSES } from '../routine'
import { printCharges } from './charges'
import { failedTrial } from './point'
import type { PointResult, SweepResult, TrialTally } from './result'
import { printWidth } from './widths'

/** Columns after those that place a row; every figure is a whole number of operations or words. */
const SPACES = ['input', 'output', 'working', 'declared', 'constants'] as const

/**
 * The points as CSV (RFC 4180: CRLF, quotes where needed, one line of titles): one row a trial that ran well, one a
 * point that was refused or failed. Trials count from 1. `time` is the sum of the operations, each at its charge; the
 * classes are unit operations, unpriced; `index` is no operation of its own. Columns that end in `_words` are space.
 */
export function writeCsv(result: SweepResult): string {
  const sizes = sizeNames(result)
  const titles = [
    ...['routine', ...sizes, 'w', 'width', 'set', 'status', 'trial', 'seed', 'charges', 'time'],
    ...OPERATION_CLASSES,
    ...['index', ...SPACES.map(space => `${space}_words`), 'broken', 'line', 'reason'],
  ]
  const { charges } = result.setting
  const charged = printCharges(charges)
  const rows = result.points.flatMap(point => {
    const { point: at } = point
    const choice = result.setting.widths[at.widthChoice]
    const place = [
      result.routine,
      ...sizes.map(size => at.sizes[size] ?? ''),
      at.width,
      choice ? printWidth(choice) : at.width,
      at.set,
      point.status,
    ]
    if (point.status === 'done')
      return point.trials.map((trial, number) => [
        ...place,
        ...trialCells(trial, number, charges, charged),
        brokenBy(point),
      ])
    const failed = point.status === 'failed' ? point : undefined
    const trial = failed && failedTrial(result.setting, failed)
    const run = [trial === undefined ? '' : trial + 1, failed?.seed ?? '']
    const empty = new Array<string>(OPERATION_CLASSES.length + SPACES.length + 2).fill('')
    return [[...place, ...run, charged, ...empty, '', point.line ?? '', point.reason]]
  })
  return [titles, ...rows].map(row => `${row.map(quoteCell).join(',')}\r\n`).join('')
}

function sizeNames({ points }: SweepResult): string[] {
  return Object.keys(points[0]?.point.sizes ?? {})
}

function trialCells({ seed, tally }: TrialTally, number: number, charges: Charges, charged: string) {
  return [number + 1, seed, charged, weighTally(tally, charges).time, ...countCells(tally)]
}

function countCells({ byClass, indexed, space }: Tally): number[] {
  return [...OPERATION_CLASSES.map(name => byClass[name]), indexed, ...SPACES.map(name => space[name])]
}

/** Claims and checks that the point breaks, by line. */
function brokenBy(point: Extract<PointResult, { status: 'done' }>): string {
  const broken = point.verdicts.filter(({ outcome }) => outcome === 'broken')
  return broken
    .map(({ kind, line }) => (kind === 'check' ? `check line ${line}` : `claim ${kind} line ${line}`))
    .join('; ')
}

function quoteCell(cell: string | number | bigint): string {
  const text = String(cell)
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text
}
