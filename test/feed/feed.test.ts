import { describe, expect, test } from 'vitest'
import { type FeedPattern, feedInput, readData, readInput, sizesOfData } from '../../src/feed'
import { type Binding, bindProgram, DEFAULT_LIMITS, type Input } from '../../src/machine'
import { readProgram } from '../../src/routine'

/** A routine of these declarations, bound. */
function bind(declarations: string, sizes: Record<string, number>, width: number): Binding {
  const { program, diagnostics } = readProgram(`routine r\n${declarations}\n  out s\nbegin\n  s <- 0\nend\n`)
  if (!program) throw new Error(JSON.stringify(diagnostics))
  const bound = bindProgram(program, { width, sizes, lets: {} }, DEFAULT_LIMITS)
  if ('refusal' in bound) throw new Error(bound.refusal.reason)
  return bound.binding
}

function feed(binding: Binding, pattern: FeedPattern = 'uniform', seed = 1): Input {
  const fed = feedInput(binding, pattern, seed)
  if ('problem' in fed) throw new Error(fed.problem)
  return fed.input
}

function words(input: Input, name: string): bigint[] {
  return Array.from(input.arrays[name]!, BigInt)
}

describe('a feed line', () => {
  test('gives the ends of a range, both included, at the point', () => {
    const input = feed(bind('  in a[n]\n  feed a[i] in w .. n/2 + 1', { n: 20 }, 8))
    expect(new Set(words(input, 'a'))).toEqual(new Set([8n, 9n, 10n, 11n]))
  })

  test('takes fractions inwards', () => {
    const input = feed(bind('  in a[n]\n  feed a[i] in n/3 .. n/2', { n: 7 }, 8))
    expect(new Set(words(input, 'a'))).toEqual(new Set([3n]))
  })

  test('may depend on the element', () => {
    const input = feed(bind('  in a[n]\n  feed a[i] in 2*i .. 2*i + 1', { n: 50 }, 16))
    expect(words(input, 'a').map(word => word / 2n)).toEqual(
      Array.from({ length: 50 }, (_, place) => BigInt(place)),
    )
  })

  test('holds for scalars', () => {
    const binding = bind('  in x, y\n  feed x in 5 .. 5', {}, 100)
    expect(feed(binding).scalars.x).toBe(5n)
    expect(feed(binding).scalars.y).toBeLessThan(2n ** 100n)
  })

  test('may ask for distinct words', () => {
    const input = feed(bind('  in a[n]\n  feed a[i] in 0 .. n\n  feed a distinct', { n: 100 }, 16))
    expect(new Set(words(input, 'a')).size).toBe(100)
  })

  test('says nothing of an array without words', () => {
    expect(words(feed(bind('  in a[n]\n  feed a[i] in 0 .. n - 1', { n: 0 }, 8)), 'a')).toEqual([])
  })

  test.each<[string, number, FeedPattern, string]>([
    ['feed a[i] in 5 .. 4', 3, 'uniform', 'feed: a has an empty range, 5 .. 4'],
    ['feed a[i] in i .. 2', 4, 'uniform', 'feed: a has an empty range, 3 .. 2 at element 3'],
    [
      'feed a[i] in 0 .. 2^w',
      3,
      'uniform',
      'feed: a has a range up to 256, which does not fit in a word of 8 bits',
    ],
    ['feed a[i] in n - 9 .. 7', 3, 'uniform', 'feed: a has a range from -6 on, and words start at 0'],
    [
      'feed a[i] in 0 .. 9\n  feed a distinct',
      11,
      'uniform',
      'feed: a is declared distinct, but only 10 words are legal for its 11',
    ],
    ['feed a distinct', 3, 'equal', 'feed: a is declared distinct, so its 3 words cannot be equal'],
    ['feed a[i] in 0 .. 9', 11, 'permutation', 'feed: a cannot be a permutation of 11 words: only 10 are legal'],
    ['feed a[i] in 0 .. lg(n)', 0, 'uniform', ''],
    [
      'feed a[i] in 0 .. 1/(n - 3)',
      3,
      'uniform',
      'feed: a has a range that cannot be worked out: It divides by zero.',
    ],
  ])('%s, %i words, %s: %s', (line, n, pattern, problem) => {
    const fed = feedInput(bind(`  in a[n]\n  ${line}`, { n }, 8), pattern, 1)
    expect('problem' in fed ? fed.problem : '').toBe(problem)
  })
})

test('what an array is fed does not depend on which others there are', () => {
  const alone = feed(bind('  in a[n]', { n: 10 }, 64))
  const along = feed(bind('  in x\n  in b[n]\n  inout a[n]', { n: 10 }, 64))
  expect(words(along, 'a')).toEqual(words(alone, 'a'))
  expect(words(along, 'a')).not.toEqual(words(along, 'b'))
})

test('the junk that goes with an input depends on the seed', () => {
  const binding = bind('  in a[n]', { n: 10 }, 64)
  expect(feed(binding, 'uniform', 1).junk).toBe(feed(binding, 'sorted', 1).junk)
  expect(feed(binding, 'uniform', 1).junk).not.toBe(feed(binding, 'uniform', 2).junk)
})

describe('data', () => {
  test('numbers and strings come out as the same words', () => {
    const binding = bind('  in a[n], x', { n: 3 }, 64)
    const read = readInput('{"x": "18446744073709551615", "a": [255, "255", "0xFF"]}', binding)
    expect(read).toMatchObject({ input: { scalars: { x: 2n ** 64n - 1n } } })
    if ('input' in read) expect(words(read.input, 'a')).toEqual([255n, 255n, 255n])
  })

  test('sizes follow from lengths that are plain size names', () => {
    const { program } = bind('  in a[n], b[m], c[2*k]\n  in d[n]', { n: 1, m: 1, k: 1 }, 8)
    expect(sizesOfData({ a: [1, 2], b: [], c: [1, 2], d: [0, 0] }, program.routine)).toEqual({
      sizes: { n: 2, m: 0 },
    })
    expect(sizesOfData({ a: [1, 2], d: [0] }, program.routine)).toEqual({
      problem: 'a has 2 words and d has 1, but both lengths are n',
    })
  })

  test.each([
    ['{"a": [1, 2]}', 'x: missing; routine r takes a, x'],
    ['{"a": [1, 2], "x": 1, "toString": 1}', 'toString: no input of that name; routine r takes a, x'],
    ['{"a": [1, 2, 3], "x": 1}', 'a has 3 words in the data and 2 at this point'],
    ['{"a": 1, "x": 1}', 'a is an array: give a list of 2 words'],
    ['{"a": [1, 2], "x": [1]}', 'x is a single word: give a number, not a list'],
    ['{"a": [1, "0x10000"], "x": 1}', 'a[1] is 0x10000, which does not fit in a word of 16 bits (0 .. 2^16 - 1)'],
    ['{"a": [1, 2], "x": true}', 'x is true, which is no word: give a number, or a string for words past 2^53'],
  ])('%s: %s', (json, problem) => {
    expect(readInput(json, bind('  in a[n], x', { n: 2 }, 16))).toEqual({ problem })
  })

  test('JSON that breaks off says where', () => {
    const read = readData('{"a": [1, 2')
    expect('problem' in read && read.problem).toMatch(/^it is not JSON \(.+\)$/)
  })
})

test('ranges that depend on the element keep up with long arrays', () => {
  const binding = bind('  in a[n]\n  feed a[i] in 0 .. i', { n: 1 << 18 }, 64)
  const start = performance.now()
  feed(binding)
  expect(performance.now() - start).toBeLessThan(3000)
})
