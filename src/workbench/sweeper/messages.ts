import type { PointResult } from '../../sweep/result'
import type { Setting } from '../../sweep/setting'

/** What a sweep needs. All of it can be posted: words of exact expressions are BigInts, which structured clones carry. */
export interface SweepRequest {
  /** Tells one sweep from the next; messages about an earlier one are dropped. */
  readonly number: number
  readonly text: string
  /** Name of the routine, of several in the text. */
  readonly routine: string
  readonly setting: Setting
}

export type ToWorker =
  | { readonly kind: 'sweep'; readonly request: SweepRequest }
  | { readonly kind: 'cancel'; readonly number: number }

export type FromWorker =
  /** In the grid's order. */
  | { readonly kind: 'result'; readonly number: number; readonly result: PointResult }
  | { readonly kind: 'ended'; readonly number: number; readonly complete: boolean }
  /** A fault of ours. */
  | { readonly kind: 'crashed'; readonly number: number; readonly message: string }
