import { describe, expect, test } from 'vitest'
import { tokenizeText } from '../../grammar/index'

/** The tokens of a text as `text:kind`, names and operators left out unless asked for. */
function kindsOf(text: string, all = false): string[] {
  return tokenizeText(text)
    .filter(({ kind }) => all || (kind !== 'name' && kind !== 'operator' && kind !== 'number'))
    .map(({ start, end, kind }) => `${text.slice(start, end)}:${kind}`)
}

test('every kind of token has its colour', () => {
  expect(kindsOf('next: x <- popcount(a[0x1f]) + 5 # why', true)).toEqual([
    'next:label',
    'x:name',
    '<-:operator',
    'popcount:function',
    'a:name',
    '0x1f:number',
    '+:operator',
    '5:number',
    '# why:comment',
  ])
})

describe('words are coloured by the place they stand in', () => {
  test.each([
    ['in in, out', ['in:declaration']],
    ['in <- out', []],
    ['out[in] <- 3', []],
    ['check sum(a) = sum i in 0..n-1 : a[i]', ['check:declaration', 'sum:function', 'sum:function', 'in:keyword']],
    ['claim time <= time', ['claim:declaration', 'time:keyword']],
    ['feed distinct distinct', ['feed:declaration', 'distinct:keyword']],
    ['feed a[i] in 0..n', ['feed:declaration', 'in:keyword']],
    ['for to from from to to by by do', ['for:keyword', 'from:keyword', 'to:keyword', 'by:keyword', 'do:keyword']],
    ['if to = then then goto in', ['if:keyword', 'then:keyword', 'goto:keyword', 'in:label']],
    ['else if x = y then', ['else:keyword', 'if:keyword', 'then:keyword']],
    [
      'assert all i in 0..1 : x = i and not y = 0',
      ['assert:keyword', 'all:function', 'in:keyword', 'and:keyword', 'not:keyword'],
    ],
    ['u, v <- merge(x)', ['merge:function']],
    ['procedure f(x) -> y', ['procedure:keyword', 'f:function']],
    ['fix t[i in 0..3] = i', ['fix:declaration', 'in:keyword']],
  ])('%s', (text, kinds) => expect(kindsOf(text)).toEqual(kinds))
})

test('what the notation has no use for is marked', () => {
  expect(kindsOf('x += y – z; # – is fine here')).toEqual([
    '+=:unknown',
    '–:unknown',
    ';:unknown',
    '# – is fine here:comment',
  ])
})

test('comments between the parts of a long line keep their order', () => {
  expect(kindsOf('x <- y + # one\n # two ?\n ? z # three')).toEqual([
    '# one:comment',
    '# two ?:comment',
    '?:unknown',
    '# three:comment',
  ])
})

test('ten thousand lines are coloured at once', () => {
  const text = 'next: x <- (a[i + 1] >> 3) & 0xff  # a comment\n  if x >= n goto next\n'.repeat(5000)
  tokenizeText(text)
  const times = Array.from({ length: 5 }, () => {
    const start = process.cpuUsage()
    tokenizeText(text)
    return process.cpuUsage(start).user / 1000
  })
  // The aim is 50 ms of a core's time; a core that is shared with others gets ten times that.
  expect(Math.min(...times)).toBeLessThan(500)
})
