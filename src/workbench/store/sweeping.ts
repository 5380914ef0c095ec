import type { StoreApi } from 'zustand/vanilla'
import { gridPoints } from '../../sweep/grid'
import { findMismatch } from '../../sweep/mismatch'
import type { PointResult } from '../../sweep/result'
import { firstError, isCheckOf } from './draft'
import { firstReading, type Reading, type SweepRecord } from './record'
import type { WorkbenchState } from './state'
import { weighResult } from './weighing'
import type { World } from './world'

/** What can be done with sweeps. */
export interface Sweeping {
  /** Runs the draft in the setting as they stand; false where something stands in the way (`obstacle` says what). */
  sweep(): boolean
  /** Stops the sweep that runs; its results so far stand. */
  cancel(): void
  /** Puts the setting's charges on the results there are. */
  weighAgain(): void
}

/** Why the draft cannot be swept as it stands; undefined where it can. */
export function obstacle(
  state: Pick<WorkbenchState, 'draft' | 'checked' | 'settingRead'>,
): { readonly text: string; readonly line?: number } | undefined {
  const { draft, checked, settingRead } = state
  if (!checked.program && isCheckOf(checked, draft)) {
    const error = firstError(checked)
    if (!error) return { text: 'The draft has no routine.' }
    return { text: `The draft stops at line ${error.span.line}.`, line: error.span.line }
  }
  const [problem] = settingRead.problems
  if (problem) return { text: `The setting stops at ${problem.field}: ${problem.problem}.` }
  const mismatch = settingRead.setting && checked.program && findMismatch(settingRead.setting, checked.program)
  return mismatch && { text: `The setting does not fit: ${mismatch.problem}; ${mismatch.remedy}.` }
}

export function sweepingOf(store: StoreApi<WorkbenchState>, world: World): Sweeping {
  let number = 0

  function change(of: number, change: (record: SweepRecord) => Partial<SweepRecord>): void {
    const { record } = store.getState()
    if (record?.number === of) store.setState({ record: { ...record, ...change(record) } })
  }

  /** The reading that the results ask for, unless the user picked one. */
  function readOn(ended: boolean): void {
    const { record, reading, readingPicked } = store.getState()
    if (!record || (readingPicked && reading)) return
    const first = firstReading(record, ended)
    if (first?.point !== reading?.point || first?.trial !== reading?.trial) store.setState({ reading: first })
  }

  function sweep(): boolean {
    const { draft, checked, settingRead, record: before, reading, readingPicked } = store.getState()
    const { program } = checked
    const { setting } = settingRead
    if (!program || !setting || !isCheckOf(checked, draft) || findMismatch(setting, program)) return false
    number += 1
    const own = number
    const points = gridPoints(setting, program)
    const startedAt = world.now()
    const record: SweepRecord = {
      number: own,
      file: draft.file,
      text: draft.text,
      program,
      setting,
      points,
      results: new Array<PointResult | undefined>(points.length).fill(undefined),
      status: 'running',
      startedAt,
      elapsed: 0,
    }
    const kept = readingPicked && before && reading ? sameReading(reading, before, record) : undefined
    store.setState({ record, reading: kept, readingPicked: kept !== undefined })
    world.sweeper.start(
      { number: own, text: draft.text, routine: program.routine.name, setting },
      {
        results(results) {
          change(own, ({ results: known, setting: { charges } }) => {
            const next = [...known]
            for (const result of results)
              next[result.point.index] =
                charges === setting.charges ? result : weighResult(program, setting, result, charges)
            return { results: next, elapsed: world.now() - startedAt }
          })
          if (store.getState().record?.number === own) readOn(false)
        },
        ended(end, crash) {
          change(own, ({ status }) => ({
            status: status === 'running' ? end : status,
            elapsed: world.now() - startedAt,
            ...(crash !== undefined && { crash }),
          }))
          if (store.getState().record?.number === own) readOn(true)
        },
      },
    )
    return true
  }

  return {
    sweep,
    cancel: () => world.sweeper.cancel(),
    weighAgain() {
      const { record, settingRead } = store.getState()
      const charges = settingRead.setting?.charges
      if (!record || !charges) return
      const results = record.results.map(
        result => result && weighResult(record.program, record.setting, result, charges),
      )
      store.setState({ record: { ...record, results, setting: { ...record.setting, charges } } })
      // The point that is read stays: what changed is its price.
      if (!store.getState().reading) readOn(record.status !== 'running')
    },
  }
}

/** The same place in another sweep's grid, where it has one. */
function sameReading(reading: Reading, before: SweepRecord, after: SweepRecord): Reading | undefined {
  const from = before.points[reading.point]
  if (!from) return undefined
  const to = after.points.find(
    ({ width, set, sizes }) =>
      width === from.width && set === from.set && Object.values(sizes).join() === Object.values(from.sizes).join(),
  )
  return to && { point: to.index, trial: Math.min(reading.trial, after.setting.trials - 1) }
}
