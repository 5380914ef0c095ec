import { describe, expect, test } from 'vitest'
import { readProgram } from '../../src/routine'

const TWO = `routine first
  out z
begin
  z <- 1
end

routine second
  out y
begin
  y <- 2
end
`

function said(text: string, name?: string): string[] {
  return readProgram(text, name).diagnostics.map(({ span, message }) => `${span.line}: ${message}`)
}

describe('a text of several routines', () => {
  test('gives the first, and lists all', () => {
    const { program, names, diagnostics } = readProgram(TWO)
    expect(program?.routine.name).toBe('first')
    expect(names).toEqual(['first', 'second'])
    expect(diagnostics).toEqual([])
  })

  test('gives the one that is named', () => {
    expect(readProgram(TWO, 'second').program?.routine.name).toBe('second')
  })

  test('says what it has where the name is none of them', () => {
    const { program, names, diagnostics } = readProgram(TWO, 'third')
    expect(program).toBeUndefined()
    expect(names).toEqual(['first', 'second'])
    expect(diagnostics).toMatchObject([
      { severity: 'error', message: 'The text has no routine `third`.', remedy: expect.stringContaining('second') },
    ])
  })

  test('is checked where it is read alone', () => {
    const text = TWO.replace('y <- 2', 'y <- x')
    expect(said(text)).toEqual([])
    expect(said(text, 'second')).toEqual(['10: `x` is neither declared nor ever set.'])
  })

  test('is parsed throughout, and runs where the routine that is read has no error', () => {
    const text = TWO.replace('y <- 2', 'y <- 2 +')
    expect(readProgram(text).program).toBeDefined()
    expect(said(text)).toHaveLength(1)
    expect(readProgram(text, 'second').program).toBeUndefined()
  })

  test('warns of a name that stands twice', () => {
    const { program, diagnostics } = readProgram(TWO.replace('second', 'first'))
    expect(program).toBeDefined()
    expect(diagnostics).toMatchObject([{ severity: 'warning', span: { line: 7 } }])
  })
})

describe('a line that cannot be read', () => {
  test('does not make what it may declare or set unknown elsewhere', () => {
    const text = 'routine draft\n  in a[n\n  out z\nbegin\n  x <- (1 + \n  z <- x + a[0]\nend\n'
    expect(said(text).map(line => line.slice(0, 2))).toEqual(['2:', '5:'])
  })

  test('leaves the errors of other lines to be said', () => {
    const text = 'routine draft\n  out z\nbegin\n  x <- (1 + \n  z <- x + y\nend\n'
    expect(said(text)).toEqual([expect.stringMatching(/^4:/), '5: `y` is neither declared nor ever set.'])
  })
})

test('a text without a routine has no names', () => {
  expect(readProgram('')).toMatchObject({ names: [], diagnostics: [{ severity: 'error' }] })
  expect(readProgram('# nothing yet\n').names).toEqual([])
})

test('a variable that may be read before it is set is said after all else is in order', () => {
  expect(said('routine draft\n  out z\nbegin\n  z <- z + 1\nend\n')).toEqual([
    expect.stringContaining('z may be read before it is set'),
  ])
})
