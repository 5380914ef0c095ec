import type { Span } from '../../grammar/span'
import type { Program } from '../routine/block'
import type { Words } from '../routine/words'

/** Where a grid point puts a program: everything but the input. Values of sizes are whole numbers from 0. */
export interface Point {
  readonly width: number
  readonly sizes: Readonly<Record<string, number>>
  /** Lets that differ from their defaults. */
  readonly lets: Readonly<Record<string, bigint>>
}

/** A program with its lengths, constants and addresses worked out at a point. */
export interface Binding {
  readonly program: Program
  readonly point: Point
  /** By index of the program's constants; every one below 2^w. */
  readonly constants: readonly bigint[]
  /** By index of the routine's arrays; `base` in words from address 0. */
  readonly arrays: readonly { readonly base: number; readonly length: number }[]
  /** Memory in use is addresses 0 .. words - 1; those below `writable` are read-only. */
  readonly words: number
  readonly writable: number
  /** Contents of fix tables, by array index. */
  readonly tables: ReadonlyMap<number, Words>
  /** Values of every size, let and fix, and of `w`. */
  readonly names: ReadonlyMap<string, bigint>
}

/** Why a point cannot be run: a need fails, an index does not fit a word, memory would not hold it. */
export interface Refusal {
  readonly reason: string
  /** What the reason points at in the source, where it points at anything. */
  readonly span?: Span
}

/** What one run is given. Arrays of role in and inout, and scalars of role in and inout, by name. */
export interface Input {
  readonly arrays: Readonly<Record<string, Words>>
  readonly scalars: Readonly<Record<string, bigint>>
  /** Seeds the junk that out and work memory starts with. */
  readonly junk: number
}

export interface Limits {
  /** Most unit operations of a run, every class counted 1; at most 2^53 - 1. */
  readonly operations: number
  /** Most bytes of memory for words and marks of a run. */
  readonly bytes: number
  /** Most words of frames in flight. */
  readonly frames: number
}

export const DEFAULT_LIMITS: Limits = { operations: 20_000_000_000, bytes: 1 << 30, frames: 1 << 24 }

export type FailureKind =
  | 'index' // outside its array; value: the index
  | 'address' // outside the memory in use, or a store to a read-only array; value: the address
  | 'divide' // division by zero; value: the dividend
  | 'step' // a for step of 0; value: 0
  | 'assert' // value: none (0)
  | 'operation-limit' // value: the limit
  | 'frame-limit' // value: the limit

/** A run that went wrong. It has no counts. */
export interface Failure {
  readonly kind: FailureKind
  readonly span: Span
  readonly value: bigint
  /** A whole sentence: what happened, with line, sizes, w and value. */
  readonly message: string
}

export type RunResult =
  | {
      readonly ok: true
      /** Visits of each block of the program; safe integers. */
      readonly visits: Float64Array
      readonly arrays: Readonly<Record<string, Words>>
      readonly scalars: Readonly<Record<string, bigint>>
      /** Words of work arrays stored to at least once. */
      readonly touched: number
      /** Largest number of words in frames at once. */
      readonly frames: number
    }
  | { readonly ok: false; readonly failure: Failure }
