import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus'
import { type CompiledProgram, compileProgramSync } from '../../src/engine'
import {
  type Binding,
  bindProgram,
  CHARGES,
  DEFAULT_LIMITS,
  type Input,
  makeWords,
  type RunResult,
  tallyRun,
  weighTally,
} from '../../src/machine'
import { readProgram, type Words } from '../../src/routine'
import type { BenchCase } from './cases'

type GoodRun = Extract<RunResult, { ok: true }>

const modules = new Map<string, CompiledProgram>()

/** A routine bound to a size, with its input, ready to run again and again. */
export class Ready {
  readonly words: Words
  private readonly binding: Binding
  private readonly compiled: CompiledProgram
  private readonly input: Input

  constructor(
    readonly each: BenchCase,
    width: number,
    n: number,
    /** Whether the routine's body is left out: what remains is setting up and taking out. */
    idle = false,
  ) {
    const text = readFileSync(join(import.meta.dirname, `${each.name}.tally`), 'utf8')
    const { program, diagnostics } = readProgram(idle ? withoutBody(text, each) : text)
    if (!program) throw new Error(`${each.name}: ${diagnostics.map(({ message }) => message).join('; ')}`)
    this.words = makeWords(width, inputOf(each, width, n))
    const point = { width, sizes: { n: this.words.length }, lets: {} }
    const bound = bindProgram(program, point, DEFAULT_LIMITS)
    if ('refusal' in bound) throw new Error(`${each.name} at n = ${n}: ${bound.refusal.reason}`)
    this.binding = bound.binding
    const key = `${each.name} ${width} ${idle}`
    this.compiled = modules.get(key) ?? compileProgramSync(program, width)
    modules.set(key, this.compiled)
    this.input = { arrays: { a: this.words }, scalars: {}, junk: 1 }
  }

  /** One counted run, with its time in milliseconds: input in, junk, the routine, results out. */
  run(): { time: number; good: GoodRun } {
    const start = performance.now()
    const good = this.compiled.run(this.binding, this.input, DEFAULT_LIMITS)
    const time = performance.now() - start
    if (!good.ok) throw new Error(`${this.each.name}: ${good.failure.message}`)
    return { time, good }
  }

  operations(good: GoodRun): number {
    return Number(weighTally(tallyRun(this.binding, good), CHARGES.unit).time)
  }

  /** The words of the result that its twin sums up. */
  result(good: GoodRun): Iterable<bigint | number> {
    const { result } = this.each
    return typeof result === 'string' ? good.arrays[result]! : result.map(name => good.scalars[name]!)
  }
}

function withoutBody(text: string, { result }: BenchCase): string {
  const outputs = typeof result === 'string' ? [] : result.map(name => `  ${name} <- 0\n`)
  return text.replace(/^begin[\s\S]*/m, `begin\n${outputs.join('')}  halt\nend\n`)
}

function inputOf({ input }: BenchCase, width: number, n: number): bigint[] {
  const generator = xoroshiro128plus(n)
  const bits = () => BigInt(generator.next() >>> 0)
  const random = () => (width > 32 ? (bits() << 32n) | bits() : bits())
  return input ? input(n, random) : Array.from({ length: n }, random)
}
