import type { Span } from '../../grammar/span'
import type { Block, Operand, Operation, Words } from '../routine'
import { applyBinary, applyUnary, compareWords, multiplyWords } from './arithmetic'
import { judgeAssert } from './assert'
import { checkInput } from './check-input'
import { type FailureDetail, makeFailure } from './failure'
import { junkBlock, junkWord } from './junk'
import type { Binding, Failure, FailureKind, Input, Limits, RunResult } from './run'
import { makeWords } from './words'

/**
 * Runs a bound program on BigInts, for any width: the oracle that the compiled way must equal to the last count.
 * Calls have frames of their own, not the host's stack. An input that does not fit the binding is a fault of the caller's.
 */
export function interpretProgram(binding: Binding, input: Input, limits: Limits): RunResult {
  const wrong = checkInput(binding, input)
  if (wrong) throw new Error(wrong)
  return new Interpreter(binding, input, limits).run()
}

/** A call in flight, with the caller's variables to go back to. */
interface Frame {
  readonly variables: bigint[]
  readonly next: number
  readonly results: readonly number[]
  readonly words: number
}

/** Thrown by an operation that goes wrong, and caught in `run`. */
class Stopped extends Error {
  constructor(readonly failure: Failure) {
    super(failure.message)
  }
}

class Interpreter {
  private readonly width: number
  private readonly memory: bigint[]
  private readonly touched: Uint8Array
  private readonly visits: Float64Array
  private variables: bigint[]
  private readonly frames: Frame[] = []
  private frameWords = 0
  private peakFrames = 0
  private passed = 0

  constructor(
    private readonly binding: Binding,
    private readonly input: Input,
    private readonly limits: Limits,
  ) {
    const { program, point } = binding
    this.width = point.width
    this.memory = firstMemory(binding, input)
    this.touched = new Uint8Array(binding.words)
    this.visits = new Float64Array(program.blocks.length)
    this.variables = new Array<bigint>(program.procedures[0]!.variables.length).fill(0n)
    const given = program.routine.scalars.filter(scalar => scalar.role !== 'out')
    for (const [variable, { name }] of given.entries()) this.variables[variable] = input.scalars[name]!
  }

  run(): RunResult {
    try {
      this.runBlocks()
    } catch (thrown) {
      if (thrown instanceof Stopped) return { ok: false, failure: thrown.failure }
      throw thrown
    }
    return this.result()
  }

  private runBlocks(): void {
    const { blocks, procedures } = this.binding.program
    let at = procedures[0]!.entry
    for (;;) {
      const block = blocks[at]!
      this.visits[at]! += 1
      if (block.checkpoint !== undefined) {
        this.passed += block.checkpoint
        if (this.passed > this.limits.operations) this.failAtLimit(block)
      }
      for (const operation of block.operations) this.step(operation)
      const next = this.leave(block)
      if (next === undefined) break
      at = next
    }
    const operations = blocks.reduce((sum, block, place) => {
      const once = block.costs.reduce((count, cost) => (cost.class === 'index' ? count : count + cost.count), 0)
      return sum + once * this.visits[place]!
    }, 0)
    if (operations > this.limits.operations) this.failAtLimit(blocks[at]!)
  }

  private leave(block: Block): number | undefined {
    const { terminator } = block
    switch (terminator.kind) {
      case 'jump':
        return terminator.to
      case 'branch': {
        const { operator, signed, left, right, yes, no } = terminator
        return compareWords(operator, signed, this.read(left), this.read(right), this.width) ? yes : no
      }
      case 'call': {
        const callee = this.binding.program.procedures[terminator.procedure]!
        const words = terminator.arguments.map(operand => this.read(operand))
        if (this.frameWords + callee.frame > this.limits.frames)
          this.fail('frame-limit', terminator.span, BigInt(this.limits.frames))
        this.frameWords += callee.frame
        this.peakFrames = Math.max(this.peakFrames, this.frameWords)
        const { variables } = this
        this.frames.push({ variables, next: terminator.next, results: terminator.results, words: callee.frame })
        this.variables = new Array<bigint>(callee.variables.length).fill(0n)
        for (const [variable, word] of words.entries()) this.variables[variable] = word
        return callee.entry
      }
      case 'return': {
        const words = terminator.values.map(operand => this.read(operand))
        const frame = this.frames.pop()!
        this.frameWords -= frame.words
        this.variables = frame.variables
        for (const [place, variable] of frame.results.entries()) this.variables[variable] = words[place]!
        return frame.next
      }
      case 'halt':
        return undefined
    }
  }

  private step(operation: Operation): void {
    const { variables, width } = this
    switch (operation.kind) {
      case 'binary': {
        const left = this.read(operation.left)
        const right = this.read(operation.right)
        const divides = operation.function === 'divide' || operation.function === 'modulo'
        if (divides && right === 0n) this.fail('divide', operation.span, left)
        variables[operation.into] = applyBinary(operation.function, left, right, width)
        break
      }
      case 'unary':
        variables[operation.into] = applyUnary(operation.function, this.read(operation.operand), width)
        break
      case 'move':
        variables[operation.into] = this.read(operation.from)
        break
      case 'product': {
        const { high, low } = multiplyWords(this.read(operation.left), this.read(operation.right), width)
        variables[operation.high] = high
        variables[operation.low] = low
        break
      }
      case 'load':
        variables[operation.into] =
          this.memory[this.element(operation.array, this.read(operation.index), operation.span)]!
        break
      case 'store': {
        const index = this.read(operation.index)
        const value = this.read(operation.value)
        this.store(this.element(operation.array, index, operation.span), value)
        break
      }
      case 'load-at': {
        const address = this.address(operation)
        if (address >= BigInt(this.binding.words)) this.fail('address', operation.span, address)
        variables[operation.into] = this.memory[Number(address)]!
        break
      }
      case 'store-at': {
        const address = this.address(operation)
        const value = this.read(operation.value)
        if (address >= BigInt(this.binding.words) || address < BigInt(this.binding.writable))
          this.fail('address', operation.span, address)
        this.store(Number(address), value)
        break
      }
      case 'assert': {
        const arrays = (name: string) => this.contents(name)
        const reason = judgeAssert(this.binding, this.input, operation, variable => variables[variable]!, arrays)
        if (reason !== undefined) this.fail('assert', operation.span, 0n, { reason })
        break
      }
      case 'check-step':
        if (this.read(operation.operand) === 0n) this.fail('step', operation.span, 0n)
        break
    }
  }

  private read(operand: Operand): bigint {
    return operand.kind === 'variable'
      ? this.variables[operand.variable]!
      : this.binding.constants[operand.constant]!
  }

  private element(array: number, index: bigint, span: Span): number {
    const { base, length } = this.binding.arrays[array]!
    if (index >= BigInt(length)) this.fail('index', span, index, { array })
    return base + Number(index)
  }

  private address({ base, index }: { readonly base: Operand; readonly index?: Operand }): bigint {
    const start = this.read(base)
    return index ? BigInt.asUintN(this.width, start + this.read(index)) : start
  }

  private store(address: number, value: bigint): void {
    this.memory[address] = value
    this.touched[address] = 1
  }

  /** The words of an array as they are now. */
  private contents(name: string): Words | undefined {
    const at = this.binding.program.routine.arrays.findIndex(array => array.name === name)
    if (at < 0) return undefined
    const { base, length } = this.binding.arrays[at]!
    return makeWords(this.width, this.memory.slice(base, base + length))
  }

  private fail(kind: FailureKind, span: Span, value: bigint, detail?: FailureDetail): never {
    throw new Stopped(makeFailure(this.binding, kind, span, value, detail))
  }

  private failAtLimit(block: Block): never {
    this.fail('operation-limit', spanOfBlock(this.binding, block), BigInt(this.limits.operations))
  }

  private result(): RunResult {
    const { program, arrays: places } = this.binding
    const arrays: Record<string, Words> = {}
    let touched = 0
    for (const [at, { name, role }] of program.routine.arrays.entries()) {
      const { base, length } = places[at]!
      if (role === 'out' || role === 'inout') arrays[name] = this.contents(name)!
      if (role === 'work') for (let word = base; word < base + length; word++) touched += this.touched[word]!
    }
    const scalars: Record<string, bigint> = {}
    for (const [name, variable] of program.results) scalars[name] = this.variables[variable]!
    return { ok: true, visits: this.visits, arrays, scalars, touched, frames: this.peakFrames }
  }
}

/** Where a failure that belongs to a block as a whole points: its first operation, or what ends it. */
export function spanOfBlock(binding: Binding, block: Block): Span {
  const [first] = block.operations
  if (first) return first.span
  const { terminator } = block
  // A block of nothing but a jump has no text of its own.
  return 'span' in terminator ? terminator.span : binding.program.routine.tree.name.span
}

function firstMemory(binding: Binding, input: Input): bigint[] {
  const { program, words, writable, point } = binding
  const junk = junkBlock(input.junk)
  const memory = new Array<bigint>(words).fill(0n)
  for (let address = writable; address < words; address++) memory[address] = junkWord(junk, address, point.width)
  for (const [at, { name, role }] of program.routine.arrays.entries()) {
    const content =
      role === 'table' ? binding.tables.get(at)! : role === 'in' || role === 'inout' ? input.arrays[name]! : []
    const { base } = binding.arrays[at]!
    for (let place = 0; place < content.length; place++) memory[base + place] = BigInt(content[place]!)
  }
  return memory
}
