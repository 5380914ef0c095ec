import type { CodeBuilder } from './code'
import type { End, FlowGraph } from './flow'
import { OP } from './opcode'
import type { FlowOrder, Loops } from './order'

/** What the code of a structured graph is made of. */
export interface NodeCode {
  /** Code of a node's steps. */
  steps(node: number): void
  /** Leaves a branch's test as an i32. */
  test(end: Extract<End, { kind: 'branch' }>): void
  /** Leaves an i32 that is 1 where the variable of a counted loop is past its bound. */
  past(end: Extract<End, { kind: 'guard' }>): void
  /** Leaves a dispatch's number as an i32. */
  selector(end: Extract<End, { kind: 'dispatch' }>): void
  /** Code that ends the run. */
  finish(): void
  /** Whether a way out of a node is counted, and the code that counts it if it is. */
  counts(node: number, slot: number): boolean
  count(node: number, slot: number): void
}

type Task =
  | { readonly kind: 'node'; readonly node: number }
  /** Counts a way out of a node and goes it. */
  | { readonly kind: 'way'; readonly from: number; readonly slot: number; readonly to: number }
  | { readonly kind: 'end' }

/**
 * Turns a reducible flow graph into structured code: N. Ramsey, "Beyond Relooper: recursive translation of
 * unstructured control flow to structured control flow", ICFP 2022. A node stands inside the code of its dominator;
 * one that several ways lead to follows a block around it. Here a node that leaves a loop follows that loop as
 * well, so that a loop holds no more than its own nodes. Work waits on a list, so that no depth of a graph is too
 * much; of two arms the smaller is nested and the larger goes on, so that nesting grows with the logarithm.
 */
export function emitStructure(
  graph: FlowGraph,
  order: FlowOrder,
  loops: Loops,
  code: CodeBuilder,
  node: NodeCode,
): void {
  new Structure(graph, order, loops, code, node).emit()
}

class Structure {
  /** By node: nodes whose code follows a block around this one's code, in order. */
  private readonly followers = new Map<number, number[]>()
  /** By header: nodes whose code follows the whole loop, in order. */
  private readonly afterLoop = new Map<number, number[]>()
  /** The ways that a dispatch goes: each target has no other, so such a way is counted where the target begins. */
  private readonly dispatched = new Map<number, { from: number; slot: number }>()
  private readonly placed: Uint8Array
  private readonly blockLabel: Int32Array
  private readonly loopLabel: Int32Array
  /** Number of nodes that a node dominates. */
  private readonly weight: Int32Array
  private readonly tasks: Task[] = []

  constructor(
    private readonly graph: FlowGraph,
    private readonly order: FlowOrder,
    private readonly loops: Loops,
    private readonly code: CodeBuilder,
    private readonly node: NodeCode,
  ) {
    const count = graph.nodes.length
    this.placed = new Uint8Array(count)
    this.blockLabel = new Int32Array(count)
    this.loopLabel = new Int32Array(count)
    this.weight = new Int32Array(count).fill(1)
    this.placeNodes()
  }

  emit(): void {
    const { tasks, code } = this
    tasks.push({ kind: 'node', node: this.order.order[0]! })
    for (let task = tasks.pop(); task !== undefined; task = tasks.pop()) {
      if (task.kind === 'end') code.end()
      else if (task.kind === 'node') this.emitNode(task.node)
      else this.emitWay(task.from, task.slot, task.to)
    }
    code.op(OP.unreachable)
  }

  private placeNodes(): void {
    const { graph, order, weight } = this
    for (const at of order.order) {
      const { end } = graph.nodes[at]!
      if (end.kind !== 'dispatch') continue
      for (const [slot, target] of end.targets.entries()) this.dispatched.set(target, { from: at, slot })
    }
    for (let place = order.order.length - 1; place > 0; place--) {
      const at = order.order[place]!
      weight[order.dominator[at]!]! += weight[at]!
    }
    for (const at of order.order) {
      if (order.rank[at] === 0) continue
      const parent = order.dominator[at]!
      const left = this.outermostLeft(parent, at)
      const joins = this.forwardWays(at) > 1
      if (left === -1 && !joins && !this.dispatched.has(at)) continue
      this.placed[at] = 1
      const [map, key] = left === -1 ? ([this.followers, parent] as const) : ([this.afterLoop, left] as const)
      const list = map.get(key)
      if (list) list.push(at)
      else map.set(key, [at])
    }
  }

  private forwardWays(to: number): number {
    const { sources, rank } = this.order
    let ways = 0
    for (const source of sources[to]!) if (rank[source]! < rank[to]!) ways++
    return ways
  }

  /** The header of the outermost loop that holds `from` and not `to`; -1 for none. */
  private outermostLeft(from: number, to: number): number {
    const { inner, outer, depth } = this.loops
    let left = -1
    let around = inner[to]!
    for (let head = inner[from]!; head !== -1; head = outer[head]!) {
      while (around !== -1 && depth[around]! > depth[head]!) around = outer[around]!
      if (head === around) break
      left = head
    }
    return left
  }

  private emitNode(at: number): void {
    const { code, tasks } = this
    const after = this.afterLoop.get(at) ?? []
    const followers = this.followers.get(at) ?? []
    this.openBlocks(after)
    if (this.order.header[at]) {
      this.loopLabel[at] = code.open(OP.loop)
      tasks.push({ kind: 'end' })
    }
    this.openBlocks(followers)
    const way = this.dispatched.get(at)
    if (way) this.node.count(way.from, way.slot)
    this.node.steps(at)
    this.emitEnd(at)
  }

  /** Opens a block for each follower, the last outermost, and leaves the tasks that close them. */
  private openBlocks(followers: readonly number[]): void {
    for (let place = followers.length - 1; place >= 0; place--) {
      const follower = followers[place]!
      this.blockLabel[follower] = this.code.open(OP.block)
      this.tasks.push({ kind: 'node', node: follower })
      this.tasks.push({ kind: 'end' })
    }
  }

  private emitEnd(at: number): void {
    const { code, tasks, node } = this
    const { end } = this.graph.nodes[at]!
    switch (end.kind) {
      case 'finish':
        node.finish()
        break
      case 'jump':
        this.emitWay(at, 0, end.to)
        break
      case 'dispatch':
        node.selector(end)
        code.branchTable(end.targets.map(target => this.label(at, target)!))
        break
      case 'guard':
      case 'branch': {
        const [yes, no] = end.kind === 'guard' ? [end.past, end.to] : [end.yes, end.no]
        if (end.kind === 'guard') node.past(end)
        else node.test(end)
        const yesLabel = node.counts(at, 0) ? undefined : this.label(at, yes)
        const noLabel = node.counts(at, 1) ? undefined : this.label(at, no)
        if (yesLabel !== undefined) {
          code.branch(OP.brIf, yesLabel)
          tasks.push({ kind: 'way', from: at, slot: 1, to: no })
        } else if (noLabel !== undefined) {
          code.op(OP.i32Eqz)
          code.branch(OP.brIf, noLabel)
          tasks.push({ kind: 'way', from: at, slot: 0, to: yes })
        } else {
          const yesNested = this.armWeight(at, yes) <= this.armWeight(at, no)
          if (!yesNested) code.op(OP.i32Eqz)
          code.open(OP.if)
          const arms = [
            { kind: 'way', from: at, slot: 0, to: yes },
            { kind: 'way', from: at, slot: 1, to: no },
          ] as const
          tasks.push(arms[yesNested ? 1 : 0], { kind: 'end' }, arms[yesNested ? 0 : 1])
        }
        break
      }
    }
  }

  private armWeight(from: number, to: number): number {
    return this.label(from, to) === undefined ? this.weight[to]! : 0
  }

  private emitWay(from: number, slot: number, to: number): void {
    this.node.count(from, slot)
    const label = this.label(from, to)
    if (label === undefined) this.tasks.push({ kind: 'node', node: to })
    else this.code.branch(OP.br, label)
  }

  /** The label that a way goes to; undefined where the target's code stands right there. */
  private label(from: number, to: number): number | undefined {
    if (this.order.rank[to]! <= this.order.rank[from]!) return this.loopLabel[to]!
    return this.placed[to] ? this.blockLabel[to]! : undefined
  }
}
