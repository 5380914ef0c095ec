import {
  type Binding,
  bindProgram,
  DEFAULT_LIMITS,
  type Input,
  interpretProgram,
  type Limits,
  makeWords,
  type RunResult,
} from '../../src/machine'
import { type Program, readProgram } from '../../src/routine'

/** A routine of declarations and body. Declarations start at line 2; the body follows `begin`. */
export function program(declarations: string, body: string): Program {
  const reading = readProgram(`routine draft\n${declarations}\nbegin\n${body}\nend\n`)
  if (!reading.program)
    throw new Error(reading.diagnostics.map(each => `${each.span.line}: ${each.message}`).join('\n'))
  return reading.program
}

export interface Given {
  readonly width?: number
  readonly sizes?: Record<string, number>
  readonly lets?: Record<string, bigint>
  readonly arrays?: Record<string, bigint[]>
  readonly scalars?: Record<string, bigint>
  readonly junk?: number
  readonly limits?: Partial<Limits>
}

/** Binds, or throws the refusal's reason. */
export function bound(of: Program, given: Given = {}): Binding {
  const { width = 16, sizes = {}, lets = {}, limits = {} } = given
  const outcome = bindProgram(of, { width, sizes, lets }, { ...DEFAULT_LIMITS, ...limits })
  if (!('binding' in outcome)) throw new Error(outcome.refusal.reason)
  return outcome.binding
}

export function inputOf({ width = 16, arrays = {}, scalars = {}, junk = 1 }: Given): Input {
  const words = Object.entries(arrays).map(([name, content]) => [name, makeWords(width, content)])
  return { arrays: Object.fromEntries(words), scalars, junk }
}

/** Runs by the reference. */
export function run(of: Program, given: Given = {}): RunResult {
  return interpretProgram(bound(of, given), inputOf(given), { ...DEFAULT_LIMITS, ...given.limits })
}
