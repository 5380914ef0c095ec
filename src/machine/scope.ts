import type { Scope, Words } from '../routine'
import type { Binding, Input } from './run'

/** What exact expressions of declarations may read at a point: sizes, lets, fixes and `w`. */
export function namesScope(names: ReadonlyMap<string, bigint>): Scope {
  return { number: name => names.get(name), content: () => undefined }
}

/** A run's contents after it, as checks read them. */
export interface Outcome {
  readonly arrays: Readonly<Record<string, Words>>
  readonly scalars: Readonly<Record<string, bigint>>
}

/** What checks may read: the names of the point, inputs as they were (`old`) and everything as it came out. */
export function checkScope(binding: Binding, input: Input, outcome: Outcome): Scope {
  const tables = new Map<string, Words>()
  for (const [array, words] of binding.tables) tables.set(binding.program.routine.arrays[array]!.name, words)
  return {
    number(name, old) {
      const after = old ? undefined : own(outcome.scalars, name)
      return after ?? own(input.scalars, name) ?? binding.names.get(name)
    },
    content(name, old) {
      const after = old ? undefined : own(outcome.arrays, name)
      return after ?? own(input.arrays, name) ?? tables.get(name)
    },
  }
}

function own<T>(record: Readonly<Record<string, T>>, name: string): T | undefined {
  return Object.hasOwn(record, name) ? record[name] : undefined
}
