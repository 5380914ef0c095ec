import { holdsExact, isProblem, type Operation, type Words } from '../routine'
import type { Binding, Input } from './run'

/**
 * Judges an assert with the variables and arrays as they are: undefined where it holds, else why it stops the run ('' where
 * it is plainly false). Both ways of running use it. `old` reads the input.
 */
export function judgeAssert(
  binding: Binding,
  input: Input,
  assert: Extract<Operation, { kind: 'assert' }>,
  readVariable: (variable: number) => bigint,
  contents: (name: string) => Words | undefined,
): string | undefined {
  const holds = holdsExact(assert.condition, {
    number(name, old) {
      if (old) return Object.hasOwn(input.scalars, name) ? input.scalars[name] : undefined
      const variable = assert.reads.get(name)
      return variable === undefined ? binding.names.get(name) : readVariable(variable)
    },
    content: (name, old) =>
      old ? (Object.hasOwn(input.arrays, name) ? input.arrays[name] : undefined) : contents(name),
  })
  if (isProblem(holds)) return holds.message
  return holds ? undefined : ''
}
