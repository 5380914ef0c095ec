import { expect, test } from 'vitest'
import { type Flag, sortArguments } from '../../src/headless/flags'
import { groupDigits, layTable } from '../../src/headless/table'
import { EXIT, Leave } from '../../src/headless/terminal'

const FLAGS: readonly Flag[] = [
  { name: 'n', value: '1024', help: '' },
  { name: 'charges', value: 'unit', help: '' },
  { name: 'let', value: 'k=8', help: '', many: true },
  { name: 'json', help: '' },
]

test('files, values and repeated values are told apart', () => {
  const given = sortArguments('count', ['a.tally', '--n', '5', '--let=k=8', '--let', 'm=2', '--json', '-'], FLAGS)
  expect(given.files).toEqual(['a.tally', '-'])
  expect(given.value('n')).toBe('5')
  expect(given.values('let')).toEqual(['k=8', 'm=2'])
  expect(given.has('json')).toBe(true)
  expect(given.has('charges')).toBe(false)
  expect(given.value('charges')).toBeUndefined()
})

test.each<[string[], string]>([
  [['--charge', 'unit'], 'count has no flag --charge; did you mean --charges?'],
  [['--jsno'], 'count has no flag --jsno; did you mean --json?'],
  [['--frobnicate'], 'count has no flag --frobnicate; tallyword help count lists its flags'],
  [['-q'], 'count has no flag -q; tallyword help count lists its flags'],
  [['--n'], '--n needs a value; write --n 1024'],
  [['--n', '--json'], '--n needs a value; write --n 1024'],
  [['--json=yes'], '--json takes no value; write --json alone'],
  [['--n', '1', '--n', '2'], '--n is given twice; give it once'],
])('%j is misuse', (words, message) => {
  let caught: unknown
  try {
    sortArguments('count', words, FLAGS)
  } catch (error) {
    caught = error
  }
  expect(caught).toBeInstanceOf(Leave)
  expect((caught as Leave).exit).toBe(EXIT.usage)
  expect((caught as Leave).message).toBe(`tallyword: ${message}`)
})

test('a table lines its columns up and leaves nothing trailing', () => {
  const columns = [
    { title: 'class', align: 'left' },
    { title: 'operations', align: 'right' },
    { title: '', align: 'left' },
  ] as const
  expect(
    layTable(columns, [
      ['add', '3,072', 'π'],
      ['compare', '1', ''],
    ]),
  ).toBe(['class    operations', 'add           3,072  π', 'compare           1'].join('\n'))
})

test.each([
  [0, '0'],
  [999, '999'],
  [1000, '1,000'],
  [1234567, '1,234,567'],
  [2n ** 64n, '18,446,744,073,709,551,616'],
])('%s in groups', (value, text) => {
  expect(groupDigits(value)).toBe(text)
})
