import fc from 'fast-check'
import type { Given } from '../outside/two-ways'
import type { ArrayShape, Lines, Scope } from './random-scope'
import { bodyLines } from './random-statement'
import { drawWord } from './random-word'

/** A whole random routine and what several runs of it are given, all at one width. Valid by construction; runs may fail. */
export interface RandomRoutine {
  readonly text: string
  readonly givens: readonly Given[]
}

/** Small and odd widths often: that is where masks, limits and addresses bite. */
const width: fc.Arbitrary<number> = fc.oneof(
  { weight: 4, arbitrary: fc.integer({ min: 2, max: 8 }) },
  { weight: 3, arbitrary: fc.constantFrom(13, 31, 33, 47, 63) },
  { weight: 3, arbitrary: fc.constantFrom(32, 64) },
  { weight: 2, arbitrary: fc.integer({ min: 2, max: 64 }) },
)

/** Small limits, so that every run ends soon; those that hit one must do so at the same place both ways. */
const limits = fc.record({
  operations: fc.constantFrom(20_000, 20_000, 20_000, 2000, 200, 20),
  frames: fc.constantFrom(400, 60, 12),
})

interface ProcedureShape {
  readonly parameters: number
  readonly results: number
  readonly body: Lines
  /** Where it recurs with its depth as it stands, it may never come back. */
  readonly bounded: boolean
}

const procedure: fc.Arbitrary<ProcedureShape> = fc.record({
  parameters: fc.nat(2),
  results: fc.nat(2),
  body: bodyLines,
  bounded: fc.nat(9).map(draw => draw < 8),
})

/** An array that a routine may have; its length is worked out once n is known. */
const array = (name: string, role: ArrayShape['role'], sized: boolean) =>
  fc.option(
    fc.nat(4).map(extra => ({ name, role, sized, extra })),
    { freq: 3, nil: undefined },
  )

const arrays = fc.tuple(
  array('ia', 'in', true),
  array('ta', 'fix', false),
  array('ua', 'inout', true),
  array('oa', 'out', false),
  array('wa', 'work', false),
  array('wb', 'work', true),
)

const shape = fc.record({
  bold: fc.nat(2).map(draw => draw === 0),
  width,
  n: fc.nat(6),
  arrays,
  inputs: fc.nat(2),
  kept: fc.boolean(),
  outputs: fc.integer({ min: 1, max: 2 }),
  words: fc.array(drawWord, { minLength: 40, maxLength: 40 }),
  tunable: fc.nat(5),
  procedures: fc.array(procedure, { maxLength: 2 }),
  body: bodyLines,
  runs: fc.array(fc.record({ limits, junk: fc.nat(1000), more: fc.nat(2), tunable: fc.nat(5) }), {
    minLength: 1,
    maxLength: 2,
  }),
})

type Drawn = typeof shape extends fc.Arbitrary<infer T> ? T : never

/** Arbitrary of whole random routines with width, input and limits. Shrinks towards short texts and small words. */
export const randomRoutine: fc.Arbitrary<RandomRoutine> = fc.noBias(shape.map(buildRoutine))

function buildRoutine(drawn: Drawn): RandomRoutine {
  const modulus = 1n << BigInt(drawn.width)
  const word = (at: number) => drawn.words[at % drawn.words.length]!(modulus)
  const small = (value: number) => Number(BigInt(value) % modulus)
  const n = small(drawn.n)
  const arrays = fitArrays(
    drawn.arrays.filter(item => item !== undefined),
    n,
    Number(modulus < 64n ? modulus : 64n),
  )
  const inputs = ['s', 't'].slice(0, drawn.inputs)
  const kept = drawn.kept ? ['u'] : []
  const outputs = ['p', 'q'].slice(0, drawn.outputs)
  const locals = ['x', 'y', 'z']
  const procedures = drawn.procedures.map((shape, at) => ({ ...shape, name: `f${at}` }))

  const scope = (place: Partial<Scope>): Scope => ({
    modulus,
    bold: drawn.bold,
    arrays,
    readable: [],
    assignable: [],
    labels: [],
    procedures,
    depth: undefined,
    loops: [],
    loopNames: [],
    fresh: counter(),
    ...place,
  })
  const loopNames = ['i', 'j', 'k']
  const constants = ['c', 'm', 'w', ...(arrays.some(array => array.sized) ? ['n'] : [])]

  const procedureText = ({ name, parameters, results, body: draw, bounded }: (typeof procedures)[number]) => {
    const taken = ['a0', 'a1'].slice(0, parameters)
    const given = ['r0', 'r1'].slice(0, results)
    const own = [...given, 'x', 'y']
    const start = [...own, 'fuel', ...loopNames].map(
      (variable, at) => `  ${variable} <- ${variable === 'fuel' ? '~0' : at % 2}`,
    )
    const body = draw(
      scope({
        readable: [...own, ...taken, 'depth', ...constants],
        assignable: [...own, ...taken],
        depth: bounded || !drawn.bold ? 'depth - 1' : 'depth',
        loopNames,
      }),
    )
    return [
      `procedure ${name}(${['depth', ...taken].join(', ')})${given.length > 0 ? ` -> ${given.join(', ')}` : ''}`,
      ...start.map(line => line.replace('~0', String(modulus - 1n))),
      '  if depth = 0',
      '    return',
      '  end',
      ...body.map(line => `  ${line}`),
      'end',
    ]
  }

  const variables = [...kept, ...outputs, ...locals]
  const initial = [...outputs, ...locals].map((variable, at) => `  ${variable} <- ${word(at)}`)
  const body = drawn.body(
    scope({ readable: [...variables, ...inputs, ...constants], assignable: variables, loopNames }),
  )
  const text = [
    'routine random',
    ...(inputs.length > 0 ? [`  in ${inputs.join(', ')}`] : []),
    ...(kept.length > 0 ? [`  inout ${kept.join(', ')}`] : []),
    `  out ${outputs.join(', ')}`,
    ...arrays.map(({ role, name, length, declared }) =>
      role === 'fix'
        ? `  fix ${name}[${length}] = ${Array.from({ length }, (_, at) => word(at + 7)).join(', ')}`
        : `  ${role} ${name}[${declared}]`,
    ),
    `  let m = ${small(drawn.tunable)}`,
    `  fix c = ${word(3)}`,
    ...procedures.flatMap(procedureText),
    'begin',
    ...initial,
    `  fuel <- ${modulus - 1n}`,
    ...loopNames.map((variable, at) => `  ${variable} <- ${at % 2}`),
    ...body.map(line => `  ${line}`),
    'end',
    '',
  ].join('\n')

  const filled = arrays.filter(({ role }) => role === 'in' || role === 'inout')
  // The first run is at the n that the text was made for, the next at one that is larger, with other words.
  const givens = drawn.runs.map(({ limits, junk, more, tunable }, run) => {
    const longer = run * more
    return {
      width: drawn.width,
      sizes: arrays.some(({ sized }) => sized) ? { n: n + longer } : {},
      lets: run > 0 ? { m: BigInt(small(tunable)) } : {},
      scalars: Object.fromEntries([...inputs, ...kept].map((name, at) => [name, word(at + 20 + run)])),
      arrays: Object.fromEntries(
        filled.map(({ name, length, sized }, which) => [
          name,
          Array.from({ length: sized ? length + longer : length }, (_, at) => word(at * 3 + which * 5 + run)),
        ]),
      ),
      junk,
      limits,
    }
  })
  // A shrunk counterexample is to be read, and pasted into a test.
  const routine = { text, givens, [fc.toStringMethod]: () => `\n${text}\nrun with ${fc.stringify(givens)}\n` }
  return routine
}

function counter(): () => number {
  let count = 0
  return () => count++
}

/** Leaves arrays out so that memory has no more words than addresses, or than a test needs. */
function fitArrays(
  drawn: readonly Omit<ArrayShape, 'length' | 'declared'>[],
  n: number,
  capacity: number,
): ArrayShape[] {
  let left = capacity
  let known = false
  return drawn.flatMap(array => {
    // Only input and output arrays make n a size.
    const sized = array.sized && (array.role !== 'work' || known)
    const length = sized ? n + array.extra : array.extra
    if (length > left || (length === 0 && !sized)) return []
    left -= length
    known ||= sized
    const declared = !sized ? String(array.extra) : array.extra > 0 ? `n + ${array.extra}` : 'n'
    return [{ ...array, sized, length, declared }]
  })
}
