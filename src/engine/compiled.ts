import {
  type Binding,
  type Input,
  judgeAssert,
  type Limits,
  makeFailure,
  type RunResult,
  spanOfBlock,
} from '../machine'
import type { Program } from '../routine'
import type { FailureSite } from './failure-site'
import { checkWords, countMarks, fillMemory, holdsJunk, layOut, takeMemory, wordView } from './memory'
import { IMPORTS } from './module'
import { MOST_WIDTH, type ModulePlan, planModule, RUN } from './plan'
import { type RunLayout, SLOT_BYTES } from './slots'

/**
 * A program compiled for one width. It runs at any point of that width: sizes, lets and addresses come with the
 * binding. Runs of one thread share a memory and follow one another; each is repeatable to the last count.
 *
 * There are two modules. The plain one does not mark which words of work memory are stored to: where none of them holds
 * the junk it began with, all were. Where one does, the run is made again with the module that marks each store.
 */
export class CompiledProgram {
  private marked: ModuleRunner | undefined
  /** Whether the last run by marks found work memory that was never stored to: the next one is likely to as well. */
  private sparse = false

  private constructor(
    readonly program: Program,
    readonly width: number,
    private readonly plain: ModuleRunner,
  ) {}

  /** The plain module, which can be posted to another thread and taken up there by `adopt`. */
  get module(): WebAssembly.Module {
    return this.plain.module
  }

  static async compile(program: Program, width: number): Promise<CompiledProgram> {
    const plan = planFor(program, width, false)
    return new CompiledProgram(program, width, new ModuleRunner(plan, await WebAssembly.compile(plan.bytes)))
  }

  static compileSync(program: Program, width: number): CompiledProgram {
    return new CompiledProgram(program, width, compilePlan(planFor(program, width, false)))
  }

  /** Takes up a module that was compiled for the same program and width, on this thread or another. */
  static adopt(program: Program, width: number, module: WebAssembly.Module): CompiledProgram {
    return new CompiledProgram(program, width, new ModuleRunner(planFor(program, width, false), module))
  }

  /**
   * Runs at a point. Whatever a run of the routine can do wrong is in the result. Throws an Error where binding or input
   * are not for this program, a RangeError where memory cannot be had.
   */
  run(binding: Binding, input: Input, limits: Limits): RunResult {
    if (!this.compiledFor(binding.program) || binding.point.width !== this.width)
      throw new Error('the binding is of another program or width than this was compiled for')
    checkWords(binding, input)
    const work = workWords(binding)
    if (work === 0 || !(this.sparse || work > likelyChance(this.width))) {
      const result = this.plain.run(binding, input, limits)
      if (!result.ok || work === 0) return result
      if (!this.plain.foundJunk) return { ...result, touched: work }
    }
    this.marked ??= compilePlan(planFor(this.program, this.width, true))
    const result = this.marked.run(binding, input, limits)
    if (result.ok) this.sparse = result.touched < work
    return result
  }

  /** Whether this is the program, or the same routine of the same text lowered once more. */
  private compiledFor(program: Program): boolean {
    if (program === this.program) return true
    const [given, own] = [program.routine, this.program.routine]
    return (
      given.text === own.text && given.name === own.name && program.blocks.length === this.program.blocks.length
    )
  }
}

function planFor(program: Program, width: number, marked: boolean): ModulePlan {
  if (width > MOST_WIDTH)
    throw new RangeError(
      `words of ${width} bits are not compiled yet: at most ${MOST_WIDTH} are; run them by reference`,
    )
  return planModule(program, width, marked)
}

function compilePlan(plan: ModulePlan): ModuleRunner {
  return new ModuleRunner(plan, new WebAssembly.Module(plan.bytes))
}

function workWords({ program, arrays }: Binding): number {
  return program.routine.arrays.reduce((sum, { role }, at) => (role === 'work' ? sum + arrays[at]!.length : sum), 0)
}

/** So many words, written with others at random, hold one of their junk again too often to go without marks. */
function likelyChance(width: number): number {
  return 2 ** width / 16
}

/** Runs one module. */
class ModuleRunner {
  /** After a good run without marks: whether a word of work memory holds the junk it began with. */
  foundJunk = false
  private start: (() => number) | undefined
  private memory: WebAssembly.Memory | undefined
  private running: RunLayout | undefined
  private warm = false

  constructor(
    private readonly plan: ModulePlan,
    readonly module: WebAssembly.Module,
  ) {}

  run(binding: Binding, input: Input, limits: Limits): RunResult {
    const { plan } = this
    const placed = layOut(binding, input, limits, plan)
    const memory = takeMemory(placed.stack + 1)
    const run = { ...placed, end: memory.buffer.byteLength }
    fillMemory(memory, run, plan)
    const ended = this.warmUp(memory, run) ?? this.execute(memory, run)
    return ended === 0 ? this.result(memory, run) : this.failure(memory, run, plan.sites[ended - 1]!)
  }

  /**
   * Engines compile twice: quickly before the first call, and well while a function proves hot, which no call that is
   * under way gains by. So the first run starts with few operations; if they are not enough, it has done
   * its part, and the run starts afresh. Gives how it ended if it did.
   */
  private warmUp(memory: WebAssembly.Memory, run: RunLayout): number | undefined {
    if (this.warm || run.limits.operations <= WARM_OPERATIONS) return undefined
    this.warm = true
    const short = { ...run, limits: { ...run.limits, operations: WARM_OPERATIONS } }
    const began = performance.now()
    const ended = this.execute(memory, short)
    const first = performance.now() - began
    if (ended === 0 || this.plan.sites[ended - 1]!.kind !== 'operation-limit') return ended
    // What memory holds does not matter to these; they wait for the better code.
    for (let turn = 0; turn < MOST_WARM_TURNS && performance.now() - began < MOST_WARM_TIME; turn++) {
      const start = performance.now()
      this.execute(memory, { ...short, end: memory.buffer.byteLength })
      if (performance.now() - start < first / 2) break
    }
    fillMemory(memory, run, this.plan)
    return undefined
  }

  private execute(memory: WebAssembly.Memory, run: RunLayout): number {
    const { parameters } = this.plan
    const slots = this.slots(memory)
    const placed = { ...run, end: memory.buffer.byteLength }
    for (const { slot, value } of parameters) slots[slot] = value(placed)
    this.running = placed
    try {
      return this.instance(memory)()
    } finally {
      this.running = undefined
    }
  }

  private instance(memory: WebAssembly.Memory): () => number {
    if (!this.start || this.memory !== memory) {
      const judge = (site: number) => (this.judge(memory, site) === undefined ? 1 : 0)
      const own = { [IMPORTS.memory]: memory, ...(this.plan.judged ? { [IMPORTS.judge]: judge } : {}) }
      const { exports } = new WebAssembly.Instance(this.module, { [IMPORTS.module]: own })
      this.start = exports[RUN] as () => number
      this.memory = memory
    }
    return this.start
  }

  /** Why the assert of a site stops the run, by the variables in their slots and the arrays in memory. */
  private judge(memory: WebAssembly.Memory, site: number): string | undefined {
    const { operation } = this.plan.sites[site]!
    const { binding, input } = this.running!
    if (operation?.kind !== 'assert') throw new Error('a site without an assert was to be judged')
    const slots = this.slots(memory)
    const places = [...operation.reads.values()]
    const read = (variable: number) => slots[this.plan.assertSlot + places.indexOf(variable)]!
    const contents = (name: string) => {
      const at = binding.program.routine.arrays.findIndex(array => array.name === name)
      return at < 0 ? undefined : this.words(memory, binding, at)
    }
    return judgeAssert(binding, input, operation, read, contents)
  }

  private result(memory: WebAssembly.Memory, run: RunLayout): RunResult {
    const { plan } = this
    const { binding, limits } = run
    const { program } = binding
    const slots = this.slots(memory)
    const nodeVisits = plan.counts.visits(counter => Number(slots[plan.counterSlot + counter]!))
    const visits = new Float64Array(program.blocks.length)
    for (const [node, block] of plan.nodeBlocks.entries()) if (block >= 0) visits[block]! += nodeVisits[node]!
    for (const [at, { node, yes, no }] of plan.choices.entries()) {
      const taken = Number(slots[plan.choiceSlot + at]!)
      if (yes !== undefined) visits[yes]! += taken
      if (no !== undefined) visits[no]! += yes === undefined ? taken : nodeVisits[node]! - taken
    }
    if (totalOperations(program, visits) > limits.operations) {
      const last = program.blocks.find(({ terminator }, at) => terminator.kind === 'halt' && visits[at] === 1)!
      const span = spanOfBlock(binding, last)
      return { ok: false, failure: makeFailure(binding, 'operation-limit', span, BigInt(limits.operations)) }
    }
    let frames = plan.peakSlot === undefined ? 0 : Number(slots[plan.peakSlot]!)
    for (const { node, words } of plan.copiedFrames) if (nodeVisits[node]! > 0) frames = Math.max(frames, words)
    const scalars = Object.fromEntries([...plan.resultSlots].map(([name, slot]) => [name, slots[slot]!]))
    const touched = this.touchedWords(memory, run)
    return { ok: true, visits, arrays: this.arrays(memory, binding), scalars, touched, frames }
  }

  private failure(memory: WebAssembly.Memory, run: RunLayout, site: FailureSite): RunResult {
    const { binding, limits } = run
    const { kind, operation } = site
    const block = binding.program.blocks[site.block]!
    const value = this.slots(memory)[this.plan.valueSlot]!
    const fail = (...[kind, span, value, detail]: ParametersAfterBinding): RunResult => ({
      ok: false,
      failure: makeFailure(binding, kind, span, value, detail),
    })
    switch (kind) {
      case 'operation-limit':
        return fail(kind, spanOfBlock(binding, block), BigInt(limits.operations))
      case 'frame-limit':
        return fail(kind, callSpan(block), BigInt(limits.frames))
      case 'stack-memory':
        throw new RangeError(`there is no memory for more frames (line ${callSpan(block).line})`)
      case 'index': {
        const array = operation?.kind === 'load' || operation?.kind === 'store' ? operation.array : -1
        return fail(kind, operation!.span, value, { array })
      }
      case 'assert': {
        this.running = run
        const reason = this.judge(memory, this.plan.sites.indexOf(site)) ?? ''
        this.running = undefined
        return fail(kind, operation!.span, 0n, { reason })
      }
      default:
        return fail(kind, operation!.span, value)
    }
  }

  private touchedWords(memory: WebAssembly.Memory, run: RunLayout): number {
    const { binding, input, marks } = run
    let touched = 0
    this.foundJunk = false
    for (const [at, { role }] of binding.program.routine.arrays.entries()) {
      if (role !== 'work') continue
      const { base, length } = binding.arrays[at]!
      if (this.plan.marked) touched += countMarks(memory, marks + base - binding.writable, length)
      else this.foundJunk ||= holdsJunk(this.words(memory, binding, at), base, input.junk, binding.point.width)
    }
    return touched
  }

  private arrays(memory: WebAssembly.Memory, binding: Binding) {
    const arrays: Record<string, Uint32Array | BigUint64Array> = {}
    for (const [at, { name, role }] of binding.program.routine.arrays.entries())
      if (role === 'out' || role === 'inout') arrays[name] = this.words(memory, binding, at).slice()
    return arrays
  }

  private words(memory: WebAssembly.Memory, { arrays }: Binding, array: number) {
    const { head, wordBytes } = this.plan
    const { base, length } = arrays[array]!
    return wordView(memory, head + base * wordBytes, length, wordBytes)
  }

  private slots(memory: WebAssembly.Memory): BigUint64Array {
    return new BigUint64Array(memory.buffer, 0, this.plan.head / SLOT_BYTES)
  }
}

type ParametersAfterBinding = Parameters<typeof makeFailure> extends [Binding, ...infer Rest] ? Rest : never

/** Operations of a first short run: some milliseconds of work for the quick compiler's code. */
const WARM_OPERATIONS = 1 << 21
/** How often, and for how many milliseconds at most, that is done again until the better code is there. */
const MOST_WARM_TURNS = 8
const MOST_WARM_TIME = 40

function totalOperations({ blocks }: Program, visits: Float64Array): number {
  let total = 0
  for (const [at, { costs }] of blocks.entries()) {
    let each = 0
    for (const cost of costs) if (cost.class !== 'index') each += cost.count
    total += each * visits[at]!
  }
  return total
}

function callSpan({ terminator }: Program['blocks'][number]) {
  if (terminator.kind !== 'call') throw new Error('a block without a call grew the frames')
  return terminator.span
}
