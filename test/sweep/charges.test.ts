import { expect, test } from 'vitest'
import { CHARGES } from '../../src/machine/machine'
import { parseCharges, printCharges } from '../../src/sweep/charges'
import { parseLets } from '../../src/sweep/lets'

test.each([
  ['unit', CHARGES.unit, 'unit'],
  ['operators', CHARGES.operators, 'operators'],
  ['multiply=32, move=0', { ...CHARGES.unit, multiply: 32, move: 0 }, 'unit,multiply=32,move=0'],
  ['unit,index=1', { ...CHARGES.unit, index: 1 }, 'unit,index=1'],
  ['operators, multiply=3', { ...CHARGES.operators, multiply: 3 }, 'operators,multiply=3'],
  ['move=0,compare=0,jump=0,call=0', CHARGES.operators, 'operators'],
])('charges %s', (text, charges, printed) => {
  expect(parseCharges(text)).toEqual({ charges })
  expect(printCharges(charges)).toBe(printed)
})

test.each([
  ['', 'the charges have an empty part', 'unit or operators'],
  ['units', '"units" is neither a preset nor a price', 'write unit'],
  ['multply=3', 'there is no class multply', 'write multiply'],
  ['square=3', 'there is no class square', 'classes: add, logic'],
  ['multiply=-1', '-1 is no price for multiply', 'whole number from 0'],
  ['multiply=1.5', '1.5 is no price for multiply', 'whole number from 0'],
  ['move=0, operators', 'the preset operators would undo what stands before it', 'write operators first'],
])('charges "%s" are told: %s', (text, problem, remedy) => {
  const read = parseCharges(text)
  expect(read).toMatchObject({ problem })
  expect((read as { remedy: string }).remedy).toContain(remedy)
})

test.each([
  ['k=8', { k: 8n }],
  ['k = 8, m=2^4', { k: 8n, m: 16n }],
  ['mask=0xff_ff', { mask: 0xffffn }],
])('lets %s', (text, lets) => {
  expect(parseLets(text)).toEqual({ lets })
})

test.each([
  ['k', '"k" is no value of a let'],
  ['k=', '"k=" is no value of a let'],
  ['k=x', '"x" is no value for k'],
  ['k=2^99999', '"2^99999" is no value for k'],
  ['k=1, k=2', 'k is given twice'],
])('lets "%s" are told: %s', (text, problem) => {
  expect(parseLets(text)).toMatchObject({ problem })
})
