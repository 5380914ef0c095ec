import type { Exact } from '../../grammar/tree'
import type { FeedPattern } from '../feed/pattern'
import type { Charges, InstructionSetName, OffPolicy } from '../machine/machine'

export { FEED_PATTERNS, type FeedPattern } from '../feed/pattern'

/** Sizes that a grid visits, as the user wrote them and as they came out; sorted, without repeats. */
export interface SizeRange {
  /** `2^6..2^16`, `100..1000 by 100`, `8, 16, 100`. */
  readonly text: string
  readonly values: readonly number[]
}

/** One width of the grid: a number, or an expression in the sizes (`2*lg(n)`) taken up to the next whole number. */
export type WidthChoice =
  | { readonly kind: 'fixed'; readonly width: number }
  | { readonly kind: 'tied'; readonly text: string; readonly expression: Exact }

/** Everything that fixes a result besides the routine. A plain value: it survives JSON and workers (BigInts aside). */
export interface Setting {
  /** By name of size. A size that is missing takes the values of the routine's first, point by point. */
  readonly sizes: Readonly<Record<string, SizeRange>>
  readonly widths: readonly WidthChoice[]
  /** Lets that differ from their defaults. */
  readonly lets: Readonly<Record<string, bigint>>
  readonly sets: readonly InstructionSetName[]
  readonly off: OffPolicy
  readonly charges: Charges
  readonly pattern: FeedPattern
  readonly trials: number
  /** The master seed; each trial's seed follows from it and the point's coordinates. */
  readonly seed: number
}
