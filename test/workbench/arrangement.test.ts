import { describe, expect, test } from 'vitest'
import { CHARGES } from '../../src/machine/machine'
import { parseSizes } from '../../src/sweep/sizes'
import { type Arrangement, step } from '../../src/workbench/grid/arrangement'
import { digitGroups } from '../../src/workbench/marks/Count'
import { readCharges, readRange } from '../../src/workbench/setting/sentence-parts'
import { fileName } from '../../src/workbench/store/draft'

const ARRANGEMENT: Arrangement = {
  columns: 4,
  rows: [0, 4, 8].map(first => ({ set: 'full', width: 0, first })),
}

test.each([
  ['ArrowRight', 5, 6],
  ['ArrowLeft', 5, 4],
  ['ArrowUp', 5, 1],
  ['ArrowDown', 5, 9],
  ['Home', 6, 4],
  ['End', 5, 7],
  ['PageUp', 9, 1],
  ['PageDown', 1, 9],
  ['ArrowRight', 7, 7],
  ['ArrowLeft', 4, 4],
  ['ArrowUp', 1, 1],
  ['ArrowDown', 9, 9],
  ['x', 5, undefined],
])('%s leads from point %i of a grid of 3 by 4 to %s', (key, from, to) => {
  expect(step(key, from, ARRANGEMENT)).toBe(to)
})

describe('a range', () => {
  test.each([
    ['2^6..2^16', { kind: 'doubling', from: 64, to: 65536 }],
    ['3, 6, 12', { kind: 'doubling', from: 3, to: 12 }],
    ['100..1000 by 100', { kind: 'stepping', from: 100, to: 1000, by: 100 }],
    ['1..5 by 1', { kind: 'stepping', from: 1, to: 5, by: 1 }],
    ['7', { kind: 'list', values: [7] }],
    ['64, 128', { kind: 'list', values: [64, 128] }],
    ['8, 16, 100', { kind: 'list', values: [8, 16, 100] }],
    ['1, 2, 4, 8, 16, 17', { kind: 'many', count: 6, from: 1, to: 17 }],
  ])('%s reads as %j', (text, reading) => {
    const read = parseSizes(text)
    expect('range' in read && readRange(read.range)).toEqual(reading)
  })
})

test('charges read as a preset, or as what differs from unit', () => {
  expect(readCharges(CHARGES.unit)).toEqual({ kind: 'unit' })
  expect(readCharges(CHARGES.operators)).toEqual({ kind: 'operators' })
  expect(readCharges({ ...CHARGES.unit, multiply: 32, index: 1 })).toEqual({
    kind: 'own',
    prices: [
      ['multiply', 32],
      ['index', 1],
    ],
  })
})

test.each([
  ['7', ['7']],
  ['1234', ['1234']],
  ['12345', ['12', '345']],
  ['1229863', ['1', '229', '863']],
])('the digits %s stand in groups %j', (digits, groups) => {
  expect(digitGroups(digits)).toEqual(groups)
})

test.each([
  ['merge', 'merge.tally'],
  [' merge.tally ', 'merge.tally'],
  ['notes.txt', 'notes.tally'],
  ['a/b:c.tally', 'a-b-c.tally'],
  ['', 'draft.tally'],
  ['.tally', 'draft.tally'],
  ['...hidden', 'hidden.tally'],
])('the file name %j becomes %j', (typed, name) => {
  expect(fileName(typed)).toBe(name)
})
