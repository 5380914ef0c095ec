import { describe, expect, test } from 'vitest'
import { parseText, printRoutine } from '../../grammar/index'
import { readLines } from '../../grammar/lines'
import { bare } from './trees'

/** The lines of a text, each as its tokens. */
function linesOf(text: string): string[] {
  return readLines(text).lines.map(({ tokens }) => tokens.map(({ image }) => image).join(' '))
}

describe('a line goes on in the next', () => {
  test.each([
    ['after a comma', 'in a[n],\n   b[m]', ['in a [ n ] , b [ m ]']],
    ['after an infix operator', 'x <- y +\n z', ['x <- y + z']],
    ['after an arrow', 'x <-\n y', ['x <- y']],
    ['after and, or, not', 'if x = 1 and\n not\n y = 2 goto L', ['if x = 1 and not y = 2 goto L']],
    ['after a range sign', 'feed x in 0 ..\n 9', ['feed x in 0 .. 9']],
    ['inside brackets', 'x <- (y\n + z)', ['x <- ( y + z )']],
    ['over comments and blank lines', 'x <- y + # more\n\n  # and more\n z', ['x <- y + z']],
    [
      'after the colon of a quantifier',
      'check all i in 0..n :\n a[i] = 0',
      ['check all i in 0 .. n : a [ i ] = 0'],
    ],
    ['before a word that stands between operands', 'x <- (sum i\n in 0..1 : i)', ['x <- ( sum i in 0 .. 1 : i )']],
  ])('%s', (_, text, lines) => expect(linesOf(text)).toEqual(lines))
})

describe('a line ends', () => {
  test.each([
    ['where a word opens an instruction', 'x <- (y +\nif x = 1 goto L', ['x <- ( y +', 'if x = 1 goto L']],
    ['where an arrow follows', 'x <- (y +\nz[i] <- 3', ['x <- ( y +', 'z [ i ] <- 3']],
    ['where a label follows', 'x <- y +\nnext: halt', ['x <- y +', 'next : halt']],
    ['where a declaration follows', 'in a[n\nout b[n]', ['in a [ n', 'out b [ n ]']],
    ['where two operands would meet', 'x <- (y\nf(z)', ['x <- ( y', 'f ( z )']],
    ['after the colon of a label', 'next:\nx <- 1', ['next :', 'x <- 1']],
  ])('%s', (_, text, lines) => expect(linesOf(text)).toEqual(lines))
})

describe('signs in print and odd blanks', () => {
  const plain = `routine r
  in a[n]
  out s
  check all i in 0 .. n - 1 : s >= a[i] and not (s < a[i] or s != s)
  procedure f(x) -> y
    y <- x << 1
  end
begin
  s <- a[0] * 2 xor -3
  s <- f(s)
  if s <= 2 and s >= 1 goto done
done:
end`

  test('give the same tree as ASCII', () => {
    const printed = plain
      .replaceAll('<-', '←')
      .replaceAll('->', '→')
      .replaceAll('<=', '≤')
      .replaceAll('>=', '≥')
      .replaceAll('!=', '≠')
      .replace('* 2', '· 2')
      .replaceAll('xor', '⊕')
      .replaceAll(' - ', ' − ')
      .replaceAll('-3', '−3')
      .replaceAll('..', '…')
      .replaceAll('<<', '≪')
      .replaceAll(' and ', ' ∧ ')
      .replaceAll(' or ', ' ∨ ')
      .replaceAll('not ', '¬')
    const read = parseText(printed)
    expect(read.diagnostics).toEqual([])
    expect(bare(read.routines)).toEqual(bare(parseText(plain).routines))
    expect(printRoutine(read.routines[0]!)).toBe(printRoutine(parseText(plain).routines[0]!))
  })

  test.each([
    ['tabs', (text: string) => text.replaceAll('  ', '\t')],
    ['non-breaking blanks', (text: string) => text.replaceAll(' ', '\u00A0')],
    ['blanks at the end of lines', (text: string) => text.replaceAll('\n', '  \t\u00A0\n')],
    ['line breaks of other systems', (text: string) => text.replaceAll('\n', '\r\n')],
    ['line breaks of older systems', (text: string) => text.replaceAll('\n', '\r')],
    ['a byte order mark', (text: string) => `\uFEFF${text}`],
    ['comments with any characters', (text: string) => text.replaceAll('\n', ' # “smart” – dashes — and 😀\n')],
  ])('%s make no difference', (_, change) => {
    const read = parseText(change(plain))
    expect(read.diagnostics).toEqual([])
    expect(bare(read.routines)).toEqual(bare(parseText(plain).routines))
  })
})

describe('numbers', () => {
  const readNumber = (text: string): unknown => {
    const statement = parseText(`routine r\nbegin\n x <- ${text}\nend`).routines[0]?.body[0]
    return statement?.kind === 'assign' && statement.value.kind === 'number' ? statement.value.value : undefined
  }

  test.each([
    ['160', 160n],
    ['0xff', 255n],
    ['0XfF', 255n],
    ['0b1010', 10n],
    ['1_000_000', 1000000n],
    ['0x1_0000', 65536n],
    ['007', 7n],
  ])('%s', (text, value) => expect(readNumber(text)).toBe(value))

  test('of the widest word are read whole', () => {
    const word = 2n ** 4096n - 1n
    expect(readNumber(String(word))).toBe(word)
    expect(readNumber(`0b${word.toString(2)}`)).toBe(word)
  })

  test('stand next to a range sign', () => {
    expect(linesOf('feed x in 2..5')).toEqual(['feed x in 2 .. 5'])
    expect(linesOf('2^6..2^16')).toEqual(['2 ^ 6 .. 2 ^ 16'])
    expect(linesOf('0.5..1.5')).toEqual(['0.5 .. 1.5'])
  })

  test('keep their notation when they are printed', () => {
    const text = 'routine r\nbegin\n  x <- 0xFF + 0b0011 + 1_000 + 12\nend'
    expect(printRoutine(parseText(text).routines[0]!)).toBe(text)
  })
})

test('spans are places in the text as it was given, with line and column', () => {
  const text = '\uFEFF# head\r\n\r\nroutine r\r\nbegin\r\n\tx ← y + 1\r\nend'
  const { routines } = parseText(text)
  const [statement] = routines[0]!.body
  const { start, end, line, column } = statement!.span
  expect({ at: text.slice(start, end), line, column }).toEqual({ at: 'x ← y + 1', line: 5, column: 2 })
  expect(routines[0]!.begin.line).toBe(4)
  expect(text.slice(routines[0]!.end.start, routines[0]!.end.end)).toBe('end')
})
