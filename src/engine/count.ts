import { FINISH, type FlowGraph, targetsOf } from './flow'
import type { FlowOrder, Loops } from './order'

interface Edge {
  readonly from: number
  readonly to: number
  /** The counter on it, or why there is none. */
  readonly counter: number
}

const IN_TREE = -1
const ASIDE = -2

interface BareEdge {
  readonly from: number
  readonly to: number
  readonly weight: number
  readonly aside: boolean | undefined
  /** The counted loop whose passes are the visits of this edge. */
  readonly loop: number | undefined
}

/**
 * Which edges of a flow graph are counted, and how visits of all nodes follow from those counts: counters stand on
 * the edges outside a spanning tree, and what enters a node leaves it. D. E. Knuth, F. R. Stevenson, "Optimal
 * measurement points for program frequency counts", BIT 13, 1973.
 */
export class CountPlan {
  /** Number of counters; the first are those of the counted loops. */
  readonly counters: number
  private readonly edges: readonly Edge[]
  private readonly firstEdge: Int32Array
  /** Nodes and the tree edges towards the entry, leaves first. */
  private readonly leavesFirst: readonly { readonly node: number; readonly edge: number }[]

  constructor(
    private readonly graph: FlowGraph,
    order: FlowOrder,
    loops: Loops,
  ) {
    const bare: BareEdge[] = []
    this.firstEdge = new Int32Array(graph.nodes.length).fill(-1)
    for (const from of order.order) {
      this.firstEdge[from] = bare.length
      const { end } = graph.nodes[from]!
      const targets = targetsOf(end)
      for (let slot = 0; slot < targets.length; slot++) {
        const to = targets[slot]!
        const aside = graph.nodes[from]!.aside || graph.nodes[to]!.aside
        const loop = end.kind === 'guard' && slot === 1 ? end.loop : undefined
        bare.push({ from, to, aside, loop, weight: edgeWeight(from, to, targets.length, loops) })
      }
    }
    const inTree = spanningTree(graph.nodes.length, bare)
    let counters = graph.counted.length
    this.edges = bare.map(({ from, to, aside, loop }, at) => {
      if (aside) return { from, to, counter: ASIDE }
      return { from, to, counter: loop ?? (inTree[at] ? IN_TREE : counters++) }
    })
    this.counters = counters
    this.leavesFirst = this.walkTree()
  }

  /** The counter to step on the way out of a node by a slot of its end; -1 for none. */
  counterOf(node: number, slot: number): number {
    const { counter } = this.edges[this.firstEdge[node]! + slot]!
    return counter < this.graph.counted.length ? -1 : counter
  }

  /** Visits of each node in a run from entry to finish, from the counts. All are safe integers. */
  visits(counts: (counter: number) => number): Float64Array {
    const flow = new Float64Array(this.edges.length)
    // What enters a node less what leaves it, over the edges known so far. One run enters and one finishes.
    const excess = new Float64Array(this.graph.nodes.length)
    excess[0] = 1
    excess[FINISH] = -1
    const settle = (at: number, amount: number) => {
      const { from, to } = this.edges[at]!
      flow[at] = amount
      excess[to]! += amount
      excess[from]! -= amount
    }
    for (let at = 0; at < this.edges.length; at++) {
      const { counter } = this.edges[at]!
      if (counter >= 0) settle(at, counts(counter))
    }
    for (const { node, edge } of this.leavesFirst)
      settle(edge, this.edges[edge]!.to === node ? -excess[node]! : excess[node]!)
    const visits = new Float64Array(this.graph.nodes.length)
    visits[0] = 1
    for (let at = 0; at < this.edges.length; at++) visits[this.edges[at]!.to]! += flow[at]!
    return visits
  }

  private walkTree() {
    const branches: number[][] = this.graph.nodes.map(() => [])
    for (let at = 0; at < this.edges.length; at++) {
      const { from, to, counter } = this.edges[at]!
      if (counter !== IN_TREE) continue
      branches[from]!.push(at)
      branches[to]!.push(at)
    }
    const found: { node: number; edge: number }[] = []
    const seen = new Uint8Array(this.graph.nodes.length)
    const waiting = [0]
    seen[0] = 1
    for (let node = waiting.pop(); node !== undefined; node = waiting.pop()) {
      for (const edge of branches[node]!) {
        const { from, to } = this.edges[edge]!
        const next = from === node ? to : from
        if (seen[next]) continue
        seen[next] = 1
        found.push({ node: next, edge })
        waiting.push(next)
      }
    }
    return found.reverse()
  }
}

/** How often a loop's body is taken to run, for want of better: only which edges are counted hangs on it. */
const PASSES = 8
const MOST_DEPTH = 12

function edgeWeight(from: number, to: number, slots: number, { depth }: Loops): number {
  const before = PASSES ** Math.min(depth[from]!, MOST_DEPTH)
  return Math.min(before / slots, PASSES ** Math.min(depth[to]!, MOST_DEPTH))
}

/** A spanning tree of greatest weight, directions aside: the edges in it (J. B. Kruskal, Proc. AMS 7, 1956). */
function spanningTree(nodes: number, edges: readonly BareEdge[]): Uint8Array {
  const root = Int32Array.from({ length: nodes }, (_, node) => node)
  const find = (node: number) => {
    while (root[node] !== node) {
      root[node] = root[root[node]!]!
      node = root[node]!
    }
    return node
  }
  // There are few weights, one or two for each depth of loops.
  const byWeight = new Map<number, number[]>()
  for (let at = 0; at < edges.length; at++) {
    const { weight, aside, loop } = edges[at]!
    if (aside || loop !== undefined) continue
    const list = byWeight.get(weight)
    if (list) list.push(at)
    else byWeight.set(weight, [at])
  }
  const inTree = new Uint8Array(edges.length)
  for (const weight of [...byWeight.keys()].sort((a, b) => b - a)) {
    for (const at of byWeight.get(weight)!) {
      const a = find(edges[at]!.from)
      const b = find(edges[at]!.to)
      if (a === b) continue
      root[a] = b
      inTree[at] = 1
    }
  }
  return inTree
}
