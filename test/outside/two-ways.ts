import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { expect } from 'vitest'
import { type CompiledProgram, compileProgramSync } from '../../src/engine'
import {
  type Binding,
  bindProgram,
  CHARGES,
  type Charges,
  DEFAULT_LIMITS,
  type Failure,
  type Input,
  interpretProgram,
  type Limits,
  makeWords,
  type RunResult,
  type Tally,
  tallyRun,
  weighTally,
} from '../../src/machine'
import { type Program, readProgram } from '../../src/routine'

/** What one run is given, in plain numbers. */
export interface Given {
  readonly width: number
  readonly sizes?: Readonly<Record<string, number>>
  readonly lets?: Readonly<Record<string, bigint>>
  readonly scalars?: Readonly<Record<string, bigint | number>>
  readonly arrays?: Readonly<Record<string, readonly (bigint | number)[]>>
  readonly junk?: number
  readonly limits?: Partial<Limits>
}

/** A good run, the same both ways. */
export interface Outcome {
  readonly tally: Tally
  readonly scalars: Readonly<Record<string, bigint>>
  /** Each array's words as BigInts. */
  array(name: string): bigint[]
  /** Time under the given charges. */
  time(charges?: Charges): number
  /** Operations of all classes on the first line of the text that holds `part`. */
  operationsAt(part: string): number
  readonly frames: number
}

/** The text of a `.tally` file of this folder. */
export function routineText(file: string): string {
  return readFileSync(fileURLToPath(new URL(file, import.meta.url)), 'utf8')
}

/** A routine that is run by the reference and by the engine, each checked against the other. */
export class TwoWays {
  readonly program: Program
  readonly text: string
  private readonly modules = new Map<number, CompiledProgram>()

  /** Throws where the text is no routine, with what is wrong with it. */
  constructor(text: string) {
    const { program, diagnostics } = readProgram(text)
    const errors = diagnostics.filter(diagnostic => diagnostic.severity === 'error')
    if (!program || errors.length > 0) {
      const list = errors.map(error => `line ${error.span.line}: ${error.message} (${error.remedy})`)
      throw new Error(`not a routine: ${list.join('; ')}\n${text}`)
    }
    this.program = program
    this.text = text
  }

  bind(given: Given): Binding {
    const point = { width: given.width, sizes: given.sizes ?? {}, lets: given.lets ?? {} }
    const bound = bindProgram(this.program, point, { ...DEFAULT_LIMITS, ...given.limits })
    if ('refusal' in bound) throw new Error(`refused at w = ${given.width}: ${bound.refusal.reason}`)
    return bound.binding
  }

  /** Both results, which may be failures; nothing is compared yet. */
  results(given: Given): { binding: Binding; reference: RunResult; engine: RunResult } {
    const binding = this.bind(given)
    const limits = { ...DEFAULT_LIMITS, ...given.limits }
    const compiled = this.modules.get(given.width) ?? compileProgramSync(this.program, given.width)
    this.modules.set(given.width, compiled)
    const reference = interpretProgram(binding, toInput(given), limits)
    const engine = compiled.run(binding, toInput(given), limits)
    return { binding, reference, engine }
  }

  /** Runs both ways and expects one and the same good outcome. */
  run(given: Given): Outcome {
    const { binding, reference, engine } = this.results(given)
    expect(engine).toEqual(reference)
    if (!engine.ok) throw new Error(`the run failed: ${engine.failure.message}`)
    const tally = tallyRun(binding, engine)
    const lines = this.text.split('\n')
    return {
      tally,
      scalars: engine.scalars,
      frames: engine.frames,
      array(name) {
        const words = engine.arrays[name]
        if (!words) throw new Error(`no array ${name} among the results`)
        return Array.from(words, BigInt)
      },
      time: (charges = CHARGES.unit) => Number(weighTally(tally, charges).time),
      operationsAt(part) {
        const line = lines.findIndex(text => text.includes(part)) + 1
        if (line === 0) throw new Error(`no line holds "${part}"`)
        const counts = tally.byLine.find(entry => entry.line === line)?.counts ?? {}
        return Object.entries(counts).reduce((sum, [name, count]) => sum + (name === 'index' ? 0 : count), 0)
      },
    }
  }

  /** Runs both ways and expects one and the same failure. */
  fail(given: Given): Failure {
    const { reference, engine } = this.results(given)
    expect(engine).toEqual(reference)
    if (engine.ok) throw new Error('the run was good, and should have failed')
    return engine.failure
  }
}

/** The words of a run in the form that both ways take. */
export function toInput(given: Given): Input {
  const mask = (1n << BigInt(given.width)) - 1n
  const word = (value: bigint | number) => BigInt(value) & mask
  const scalars = Object.entries(given.scalars ?? {}).map(([name, value]) => [name, word(value)] as const)
  const arrays = Object.entries(given.arrays ?? {}).map(
    ([name, values]) => [name, makeWords(given.width, values.map(word))] as const,
  )
  return { arrays: Object.fromEntries(arrays), scalars: Object.fromEntries(scalars), junk: given.junk ?? 1 }
}

/** Words where carries, signs and shifts turn: around 0, the sign bit, the top, half a word, and patterns. */
export function cornerWords(width: number): bigint[] {
  const top = (1n << BigInt(width)) - 1n
  const sign = 1n << BigInt(width - 1)
  const half = 1n << BigInt(width >> 1)
  const stripes = BigInt.asUintN(width, 0x5555_5555_5555_5555_5555n)
  const mixed = BigInt.asUintN(width, 0x9e37_79b9_7f4a_7c15_f39c_c060n)
  const w = BigInt(width)
  const words = [0n, 1n, 2n, 3n, sign - 1n, sign, sign + 1n, top - 1n, top, half - 1n, half, w - 1n, w, w + 1n]
  return [...new Set([...words, stripes, mixed].map(word => word & top))]
}
