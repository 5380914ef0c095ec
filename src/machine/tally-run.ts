import { type ChargedClass, OPERATION_CLASSES, type OperationClass } from '../routine'
import type { Binding, RunResult } from './run'
import type { ExpandedUse, Space, Tally } from './tally'

type Finished = Extract<RunResult, { ok: true }>

/** The tally of a finished run: its blocks' costs times their visits, and its words of space. */
export function tallyRun(binding: Binding, result: Finished): Tally {
  const byClass = Object.fromEntries(OPERATION_CLASSES.map(each => [each, 0])) as Record<OperationClass, number>
  const lines = new Map<number, Partial<Record<ChargedClass, number>>>()
  const stoodIn = new Map<string, { line: number; class: OperationClass; calls: number; operations: number }>()
  let indexed = 0
  for (const [at, { costs }] of binding.program.blocks.entries()) {
    const visits = result.visits[at]!
    if (visits === 0) continue
    for (const cost of costs) {
      const count = cost.count * visits
      if (cost.class === 'index') indexed += count
      else byClass[cost.class] += count
      const line = lines.get(cost.line) ?? {}
      lines.set(cost.line, line)
      line[cost.class] = (line[cost.class] ?? 0) + count
      if (!cost.expanded || cost.class === 'index') continue
      const key = `${cost.line} ${cost.expanded}`
      const use = stoodIn.get(key) ?? { line: cost.line, class: cost.expanded, calls: 0, operations: 0 }
      stoodIn.set(key, use)
      use.operations += count
      if (cost.class === 'call') use.calls += count
    }
  }
  const byLine = [...lines].sort(([a], [b]) => a - b).map(([line, counts]) => ({ line, counts }))
  const expanded = [...stoodIn.values()]
    .sort((a, b) => a.line - b.line)
    // A use is one call there and one back.
    .map(({ calls, ...use }): ExpandedUse => ({ ...use, uses: calls / 2 }))
  return {
    byClass,
    byLine,
    indexed,
    ...(expanded.length > 0 ? { expanded } : {}),
    space: spaceOf(binding, result),
  }
}

function spaceOf(binding: Binding, { touched, frames }: Finished): Space {
  const { routine, procedures } = binding.program
  let input = routine.sizes.length
  let output = 0
  let declared = 0
  let constants = routine.fixes.length
  for (const [at, { role }] of routine.arrays.entries()) {
    const { length } = binding.arrays[at]!
    if (role === 'in' || role === 'inout') input += length
    else if (role === 'out') output += length
    else if (role === 'work') declared += length
    else constants += length
  }
  for (const { role } of routine.scalars) {
    if (role === 'out') output += 1
    else input += 1
  }
  const scalars = new Set(routine.scalars.map(({ name }) => name))
  const variables = procedures[0]!.variables.filter(({ name, hidden }) => !hidden && !scalars.has(name)).length
  return { input, output, working: touched + variables + frames, declared, constants }
}
