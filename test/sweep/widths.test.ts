import { describe, expect, test } from 'vitest'
import { parseWidths, printWidth, widthAt } from '../../src/sweep/widths'

test.each([
  ['64', ['64']],
  ['16,32, 64', ['16', '32', '64']],
  ['64, 16, 64', ['64', '16']],
  ['8..64', ['8', '16', '32', '64']],
  ['13..15 by 1', ['13', '14', '15']],
  ['2^6', ['64']],
  ['16, lg(n)^2, 2*lg(n)', ['16', 'lg(n)^2', '2*lg(n)']],
  ['max(lg(n), 8), 32', ['max(lg(n), 8)', '32']],
])('%s', (text, printed) => {
  const read = parseWidths(text, ['n'])
  expect('widths' in read && read.widths.map(printWidth)).toEqual(printed)
})

test.each([
  ['', 'the word width is missing', 'write 64'],
  ['1', 'no word has 1 bits here', 'write widths from 2 to 4096'],
  ['5000', 'no word has 5000 bits here', 'write widths from 2 to 4096'],
  ['16,,32', 'a width is missing', 'write 64'],
  ['64..16', '"64..16" runs down', 'write 16..64'],
  ['lg(m)', '"lg(m)" uses m, which is no size of the routine', 'write an expression in n'],
])('%s is told: %s', (text, problem, remedy) => {
  const read = parseWidths(text, ['n'])
  expect(read).toMatchObject({ problem })
  expect((read as { remedy: string }).remedy).toContain(remedy)
})

test('an expression that does not parse says what the parser says', () => {
  const read = parseWidths('lg(n', ['n'])
  expect('problem' in read && read.problem).toMatch(/^"lg\(n" is no width: /)
})

describe('a width tied to sizes', () => {
  function at(text: string, n: number) {
    const read = parseWidths(text)
    if ('problem' in read) throw new Error(read.problem)
    return widthAt(read.widths[0]!, { n })
  }

  test.each([
    ['lg(n)', 1024, 10],
    ['lg(n)', 1025, 11],
    ['2*lg(n)', 1000, 20],
    ['lg(n)^2', 1024, 100],
    ['ceil(lg(n))^2', 1000, 100],
    ['lg(n)^2', 1000, 100],
    ['n^0.5', 4096, 64],
    ['n^0.5', 4097, 65],
    ['lg(n)^3', 65536, 4096],
  ])('%s at n = %i is %i, taken up to the next whole number', (text, n, width) => {
    expect(at(text, n)).toEqual({ width })
  })

  test.each([
    ['lg(n)', 2, 'w = lg(n) is 1, and words have 2 to 4096 bits'],
    ['n', 5000, 'w = n is 5000, and words have 2 to 4096 bits'],
    ['lg(n)', 0, 'w = lg(n) cannot be worked out: It takes lg of zero.'],
    ['lg(m)', 4, 'w = lg(m) cannot be worked out: '],
  ])('%s at n = %i is none: %s', (text, n, problem) => {
    const width = at(text, n)
    expect('problem' in width && width.problem).toContain(problem)
  })
})
