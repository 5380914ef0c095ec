import type { ChargedClass, OperationClass } from '../routine/block'

/** Words of space of one run. `working` is work words touched + variables + peak frames. */
export interface Space {
  readonly input: number
  readonly output: number
  readonly working: number
  /** Declared length of all work arrays. */
  readonly declared: number
  /** Words of fix words and fix tables. */
  readonly constants: number
}

/** The operations of one run, before any price is put on them. */
export interface Tally {
  /** Operations by class. */
  readonly byClass: Readonly<Record<OperationClass, number>>
  /** Operations by source line and class; lines in order, those without operations left out. */
  readonly byLine: readonly {
    readonly line: number
    readonly counts: Readonly<Partial<Record<ChargedClass, number>>>
  }[]
  /** Base-plus-index accesses. */
  readonly indexed: number
  /** What stood in for classes that are off, by line and class; absent where nothing did. */
  readonly expanded?: readonly ExpandedUse[]
  readonly space: Space
}

/** The expansions on one line for one class: `operations`, of `uses` uses, are part of the line's count. */
export interface ExpandedUse {
  readonly line: number
  readonly class: OperationClass
  readonly uses: number
  readonly operations: number
}
