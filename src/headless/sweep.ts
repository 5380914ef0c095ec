import { mkdir, writeFile } from 'node:fs/promises'
import { join, resolve } from 'node:path'
import { weighTally } from '../machine'
import { failedTrial, type PointResult, runSweep, type SweepResult, writeCsv, writeRecord } from '../sweep'
import { DISCLAIMER } from './count-text'
import type { Arguments, Flag } from './flags'
import { sayPlace, saySetting } from './say'
import { GRID_FLAGS, readSetting, readWay } from './setting-flags'
import { readSource, type Source, sayAt } from './source'
import { type Column, groupDigits, layTable } from './table'
import { EXIT, type Exit, misuse, type Terminal } from './terminal'

export const SWEEP_FLAGS: readonly Flag[] = [
  ...GRID_FLAGS,
  { name: 'out', value: 'DIR', help: 'write ROUTINE.csv and ROUTINE.json there instead of a table' },
  { name: 'json', help: 'print the JSON instead of a table' },
]

type Done = Extract<PointResult, { status: 'done' }>

/** `sweep`: every point of a grid, as a table or as files. */
export async function sweep(given: Arguments, terminal: Terminal): Promise<Exit> {
  const source = await readSource(terminal, 'sweep', given.files, given.value('routine'))
  const folder = given.value('out')
  if (folder !== undefined && given.has('json')) throw misuse('--out writes the JSON anyway', 'leave --json out')
  const result = await sweepSource(given, terminal, source)
  if (folder !== undefined) await writeFiles(terminal, folder, result)
  else terminal.print(given.has('json') ? writeRecord(result).trimEnd() : layResult(result))
  return complainOf(terminal, source, result)
}

/** Runs the grid of the flags, progress shown where somebody watches. */
export async function sweepSource(given: Arguments, terminal: Terminal, source: Source): Promise<SweepResult> {
  const setting = readSetting(given, source.program)
  const way = readWay(given)
  const result = await runSweep(source.program, setting, {
    ...(way ? { way } : {}),
    onPoint: ({ point }, done, all) => terminal.progress?.(`${done} of ${all} points  ${sayPlace(point)}`),
  })
  terminal.progress?.(undefined)
  return result
}

/**
 * Names the failed points and the first broken one on standard error, and gives the exit: failed before broken before
 * good. A grid with no point that ran is wrong use.
 */
export function complainOf(terminal: Terminal, { file }: Source, { points, setting }: SweepResult): Exit {
  const failed = points.filter(result => result.status === 'failed')
  for (const result of failed) {
    const { point, line, reason } = result
    const trial = setting.trials > 1 ? `, trial ${(failedTrial(setting, result) ?? 0) + 1}` : ''
    terminal.complain(`${file}${line === undefined ? '' : `:${line}`}: ${sayPlace(point)}${trial}: ${reason}`)
  }
  if (failed.length > 0) return EXIT.failed
  const done = points.filter(result => result.status === 'done')
  if (done.length === 0) {
    terminal.complain(sayAt(file, undefined, `none of the ${points.length} points could be run`))
    return EXIT.usage
  }
  const bad = done.flatMap(({ point, verdicts }) =>
    verdicts.filter(({ outcome }) => outcome !== 'holds').map(verdict => ({ point, verdict })),
  )
  const [first] = bad
  if (!first) return EXIT.good
  const { kind, line, outcome } = first.verdict
  const what = kind === 'check' ? 'check' : `claim ${kind}`
  terminal.complain(`${file}:${line}: ${what} is ${outcome} at ${sayPlace(first.point)}`)
  return EXIT.broken
}

async function writeFiles(terminal: Terminal, folder: string, result: SweepResult): Promise<void> {
  const target = resolve(terminal.folder, folder)
  const files = [
    { name: `${result.routine}.csv`, text: writeCsv(result) },
    { name: `${result.routine}.json`, text: writeRecord(result) },
  ]
  try {
    await mkdir(target, { recursive: true })
    for (const { name, text } of files) await writeFile(join(target, name), text)
  } catch (error) {
    throw misuse(`cannot write to ${folder}: ${(error as Error).message}`, 'give a folder that can be written to')
  }
  for (const { name } of files) terminal.print(join(folder, name))
}

function layResult(result: SweepResult): string {
  const { points, setting } = result
  const sizes = Object.keys(points[0]?.point.sizes ?? {})
  const spread = points.some(point => point.status === 'done' && new Set(timesOf(point, result)).size > 1)
  const right = (title: string): Column => ({ title, align: 'right' })
  const columns: Column[] = [
    ...sizes.map(right),
    right('w'),
    { title: 'set', align: 'left' },
    ...(spread ? ['least', 'mean', 'most'] : ['time']).map(right),
    right('words'),
    { title: '', align: 'left' },
  ]
  const rows = points.map(point => {
    const { sizes: values, width, set } = point.point
    const place = [...sizes.map(size => groupDigits(values[size] ?? 0)), String(width || ''), set]
    if (point.status !== 'done')
      return [...place, ...(spread ? ['', '', ''] : ['']), '', `${point.status}: ${point.reason}`]
    const words = Math.max(...point.trials.map(({ tally }) => tally.space.working))
    return [...place, ...timeCells(point, result, spread), groupDigits(words), sayVerdicts(point)]
  })
  return [saySetting(result.routine, setting), layTable(columns, rows), DISCLAIMER].join('\n\n')
}

/** Each trial's operations at their charges. */
function timesOf({ trials }: Done, { setting }: SweepResult): bigint[] {
  return trials.map(({ tally }) => BigInt(weighTally(tally, setting.charges).time))
}

function timeCells(point: Done, result: SweepResult, spread: boolean): string[] {
  const times = timesOf(point, result)
  if (!spread) return [groupDigits(times[0]!)]
  const least = times.reduce((a, b) => (a < b ? a : b))
  const most = times.reduce((a, b) => (a > b ? a : b))
  const sum = times.reduce((a, b) => a + b)
  return [groupDigits(least), sayMean(sum, BigInt(times.length)), groupDigits(most)]
}

/** sum / count to one decimal, rounded half up; whole where it is whole. */
function sayMean(sum: bigint, count: bigint): string {
  if (sum % count === 0n) return groupDigits(sum / count)
  const tenths = (sum * 20n + count) / (count * 2n)
  return `${groupDigits(tenths / 10n)}.${tenths % 10n}`
}

function sayVerdicts({ verdicts }: Done): string {
  const bad = verdicts.filter(({ outcome }) => outcome !== 'holds')
  return bad
    .map(({ kind, line, outcome }) => `${kind === 'check' ? 'check' : `claim ${kind}`} line ${line} ${outcome}`)
    .join('; ')
}
