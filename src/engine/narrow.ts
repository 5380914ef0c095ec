import type { Comparison } from '../../grammar/tree'
import type { BinaryFunction, Constant, Operand, UnaryFunction } from '../routine'
import type { Bounds } from './bounds'
import type { CodeBuilder, LocalPool } from './code'
import { BINARY_OPCODE, I32_OPS, I64_OPS, OP, SIGNED_OPCODE, UNSIGNED_OPCODE, type WordOpcodes } from './opcode'
import type { RunLayout, SlotTable } from './slots'
import { SLOT_BYTES } from './slots'
import type { WordCode } from './word-code'

/** Words of at most 64 bits: one local each, an i32 up to 32 bits and an i64 above. */
export class NarrowWords implements WordCode {
  readonly bytes: number
  readonly logBytes: number
  private readonly ops: WordOpcodes
  private readonly bits: number
  private readonly ones: bigint
  private readonly variables: number[]
  private readonly scratch = new Map<string, number>()
  private readonly lengths: number[] = []
  private readonly constantLocals: number[] = []
  /** By constant: its word, where that is known now. */
  private readonly knownWords: readonly (bigint | undefined)[]

  constructor(
    private readonly width: number,
    constants: readonly Constant[],
    variables: number,
    private readonly code: CodeBuilder,
    private readonly pool: LocalPool,
    private readonly slots: SlotTable,
    private readonly bounds: Bounds,
  ) {
    this.bits = width <= 32 ? 32 : 64
    this.ops = width <= 32 ? I32_OPS : I64_OPS
    this.bytes = this.bits / 8
    this.logBytes = Math.log2(this.bytes)
    this.ones = (1n << BigInt(width)) - 1n
    this.variables = new Array(variables).fill(-1)
    this.knownWords = constants.map(constant => {
      if (constant.kind === 'literal') return constant.value & this.ones
      return constant.kind === 'width' ? BigInt(width) : undefined
    })
  }

  copy(from: readonly Operand[], into: readonly number[]): void {
    for (const operand of from) this.push(operand)
    for (let at = into.length - 1; at >= 0; at--) this.set(into[at]!)
  }

  binary(name: BinaryFunction, into: number, left: Operand, right: Operand): void {
    if (name === 'shift-left' || name === 'shift-right') this.shift(name === 'shift-left', left, right)
    else {
      this.push(left)
      this.push(right)
      this.code.op(this.ops[BINARY_OPCODE[name]])
      if (this.outgrows(name, left, right)) this.mask()
    }
    this.set(into)
  }

  choose(into: number, test: number, yes: Operand, no: Operand): void {
    this.push(yes)
    this.push(no)
    this.code.get(test)
    this.code.op(OP.select)
    this.set(into)
  }

  unary(name: UnaryFunction, into: number, operand: Operand): void {
    const { code, ops } = this
    switch (name) {
      case 'negate':
        this.constant(0n)
        this.push(operand)
        code.op(ops.sub)
        this.mask()
        break
      case 'complement':
        this.push(operand)
        this.constant(this.ones)
        code.op(ops.xor)
        break
      case 'popcount':
        this.push(operand)
        code.op(ops.popcnt)
        break
      case 'lsb':
        this.push(operand)
        // A bit above the word ends the count of zeros at w.
        if (this.width < this.bits) {
          this.constant(1n << BigInt(this.width))
          code.op(ops.or)
        }
        code.op(ops.ctz)
        break
      case 'msb':
        this.constant(BigInt(this.bits - 1))
        this.push(operand)
        code.op(ops.clz)
        code.op(ops.sub)
        this.constant(BigInt(this.width))
        this.push(operand)
        code.op(ops.eqz)
        code.op(OP.i32Eqz)
        code.op(OP.select)
        break
    }
    this.set(into)
  }

  product(high: number, low: number, left: Operand, right: Operand): void {
    if (this.bits === 32) this.productInOne(high, low, left, right)
    else this.productByHalves(high, low, left, right)
  }

  compare(operator: Comparison, signed: boolean, left: Operand, right: Operand): void {
    const ordered = operator !== '=' && operator !== '!='
    for (const operand of [left, right]) {
      this.push(operand)
      // Shifted up, the word's sign bit is the local's.
      if (signed && ordered && this.width < this.bits) {
        this.constant(BigInt(this.bits - this.width))
        this.code.op(this.ops.shl)
      }
    }
    this.code.op(this.ops[(signed ? SIGNED_OPCODE : UNSIGNED_OPCODE)[operator]])
  }

  zero(operand: Operand): void {
    this.push(operand)
    this.code.op(this.ops.eqz)
  }

  outsideArray(index: Operand, array: number): void {
    this.push(index)
    this.lengths[array] ??= this.slots.parameter(`length ${array}`, this.ops, run =>
      BigInt(run.binding.arrays[array]!.length),
    )
    this.code.get(this.lengths[array]!)
    this.code.op(this.ops.geU)
  }

  outsideMemory(base: Operand, index: Operand | undefined, store: boolean): void {
    const { code, ops } = this
    this.push(base)
    if (index) {
      this.push(index)
      code.op(ops.add)
      this.mask()
    }
    code.tee(this.local('address', ops))
    if (store) {
      this.pushParameter('writable', run => run.binding.writable)
      code.op(ops.sub)
      this.pushParameter('writable words', run => run.binding.words - run.binding.writable)
    } else {
      this.pushParameter('words', run => run.binding.words)
    }
    code.op(ops.geU)
  }

  pushAddress(fromWritable: boolean): void {
    const { code, ops } = this
    code.get(this.local('address', ops))
    if (fromWritable) {
      this.pushParameter('writable', run => run.binding.writable)
      code.op(ops.sub)
    }
    this.toI32()
  }

  knownIndex(index: Operand): number | undefined {
    const known = this.known(index)
    return known !== undefined && known < MOST_KNOWN_INDEX ? Number(known) : undefined
  }

  pushIndex(index: Operand): void {
    this.push(index)
    this.toI32()
  }

  load(into: number, offset: number): void {
    this.code.memory(this.ops.load, this.logBytes, offset)
    this.set(into)
  }

  store(value: Operand, offset: number): void {
    this.push(value)
    this.code.memory(this.ops.store, this.logBytes, offset)
  }

  bound(loop: number, variable: number, down: boolean): void {
    const { code, ops } = this
    const passes = this.local('passes', I64_OPS)
    const at = this.variable(variable)
    const push = () => {
      code.get(at)
      if (this.bits === 32) code.op(OP.i64ExtendI32U)
    }
    code.get(at)
    code.set(this.local(`start ${loop}`, ops))
    // The variable's last word: where it stands, and passes - 1 on, up to the end of the word.
    code.i64(1)
    code.op(I64_OPS.sub)
    code.set(passes)
    if (down) {
      push()
      code.get(passes)
      code.op(I64_OPS.sub)
      code.i64(0)
      push()
      code.get(passes)
      code.op(I64_OPS.geU)
      code.op(OP.select)
    } else {
      push()
      code.get(passes)
      code.op(I64_OPS.add)
      code.i64(this.ones)
      code.get(passes)
      code.i64(this.ones)
      push()
      code.op(I64_OPS.sub)
      code.op(I64_OPS.leU)
      code.op(OP.select)
    }
    this.toWord()
    code.set(this.local(`bound ${loop}`, ops))
  }

  pastBound(loop: number, variable: number, down: boolean): void {
    this.code.get(this.variable(variable))
    this.code.get(this.local(`bound ${loop}`, this.ops))
    this.code.op(down ? this.ops.ltU : this.ops.gtU)
  }

  pushDistance(loop: number, variable: number, down: boolean): void {
    const { code, ops } = this
    const start = this.local(`start ${loop}`, ops)
    const at = this.variable(variable)
    code.get(down ? start : at)
    code.get(down ? at : start)
    code.op(ops.sub)
    this.mask()
    if (this.bits === 32) code.op(OP.i64ExtendI32U)
  }

  writeSlot(slot: number, value: Operand | 'address'): void {
    this.code.i32(0)
    if (value === 'address') this.code.get(this.local('address', this.ops))
    else this.push(value)
    if (this.bits === 32) this.code.op(OP.i64ExtendI32U)
    this.code.memory(I64_OPS.store, 3, slot * SLOT_BYTES)
  }

  readAtEntry(variable: number, value: (run: RunLayout) => bigint): void {
    this.slots.read(this.variable(variable), this.ops, value)
  }

  /** The factors fit 32 bits, so the whole product fits 64. */
  private productInOne(high: number, low: number, left: Operand, right: Operand): void {
    const { code } = this
    const whole = this.local('product', I64_OPS)
    for (const operand of [left, right]) {
      this.push(operand)
      code.op(OP.i64ExtendI32U)
    }
    code.op(I64_OPS.mul)
    code.tee(whole)
    code.i64(this.width)
    code.op(I64_OPS.shrU)
    code.op(OP.i32WrapI64)
    this.set(high)
    code.get(whole)
    code.op(OP.i32WrapI64)
    this.mask()
    this.set(low)
  }

  /**
   * By halves of h = ceil(w/2) bits: with x = x1 2^h + x0 and likewise y, no partial sum outgrows 64 bits, and the
   * top part counts units of 2^2h, which is 2^w, or 2^(w+1) for odd w.
   */
  private productByHalves(high: number, low: number, left: Operand, right: Operand): void {
    const { code } = this
    const x = this.local('x', I64_OPS)
    const y = this.local('y', I64_OPS)
    const x0 = this.local('x0', I64_OPS)
    const x1 = this.local('x1', I64_OPS)
    const y0 = this.local('y0', I64_OPS)
    const y1 = this.local('y1', I64_OPS)
    const inner = this.local('inner', I64_OPS)
    const outer = this.local('outer', I64_OPS)
    this.split(left, x, x0, x1)
    this.split(right, y, y0, y1)
    // x holds x0 y0 from here on.
    this.multiply(x0, y0)
    code.set(x)
    this.multiply(x1, y0)
    this.topHalf(x)
    code.op(I64_OPS.add)
    code.set(inner)
    this.multiply(x0, y1)
    this.bottomHalf(inner)
    code.op(I64_OPS.add)
    code.set(outer)
    // The bottom 2h bits.
    code.get(outer)
    code.i64(this.half)
    code.op(I64_OPS.shl)
    this.bottomHalf(x)
    code.op(I64_OPS.or)
    code.set(x)
    // The top.
    this.multiply(x1, y1)
    this.topHalf(inner)
    code.op(I64_OPS.add)
    this.topHalf(outer)
    code.op(I64_OPS.add)
    if (this.width % 2 === 1) {
      code.i64(1)
      code.op(I64_OPS.shl)
      code.get(x)
      code.i64(this.width)
      code.op(I64_OPS.shrU)
      code.i64(1)
      code.op(I64_OPS.and)
      code.op(I64_OPS.or)
    }
    this.set(high)
    code.get(x)
    this.mask()
    this.set(low)
  }

  /** Bits of the bottom half of a word above 32 bits. */
  private get half(): number {
    return Math.ceil(this.width / 2)
  }

  private split(operand: Operand, whole: number, bottom: number, top: number): void {
    this.push(operand)
    this.code.set(whole)
    this.bottomHalf(whole)
    this.code.set(bottom)
    this.topHalf(whole)
    this.code.set(top)
  }

  private multiply(a: number, b: number): void {
    this.code.get(a)
    this.code.get(b)
    this.code.op(I64_OPS.mul)
  }

  private topHalf(local: number): void {
    this.code.get(local)
    this.code.i64(this.half)
    this.code.op(I64_OPS.shrU)
  }

  private bottomHalf(local: number): void {
    this.code.get(local)
    this.code.i64((1n << BigInt(this.half)) - 1n)
    this.code.op(I64_OPS.and)
  }

  /** Whether a result may have bits past the word. */
  private outgrows(name: BinaryFunction, left: Operand, right: Operand): boolean {
    if (this.width === this.bits) return false
    switch (name) {
      case 'subtract':
        return true
      case 'add':
        return this.bounds.most(left) + this.bounds.most(right) > this.ones
      case 'multiply':
        return this.bounds.most(left) * this.bounds.most(right) > this.ones
      default:
        return false
    }
  }

  private shift(left: boolean, value: Operand, amount: Operand): void {
    const { code, ops } = this
    const known = this.known(amount)
    if (known !== undefined && known >= BigInt(this.width)) {
      this.constant(0n)
      return
    }
    this.push(value)
    this.push(amount)
    code.op(left ? ops.shl : ops.shrU)
    // The machine shifts by the amount modulo 32 or 64; between w and that, nothing of the word is left but what the
    // mask takes.
    if (known === undefined && this.bounds.most(amount) >= BigInt(this.bits)) {
      this.constant(0n)
      this.push(amount)
      this.constant(BigInt(this.bits))
      code.op(ops.ltU)
      code.op(OP.select)
    }
    if (left) this.mask()
  }

  private known(operand: Operand): bigint | undefined {
    return operand.kind === 'variable' ? undefined : this.knownWords[operand.constant]
  }

  private push(operand: Operand): void {
    if (operand.kind === 'variable') {
      this.code.get(this.variable(operand.variable))
      return
    }
    const known = this.known(operand)
    if (known !== undefined) this.constant(known)
    else {
      const at = operand.constant
      this.constantLocals[at] ??= this.slots.parameter(
        `constant ${at}`,
        this.ops,
        run => run.binding.constants[at]!,
      )
      this.code.get(this.constantLocals[at]!)
    }
  }

  private pushParameter(key: string, value: (run: RunLayout) => number): void {
    this.code.get(this.slots.parameter(key, this.ops, run => BigInt(value(run))))
  }

  private constant(value: bigint): void {
    if (this.bits === 32) this.code.i32(Number(BigInt.asIntN(32, value)))
    else this.code.i64(value)
  }

  private set(variable: number): void {
    this.code.set(this.variable(variable))
  }

  private mask(): void {
    if (this.width === this.bits) return
    this.constant(this.ones)
    this.code.op(this.ops.and)
  }

  /** Takes an i64 that a word holds. */
  private toWord(): void {
    if (this.bits === 32) this.code.op(OP.i32WrapI64)
  }

  private toI32(): void {
    if (this.bits === 64) this.code.op(OP.i32WrapI64)
  }

  private variable(variable: number): number {
    let local = this.variables[variable]!
    if (local === -1) {
      local = this.pool.take(this.ops.type)
      this.variables[variable] = local
    }
    return local
  }

  /** A local for intermediate values; each name goes with one type. */
  private local(name: string, { type }: WordOpcodes): number {
    let local = this.scratch.get(name)
    if (local === undefined) {
      local = this.pool.take(type)
      this.scratch.set(name, local)
    }
    return local
  }
}

/** Indices below this are folded into an access's constant offset. */
const MOST_KNOWN_INDEX = 1n << 24n
