import type { Binding, Input, Limits } from '../machine'
import type { CodeBuilder, LocalPool } from './code'
import { I32_OPS, type WordOpcodes } from './opcode'

/** Bytes of one slot. */
export const SLOT_BYTES = 8

/** Where a run's parts stand in memory, in bytes. */
export interface RunLayout {
  readonly binding: Binding
  readonly input: Input
  readonly limits: Limits
  /** One byte for each writable word. */
  readonly marks: number
  /** The stack of frames, up to the end of memory. */
  readonly stack: number
  readonly end: number
}

export interface Parameter {
  readonly slot: number
  readonly value: (layout: RunLayout) => bigint
}

/**
 * The head of memory: slots of eight bytes through which a run is given what its point fixes, and gives back its
 * counts. Parameters are read into locals once, at the entry.
 */
export class SlotTable {
  readonly parameters: Parameter[] = []
  private readonly locals = new Map<string, number>()
  private readonly reads: { slot: number; local: number; ops: WordOpcodes }[] = []
  private used = 0

  constructor(private readonly pool: LocalPool) {}

  /** Slots handed out so far. */
  get count(): number {
    return this.used
  }

  /** A run of slots. */
  take(count: number): number {
    const first = this.used
    this.used += count
    return first
  }

  /** The local that holds a parameter; the same key gives the same local. */
  parameter(key: string, ops: WordOpcodes, value: Parameter['value']): number {
    let local = this.locals.get(key)
    if (local === undefined) {
      local = this.pool.take(ops.type)
      this.locals.set(key, local)
      this.read(local, ops, value)
    }
    return local
  }

  /** Reads a parameter into a local that is there already. */
  read(local: number, ops: WordOpcodes, value: Parameter['value']): void {
    const slot = this.take(1)
    this.parameters.push({ slot, value })
    this.reads.push({ slot, local, ops })
  }

  /** The code that reads all parameters. */
  writeReads(code: CodeBuilder): void {
    for (const { slot, local, ops } of this.reads) {
      code.i32(0)
      code.memory(ops.load, ops === I32_OPS ? 2 : 3, slot * SLOT_BYTES)
      code.set(local)
    }
  }

  /** Code that puts a local into a slot. */
  write(code: CodeBuilder, slot: number, ops: WordOpcodes, pushValue: () => void): void {
    code.i32(0)
    pushValue()
    code.memory(ops.store, ops === I32_OPS ? 2 : 3, slot * SLOT_BYTES)
  }
}
