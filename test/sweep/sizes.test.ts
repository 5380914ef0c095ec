import { expect, test } from 'vitest'
import { parseSizes } from '../../src/sweep/sizes'

test.each<[string, number[]]>([
  ['1024', [1024]],
  ['0', [0]],
  ['2^6..2^10', [64, 128, 256, 512, 1024]],
  ['3..20', [3, 6, 12]],
  ['100..1000 by 300', [100, 400, 700, 1000]],
  ['100..1000 BY 400', [100, 500, 900]],
  ['0..10 by 5', [0, 5, 10]],
  ['8, 16, 100', [8, 16, 100]],
  ['100,8,8', [8, 100]],
  ['2^4..2^6, 100..300 by 100, 7', [7, 16, 32, 64, 100, 200, 300]],
  ['2^4-1, 2^4, 2^4 + 1', [15, 16, 17]],
  ['1_000', [1000]],
  [' 4 .. 16 ', [4, 8, 16]],
  ['4…16', [4, 8, 16]],
  ['5..5', [5]],
])('%s', (text, values) => {
  expect(parseSizes(text)).toEqual({ range: { text: text.trim(), values } })
})

test.each<[string, string, string]>([
  ['', 'a size is missing', 'write 2^6..2^16'],
  ['8,,9', 'nothing stands between two commas in "8,,9"', 'write 2^6..2^16'],
  ['n', '"n" is not a size', 'write 2^6..2^16'],
  ['2^6..', '"" is not a size', 'write 2^6..2^16'],
  ['-4', '"-4" is not a size', 'write 2^6..2^16'],
  ['2.5', '"2.5" is not a size', 'write 2^6..2^16'],
  ['16..4', '"16..4" runs down', 'write 4..16'],
  ['0..8', '"0..8" would double 0', 'write 1..8'],
  ['1..8 by 0', '"1..8 by 0" never moves on', 'write a step from 1 on'],
  ['1,000', '"000" begins with 0', 'write thousands without commas: 1000 or 1_000'],
  ['2^60', '"2^60" is past 2^53', 'write 2^6..2^16'],
  ['2^6000000', '"2^6000000" is too large', 'write 2^6..2^16'],
  ['1 - 4', '"1 - 4" is below 0', 'write 2^6..2^16'],
  ['1..1000000 by 1', '"1..1000000 by 1" makes more than 100000 values', 'take a larger step'],
])('%s is told: %s', (text, problem, remedy) => {
  const read = parseSizes(text)
  expect(read).toMatchObject({ problem })
  expect((read as { remedy: string }).remedy).toContain(remedy)
})
