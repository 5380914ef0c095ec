import { type ChargedClass, OPERATION_CLASSES, type OperationClass } from '../routine'
import type { Charges } from './machine'
import type { Tally } from './tally'

/** A whole number; a bigint where it passes 2^53. */
export type Count = number | bigint

/** A tally under a table of charges. `count` is operations, `time` what they are charged. */
export interface WeighedTally {
  readonly time: Count
  readonly byClass: Readonly<Record<OperationClass, { readonly count: number; readonly time: Count }>>
  readonly byLine: readonly { readonly line: number; readonly count: number; readonly time: Count }[]
}

/** Prices a tally. Base-plus-index accesses are no operations; they are priced by `charges.index`. */
export function weighTally(tally: Tally, charges: Charges): WeighedTally {
  const indexTime = price(tally.indexed, charges.index)
  const byClass = Object.fromEntries(
    OPERATION_CLASSES.map(each => [
      each,
      { count: tally.byClass[each], time: price(tally.byClass[each], charges[each]) },
    ]),
  ) as unknown as WeighedTally['byClass']
  const time = OPERATION_CLASSES.reduce<Count>((sum, each) => addCounts(sum, byClass[each].time), indexTime)
  const byLine = tally.byLine.map(({ line, counts }) => {
    let operations = 0
    let lineTime: Count = 0
    for (const [charged, count] of Object.entries(counts) as [ChargedClass, number][]) {
      if (charged !== 'index') operations += count
      lineTime = addCounts(lineTime, price(count, charges[charged]))
    }
    return { line, count: operations, time: lineTime }
  })
  return { time, byClass, byLine }
}

function price(count: number, charge: number): Count {
  const quick = count * charge
  return Number.isSafeInteger(quick) ? quick : BigInt(count) * BigInt(charge)
}

function addCounts(left: Count, right: Count): Count {
  if (typeof left === 'number' && typeof right === 'number') {
    const quick = left + right
    if (Number.isSafeInteger(quick)) return quick
  }
  return BigInt(left) + BigInt(right)
}
