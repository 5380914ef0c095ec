import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { formatText, parseCondition, parseExact, parseText, printRoutine, tokenizeText } from '../../grammar/index'
import { bare, routine } from './trees'

/** Pieces that hurt. */
const JUNK = [
  '(',
  ')',
  '[',
  ']',
  '{',
  '}',
  ';',
  '<-',
  ':=',
  '=',
  '==',
  ',',
  ':',
  '..',
  '.',
  '#',
  '–',
  '“',
  '\u0000',
  '😀',
]
const WORDS = [
  'end',
  'if',
  'else',
  'until',
  'repeat',
  'routine',
  'begin',
  'procedure',
  'sum',
  'in',
  'goto',
  'not',
  'IF',
]
const MORE = [
  '\n',
  '\r',
  '\r\n',
  ' ',
  '0x',
  '++',
  '--',
  '^',
  '!',
  '&&',
  '//',
  '%',
  '9'.repeat(30),
  'elif',
  '}else{',
]

const cut = fc.record({
  at: fc.double({ min: 0, max: 1, noNaN: true }),
  length: fc.nat(12),
  put: fc.oneof(fc.constantFrom(...JUNK, ...WORDS, ...MORE), fc.string()),
})

/** Reads a text in every way there is, and checks what is said of it. */
function readAll(text: string): void {
  const { routines, diagnostics } = parseText(text)
  const starts = [0, ...[...text.matchAll(/\r\n?|\n/g)].map(({ 0: sign, index }) => index + sign.length)]
  for (const { span, message, remedy, fix } of diagnostics) {
    expect(message).not.toBe('')
    expect(remedy).not.toBe('')
    expect(0 <= span.start && span.start <= span.end && span.end <= text.length).toBe(true)
    expect(starts[span.line - 1]! + span.column - 1).toBe(span.start)
    let last = 0
    for (const { start, end } of fix?.edits ?? []) {
      expect(last <= start && start <= end && end <= text.length).toBe(true)
      last = end
    }
  }
  expect(diagnostics.map(({ span }) => span.start)).toEqual(
    diagnostics.map(({ span }) => span.start).sort((a, b) => a - b),
  )
  for (const tree of routines) printRoutine(tree)
  expect(formatText(text).text === undefined).toBe(diagnostics.length > 0)
  let end = 0
  for (const token of tokenizeText(text)) {
    expect(end <= token.start && token.start < token.end && token.end <= text.length).toBe(true)
    end = token.end
  }
  parseExact(text)
  parseCondition(text)
}

describe('no text makes the parser throw', () => {
  test('not a good routine with pieces cut out and put in', () => {
    fc.assert(
      fc.property(routine, fc.array(cut, { minLength: 1, maxLength: 6 }), (tree, cuts) => {
        let text = printRoutine(tree)
        for (const { at, length, put } of cuts) {
          const place = Math.floor(at * text.length)
          text = text.slice(0, place) + put + text.slice(place + length)
        }
        readAll(text)
      }),
      { numRuns: 150 },
    )
  })

  test('not random characters', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary', maxLength: 200 }), readAll), { numRuns: 300 })
  })

  test('not random pieces of the notation', () => {
    const pieces = fc.array(fc.constantFrom(...JUNK, ...WORDS, ...MORE, 'x', 'a[i]', '7', '+'), { maxLength: 60 })
    fc.assert(
      fc.property(pieces, list => readAll(list.join(' '))),
      { numRuns: 300 },
    )
  })

  const body = (text: string): string => `routine r\n  in a[n]\n  check n = 0\nbegin\n${text}\nend\n`
  test.each([
    [
      'a thousand brackets',
      body(`x <- ${'('.repeat(1000)}y${')'.repeat(1000)}`),
      'brackets stand inside each other',
    ],
    ['a thousand open brackets', body(`x <- ${'a['.repeat(1000)}`), 'brackets stand inside each other'],
    ['a thousand sums', body('halt').replace('n = 0', `${'sum i in 0..1 : '.repeat(1000)}i = 0`), 'brackets stand'],
    ['a hundred thousand terms', body(`x <- ${'y + '.repeat(100_000)}y`), 'more than 1000 operators'],
    ['ten thousand signs', body(`x <- ${'- '.repeat(10_000)}y`), 'more than 1000 operators'],
    ['ten thousand negations', body(`if ${'not '.repeat(10_000)}x = y goto L`), 'more than 1000 operators'],
    ['towers of powers', body('halt').replace('n = 0', `n = ${'2^'.repeat(10_000)}2`), 'more than 1000 operators'],
    ['300 forms', body(`${'if x = y\n'.repeat(300)}${'end\n'.repeat(300)}`), 'More than 200 forms'],
    ['300 open forms', body('while x = y\n'.repeat(300)), 'More than 200 forms'],
    ['a number of a million digits', body(`x <- ${'9'.repeat(1_000_000)}`), 'no word is that long'],
  ])('not %s', (_, text, message) => {
    const { diagnostics } = parseText(text)
    expect(diagnostics.map(each => each.message).join('\n')).toContain(message)
    tokenizeText(text)
  })

  test('and what the limits allow is read and printed', () => {
    const deep = [
      `x <- ${'('.repeat(100)}y${')'.repeat(100)}`,
      `x <- ${'y + '.repeat(1000)}y`,
      `${'if x = y\n'.repeat(199)}${'end\n'.repeat(199)}`,
    ]
    for (const text of deep) {
      const whole = body(text)
      const { routines, diagnostics } = parseText(whole)
      expect(diagnostics).toEqual([])
      expect(bare(parseText(printRoutine(routines[0]!)).routines)).toEqual(bare(routines))
    }
  })

  test('and a text with more errors than anyone reads says so', () => {
    const { diagnostics } = parseText(body('x = 1\n'.repeat(1000)))
    expect(diagnostics).toHaveLength(201)
    expect(diagnostics.at(-1)!.message).toBe('800 more errors are not listed.')
  })
})

describe('a broken line costs itself alone', () => {
  const broken = [
    'x <- y z',
    'if x goto L',
    'y <- 3 ^ ^ 2',
    '?',
    'x <- (y',
    'x <- a[i',
    'goto 7',
    'foo',
    'x, y <- 3',
    'halt halt',
    'x <- f(y) + 1',
    'goto goto',
  ]

  test('wherever it stands', () => {
    fc.assert(
      fc.property(routine, fc.constantFrom(...broken), fc.nat(), (tree, bad, where) => {
        const lines = printRoutine(tree).split('\n')
        const begin = lines.indexOf('begin')
        const place = begin + 1 + (where % (lines.length - begin - 1))
        const text = [...lines.slice(0, place), `  ${bad}`, ...lines.slice(place)].join('\n')
        const { routines, diagnostics } = parseText(text)
        expect(diagnostics.map(({ span }) => span.line)).toEqual(diagnostics.map(() => place + 1))
        expect(diagnostics.length).toBeGreaterThan(0)
        expect(bare(routines)).toEqual([bare(tree)])
      }),
      { numRuns: 300 },
    )
  })

  test('several at once, each with its own message', () => {
    const text = `routine r
  in a[n
  out s
  check s == a[0]
begin
  s = a[0]
  i <- 0
  while i < n &&
    if a[i] > s then s <- a[i]
    i++
  end
  if s < goto done
done
end
`
    const { routines, diagnostics } = parseText(text)
    expect(diagnostics.map(({ span, message }) => `${span.line}: ${message}`)).toEqual([
      '2: The bracket `[` is not closed.',
      '4: `==` is no comparison of the notation.',
      '6: `=` compares; an assignment has an arrow.',
      '8: The line ends after `&&`, where something is missing.',
      '9: Only `goto L` may follow a condition on its line.',
      '10: `++` is no operation of the notation.',
      '12: `goto` is a word of the notation, and stands where a name, a number or `(` was expected.',
      '13: `done` alone is no instruction.',
    ])
    expect(routines[0]!.body.map(({ kind }) => kind)).toEqual(['assign', 'assign', 'while'])
  })
})

describe('a missing end', () => {
  // Forms laid out as the printer does it; the one that has lost its end is named, whichever it is.
  const text = `routine r
  procedure f(x) -> y
    while x > 0
      x <- x - 1
    end
    y <- x
  end
begin
  for i from 1 to 3
    if i = 2
      while i < 4
        i <- i + 1
      end
    else if i = 3
      x <- 1
    else
      x <- 2
    end
    y <- 1
  end
  z <- 1
end
routine q
begin
  x <- 1
end`
  const lines = text.split('\n')
  const ends = lines.flatMap((line, at) => (line.trim() === 'end' ? [at] : []))
  const columnOf = (line: string): number => line.length - line.trimStart().length

  test.each(ends)('on line %i is reported at the form that it should close', at => {
    const without = [...lines.slice(0, at), ...lines.slice(at + 1)].join('\n')
    const opener = lines.findLastIndex(
      (line, place) =>
        place < at &&
        columnOf(line) === columnOf(lines[at]!) &&
        /^ *(?:routine|procedure|for|if|while)\b/.test(line),
    )
    const { routines, diagnostics } = parseText(without)
    expect(diagnostics.map(({ span }) => span.line)).toEqual([opener + 1])
    expect(diagnostics[0]!.message).toMatch(/has no `end`/)
    expect(bare(routines)).toEqual(bare(parseText(text).routines))
  })

  test.each(lines.map((_, at) => at).slice(1))('and one too many before line %i is told, too', at => {
    const column = columnOf(lines[at]!)
    const extra = `${' '.repeat(column + 2)}end`
    const more = [...lines.slice(0, at), extra, ...lines.slice(at)].join('\n')
    expect(parseText(more).diagnostics.length).toBeGreaterThan(0)
  })
})

test('routines that follow a broken one are read', () => {
  const text = `routine a
begin
  if x = 1
    y <- 2
end

routine b
begin
  z <- 3
end
`
  const { routines, diagnostics } = parseText(text)
  expect(routines.map(({ name }) => name.text)).toEqual(['a', 'b'])
  expect(diagnostics.map(({ span }) => span.line)).toEqual([3])
  expect(routines[1]!.body).toHaveLength(1)
})
