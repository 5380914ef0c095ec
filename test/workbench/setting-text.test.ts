import { describe, expect, test } from 'vitest'
import { DEMO_SETTING } from '../../src/workbench/store/demo'
import {
  isSettingText,
  type RoutineShape,
  readSetting,
  runsKey,
  type SettingText,
} from '../../src/workbench/store/setting-text'

const SHAPE: RoutineShape = { name: 'merge', sizes: ['n', 'm'], lets: ['k'] }

function read(change: Partial<SettingText>, shape = SHAPE) {
  return readSetting({ ...DEMO_SETTING, ...change }, shape)
}

describe('a setting as written', () => {
  test('gives values of the first size, whatever its name', () => {
    const { setting } = read({ first: '8..32' }, { name: 'count', sizes: ['length'], lets: [] })
    expect(setting?.sizes).toEqual({ length: { text: '8..32', values: [8, 16, 32] } })
  })

  test('lets a further size go along with the first until it has values', () => {
    expect(Object.keys(read({}).setting!.sizes)).toEqual(['n'])
    expect(read({ others: { m: '4, 5' } }).setting?.sizes.m?.values).toEqual([4, 5])
  })

  test('keeps values of sizes and lets that the routine at hand has not', () => {
    const { setting, problems } = read({ others: { z: 'nonsense' }, lets: { z: 'nonsense' } })
    expect(problems).toEqual([])
    expect(setting?.lets).toEqual({})
  })

  test('gives lets that are written', () => {
    expect(read({ lets: { k: '2^3' } }).setting?.lets).toEqual({ k: 8n })
  })

  test.each([
    ['widths', { widths: '16, 5000' }],
    ['widths', { widths: 'lg(q)' }],
    ['charges', { charges: 'unit, move = -1' }],
    ['sets', { sets: [] }],
    ['size n', { first: '' }],
    ['size m', { others: { m: '9..3' } }],
    ['let k', { lets: { k: 'eight' } }],
    ['trials', { trials: '0' }],
    ['trials', { trials: 'many' }],
    ['seed', { seed: '-1' }],
  ] satisfies [string, Partial<SettingText>][])('names the field %s, with a remedy, for %j', (field, change) => {
    const { setting, problems } = read(change)
    expect(setting).toBeUndefined()
    expect(problems.map(problem => problem.field)).toEqual([field])
    expect(problems[0]?.problem).not.toBe('')
    expect(problems[0]?.remedy).not.toBe('')
  })

  test('refuses a grid that no page could show', () => {
    const { problems } = read({ first: '1..40000 by 1', widths: '16, 32, 64' })
    expect(problems.map(problem => problem.field)).toEqual(['size n'])
  })
})

describe('the key of runs', () => {
  const key = (change: Partial<SettingText>) => runsKey(read(change).setting!)

  test('does not change with the charges', () => {
    expect(key({ charges: 'operators' })).toBe(key({}))
  })

  test.each([
    { first: '2^6..2^12' },
    { widths: '16, 32' },
    { lets: { k: '9' } },
    { sets: ['full'] },
    { pattern: 'sorted' },
    { trials: '6' },
    { seed: '2' },
  ] satisfies Partial<SettingText>[])('changes with %j', change => {
    expect(key(change)).not.toBe(key({}))
  })

  test('does not change with the way sizes are written', () => {
    expect(key({ first: '64, 128, 256' })).toBe(key({ first: '2^6..2^8' }))
  })
})

test.each([
  null,
  [],
  {},
  { ...DEMO_SETTING, sets: ['fast'] },
  { ...DEMO_SETTING, pattern: 'zipf' },
  { ...DEMO_SETTING, lets: { k: 8 } },
  { ...DEMO_SETTING, widths: 16 },
])('%j is no setting', value => {
  expect(isSettingText(value)).toBe(false)
})
