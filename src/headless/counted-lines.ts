import type { Charges, Tally } from '../machine'
import { OPERATION_CLASSES } from '../routine'

/** What one source line did in a run. */
export interface CountedLine {
  readonly line: number
  /** Unit operations of all classes. */
  readonly count: number
  /** Those at their charges. */
  readonly time: bigint
}

/** The lines that did anything, in order. */
export function countedLines({ byLine }: Tally, charges: Charges): CountedLine[] {
  return byLine.map(({ line, counts }) => {
    const count = OPERATION_CLASSES.reduce((sum, name) => sum + (counts[name] ?? 0), 0)
    const time = [...OPERATION_CLASSES, 'index' as const].reduce(
      (sum, name) => sum + BigInt(counts[name] ?? 0) * BigInt(charges[name]),
      0n,
    )
    return { line, count, time }
  })
}
