import { describe, expect, test } from 'vitest'
import { CHARGES, INSTRUCTION_SETS, judgeRun, refuseClasses, tallyRun, weighTally } from '../../src/machine'
import { bound, type Given, inputOf, program, run } from './given'

function finished(declarations: string, body: string, given: Given = {}) {
  const of = program(declarations, body)
  const result = run(of, given)
  if (!result.ok) throw new Error(result.failure.message)
  const binding = bound(of, given)
  const tally = tallyRun(binding, result)
  const judge = (charges = CHARGES.unit as Parameters<typeof judgeRun>[4]) =>
    judgeRun(binding, inputOf(given), result, tally, charges)
  return { of, tally, judge }
}

describe('charges', () => {
  const { tally } = finished('  in a[n]\n  out z', 'z <- a[0] * a[1]\nif z = 6 goto done\nz <- 0\ndone:\nhalt', {
    sizes: { n: 2 },
    arrays: { a: [2n, 3n] },
  })

  test('unit counts every operation once', () => {
    expect(weighTally(tally, CHARGES.unit).time).toBe(4)
  })

  test('operators leaves moves, compares, jumps and calls out', () => {
    expect(weighTally(tally, CHARGES.operators).time).toBe(3)
  })

  test('a table of the user’s own prices a class, and base-plus-index accesses apart', () => {
    const weighed = weighTally(tally, { ...CHARGES.unit, multiply: 32, index: 2 })
    expect(weighed.time).toBe(2 + 32 + 1 + 2 * 2)
    expect(weighed.byLine).toEqual([
      { line: 5, count: 3, time: 38 },
      { line: 6, count: 1, time: 1 },
    ])
  })

  test('stay exact past 2^53', () => {
    const charged = 2 ** 53 - 1
    expect(weighTally(tally, { ...CHARGES.unit, load: charged }).time).toBe(2n * BigInt(charged) + 2n)
  })
})

describe('claims and checks', () => {
  const declarations = `  in    a[n]
  out   z
  claim time <= n + 1
  claim time = 2
  claim space <= lg(n) / 2
  check z = sum(a) - a[n - 1]
  check z = 5`
  const given = { sizes: { n: 3 }, arrays: { a: [2n, 3n, 4n] } }
  const { judge } = finished(declarations, 'z <- a[0]\nz <- z + a[1]', given)

  test('are judged exactly, with both sides', () => {
    expect(judge()).toEqual([
      { kind: 'time', place: 0, line: 4, outcome: 'holds', count: 3, bound: '4', ratio: 0.75 },
      { kind: 'time', place: 1, line: 5, outcome: 'broken', count: 3, bound: '2', ratio: 1.5 },
      { kind: 'space', place: 2, line: 6, outcome: 'holds', count: 0, bound: '0.792481250360578...', ratio: 0 },
      { kind: 'check', place: 0, line: 7, outcome: 'holds' },
      { kind: 'check', place: 1, line: 8, outcome: 'holds' },
    ])
  })

  test('of time follow the charges', () => {
    expect(judge({ ...CHARGES.unit, add: 0 })[1]).toMatchObject({ outcome: 'holds', count: 2 })
  })

  test('that cannot be worked out are undecided, and say why', () => {
    const { judge: judged } = finished('  in a[n]\n  out z\n  check a[n] = 0', 'z <- 1', given)
    expect(judged()[0]).toMatchObject({ outcome: 'undecided' })
    expect((judged()[0] as { reason: string }).reason).not.toBe('')
  })
})

describe('a class that is off', () => {
  const of = program('  out z', 'z <- 3 * 4\nz <- z / 2 + (z & 1)\nh, z <- z * z\nz <- popcount(z) << 1')

  test.each([
    ['full', [5, 7]],
    ['no-multiply', [4, 5, 6, 7]],
    ['add-only', [4, 5, 5, 6, 7, 7]],
    ['extended', []],
  ] as const)('is an error on %s at each line that uses it', (set, lines) => {
    expect(refuseClasses(of, INSTRUCTION_SETS[set]).map(each => each.span.line)).toEqual(lines)
  })

  test('says which, and what to do', () => {
    const [first] = refuseClasses(of, INSTRUCTION_SETS['no-multiply'])
    expect(first!.message).toBe('line 4 uses multiply, which the instruction set no-multiply lacks')
    expect(first!.remedy).toContain('has multiply')
  })
})
