import { describe, expect, test } from 'vitest'
import { bound, type Given, program } from './given'

describe('a point is refused', () => {
  test.each<[string, string, Given, string]>([
    [
      'a size that does not fit a word',
      '  in a[n]',
      { width: 4, sizes: { n: 16 } },
      'n = 16 does not fit a word of 4 bits: n < 2^w fails',
    ],
    [
      'a need that fails',
      '  in a[n]\n  need w >= 2*lg(n)',
      { sizes: { n: 1024 } },
      'need w >= 2*lg(n) fails at n = 1024, w = 16 (line 3)',
    ],
    [
      'a literal that does not fit',
      '  fix m = 1',
      { width: 2 },
      'a constant of line 4 = 5 does not fit a word of 2 bits',
    ],
    ['a fix that is used and does not fit', '  fix m = 2^w', {}, 'fix m = 65536 does not fit a word of 16 bits'],
    ['a fix that is no whole number', '  fix m = w / 3', {}, 'fix m cannot be worked out at w = 16'],
    ['a length below 0', '  in a[n]\n  work b[n - 5]', { sizes: { n: 2 } }, 'the length of b is -3, below 0'],
    ['a list of another length', '  let k = 3\n  fix t[k] = 1, 2', {}, 't has 3 words, and its list gives 2'],
    ['a table word that does not fit', '  fix t[2] = 1, 2^w', {}, 't[1] = 65536 does not fit a word of 16 bits'],
    [
      'memory past the limit',
      '  work b[1000]',
      { limits: { bytes: 4000 } },
      'memory of 1000 words of 16 bits needs 5000 bytes, past the limit of 4000',
    ],
    [
      'an array far past the limit',
      '  work b[2^40]',
      {},
      'needs 4398046511104 bytes, past the limit of 1073741824',
    ],
    ['a size without a value', '  in a[n]', {}, 'size n has no value here'],
    ['no width', '  work b[1]', { width: 1 }, 'w = 1 is no width'],
  ])('for %s', (_, declarations, given, reason) => {
    const uses = declarations.includes('fix m') ? 'x <- m + 5' : 'halt'
    expect(() => bound(program(declarations, uses), given)).toThrow(reason)
  })

  test('for an address that does not fit a word, only where the routine forms it', () => {
    const declarations = '  in a[n]\n  work b[1]\n  work c[200]\n  work d[2]'
    const given = { width: 8, sizes: { n: 100 } }
    expect(() => bound(program(declarations, 'p <- addr(d)'), given)).toThrow(
      'addr(d) = 301 does not fit a word of 8 bits',
    )
    expect(bound(program(declarations, 'd[0] <- 1'), given).words).toBe(303)
  })
})

describe('a binding', () => {
  test('lays read-only arrays first, in order of declaration', () => {
    const of = program('  out b[2]\n  fix t[2] = 7, 8\n  in a[n]\n  work c[n + 1]', 'b[0] <- 1')
    const { arrays, words, writable } = bound(of, { sizes: { n: 3 } })
    expect(of.routine.arrays.map(array => array.name)).toEqual(['a', 't', 'b', 'c'])
    expect(arrays).toEqual([
      { base: 0, length: 3 },
      { base: 3, length: 2 },
      { base: 5, length: 2 },
      { base: 7, length: 4 },
    ])
    expect({ words, writable }).toEqual({ words: 11, writable: 5 })
  })

  test('takes lets from the point, and fixes over them', () => {
    const of = program('  let k = 8\n  fix r = 2^k - 1', 'x <- r + k')
    expect(bound(of).names.get('r')).toBe(255n)
    expect(bound(of, { lets: { k: 3n } }).names.get('r')).toBe(7n)
  })

  test('works a table out by formula', () => {
    const of = program('  fix t[i in 2 .. 2^3 - 1] = popcount(i) + w', 'x <- t[0]')
    expect([...bound(of).tables.get(0)!]).toEqual([17, 18, 17, 18, 18, 19])
  })
})
