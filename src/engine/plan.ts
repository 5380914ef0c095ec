import type { Program } from '../routine'
import { Bounds } from './bounds'
import { type Choice, MOST_OPERATIONS, makeChoices } from './choices'
import { CodeBuilder, LocalPool } from './code'
import { CountPlan } from './count'
import { countLoops } from './counted'
import type { FailureSite } from './failure-site'
import { buildFlow, type FlowGraph } from './flow'
import { writeModule } from './module'
import { NarrowWords } from './narrow'
import { I32, I64_OPS, OP } from './opcode'
import { findLoops } from './order'
import { readyFlow } from './reduce'
import { type Parameter, SLOT_BYTES, SlotTable } from './slots'
import { StepCode } from './steps'
import { emitStructure } from './structure'

/** A module for one program at one width, and what is needed to give it a run and to read its results. */
export interface ModulePlan {
  readonly bytes: Uint8Array<ArrayBuffer>
  /** Whether stores to work memory are marked. */
  readonly marked: boolean
  /** Whether the module asks the judge of asserts. */
  readonly judged: boolean
  /** Bytes of memory before the first word. */
  readonly head: number
  /** Bytes of a word in memory. */
  readonly wordBytes: number
  readonly parameters: readonly Parameter[]
  readonly sites: readonly FailureSite[]
  readonly valueSlot: number
  readonly assertSlot: number
  /** Where scalar results wait, by name. */
  readonly resultSlots: ReadonlyMap<string, number>
  /** Where the peak of words in frames waits; absent where it follows from `copiedFrames`. */
  readonly peakSlot: number | undefined
  /** Nodes that call a copied procedure from the routine's own body, and the words in frames then. */
  readonly copiedFrames: readonly { readonly node: number; readonly words: number }[]
  readonly counterSlot: number
  readonly counts: CountPlan
  /** Branches without blocks for their arms, and where the number of times that the arm was taken waits for each. */
  readonly choices: readonly Choice[]
  readonly choiceSlot: number
  /** By node of the flow graph: the program's block it visits, -1 for none. */
  readonly nodeBlocks: Int32Array
}

/** The exported function of a module. Gives 0 for a good run, else the number of a failure site plus 1. */
export const RUN = 'run'

/** Largest width that words in single locals reach. */
export const MOST_WIDTH = 64

/** Plans and writes the module. Sizes, lets, lengths, bases and fix words are parameters of a run, never part of it. */
export function planModule(program: Program, width: number, marked: boolean): ModulePlan {
  const graph = buildFlow(program)
  makeChoices(program, graph)
  const order = countLoops(program, graph, readyFlow(graph))
  const loops = findLoops(order)
  const counts = new CountPlan(graph, order, loops)

  const code = new CodeBuilder()
  const pool = new LocalPool()
  const slots = new SlotTable(pool)
  const head = mostHeadBytes(program, counts.counters + graph.choices.length)
  const bounds = new Bounds(program, graph, order, width)
  const words = new NarrowWords(
    width,
    program.constants,
    graph.variables + 2 * MOST_OPERATIONS,
    code,
    pool,
    slots,
    bounds,
  )
  const steps = new StepCode(program, graph, words, code, pool, slots, bounds, head, marked)
  for (const { name, role } of program.routine.scalars) {
    if (role === 'out') continue
    const variable = program.procedures[0]!.variables.findIndex(variable => variable.name === name)
    words.readAtEntry(variable, run => run.input.scalars[name]!)
  }

  const counterLocals: number[] = []
  const counterLocal = (counter: number) => {
    if (counter < graph.counted.length) return steps.passesOf(counter)
    counterLocals[counter] ??= pool.take(I64_OPS.type)
    return counterLocals[counter]!
  }
  const counterSlot = slots.take(counts.counters)
  const choiceSlot = slots.take(graph.choices.length)
  const resultSlots = new Map([...program.results].map(([name]) => [name, slots.take(1)]))
  let peakSlot: number | undefined
  emitStructure(graph, order, loops, code, {
    steps: node => {
      for (const place of graph.nodes[node]!.steps.keys()) steps.emit(node, place)
    },
    test: end => steps.pushTest(end.test, end.shift),
    past: end => steps.pushPast(end.loop),
    selector: end => steps.pushSelector(end.selector),
    counts: (node, slot) => counts.counterOf(node, slot) >= 0,
    count: (node, slot) => {
      const counter = counts.counterOf(node, slot)
      if (counter < 0) return
      code.get(counterLocal(counter))
      code.i64(1)
      code.op(I64_OPS.add)
      code.set(counterLocal(counter))
    },
    finish: () => {
      for (let counter = 0; counter < counts.counters; counter++) {
        slots.write(code, counterSlot + counter, I64_OPS, () => code.get(counterLocal(counter)))
      }
      for (let choice = 0; choice < graph.choices.length; choice++) {
        slots.write(code, choiceSlot + choice, I64_OPS, () => code.get(steps.choices.takenOf(choice)))
      }
      for (const [name, variable] of program.results) {
        words.writeSlot(resultSlots.get(name)!, { kind: 'variable', variable })
      }
      peakSlot = steps.writePeak()
      code.i32(0)
      code.op(OP.return)
    },
  })

  const entry = new CodeBuilder()
  slots.writeReads(entry)
  if (slots.count * SLOT_BYTES > head) throw new Error('the head of memory is too small for its slots')
  const locals = pool.declaration()
  const judged = program.blocks.some(({ operations }) => operations.some(({ kind }) => kind === 'assert'))
  return {
    bytes: writeModule({ exported: RUN, results: [I32], locals, code: [entry.bytes, code.bytes] }, judged),
    marked,
    judged,
    head,
    wordBytes: words.bytes,
    parameters: slots.parameters,
    sites: steps.sites.list,
    valueSlot: steps.valueSlot,
    assertSlot: steps.assertSlot,
    resultSlots,
    peakSlot,
    copiedFrames: copiedFrames(graph),
    counterSlot,
    counts,
    choices: graph.choices,
    choiceSlot,
    nodeBlocks: Int32Array.from(graph.nodes, ({ block }) => block),
  }
}

function copiedFrames({ nodes }: FlowGraph): { node: number; words: number }[] {
  return nodes.flatMap(({ steps }, node) =>
    steps.flatMap(step => (step.kind === 'frame' && !step.base && !step.kept ? [{ node, words: step.words }] : [])),
  )
}

/** Room for every slot that a module can need: it must be known before the first access is emitted. */
function mostHeadBytes(program: Program, counters: number): number {
  const { arrays, scalars } = program.routine
  let asserted = 0
  for (const { operations } of program.blocks)
    for (const operation of operations)
      if (operation.kind === 'assert') asserted = Math.max(asserted, operation.reads.size)
  const slots =
    program.constants.length +
    SLOTS_PER_ARRAY * arrays.length +
    2 * scalars.length +
    counters +
    asserted +
    SINGLE_SLOTS
  return Math.ceil((slots * SLOT_BYTES) / CACHE_LINE) * CACHE_LINE
}

/** Length, base and marks. */
const SLOTS_PER_ARRAY = 3
/** Failure value, limits, memory bounds, marks, the stack of frames, its peak. */
const SINGLE_SLOTS = 12
const CACHE_LINE = 64
