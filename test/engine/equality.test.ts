import fc from 'fast-check'
import { expect, test } from 'vitest'
import { compileProgramSync } from '../../src/engine'
import { bindProgram, DEFAULT_LIMITS, interpretProgram, tallyRun } from '../../src/machine'
import { readProgram } from '../../src/routine'
import { toInput } from '../outside/two-ways'
import { type RandomRoutine, randomRoutine } from './random-routine'

/** How many routines: few by default, any number by environment for a long run; likewise where the draw starts. */
const COUNT = Number(process.env.RANDOM_ROUTINES ?? 600)
const SEED = process.env.RANDOM_SEED === undefined ? {} : { seed: Number(process.env.RANDOM_SEED) }

type Ending = 'good' | 'refused' | string

/** Runs a routine both ways and expects all that each run gives to be equal; tells how the runs ended. */
function compareWays({ text, givens }: RandomRoutine): Ending[] {
  const { program, diagnostics } = readProgram(text)
  expect(diagnostics.filter(({ severity }) => severity === 'error')).toEqual([])
  const compiled = compileProgramSync(program!, givens[0]!.width)
  return givens.map(given => {
    const limits = { ...DEFAULT_LIMITS, ...given.limits }
    const point = { width: given.width, sizes: given.sizes ?? {}, lets: given.lets ?? {} }
    const bound = bindProgram(program!, point, limits)
    if ('refusal' in bound) return 'refused'
    const reference = interpretProgram(bound.binding, toInput(given), limits)
    const engine = compiled.run(bound.binding, toInput(given), limits)
    expect(engine).toEqual(reference)
    if (!engine.ok || !reference.ok) return engine.ok ? 'good' : engine.failure.kind
    expect(tallyRun(bound.binding, engine)).toEqual(tallyRun(bound.binding, reference))
    return 'good'
  })
}

test(
  `${COUNT} random routines give the same both ways`,
  () => {
    const endings = new Map<Ending, number>()
    fc.assert(
      fc.property(randomRoutine, routine => {
        for (const ending of compareWays(routine)) endings.set(ending, (endings.get(ending) ?? 0) + 1)
      }),
      { numRuns: COUNT, ...SEED },
    )
    // The draw must reach what it is meant to reach: most routines run to their end, and each way to fail turns up.
    if (COUNT > 1000) console.info(Object.fromEntries(endings))
    expect(endings.get('good')).toBeGreaterThan(COUNT * 0.35)
    expect(endings.get('refused') ?? 0).toBeLessThan(COUNT * 0.1)
    expect([...endings.keys()]).toEqual(
      expect.arrayContaining(['index', 'address', 'divide', 'assert', 'operation-limit', 'frame-limit']),
    )
  },
  COUNT * 100 + 20_000,
)
