import { describe, expect, test } from 'vitest'
import { formatText, parseText, printRoutine } from '../../grammar/index'
import { bare } from './trees'

const TOTAL = `# Two-word sum of n words.
routine total
  in    a[n]
  out   lo, hi
  claim time  <= 7*n + 5
  claim space <= 4
  check hi * 2^w + lo = sum(a)
begin
  lo <- 0
  hi <- 0
  i  <- 0
again:
  if i >= n goto done
  x  <- a[i]
  lo <- lo + x
  if lo >= x goto next
  hi <- hi + 1
next:
  i  <- i + 1
  goto again
done:
  halt
end
`

test('a text in canonical layout stays as it is', () => {
  expect(formatText(TOTAL)).toEqual({ text: TOTAL, diagnostics: [] })
})

test('any layout of it comes out the same', () => {
  const squeezed = TOTAL.replaceAll('<-', '←')
    .replaceAll(/^ +/gm, '\t')
    .replaceAll(' + ', '+')
    .replaceAll('next:\n', 'next: ')
    .replaceAll('\n', ' \r\n')
  expect(formatText(squeezed).text).toBe(TOTAL)
})

test('a text with errors is left alone', () => {
  const { text, diagnostics } = formatText(TOTAL.replace('lo <- 0', 'lo = 0'))
  expect(text).toBeUndefined()
  expect(diagnostics).toHaveLength(1)
})

test('comments and blank lines stay where they were', () => {
  const text = `#!sheet 3
# Head, first line.

#    Indented art.
routine r # after the name
# above in
in a[n], # after the first
   b[n]  # after the second


# two blanks above
out s
 # last of the declarations
begin # after begin

   # first thing
  s <- 0
  for i from 0 to n-1 # after for
     # inside

     s <- s + a[i]# close by

     # at the end of the loop
  end # after end
  if s = 0
    # empty but for this
  else

    s <- 1
  end

next: # after a label
# above halt
  halt

end # after the end

# between

routine q
begin
end
# after all
`
  const set = `# !sheet 3
# Head, first line.

#    Indented art.
routine r  # after the name
  # above in
  in  a[n], b[n]  # after the first  # after the second

  # two blanks above
  out s
  # last of the declarations
begin  # after begin
  # first thing
  s <- 0
  for i from 0 to n - 1  # after for
    # inside

    s <- s + a[i]  # close by

    # at the end of the loop
  end  # after end
  if s = 0
    # empty but for this
  else
    s <- 1
  end

next:  # after a label
  # above halt
  halt
end  # after the end

# between

routine q
begin
end
# after all
`
  const formatted = formatText(text)
  expect(formatted.diagnostics).toEqual([])
  expect(formatted.text).toBe(set)
  expect(formatText(set).text).toBe(set)
  expect(bare(parseText(set).routines)).toEqual(bare(parseText(text).routines))
})

describe('brackets stand where they are needed', () => {
  const printed = (text: string): string => {
    const { routines, diagnostics } = parseText(`routine r\nbegin\n  x <- ${text}\nend`)
    expect(diagnostics).toEqual([])
    return printRoutine(routines[0]!).split('\n')[2]!.slice('  x <- '.length)
  }

  test.each([
    ['((a + b)) * (c)', '(a + b) * c'],
    ['(a * b) + c', 'a * b + c'],
    ['a - (b - c)', 'a - (b - c)'],
    ['(a - b) - c', 'a - b - c'],
    ['a + (b + c)', 'a + (b + c)'],
    ['a / (b * c)', 'a / (b * c)'],
    ['-(a + b)', '-(a + b)'],
    ['-(-a)', '-(-a)'],
    ['~(-(a[(i + 1)]))', '~-a[i + 1]'],
    ['a - (-b)', 'a - -b'],
    // Inside shifts and bitwise operators other operators keep theirs.
    ['a >> s & m', '(a >> s) & m'],
    ['a & b & c', 'a & b & c'],
    ['a & (b & c)', 'a & (b & c)'],
    ['a << b + 1', 'a << (b + 1)'],
    ['a | b xor c & d', 'a | (b xor (c & d))'],
    ['(a & b) + 1', '(a & b) + 1'],
  ])('%s', (text, expected) => expect(printed(text)).toBe(expected))

  const declared = (text: string): string => {
    const { routines, diagnostics } = parseText(`routine r\n  check ${text}\nbegin\nend`)
    expect(diagnostics).toEqual([])
    return printRoutine(routines[0]!).split('\n')[1]!.slice('  check '.length)
  }

  test.each([
    ['2 * n = (3*n)', '2*n = 3*n'],
    ['(2^n)^2 = 2^(n^2)', '(2^n)^2 = 2^n^2'],
    ['2^(-1) = 0.50', '2^-1 = 0.5'],
    ['-(n^2) = (-n)^2', '-n^2 = (-n)^2'],
    ['(a = b and c = d) or e = f', 'a = b and c = d or e = f'],
    ['a = b and (c = d or e = f)', 'a = b and (c = d or e = f)'],
    ['not (a = b)', 'not a = b'],
    ['not (a = b and c = d)', 'not (a = b and c = d)'],
    ['(all i in 0..1 : a[i] = 0) and b = 0', '(all i in 0 .. 1 : a[i] = 0) and b = 0'],
    ['(sum i in 0..1 : a[i]) = b', 'sum i in 0 .. 1 : a[i] = b'],
    ['(sum i in 0..1 : a[i]) + 1 = b', '(sum i in 0 .. 1 : a[i]) + 1 = b'],
  ])('%s', (text, expected) => expect(declared(text)).toBe(expected))
})

test('long tables are broken after commas, and read again', () => {
  const values = Array.from({ length: 64 }, (_, at) => `0x${(at * 2654435761).toString(16)}`)
  const text = `routine r\n  fix t[64] = ${values.join(', ')}\nbegin\nend\n`
  const formatted = formatText(text).text!
  const lines = formatted.split('\n')
  expect(Math.max(...lines.map(({ length }) => length))).toBeLessThan(110)
  expect(lines.length).toBeGreaterThan(8)
  expect(bare(parseText(formatted).routines)).toEqual(bare(parseText(text).routines))
  expect(formatText(formatted).text).toBe(formatted)
})
