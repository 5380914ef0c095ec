import type { InstructionSetName } from '../machine/machine'
import type { Tally } from '../machine/tally'
import type { Setting } from './setting'

/** One place of the grid. */
export interface GridPoint {
  /** Place in the grid's order: sets outermost, then widths, then sizes. Also its key. */
  readonly index: number
  readonly sizes: Readonly<Record<string, number>>
  /** The size the grid sweeps (the routine's first), for plots; 0 for a routine without sizes. */
  readonly n: number
  readonly width: number
  /** Place in `setting.widths`: series and marker of a plot. */
  readonly widthChoice: number
  readonly set: InstructionSetName
}

/** A claim or a check at one point. Figures are exact, as text: whole numbers, or a rational `p/q`, or a decimal with `...` for a real. */
export interface Verdict {
  readonly kind: 'time' | 'space' | 'check'
  /** Place among the routine's claims, or among its checks. */
  readonly place: number
  readonly line: number
  /** `undecided`: it could not be worked out; `reason` says why. */
  readonly outcome: 'holds' | 'broken' | 'undecided'
  /** Of a claim: the count and the bound; over trials, those with the least margin. */
  readonly count?: number
  readonly bound?: string
  /** Nearest double of count / bound, for plots alone; absent where the bound is 0. */
  readonly ratio?: number
  /** The first trial that breaks it, from 0. */
  readonly trial?: number
  readonly reason?: string
}

export interface TrialTally {
  readonly seed: number
  readonly tally: Tally
}

export type PointResult =
  | {
      readonly status: 'done'
      readonly point: GridPoint
      readonly trials: readonly TrialTally[]
      readonly verdicts: readonly Verdict[]
    }
  /** Not run: `reason` says why, `line` where the source says so (a need, a use of a class that is off). */
  | { readonly status: 'refused'; readonly point: GridPoint; readonly reason: string; readonly line?: number }
  /** Run, and went wrong. `seed` is the trial's. */
  | {
      readonly status: 'failed'
      readonly point: GridPoint
      readonly reason: string
      readonly line?: number
      readonly seed: number
    }

/** All results of one setting, in the grid's order. A plain value. */
export interface SweepResult {
  readonly setting: Setting
  /** The routine's name, and the text it was read from. */
  readonly routine: string
  readonly text: string
  readonly points: readonly PointResult[]
  /** False where the sweep was stopped before its last point. */
  readonly complete: boolean
}
