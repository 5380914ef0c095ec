import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { formatText, PLACED_WORDS, parseText, RESERVED_WORDS } from '../../grammar/index'
import {
  bindProgram,
  CHARGES,
  DEFAULT_LIMITS,
  INSTRUCTION_SETS,
  type Input,
  type InstructionSetName,
  interpretProgram,
  judgeRun,
  makeWords,
  refuseClasses,
  tallyRun,
  weighTally,
} from '../../src/machine/index'
import { OPERATION_CLASSES, type Program, readProgram } from '../../src/routine/index'
import { type Expectation, readExamples } from './examples'

const PAGE = new URL('../../grammar/NOTATION.md', import.meta.url)
const page = readFileSync(PAGE, 'utf8')
const examples = readExamples(page)

describe.each(examples)(
  'the example on line $line of the notation',
  ({ text, expectations, error, layoutFree }) => {
    if (error !== undefined)
      test('is turned down, for the reason given', () => {
        const { program, diagnostics } = readProgram(text)
        expect(program).toBeUndefined()
        expect(diagnostics.map(({ message }) => message).join('\n')).toContain(error)
      })
    else {
      test('reads without a word', () => {
        expect(parseText(text).diagnostics).toEqual([])
        expect(readProgram(text).diagnostics).toEqual([])
      })

      test('says what it counts', () => expect(expectations.length).toBeGreaterThan(0))

      test(layoutFree ? 'says that it is not in canonical layout' : 'is in canonical layout', () => {
        if (layoutFree) expect(formatText(text).text).not.toBe(text)
        else expect(formatText(text).text).toBe(text)
      })

      test.each(expectations)('counts as written at $title', expectation => {
        const { program } = readProgram(text)
        expect(program).toBeDefined()
        checkCounts(program!, expectation)
      })
    }
  },
)

describe('the notation page leaves nothing out', () => {
  const seen = new Set<string>()
  const note = (tree: unknown): void => {
    if (typeof tree !== 'object' || tree === null) return
    const kind = 'kind' in tree ? tree.kind : 'item'
    for (const [key, value] of Object.entries(tree)) {
      if (['kind', 'operator', 'function', 'measure'].includes(key)) seen.add(String(value))
      if (['down', 'signed', 'old', 'step', 'length', 'otherwise', 'values'].includes(key) && value)
        seen.add(`${kind} with ${key}`)
      note(value)
    }
  }
  for (const { text, error } of examples) if (error === undefined) note(parseText(text).routines)

  test.each([
    [
      'declarations',
      'in out inout work let fix table formula need feed-range feed-distinct claim check time space',
    ],
    ['operators on words', '+ - * / mod & | xor << >> negate complement popcount msb lsb'],
    ['comparisons and conditions', '= != < <= > >= and or not'],
    ['values of words', 'number name element indirect address'],
    [
      'instructions',
      'assign product call label goto if-goto while repeat for if halt return assert procedure compare binary',
    ],
    ['exact expressions', '^ lg ceil floor min max abs old total sum all any sorted same'],
  ])('of %s', (_, kinds) => {
    expect(kinds.split(' ').filter(kind => !seen.has(kind))).toEqual([])
  })

  test('of variants', () => {
    const variants =
      'for with down,for with step,compare with signed,item with length,if with otherwise,return with values'
    expect(variants.split(',').filter(variant => !seen.has(variant))).toEqual([])
  })

  test('of classes, each counted by line or in all', () => {
    const counted = new Set<string>()
    for (const { expectations } of examples)
      for (const { classes, lines } of expectations)
        for (const counts of [...lines.values(), ...(classes ? [classes] : [])])
          for (const [name, count] of counts) if (count > 0) counted.add(name)
    expect(OPERATION_CLASSES.filter(each => !counted.has(each))).toEqual([])
  })

  test('of ways to fail that need no limit', () => {
    const kinds = examples.flatMap(({ expectations }) => expectations.flatMap(({ fails }) => fails?.kind ?? []))
    expect(new Set(kinds)).toEqual(new Set(['index', 'address', 'divide', 'step', 'assert']))
  })

  test('of reserved words', () => {
    const listed = (from: string, to: string): string[] => {
      const part = page.slice(page.indexOf(from), page.indexOf(to, page.indexOf(from)))
      return [...part.matchAll(/`([a-z]+)`/g)].map(([, word]) => word!)
    }
    expect(listed('**Reserved words**', '**Words reserved')).toEqual(RESERVED_WORDS)
    const placed = listed('**Words reserved in their place only**', 'So `out')
    expect(PLACED_WORDS.filter(word => !placed.includes(word))).toEqual([])
  })
})

function checkCounts(program: Program, expected: Expectation): void {
  const { routine } = program
  const width = Number(expected.point.get('w'))
  const set = (expected.point.get('set') ?? 'full') as InstructionSetName
  expect(refuseClasses(program, INSTRUCTION_SETS[set])).toEqual([])
  const sizes = Object.fromEntries(routine.sizes.map(size => [size, Number(expected.point.get(size))]))
  const lets = Object.fromEntries(
    routine.lets.flatMap(({ name }) => {
      const value = expected.point.get(name)
      return value === undefined ? [] : [[name, BigInt(value)]]
    }),
  )
  const bound = bindProgram(program, { width, sizes, lets }, DEFAULT_LIMITS)
  if (expected.refused) {
    expect(bound).toHaveProperty('refusal')
    return
  }
  if ('refusal' in bound) throw new Error(bound.refusal.reason)
  const { binding } = bound
  const given = [...expected.input]
  const arrays = new Set(routine.arrays.map(({ name }) => name))
  const input: Input = {
    arrays: Object.fromEntries(
      given.filter(([name]) => arrays.has(name)).map(([name, words]) => [name, makeWords(width, words)]),
    ),
    scalars: Object.fromEntries(given.filter(([name]) => !arrays.has(name)).map(([name, [word]]) => [name, word!])),
    junk: 1,
  }
  const result = interpretProgram(binding, input, DEFAULT_LIMITS)
  if (expected.fails) {
    if (result.ok) throw new Error('the run did not fail')
    expect(result.failure.kind).toBe(expected.fails.kind)
    if (expected.fails.value !== undefined) expect(result.failure.value).toBe(expected.fails.value)
    return
  }
  if (!result.ok) throw new Error(result.failure.message)
  const tally = tallyRun(binding, result)
  const verdicts = judgeRun(binding, input, result, tally, CHARGES.unit)
  expect(verdicts.filter(({ outcome }) => outcome !== 'holds')).toEqual([])
  for (const [name, words] of expected.output) {
    const found = arrays.has(name) ? Array.from(result.arrays[name]!, BigInt) : [result.scalars[name]]
    expect({ [name]: found }).toEqual({ [name]: words })
  }
  if (expected.classes) {
    const all = Object.fromEntries(OPERATION_CLASSES.map(each => [each, expected.classes!.get(each) ?? 0]))
    expect(tally.byClass).toEqual(all)
  }
  if (expected.time !== undefined) expect(weighTally(tally, CHARGES.unit).time).toBe(expected.time)
  if (expected.index !== undefined) expect(tally.indexed).toBe(expected.index)
  for (const [line, counts] of expected.lines) {
    const found = { ...tally.byLine.find(each => each.line === line)?.counts }
    delete found.index
    expect({ line, ...found }).toEqual({ line, ...Object.fromEntries(counts) })
  }
  for (const [figure, words] of expected.space)
    expect({ [figure]: tally.space[figure as keyof typeof tally.space] }).toEqual({ [figure]: words })
}
