import type { Block, BlockProcedure } from './block'
import { successors } from './block-builder'

/**
 * Marks the blocks at which a run is measured against its operation limit: targets of retreating edges of a
 * depth-first walk and entries of procedures, so that no cycle is without one. The weight is the least number of
 * operations from there to the next mark or the end. A block on a cycle always has at least 1: what ends without
 * any cost has no branch, so it cannot go round.
 */
export function markCheckpoints(blocks: readonly Block[], procedures: readonly BlockProcedure[]): Block[] {
  const marked = new Set<number>()
  const finished: number[] = []
  for (const [place, procedure] of procedures.entries()) {
    if (place > 0) marked.add(procedure.entry)
    walk(blocks, procedure.entry, marked, finished)
  }
  // In finishing order every successor that is no mark comes before its predecessors.
  const least = new Float64Array(blocks.length)
  for (const at of finished) {
    const block = blocks[at]!
    const own = block.costs.reduce((sum, cost) => (cost.class === 'index' ? sum : sum + cost.count), 0)
    const onward = block.terminator.kind === 'call' ? [] : successors(block.terminator)
    const rest = onward.map(next => (marked.has(next) ? 0 : least[next]!))
    least[at] = own + (rest.length > 0 ? Math.min(...rest) : 0)
  }
  return blocks.map((block, at) => (marked.has(at) ? { ...block, checkpoint: Math.max(1, least[at]!) } : block))
}

function walk(blocks: readonly Block[], entry: number, marked: Set<number>, finished: number[]): void {
  const open = new Set<number>([entry])
  const seen = new Set<number>([entry])
  const path: { at: number; next: readonly number[]; taken: number }[] = []
  const push = (at: number) => path.push({ at, next: successors(blocks[at]!.terminator), taken: 0 })
  push(entry)
  while (path.length > 0) {
    const step = path[path.length - 1]!
    const next = step.next[step.taken++]
    if (next === undefined) {
      path.pop()
      open.delete(step.at)
      finished.push(step.at)
    } else if (open.has(next)) {
      marked.add(next)
    } else if (!seen.has(next)) {
      seen.add(next)
      open.add(next)
      push(next)
    }
  }
}
