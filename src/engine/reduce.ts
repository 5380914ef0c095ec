import { findComponents } from './components'
import { type FlowGraph, targetsOf, withTargets } from './flow'
import { type FlowOrder, orderFlow } from './order'

/**
 * Readies a graph for structured code and for counting, and gives its order. Where a loop has several entries, a node
 * is added that all ways to those entries go through, and that goes on to the one that a selector tells; the rest of
 * the graph stays as it is. Each target of a dispatch that other ways lead to as well gets a node of its own before it.
 */
export function readyFlow(graph: FlowGraph): FlowOrder {
  const order = orderFlow(graph)
  if (!order.reducible) splitLoops(graph, [...order.order], new Set())
  const padded = padDispatches(graph)
  return order.reducible && !padded ? order : orderFlow(graph)
}

/** Makes every loop among `members` (edges to `heads` left out) one of a single entry, from the outermost in. */
function splitLoops(graph: FlowGraph, members: readonly number[], heads: Set<number>): void {
  const { nodes } = graph
  const waiting: (readonly number[])[] = [members]
  for (let region = waiting.pop(); region !== undefined; region = waiting.pop()) {
    const inside = new Set(region)
    const within = (at: number) => targetsOf(nodes[at]!.end).filter(to => inside.has(to) && !heads.has(to))
    const component = findComponents(nodes.length, region, within)
    const groups = new Map<number, number[]>()
    for (const at of region) {
      const group = groups.get(component[at]!)
      if (group) group.push(at)
      else groups.set(component[at]!, [at])
    }
    for (const loop of groups.values()) {
      if (loop.length === 1 && !within(loop[0]!).includes(loop[0]!)) continue
      const entries = loopEntries(graph, loop)
      if (entries.length === 1) heads.add(entries[0]!)
      else {
        const added = dispatchEntries(graph, loop, entries)
        heads.add(added.dispatch)
        loop.push(...added.inside)
      }
      waiting.push(loop)
    }
  }
}

function loopEntries({ nodes }: FlowGraph, loop: readonly number[]): number[] {
  const inside = new Set(loop)
  const entries = new Set<number>()
  for (const [at, { end }] of nodes.entries()) {
    if (inside.has(at)) continue
    for (const target of targetsOf(end)) if (inside.has(target)) entries.add(target)
  }
  return [...entries]
}

function dispatchEntries(graph: FlowGraph, loop: readonly number[], entries: readonly number[]) {
  const { nodes } = graph
  const members = new Set(loop)
  const places = new Map(entries.map((entry, place) => [entry, place]))
  const selector = graph.selectors++
  const count = nodes.length
  const dispatch = nodes.push({ block: -1, steps: [], end: { kind: 'dispatch', selector, targets: entries } }) - 1
  const inside = [dispatch]
  for (let at = 0; at < count; at++) {
    const node = nodes[at]!
    const targets = targetsOf(node.end)
    if (!targets.some(target => places.has(target))) continue
    const redirected = targets.map(target => {
      const value = places.get(target)
      if (value === undefined) return target
      const select = { kind: 'select', selector, value } as const
      const way = nodes.push({ block: -1, steps: [select], end: { kind: 'jump', to: dispatch } }) - 1
      if (members.has(at)) inside.push(way)
      return way
    })
    node.end = withTargets(node.end, redirected)
  }
  return { dispatch, inside }
}

function padDispatches({ nodes }: FlowGraph): boolean {
  const arrivals = new Int32Array(nodes.length)
  for (const { end } of nodes) for (const target of targetsOf(end)) arrivals[target]!++
  const before = nodes.length
  for (const node of [...nodes]) {
    if (node.end.kind !== 'dispatch') continue
    const targets = node.end.targets.map(target => {
      if (arrivals[target] === 1) return target
      return nodes.push({ block: -1, steps: [], end: { kind: 'jump', to: target } }) - 1
    })
    node.end = withTargets(node.end, targets)
  }
  return nodes.length > before
}
