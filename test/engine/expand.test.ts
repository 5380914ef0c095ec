import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { compileProgramSync } from '../../src/engine'
import { expandProgram, listExpansions } from '../../src/engine/expand'
import {
  applyBinary,
  applyUnary,
  bindProgram,
  DEFAULT_LIMITS,
  INSTRUCTION_SETS,
  type InstructionSet,
  interpretProgram,
  multiplyWords,
  type RunResult,
  refuseClasses,
  tallyRun,
} from '../../src/machine'
import { type Program, readProgram } from '../../src/routine'

const BINARY = {
  '*': 'multiply',
  '/': 'divide',
  mod: 'modulo',
  '&': 'and',
  '|': 'or',
  xor: 'xor',
  '<<': 'shift-left',
  '>>': 'shift-right',
} as const
const UNARY = ['popcount', 'msb', 'lsb'] as const

/** Every function that a machine may lack: a routine of it on x and y, and what it must give. */
const FUNCTIONS: readonly { name: string; body: string; value(x: bigint, y: bigint, w: number): bigint[] }[] = [
  ...Object.entries(BINARY).map(([operator, name]) => ({
    name,
    body: `z <- x ${operator} y\n  t <- y`,
    value: (x: bigint, y: bigint, w: number) => [applyBinary(name, x, y, w), y],
  })),
  ...UNARY.map(name => ({
    name,
    body: `z <- ${name}(x)\n  t <- y`,
    value: (x: bigint, y: bigint, w: number) => [applyUnary(name, x, w), y],
  })),
  {
    name: 'complement',
    body: 'z <- ~x\n  t <- y',
    value: (x, y, w) => [applyUnary('complement', x, w), y],
  },
  {
    name: 'product',
    body: 'z, t <- x * y',
    value: (x, y, w) => Object.values(multiplyWords(x, y, w)),
  },
]

function routine(body: string): Program {
  const { program, diagnostics } = readProgram(`routine use\n  in x, y\n  out z, t\nbegin\n  ${body}\nend\n`)
  if (!program) throw new Error(diagnostics.map(each => each.message).join('\n'))
  return program
}

const SETS: readonly InstructionSet[] = Object.values(INSTRUCTION_SETS)
const CASES = FUNCTIONS.flatMap(each => SETS.map(set => ({ ...each, set, title: `${each.name} on ${set.name}` })))

function runner(program: Program, width: number) {
  const bound = bindProgram(program, { width, sizes: {}, lets: {} }, DEFAULT_LIMITS)
  if (!('binding' in bound)) throw new Error(bound.refusal.reason)
  const compiled = compileProgramSync(program, width)
  const input = (x: bigint, y: bigint) => ({ arrays: {}, scalars: { x, y }, junk: 1 })
  return {
    binding: bound.binding,
    engine: (x: bigint, y: bigint) => compiled.run(bound.binding, input(x, y), DEFAULT_LIMITS),
    reference: (x: bigint, y: bigint) => interpretProgram(bound.binding, input(x, y), DEFAULT_LIMITS),
  }
}

function results(run: RunResult): bigint[] | string {
  return run.ok ? [run.scalars.z!, run.scalars.t!] : run.failure.kind
}

describe('an expansion', () => {
  test.each(CASES)('$title uses nothing that is off', ({ body, set }) => {
    expect(refuseClasses(expandProgram(routine(body), set), set)).toEqual([])
  })

  test.each(CASES)('$title gives every result at w = 2 .. 6', ({ body, set, value, name }) => {
    const program = expandProgram(routine(body), set)
    for (let width = 2; width <= 6; width++) {
      const { engine } = runner(program, width)
      const wrong: string[] = []
      for (let x = 0n; x < 1n << BigInt(width); x++) {
        for (let y = 0n; y < 1n << BigInt(width); y++) {
          const divides = name === 'divide' || name === 'modulo'
          const expected = divides && y === 0n ? 'divide' : value(x, y, width)
          const found = results(engine(x, y))
          if (String(found) !== String(expected)) wrong.push(`${x}, ${y}: ${found}, not ${expected}`)
        }
      }
      expect(wrong).toEqual([])
    }
  })

  test.each(CASES)('$title agrees both ways at larger widths', ({ body, set, value, name }) => {
    const program = expandProgram(routine(body), set)
    const widths = [7, 8, 13, 16, 31, 32, 33, 47, 63, 64]
    const runners = new Map(widths.map(width => [width, runner(program, width)]))
    const word = fc.oneof(fc.bigInt(0n, 9n), fc.bigInt(0n, (1n << 64n) - 1n))
    const property = fc.property(fc.constantFrom(...widths), word, word, (width, left, right) => {
      const x = BigInt.asUintN(width, left)
      const shift = name === 'shift-left' || name === 'shift-right'
      // Amounts far past w take as many doublings as they are; a little past it shows the same.
      const y = shift ? right % BigInt(width + 3) : BigInt.asUintN(width, right)
      if ((name === 'divide' || name === 'modulo') && y === 0n) return
      const { engine, reference, binding } = runners.get(width)!
      const run = engine(x, y)
      expect(results(run)).toEqual(value(x, y, width))
      const interpreted = reference(x, y)
      expect(run).toEqual(interpreted)
      if (run.ok && interpreted.ok) expect(tallyRun(binding, run)).toEqual(tallyRun(binding, interpreted))
    })
    fc.assert(property, { numRuns: 40 })
  })

  test('is counted for real, on the line of its use', () => {
    const program = expandProgram(routine('z <- x * y\n  t <- 0'), INSTRUCTION_SETS['no-multiply'])
    const { binding, engine } = runner(program, 16)
    const run = engine(5n, 3n)
    if (!run.ok) throw new Error(run.failure.message)
    const tally = tallyRun(binding, run)
    // By hand: z <- 0; two passes of test, shift, add, compare, add, add, move, jump; the last test.
    expect(tally.byClass).toMatchObject({
      multiply: 0,
      shift: 2,
      add: 6,
      compare: 5,
      jump: 2,
      call: 2,
      move: 3 + 1 + 2 + 1,
    })
    expect(tally.byLine.map(({ line }) => line)).toEqual([5, 6])
    expect(tally.space.working).toBe(6)
  })

  test('leaves a program alone that uses nothing that is off', () => {
    const program = routine('z <- x + y\n  t <- 0')
    expect(expandProgram(program, INSTRUCTION_SETS['add-only'])).toBe(program)
  })

  test('can be read, as a routine in the notation', () => {
    const set = INSTRUCTION_SETS['no-multiply']
    const uses = listExpansions(routine('z <- x * y\n  z, t <- z * z'), set)
    expect(uses.map(({ line, class: off }) => [line, off])).toEqual([
      [5, 'multiply'],
      [6, 'multiply'],
    ])
    for (const { text } of uses) expect(readProgram(text).program).toBeDefined()
  })

  test('is one procedure for each line and function', () => {
    const program = routine('z <- x * y * x\n  t <- x * z')
    const expanded = expandProgram(program, INSTRUCTION_SETS['no-multiply'])
    expect(expanded.procedures).toHaveLength(3)
  })
})
