import type { Operand, Operation, Program, Terminator } from '../routine'
import type { Bounds } from './bounds'
import { ChoiceCode } from './choice-code'
import type { CodeBuilder, LocalPool } from './code'
import type { CountedLoop } from './counted'
import { type FailureSite, FailureSites } from './failure-site'
import { type FlowGraph, type Step, shiftOperand } from './flow'
import { JUDGE_FUNCTION } from './module'
import { I32, I32_OPS, I64_OPS, OP } from './opcode'
import type { SlotTable } from './slots'
import type { WordCode } from './word-code'

type Of<K extends Step['kind']> = Extract<Step, { kind: K }>

/** Code of what nodes do: operations with their checks, checkpoints, frames. */
export class StepCode {
  readonly sites = new FailureSites()
  /** Where a failing run leaves its value. */
  readonly valueSlot: number
  /** Where the first variable that an assert reads waits for the judge. */
  readonly assertSlot: number
  private readonly marked: boolean
  private fuelLocal: number | undefined
  private made: number | undefined
  private readonly selectorLocals: number[] = []
  private readonly passes: number[] = []
  readonly choices: ChoiceCode
  private readonly bases: number[] = []
  private frames: { count: number; peak: number; sum: number } | undefined
  private stack: { pointer: number; end: number } | undefined

  constructor(
    private readonly program: Program,
    private readonly graph: FlowGraph,
    private readonly words: WordCode,
    private readonly code: CodeBuilder,
    private readonly pool: LocalPool,
    private readonly slots: SlotTable,
    private readonly bounds: Bounds,
    /** Bytes from address 0 of the module's memory to the first word. */
    private readonly head: number,
    /** Whether stores to work memory are marked. */
    marked: boolean,
  ) {
    this.valueSlot = slots.take(1)
    this.choices = new ChoiceCode(
      program,
      graph,
      words,
      code,
      pool,
      (test, shift) => this.pushTest(test, shift),
      (operation, block) => this.operation(operation, 0, block),
    )
    this.assertSlot = slots.take(mostReads(program))
    this.marked = marked && program.routine.arrays.some(array => array.role === 'work')
    if (graph.stacked) {
      this.stack = { pointer: pool.take(I32), end: pool.take(I32) }
      slots.read(this.stack.pointer, I32_OPS, run => BigInt(run.stack))
      slots.read(this.stack.end, I32_OPS, run => BigInt(run.end))
    }
  }

  emit(node: number, place: number): void {
    const step = this.graph.nodes[node]!.steps[place]!
    switch (step.kind) {
      case 'block': {
        const { operations, checkpoint } = this.program.blocks[step.block]!
        if (checkpoint !== undefined && !step.charged) this.checkpoint(step.block, checkpoint)
        for (let at = 0; at < operations.length; at++) {
          this.bounds.moveTo(node, place, at)
          this.operation(operations[at]!, step.shift, step.block)
        }
        break
      }
      case 'choose':
        this.bounds.moveTo(node, place, 0)
        this.choices.emit(step)
        break
      case 'copy':
        this.words.copy(step.from, step.into)
        break
      case 'frame':
        this.frame(step)
        break
      case 'unframe': {
        const { count } = this.frameLocals()
        this.code.get(count)
        this.code.i64(step.words)
        this.code.op(I64_OPS.sub)
        this.code.set(count)
        break
      }
      case 'push':
        this.push(step)
        break
      case 'pull':
        this.pull(step.variables)
        break
      case 'begin':
        this.begin(this.graph.counted[step.loop]!, step.loop)
        break
      case 'settle':
        this.settle(this.graph.counted[step.loop]!, step)
        break
      case 'select':
        this.code.i32(step.value)
        this.code.set(this.selector(step.selector))
        break
    }
  }

  /** Leaves the number of the target of a dispatch as an i32. */
  pushSelector(selector: number | 'stack'): void {
    if (selector !== 'stack') {
      this.code.get(this.selector(selector))
      return
    }
    const { pointer } = this.stack!
    this.code.get(pointer)
    this.code.i32(this.words.bytes)
    this.code.op(I32_OPS.sub)
    this.code.tee(pointer)
    this.code.memory(I32_OPS.load, 2, 0)
  }

  /** Leaves the test of a branch as an i32. */
  pushTest(test: Extract<Terminator, { kind: 'branch' }>, shift: number): void {
    this.words.compare(test.operator, test.signed, shiftOperand(test.left, shift), shiftOperand(test.right, shift))
  }

  /** Leaves an i32 that is 1 where the variable of a counted loop is past its bound. */
  pushPast(loop: number): void {
    const { variable, down } = this.graph.counted[loop]!
    this.words.pastBound(loop, variable, down)
  }

  /** The local that counts the passes of a counted loop. */
  passesOf(loop: number): number {
    this.passes[loop] ??= this.pool.take(I64_OPS.type)
    return this.passes[loop]!
  }

  /** Puts the peak of words in frames where the run's caller reads it; undefined where no frame's size varies. */
  writePeak(): number | undefined {
    const { frames } = this
    if (!frames) return undefined
    const slot = this.slots.take(1)
    this.slots.write(this.code, slot, I64_OPS, () => this.code.get(frames.peak))
    return slot
  }

  private checkpoint(block: number, weight: number): void {
    const { code } = this
    const fuel = this.fuel()
    code.get(fuel)
    code.i64(weight)
    code.op(I64_OPS.sub)
    code.tee(fuel)
    code.i64(0)
    code.op(I64_OPS.ltS)
    this.failIf({ kind: 'operation-limit', block })
  }

  private begin({ variable, down, weight, block }: CountedLoop, loop: number): void {
    const { code } = this
    const fuel = this.fuel()
    code.get(fuel)
    code.i64(weight)
    code.op(I64_OPS.ltS)
    this.failIf({ kind: 'operation-limit', block })
    // A power of two for the weight: fewer passes than there may be, and no division. The guard comes back for more.
    const shift = Math.ceil(Math.log2(weight))
    code.get(fuel)
    code.i64(shift)
    code.op(I64_OPS.shrU)
    if (weight > 1) {
      code.i64(1)
      code.get(fuel)
      code.i64(1n << BigInt(shift))
      code.op(I64_OPS.geS)
      code.op(OP.select)
    }
    this.words.bound(loop, variable, down)
  }

  private settle({ variable, down, weight }: CountedLoop, { loop, passes }: Of<'settle'>): void {
    const { code } = this
    const fuel = this.fuel()
    const total = this.passesOf(loop)
    const made = this.madeLocal()
    this.words.pushDistance(loop, variable, down)
    if (passes > 0) {
      code.i64(passes)
      code.op(I64_OPS.add)
    }
    code.tee(made)
    code.get(total)
    code.op(I64_OPS.add)
    code.set(total)
    code.get(fuel)
    code.get(made)
    if (weight > 1) {
      code.i64(weight)
      code.op(I64_OPS.mul)
    }
    code.op(I64_OPS.sub)
    code.set(fuel)
  }

  private madeLocal(): number {
    this.made ??= this.pool.take(I64_OPS.type)
    return this.made
  }

  private fuel(): number {
    if (this.fuelLocal === undefined) {
      this.fuelLocal = this.slots.parameter('operations', I64_OPS, run => BigInt(run.limits.operations))
    }
    return this.fuelLocal
  }

  private operation(operation: Operation, shift: number, block: number): void {
    const { words } = this
    switch (operation.kind) {
      case 'binary': {
        const left = shiftOperand(operation.left, shift)
        const right = shiftOperand(operation.right, shift)
        if (operation.function === 'divide' || operation.function === 'modulo') {
          words.zero(right)
          this.failIf({ kind: 'divide', block, operation }, left)
        }
        words.binary(operation.function, operation.into + shift, left, right)
        break
      }
      case 'unary':
        words.unary(operation.function, operation.into + shift, shiftOperand(operation.operand, shift))
        break
      case 'move':
        words.copy([shiftOperand(operation.from, shift)], [operation.into + shift])
        break
      case 'product':
        words.product(
          operation.high + shift,
          operation.low + shift,
          shiftOperand(operation.left, shift),
          shiftOperand(operation.right, shift),
        )
        break
      case 'load': {
        const index = shiftOperand(operation.index, shift)
        words.outsideArray(index, operation.array)
        this.failIf({ kind: 'index', block, operation }, index)
        words.load(operation.into + shift, this.pushElement(index, operation.array))
        break
      }
      case 'store': {
        const index = shiftOperand(operation.index, shift)
        words.outsideArray(index, operation.array)
        this.failIf({ kind: 'index', block, operation }, index)
        words.store(shiftOperand(operation.value, shift), this.pushElement(index, operation.array))
        if (this.marked && this.program.routine.arrays[operation.array]!.role === 'work')
          this.markElement(index, operation.array)
        break
      }
      case 'load-at': {
        words.outsideMemory(
          shiftOperand(operation.base, shift),
          operation.index && shiftOperand(operation.index, shift),
          false,
        )
        this.failIf({ kind: 'address', block, operation }, 'address')
        this.pushPlace()
        words.load(operation.into + shift, this.head)
        break
      }
      case 'store-at': {
        words.outsideMemory(
          shiftOperand(operation.base, shift),
          operation.index && shiftOperand(operation.index, shift),
          true,
        )
        this.failIf({ kind: 'address', block, operation }, 'address')
        this.pushPlace()
        words.store(shiftOperand(operation.value, shift), this.head)
        if (this.marked) this.markPlace()
        break
      }
      case 'check-step': {
        const operand = shiftOperand(operation.operand, shift)
        words.zero(operand)
        this.failIf({ kind: 'step', block, operation }, operand)
        break
      }
      case 'assert':
        this.assert(operation, shift, block)
        break
    }
  }

  private assert(operation: Extract<Operation, { kind: 'assert' }>, shift: number, block: number): void {
    const { code } = this
    let slot = this.assertSlot
    for (const variable of operation.reads.values()) {
      this.words.writeSlot(slot++, { kind: 'variable', variable: variable + shift })
    }
    code.i32(this.sites.add({ kind: 'assert', block, operation }))
    code.call(JUDGE_FUNCTION)
    code.op(I32_OPS.eqz)
    this.failIf({ kind: 'assert', block, operation })
  }

  /** Takes an i32; where it is not 0, the run ends with this failure. */
  private failIf(site: FailureSite, value?: Operand | 'address'): void {
    const { code } = this
    code.open(OP.if)
    if (value !== undefined) this.words.writeSlot(this.valueSlot, value)
    code.i32(this.sites.add(site) + 1)
    code.op(OP.return)
    code.end()
  }

  /** Leaves the address of an element in bytes; gives the constant to add to it. */
  private pushElement(index: Operand, array: number): number {
    const { code, words } = this
    const known = words.knownIndex(index)
    if (known !== undefined) {
      if (array === 0) code.i32(0)
      else code.get(this.base(array))
      return this.head + known * words.bytes
    }
    words.pushIndex(index)
    code.i32(words.logBytes)
    code.op(I32_OPS.shl)
    // The first array stands at address 0.
    if (array > 0) {
      code.get(this.base(array))
      code.op(I32_OPS.add)
    }
    return this.head
  }

  /** The local that holds where an array begins, in bytes from address 0. */
  private base(array: number): number {
    const { bytes } = this.words
    this.bases[array] ??= this.slots.parameter(`base ${array}`, I32_OPS, run =>
      BigInt(run.binding.arrays[array]!.base * bytes),
    )
    return this.bases[array]!
  }

  /** Leaves the address last worked out, in bytes. */
  private pushPlace(): void {
    this.words.pushAddress(false)
    this.code.i32(this.words.logBytes)
    this.code.op(I32_OPS.shl)
  }

  private markElement(index: Operand, array: number): void {
    const { code } = this
    this.words.pushIndex(index)
    code.get(
      this.slots.parameter(`marks ${array}`, I32_OPS, run =>
        BigInt(run.marks + run.binding.arrays[array]!.base - run.binding.writable),
      ),
    )
    code.op(I32_OPS.add)
    code.i32(1)
    code.memory(OP.i32Store8, 0, 0)
  }

  private markPlace(): void {
    const { code } = this
    this.words.pushAddress(true)
    code.get(this.slots.parameter('marks', I32_OPS, run => BigInt(run.marks)))
    code.op(I32_OPS.add)
    code.i32(1)
    code.memory(OP.i32Store8, 0, 0)
  }

  private frame({ words, base, kept, block }: Of<'frame'>): void {
    const { code } = this
    const limit = this.slots.parameter('frames', I64_OPS, run => BigInt(run.limits.frames))
    if (!base && !kept) {
      // The sum is known now; whether the limit is lower is all there is to see.
      code.get(limit)
      code.i64(words)
      code.op(I64_OPS.ltS)
      this.failIf({ kind: 'frame-limit', block })
      return
    }
    const { count, peak, sum } = this.frameLocals()
    if (base) code.get(count)
    code.i64(words)
    if (base) code.op(I64_OPS.add)
    code.tee(sum)
    code.get(limit)
    code.op(I64_OPS.gtS)
    this.failIf({ kind: 'frame-limit', block })
    code.get(sum)
    code.get(peak)
    code.get(sum)
    code.get(peak)
    code.op(I64_OPS.gtS)
    code.op(OP.select)
    code.set(peak)
    if (!kept) return
    code.get(sum)
    code.set(count)
  }

  private frameLocals() {
    this.frames ??= {
      count: this.pool.take(I64_OPS.type),
      peak: this.pool.take(I64_OPS.type),
      sum: this.pool.take(I64_OPS.type),
    }
    return this.frames
  }

  private push({ variables, place, block }: Of<'push'>): void {
    const { code, words } = this
    const { pointer, end } = this.stack!
    const size = (variables.length + 1) * words.bytes
    code.get(pointer)
    code.i32(size)
    code.op(I32_OPS.add)
    code.get(end)
    code.op(I32_OPS.gtU)
    code.open(OP.if)
    code.i32(Math.max(STACK_GROWTH_PAGES, Math.ceil(size / PAGE_BYTES)))
    code.memoryGrow()
    code.i32(-1)
    code.op(I32_OPS.eq)
    this.failIf({ kind: 'stack-memory', block })
    code.memorySize()
    code.i32(16)
    code.op(I32_OPS.shl)
    code.set(end)
    code.end()
    for (const [at, variable] of variables.entries()) {
      code.get(pointer)
      words.store({ kind: 'variable', variable }, at * words.bytes)
    }
    code.get(pointer)
    code.i32(place)
    code.memory(I32_OPS.store, 2, variables.length * words.bytes)
    code.get(pointer)
    code.i32(size)
    code.op(I32_OPS.add)
    code.set(pointer)
  }

  private pull(variables: readonly number[]): void {
    if (variables.length === 0) return
    const { code, words } = this
    const { pointer } = this.stack!
    code.get(pointer)
    code.i32(variables.length * words.bytes)
    code.op(I32_OPS.sub)
    code.set(pointer)
    for (const [at, variable] of variables.entries()) {
      code.get(pointer)
      words.load(variable, at * words.bytes)
    }
  }

  private selector(selector: number): number {
    this.selectorLocals[selector] ??= this.pool.take(I32)
    return this.selectorLocals[selector]!
  }
}

export const PAGE_BYTES = 65_536

/** The stack of frames grows by 4 MiB at a time, so that growing takes no part of a run's time. */
const STACK_GROWTH_PAGES = 64

/** Slots for the variables of the assert that reads most. */
function mostReads({ blocks }: Program): number {
  let most = 0
  for (const { operations } of blocks)
    for (const operation of operations) if (operation.kind === 'assert') most = Math.max(most, operation.reads.size)
  return most
}
