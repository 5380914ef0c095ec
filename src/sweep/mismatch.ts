import { namesInExact, nearestName, type Program } from '../routine'
import type { Misread } from './misread'
import type { Setting } from './setting'

/** The first thing in a setting that does not go with the routine: a size or let that it lacks, or one not given. */
export function findMismatch(setting: Setting, program: Program): Misread | undefined {
  const { name, sizes, lets } = program.routine
  const first = sizes[0]
  if (first !== undefined && !setting.sizes[first])
    return { problem: `${name} has a size ${first}, and the setting gives it no values`, remedy: `give ${first}` }
  const letNames = lets.map(known => known.name)
  const strangeSize = Object.keys(setting.sizes).find(size => !sizes.includes(size))
  if (strangeSize !== undefined) return stranger(name, 'size', strangeSize, sizes)
  const strangeLet = Object.keys(setting.lets).find(known => !letNames.includes(known))
  if (strangeLet !== undefined) return stranger(name, 'let', strangeLet, letNames)
  for (const choice of setting.widths) {
    if (choice.kind === 'fixed') continue
    const strange = [...namesInExact(choice.expression)].find(known => !sizes.includes(known))
    if (strange !== undefined) return stranger(name, 'size', strange, sizes)
  }
  return undefined
}

function stranger(routine: string, kind: 'size' | 'let', given: string, known: readonly string[]): Misread {
  const near = nearestName(given, known)
  const has = known.length > 0 ? `it has ${known.join(', ')}` : `it has no ${kind}s`
  return {
    problem: `${routine} has no ${kind} ${given}`,
    remedy: near ? `did you mean ${near}?` : has,
  }
}
