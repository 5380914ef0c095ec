import type { Comparison } from '../../grammar/tree'
import type { Operand, Operation, Program } from '../routine'
import { type End, type FlowGraph, type Step, shiftOperand, targetsOf, withTargets } from './flow'
import { operationWrites } from './live'
import { type FlowOrder, findLoops, type Loops, orderFlow } from './order'

/**
 * An innermost loop whose passes are told by a variable that each of them moves by one. Such a loop needs neither a
 * counter nor a charge against the operation limit in its passes: at its entry it is worked out how far the variable may
 * go, each pass looks at that alone, and the difference is counted and charged on the way out.
 */
export interface CountedLoop {
  readonly variable: number
  readonly down: boolean
  /** The checkpoint weight of its head, and the block that it is of. */
  readonly weight: number
  readonly block: number
}

/**
 * Rewrites such loops. Ways in lead through a node that sets the bound, and then to a guard before the head. Where the
 * variable is past the bound the guard goes by a node that settles the count, aside of all that is counted, back
 * to the entry, where the run fails if nothing is left. Ways out settle the count.
 */
export function countLoops(program: Program, graph: FlowGraph, order: FlowOrder): FlowOrder {
  const found: Found[] = []
  for (const [head, members] of innermostLoops(graph, order, findLoops(order))) {
    const loop = findLoop(program, graph, order, head, members)
    if (loop) found.push(loop)
  }
  if (found.length === 0) return order
  const sources = order.sources.map(list => new Set(list))
  for (const loop of found) rewriteLoop(graph, sources, loop)
  return orderFlow(graph)
}

interface Found {
  readonly loop: CountedLoop
  readonly head: number
  readonly within: ReadonlySet<number>
  /** Members that are left after the variable has moved. */
  readonly moved: ReadonlySet<number>
}

/** Members by header, of loops that hold no other. */
function innermostLoops({ nodes }: FlowGraph, { order, header }: FlowOrder, { inner, outer }: Loops) {
  const holders = new Set<number>()
  const members = new Map<number, number[]>()
  for (const node of order) {
    if (header[node] && outer[node] !== -1) holders.add(outer[node]!)
    if (inner[node] === -1) continue
    const list = members.get(inner[node]!)
    if (list) list.push(node)
    else members.set(inner[node]!, [node])
  }
  for (const holder of holders) members.delete(holder)
  for (const head of members.keys()) if (nodes[head]!.block === -1) members.delete(head)
  return members
}

function findLoop(
  program: Program,
  graph: FlowGraph,
  order: FlowOrder,
  head: number,
  members: readonly number[],
): Found | undefined {
  const { nodes } = graph
  const block = nodes[head]!.block
  const weight = program.blocks[block]!.checkpoint
  if (weight === undefined) return undefined
  const within = new Set(members)
  const writes = new Map<number, number>()
  const moves: { variable: number; down: boolean; node: number }[] = []
  for (const at of members) {
    for (const step of nodes[at]!.steps) {
      if (step.kind === 'copy') addWrites(writes, step.into, 0)
      else if (step.kind === 'pull') addWrites(writes, step.variables, 0)
      else if (step.kind === 'choose') {
        const { yes, no } = graph.choices[step.choice]!
        for (const block of [yes, no]) {
          if (block === undefined) continue
          for (const operation of program.blocks[block]!.operations)
            addWrites(writes, operationWrites(operation), step.shift)
        }
      } else if (step.kind === 'block') {
        const { operations, checkpoint } = program.blocks[step.block]!
        if (checkpoint !== undefined && at !== head) return undefined
        for (const operation of operations) {
          addWrites(writes, operationWrites(operation), step.shift)
          if (operation.kind !== 'binary' || !movesByOne(program, operation)) continue
          const down = operation.function === 'subtract'
          moves.push({ variable: operation.into + step.shift, down, node: at })
        }
      }
    }
  }
  const latches = members.filter(at => targetsOf(nodes[at]!.end).includes(head))
  for (const { variable, down, node } of moves) {
    if (writes.get(variable) !== 1) continue
    if (!latches.every(latch => isAbove(order, node, latch))) continue
    if (!staysInRange(graph, order, { head, within, writes }, variable, down, node)) continue
    const moved = reachableFrom(graph, within, head, node)
    const exits = members.filter(at => targetsOf(nodes[at]!.end).some(to => !within.has(to)))
    if (exits.some(at => moved.has(at) && !isAbove(order, node, at))) continue
    return { loop: { variable, down, weight, block }, head, within, moved }
  }
  return undefined
}

function addWrites(writes: Map<number, number>, variables: readonly number[], shift: number): void {
  for (const variable of variables) writes.set(variable + shift, (writes.get(variable + shift) ?? 0) + 1)
}

function movesByOne({ constants }: Program, operation: Extract<Operation, { kind: 'binary' }>): boolean {
  const { function: name, into, left, right } = operation
  if (name !== 'add' && name !== 'subtract') return false
  if (left.kind !== 'variable' || left.variable !== into || right.kind !== 'constant') return false
  const by = constants[right.constant]!
  return by.kind === 'literal' && by.value === 1n
}

/** Whether one node dominates another. */
function isAbove({ dominator, rank }: FlowOrder, above: number, node: number): boolean {
  while (rank[node]! > rank[above]!) node = dominator[node]!
  return node === above
}

/** Members from `from` on, up to the next pass. */
function reachableFrom({ nodes }: FlowGraph, within: ReadonlySet<number>, head: number, from: number): Set<number> {
  const reached = new Set([from])
  const waiting = [from]
  for (let at = waiting.pop(); at !== undefined; at = waiting.pop()) {
    for (const to of targetsOf(nodes[at]!.end)) {
      if (to === head || !within.has(to) || reached.has(to)) continue
      reached.add(to)
      waiting.push(to)
    }
  }
  return reached
}

interface Body {
  readonly head: number
  readonly within: ReadonlySet<number>
  readonly writes: ReadonlyMap<number, number>
}

/**
 * Whether a test in each pass, before the variable moves, keeps the move from running round the end of the word:
 * a bound that it is strictly within, or, as in a `for`, an end that it is not at and that it was not past at the entry.
 */
function staysInRange(
  graph: FlowGraph,
  order: FlowOrder,
  { head, within, writes }: Body,
  variable: number,
  down: boolean,
  node: number,
): boolean {
  for (let at = node; at !== head; at = order.dominator[at]!) {
    const above = order.dominator[at]!
    if (order.sources[at]!.length !== 1) continue
    const test = testOnWay(graph, above, at, variable)
    if (!test) continue
    if (test.operator === (down ? '>' : '<')) return true
    if (test.operator !== '!=') continue
    const { other } = test
    if (other.kind === 'variable' && writes.has(other.variable)) continue
    const notPast = order.sources[head]!.filter(source => !within.has(source)).every(source => {
      const entered = testOnWay(graph, source, head, variable)
      return entered?.operator === (down ? '>=' : '<=') && sameOperand(entered.other, other)
    })
    if (notPast) return true
  }
  return false
}

function sameOperand(a: Operand, b: Operand): boolean {
  if (a.kind === 'variable') return b.kind === 'variable' && a.variable === b.variable
  return b.kind === 'constant' && a.constant === b.constant
}

/** What a branch says of a variable on its way to one of its targets, as `variable operator other`. */
export function testOnWay({ nodes }: FlowGraph, from: number, to: number, variable: number) {
  const { end } = nodes[from]!
  if (end.kind !== 'branch' || end.yes === end.no || end.test.signed) return undefined
  if (to !== end.yes && to !== end.no) return undefined
  const { operator, left, right } = end.test
  const told = end.yes === to ? operator : OPPOSITE[operator]
  const [a, b] = [shiftOperand(left, end.shift), shiftOperand(right, end.shift)]
  if (a.kind === 'variable' && a.variable === variable) return { operator: told, other: b }
  if (b.kind === 'variable' && b.variable === variable) return { operator: MIRRORED[told], other: a }
  return undefined
}

const OPPOSITE: Readonly<Record<Comparison, Comparison>> = {
  '=': '!=',
  '!=': '=',
  '<': '>=',
  '<=': '>',
  '>': '<=',
  '>=': '<',
}

const MIRRORED: Readonly<Record<Comparison, Comparison>> = {
  '=': '=',
  '!=': '!=',
  '<': '>',
  '<=': '>=',
  '>': '<',
  '>=': '<=',
}

function rewriteLoop(graph: FlowGraph, sources: Set<number>[], { loop, head, within, moved }: Found): void {
  const { nodes } = graph
  const number = graph.counted.push(loop) - 1
  const add = (step: Step | undefined, end: End, aside = false) => {
    for (const to of targetsOf(end)) sources[to]!.add(nodes.length)
    sources.push(new Set())
    return nodes.push({ block: -1, steps: step ? [step] : [], end, aside }) - 1
  }
  const redirect = (at: number, way: (to: number) => number) => {
    const before = targetsOf(nodes[at]!.end)
    const after = before.map(way)
    for (const to of before) sources[to]!.delete(at)
    for (const to of after) sources[to]!.add(at)
    nodes[at]!.end = withTargets(nodes[at]!.end, after)
  }
  const arrivals = [...sources[head]!]
  const entry = add({ kind: 'begin', loop: number }, { kind: 'jump', to: head })
  const settle = add({ kind: 'settle', loop: number, passes: 0 }, { kind: 'jump', to: entry }, true)
  const guard = add(undefined, { kind: 'guard', loop: number, past: settle, to: head })
  redirect(entry, () => guard)
  for (const source of arrivals) redirect(source, to => (to === head ? (within.has(source) ? guard : entry) : to))
  for (const at of within) {
    const passes = moved.has(at) ? 0 : 1
    redirect(at, to =>
      within.has(to) || to === guard ? to : add({ kind: 'settle', loop: number, passes }, { kind: 'jump', to }),
    )
  }
  nodes[head]!.steps = nodes[head]!.steps.map(step => (step.kind === 'block' ? { ...step, charged: true } : step))
}
