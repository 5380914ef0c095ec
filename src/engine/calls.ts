import type { Program } from '../routine'
import { findComponents } from './components'

/** How each procedure is called. */
export interface CallPlan {
  /**
   * A shared procedure stands in the module once and is reached by a branch, its return by a branch table; any other
   * is copied to each of its calls.
   */
  readonly shared: readonly boolean[]
  /** Whether a call of it can lead to another one before it returns. */
  readonly recursive: readonly boolean[]
  /** Procedures of the same component call each other; only such calls must save variables. */
  readonly component: Int32Array
}

/** A procedure of at most this many steps is always copied: passing control would cost as much as it does. */
const SMALL = 12

/** Most steps that copies of one procedure may add to the module: what bounds its size, and so the time to compile. */
const MOST_GROWTH = 400

/** Recursive procedures are shared; others are copied to their calls unless that makes too much code. */
export function planCalls(program: Program): CallPlan {
  const { procedures, blocks } = program
  const callees = procedures.map(procedure =>
    procedure.blocks.flatMap(at => {
      const { terminator } = blocks[at]!
      return terminator.kind === 'call' ? [terminator.procedure] : []
    }),
  )
  const component = findComponents(procedures.length, [0], at => callees[at]!)
  const members = new Map<number, number>()
  const sites = new Int32Array(procedures.length)
  for (const [at, calls] of callees.entries()) {
    if (component[at] === -1) continue
    members.set(component[at]!, (members.get(component[at]!) ?? 0) + 1)
    for (const callee of calls) sites[callee]!++
  }
  const recursive = procedures.map((_, at) => members.get(component[at]!)! > 1 || callees[at]!.includes(at))
  // Components are numbered callees first, so sizes of copied callees are known in time.
  const order = procedures.map((_, at) => at).filter(at => component[at] !== -1)
  order.sort((a, b) => component[a]! - component[b]!)
  const shared = procedures.map(() => false)
  const sizes = procedures.map(() => 0)
  for (const at of order) {
    const own = procedures[at]!.blocks.reduce((sum, block) => sum + blocks[block]!.operations.length + 1, 0)
    sizes[at] = callees[at]!.reduce((sum, callee) => (shared[callee] ? sum : sum + sizes[callee]!), own)
    shared[at] = recursive[at]! || (sizes[at]! > SMALL && (sites[at]! - 1) * sizes[at]! > MOST_GROWTH)
  }
  return { shared, recursive, component }
}
