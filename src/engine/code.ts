import { ByteWriter } from './bytes'
import { OP, type ValueType } from './opcode'

/** Code of one WebAssembly function under construction. Labels are heights of the stack of open constructs. */
export class CodeBuilder {
  readonly bytes = new ByteWriter()
  private height = 0

  op(opcode: number): void {
    this.bytes.byte(opcode)
  }

  get(local: number): void {
    this.bytes.byte(OP.localGet)
    this.bytes.unsigned(local)
  }

  set(local: number): void {
    this.bytes.byte(OP.localSet)
    this.bytes.unsigned(local)
  }

  tee(local: number): void {
    this.bytes.byte(OP.localTee)
    this.bytes.unsigned(local)
  }

  i32(value: number): void {
    this.bytes.byte(OP.i32Const)
    this.bytes.signed(value)
  }

  /** A number must fit 32 bits, signed. */
  i64(value: bigint | number): void {
    this.bytes.byte(OP.i64Const)
    if (typeof value === 'number') this.bytes.signed(value)
    else this.bytes.signed64(value)
  }

  /** A load or store: `align` is the logarithm of the alignment, `offset` a constant below 2^32 in bytes. */
  memory(opcode: number, align: number, offset: number): void {
    this.bytes.byte(opcode)
    this.bytes.unsigned(align)
    this.bytes.unsigned(offset)
  }

  call(functionIndex: number): void {
    this.bytes.byte(OP.call)
    this.bytes.unsigned(functionIndex)
  }

  memorySize(): void {
    this.bytes.byte(OP.memorySize)
    this.bytes.byte(0)
  }

  memoryGrow(): void {
    this.bytes.byte(OP.memoryGrow)
    this.bytes.byte(0)
  }

  /** Opens a block, loop or if without a result; gives its label. */
  open(opcode: typeof OP.block | typeof OP.loop | typeof OP.if): number {
    this.bytes.byte(opcode)
    this.bytes.byte(EMPTY_BLOCK_TYPE)
    return this.height++
  }

  end(): void {
    this.bytes.byte(OP.end)
    this.height--
  }

  /** A branch to the end of a block, or to the top of a loop, that is open. */
  branch(opcode: typeof OP.br | typeof OP.brIf, label: number): void {
    this.bytes.byte(opcode)
    this.bytes.unsigned(this.height - 1 - label)
  }

  /** Takes an i32 from the stack and branches to the label of that number; past the last, to the last. */
  branchTable(labels: readonly number[]): void {
    this.bytes.byte(OP.brTable)
    this.bytes.unsigned(labels.length - 1)
    for (const label of labels) this.bytes.unsigned(this.height - 1 - label)
  }
}

/** Hands out the locals of one function and keeps their types. */
export class LocalPool {
  private readonly types: ValueType[] = []

  take(type: ValueType): number {
    this.types.push(type)
    return this.types.length - 1
  }

  /** The declaration of all locals that a function's body starts with. */
  declaration(): ByteWriter {
    const runs: { type: ValueType; count: number }[] = []
    for (const type of this.types) {
      const last = runs[runs.length - 1]
      if (last?.type === type) last.count++
      else runs.push({ type, count: 1 })
    }
    const written = new ByteWriter()
    written.unsigned(runs.length)
    for (const { type, count } of runs) {
      written.unsigned(count)
      written.byte(type)
    }
    return written
  }
}

const EMPTY_BLOCK_TYPE = 0x40
