import { type Count, weighTally } from '../../machine'
import type { InstructionSetName } from '../../machine/machine'
import type { ExpandedUse, Space, Tally } from '../../machine/tally'
import { OPERATION_CLASSES, type OperationClass } from '../../routine/block'
import type { Reading, SweepRecord } from '../store/record'

/** The tally of one instruction set at the reading's place; without one where that point has no count. */
export interface SetTally {
  readonly set: InstructionSetName
  readonly tally?: Tally
  readonly time?: Count
}

/** The tallies at the size, width and trial read, one an instruction set, in the setting's order. */
export function talliesAt(record: SweepRecord, reading: Reading): SetTally[] {
  const { sets, charges } = record.setting
  const block = record.points.length / sets.length
  return sets.map((set, place) => {
    const result = record.results[(reading.point % block) + place * block]
    const tally = result?.status === 'done' ? result.trials[reading.trial]?.tally : undefined
    return tally ? { set, tally, time: weighTally(tally, charges).time } : { set }
  })
}

export interface ClassRow {
  readonly class: OperationClass
  /** By instruction set. */
  readonly counts: readonly (number | undefined)[]
}

/** Operations by class, those that nobody performs left out, the most frequent first. */
export function classRows(tallies: readonly SetTally[]): ClassRow[] {
  const rows = OPERATION_CLASSES.map(each => ({
    class: each,
    counts: tallies.map(({ tally }) => tally?.byClass[each]),
  }))
  const most = ({ counts }: ClassRow) => Math.max(0, ...counts.map(count => count ?? 0))
  return rows.filter(row => most(row) > 0).sort((a, b) => most(b) - most(a))
}

export const SPACE_WORDS: readonly { readonly name: keyof Space; readonly says: string }[] = [
  { name: 'input', says: 'input' },
  { name: 'output', says: 'output' },
  { name: 'working', says: 'working, at their peak' },
  { name: 'declared', says: 'declared as work' },
  { name: 'constants', says: 'constants' },
]

/** `line 14: multiply expanded, 64 uses, 165.5 operations a use`. */
export function expandedWords({ line, class: off, uses, operations }: ExpandedUse): string {
  const mean = operations % uses === 0 ? String(operations / uses) : (operations / uses).toFixed(1)
  return `line ${line}: ${off} expanded, ${uses} ${uses === 1 ? 'use' : 'uses'}, ${mean} operations a use`
}
