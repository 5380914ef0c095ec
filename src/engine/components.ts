/**
 * Strongly connected components of a directed graph: the component of each node, numbered so that a component
 * comes after those it leads to. Nodes that `roots` do not reach keep -1.
 * R. E. Tarjan, "Depth-first search and linear graph algorithms", SIAM J. Comput. 1, 1972; with an explicit stack.
 */
export function findComponents(
  count: number,
  roots: readonly number[],
  successors: (node: number) => readonly number[],
): Int32Array {
  const component = new Int32Array(count).fill(-1)
  const reached = new Int32Array(count).fill(-1)
  const low = new Int32Array(count)
  const waiting: number[] = []
  const path: { node: number; next: readonly number[]; taken: number }[] = []
  let clock = 0
  let found = 0
  const enter = (node: number) => {
    reached[node] = low[node] = clock++
    waiting.push(node)
    path.push({ node, next: successors(node), taken: 0 })
  }
  for (const root of roots) {
    if (reached[root] !== -1) continue
    enter(root)
    while (path.length > 0) {
      const step = path[path.length - 1]!
      const next = step.next[step.taken++]
      if (next !== undefined) {
        if (reached[next] === -1) enter(next)
        else if (component[next] === -1) low[step.node] = Math.min(low[step.node]!, reached[next]!)
        continue
      }
      path.pop()
      const above = path[path.length - 1]
      if (above) low[above.node] = Math.min(low[above.node]!, low[step.node]!)
      if (low[step.node] !== reached[step.node]) continue
      for (;;) {
        const member = waiting.pop()!
        component[member] = found
        if (member === step.node) break
      }
      found++
    }
  }
  return component
}
