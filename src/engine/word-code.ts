import type { Comparison } from '../../grammar/tree'
import type { BinaryFunction, Operand, UnaryFunction } from '../routine'
import type { RunLayout } from './slots'

/**
 * How words of one width live in locals and memory, and what code works on them: the one place that knows. Operands
 * and variables are numbered throughout the flow graph. Every word in a variable is below 2^w, before and after.
 */
export interface WordCode {
  /** Bytes of a word in memory, and their logarithm. */
  readonly bytes: number
  readonly logBytes: number
  /** All operands are read before a variable is written. */
  copy(from: readonly Operand[], into: readonly number[]): void
  /** The variable becomes the first word where an i32 local is not 0, else the second. */
  choose(into: number, test: number, yes: Operand, no: Operand): void
  /** The caller has made sure that a divisor is not 0. */
  binary(name: BinaryFunction, into: number, left: Operand, right: Operand): void
  unary(name: UnaryFunction, into: number, operand: Operand): void
  product(high: number, low: number, left: Operand, right: Operand): void
  /** Leaves an i32 that is 1 where the comparison holds, else 0. */
  compare(operator: Comparison, signed: boolean, left: Operand, right: Operand): void
  /** Leaves an i32 that is not 0 where the word is 0. */
  zero(operand: Operand): void
  /** Leaves an i32 that is 1 where an index is not below the length of an array. */
  outsideArray(index: Operand, array: number): void
  /**
   * Works out base + index mod 2^w and leaves an i32 that is 1 where no word in use has that address, or, for a
   * store, none that may be written. The address stays for `pushAddress`.
   */
  outsideMemory(base: Operand, index: Operand | undefined, store: boolean): void
  /** Leaves the address last worked out: as an i32 count of words from address 0, or from the first writable one. */
  pushAddress(fromWritable: boolean): void
  /** The index of an element if it is known now and small. */
  knownIndex(index: Operand): number | undefined
  /** Leaves an index that is inside its array as an i32. */
  pushIndex(index: Operand): void
  /** Takes an i32 address in bytes and reads the word there, `offset` bytes on. */
  load(into: number, offset: number): void
  /** Takes an i32 address in bytes and writes a word there, `offset` bytes on. */
  store(value: Operand, offset: number): void
  /**
   * Bounds the variable of a counted loop: at most as many passes from where it stands as an i64 that is taken from the
   * stack, which is at least 1.
   */
  bound(loop: number, variable: number, down: boolean): void
  /** Leaves an i32 that is 1 where the variable is past its bound. */
  pastBound(loop: number, variable: number, down: boolean): void
  /** Leaves, as an i64, how far the variable has come since it was bounded. */
  pushDistance(loop: number, variable: number, down: boolean): void
  /** Puts a word, or the address last worked out, where a failure's value is read. */
  writeSlot(slot: number, value: Operand | 'address'): void
  /** Reads a variable at the entry. */
  readAtEntry(variable: number, value: (run: RunLayout) => bigint): void
}
