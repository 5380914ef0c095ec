import { type FlowGraph, targetsOf } from './flow'

/** The order, dominators and loops of a flow graph. Nodes that cannot be reached are in no order (`rank` -1). */
export interface FlowOrder {
  /** Nodes in reverse postorder, the entry first; `rank` is a node's place in it. */
  readonly order: Int32Array
  readonly rank: Int32Array
  /** By node: every way to it comes from these, by slot of their ends (a node may repeat). */
  readonly sources: readonly (readonly number[])[]
  /** Immediate dominator by node; the entry's own is itself. */
  readonly dominator: Int32Array
  /** Whether a node is the target of a retreating edge. */
  readonly header: Uint8Array
  /** Whether each retreating edge leads to a dominator of where it starts. */
  readonly reducible: boolean
}

/**
 * Dominators by K. D. Cooper, T. J. Harvey, K. Kennedy, "A simple, fast dominance algorithm", 2001. Sources are met
 * latest first, so that a node with many of them walks up the tree once.
 */
export function orderFlow({ nodes }: FlowGraph): FlowOrder {
  const order = reversePostorder(nodes.length, at => targetsOf(nodes[at]!.end))
  const rank = new Int32Array(nodes.length).fill(-1)
  order.forEach((node, place) => {
    rank[node] = place
  })
  const sources: number[][] = nodes.map(() => [])
  // Latest first: see above.
  for (let place = order.length - 1; place >= 0; place--) {
    const node = order[place]!
    for (const target of targetsOf(nodes[node]!.end)) sources[target]!.push(node)
  }
  const dominator = findDominators(order, rank, sources)
  const header = new Uint8Array(nodes.length)
  let reducible = true
  for (const node of order) {
    for (const source of sources[node]!) {
      if (rank[source]! < rank[node]!) continue
      header[node] = 1
      reducible &&= dominates(node, source, dominator, rank)
    }
  }
  return { order, rank, sources, dominator, header, reducible }
}

function reversePostorder(count: number, targets: (node: number) => readonly number[]): Int32Array {
  const seen = new Uint8Array(count)
  const finished: number[] = []
  const path = [{ node: 0, next: targets(0), taken: 0 }]
  seen[0] = 1
  while (path.length > 0) {
    const step = path[path.length - 1]!
    const next = step.next[step.taken++]
    if (next === undefined) finished.push(path.pop()!.node)
    else if (!seen[next]) {
      seen[next] = 1
      path.push({ node: next, next: targets(next), taken: 0 })
    }
  }
  return Int32Array.from(finished.reverse())
}

function findDominators(order: Int32Array, rank: Int32Array, sources: readonly (readonly number[])[]): Int32Array {
  const dominator = new Int32Array(rank.length).fill(-1)
  const entry = order[0]!
  dominator[entry] = entry
  const meet = (a: number, b: number) => {
    while (a !== b) {
      while (rank[a]! > rank[b]!) a = dominator[a]!
      while (rank[b]! > rank[a]!) b = dominator[b]!
    }
    return a
  }
  for (let changed = true; changed; ) {
    changed = false
    for (const node of order) {
      if (node === entry) continue
      let nearest = -1
      for (const source of sources[node]!) {
        if (dominator[source] === -1) continue
        nearest = nearest === -1 ? source : meet(source, nearest)
      }
      if (dominator[node] === nearest) continue
      dominator[node] = nearest
      changed = true
    }
  }
  return dominator
}

function dominates(above: number, node: number, dominator: Int32Array, rank: Int32Array): boolean {
  while (rank[node]! > rank[above]!) node = dominator[node]!
  return node === above
}

/** The innermost loop around each node of a reducible graph. */
export interface Loops {
  /** By node: the header of its innermost loop (a header's is itself), -1 outside all loops. */
  readonly inner: Int32Array
  /** By header: the header of the next loop around, -1 for none. */
  readonly outer: Int32Array
  /** By node: number of loops around it. */
  readonly depth: Int32Array
}

/** Natural loops; inner ones are found first and then passed over as one node. */
export function findLoops({ order, rank, sources, header }: FlowOrder): Loops {
  const inner = new Int32Array(rank.length).fill(-1)
  const outer = new Int32Array(rank.length).fill(-1)
  const depth = new Int32Array(rank.length)
  /** The outermost loop found so far around a node, by a path that is shortened as it is walked. */
  const top = new Int32Array(rank.length).fill(-1)
  const outermost = (node: number) => {
    let at = node
    while (top[at] !== -1) at = top[at]!
    while (top[node] !== -1) {
      const next = top[node]!
      if (next !== at) top[node] = at
      node = next
    }
    return at
  }
  for (let place = order.length - 1; place >= 0; place--) {
    const head = order[place]!
    if (!header[head]) continue
    inner[head] = head
    const waiting: number[] = []
    const meet = (source: number) => {
      const member = outermost(source)
      if (member === head) return
      if (header[member] && inner[member] === member) outer[member] = head
      else inner[member] = head
      top[member] = head
      waiting.push(member)
    }
    for (const source of sources[head]!) if (rank[source]! >= rank[head]!) meet(source)
    for (let member = waiting.pop(); member !== undefined; member = waiting.pop())
      for (const source of sources[member]!) meet(source)
  }
  for (const node of order) {
    const head = inner[node]!
    if (head === node) depth[node] = outer[node] === -1 ? 1 : depth[outer[node]!]! + 1
    else depth[node] = head === -1 ? 0 : depth[head]!
  }
  return { inner, outer, depth }
}
