import { describe, expect, test } from 'vitest'
import type { Diagnostic } from '../../grammar'
import { parseText } from '../../grammar'
import { checkRoutine, readProgram } from '../../src/routine'

/** A routine from declarations and a body, each a list of lines; line 1 is `routine draft`. */
function draft(declarations: readonly string[], body: readonly string[]): string {
  return ['routine draft', ...declarations.map(line => `  ${line}`), 'begin', ...body, 'end', ''].join('\n')
}

function check(text: string): Diagnostic[] {
  const { routines, diagnostics } = parseText(text)
  expect(diagnostics).toEqual([])
  const found = checkRoutine(routines[0]!, text)
  expect(found.routine === undefined).toBe(found.diagnostics.some(each => each.severity === 'error'))
  return found.diagnostics
}

function apply(text: string, { fix }: Diagnostic): string {
  let fixed = text
  for (const { start, end, text: into } of [...fix!.edits].sort((a, b) => b.start - a.start))
    fixed = fixed.slice(0, start) + into + fixed.slice(end)
  return fixed
}

/** One line for each diagnostic: its line and its message. */
function said(diagnostics: readonly Diagnostic[]): string[] {
  return diagnostics.map(each => `${each.span.line}: ${each.message}`)
}

interface Case {
  readonly title: string
  readonly text: string
  /** Every diagnostic, in order: line, part of the message, part of the remedy. */
  readonly expected: readonly (readonly [line: number, message: string, remedy?: string])[]
  /** For each fix, in order, the line of the text that it writes or changes; 'none' where there is no fix. */
  readonly fixes?: readonly string[]
}

function testCases(cases: readonly Case[], severity: 'error' | 'warning' = 'error') {
  test.each(cases)('$title', ({ text, expected, fixes }) => {
    const diagnostics = check(text)
    expect(diagnostics.map(each => each.severity)).toEqual(expected.map(() => severity))
    for (const [at, [line, message, remedy]] of expected.entries()) {
      const { span, ...found } = diagnostics[at]!
      expect(`${span.line}: ${found.message}`).toContain(`${line}: `)
      expect(found.message).toContain(message)
      if (remedy) expect(found.remedy).toContain(remedy)
      expect(found.message).toMatch(/\.$/)
      expect(found.remedy).toMatch(/\.$/)
    }
    if (!fixes) return
    expect(diagnostics.map(each => (each.fix ? 'fix' : 'none'))).toEqual(
      fixes.map(written => (written === 'none' ? 'none' : 'fix')),
    )
    for (const [at, written] of fixes.entries()) {
      if (written === 'none') continue
      const fixed = apply(text, diagnostics[at]!)
      const lines = fixed.split('\n').filter(line => !text.split('\n').includes(line))
      expect(lines.map(line => line.trim())).toEqual(written === '' ? [] : written.split('\n'))
      const { message } = diagnostics[at]!
      const count = (all: readonly Diagnostic[]) => all.filter(each => each.message === message).length
      const left = readProgram(fixed).diagnostics
      expect(count(left)).toBeLessThan(count(diagnostics))
      expect(left.length).toBeLessThanOrEqual(diagnostics.length)
    }
  })
}

describe('an array that nobody declared', () => {
  testCases([
    {
      title: 'and that is read lacks an `in` line, which says its size too',
      text: draft(['out z'], ['z <- 0', 'for i from 0 to n - 1', 'z <- z + a[i]', 'end']),
      expected: [[6, '`a` is used as an array, and no line declares it: `in a[n]` is missing', '`in a[n]`']],
      fixes: ['in a[n]'],
    },
    {
      title: 'takes the one name that nothing stands for as its length',
      text: draft(['out z'], ['z <- 0', 'for i from 0 to size - 1', 'z <- z + keys[i]', 'end']),
      expected: [[6, '`in keys[size]` is missing']],
      fixes: ['in keys[size]'],
    },
    {
      title: 'and that is stored to alone lacks an `out` line',
      text: draft(['in a[n]'], ['for i from 0 to n - 1', 'b[i] <- a[i]', 'end']),
      expected: [[5, '`out b[n]` is missing', '`work` for scratch memory']],
      fixes: ['out b[n]'],
    },
    {
      title: 'and that is filled before it is read lacks a `work` line',
      text: draft(['in a[n]', 'out z'], ['c[0] <- a[0]', 'z <- c[0]']),
      expected: [[5, '`work c[n]` is missing']],
      fixes: ['work c[n]'],
    },
    {
      title: 'and that is changed in place lacks an `inout` line',
      text: draft([], ['for i from 0 to n - 1', 'a[i] <- a[i] + 1', 'end']),
      expected: [[4, '`inout a[n]` is missing']],
      fixes: ['inout a[n]'],
    },
    {
      title: 'is one cause with its size in claims and checks',
      text: draft(['out z', 'claim time <= 7*n', 'check z = a[0]'], ['z <- a[0]', 'z <- z + a[n - 1]']),
      expected: [[4, '`in a[n]` is missing']],
      fixes: ['in a[n]'],
    },
    {
      title: 'is one cause in all its places',
      text: draft(['out z'], ['z <- a[0] + a[1]', 'p <- addr(a)', 'z <- z + a[2] + p']),
      expected: [[4, '`a` is used as an array']],
      fixes: ['in a[n]'],
    },
    {
      title: 'is taken for one of a similar name',
      text: draft(['in keys[n]', 'out z'], ['z <- keyz[0]', 'z <- z + keyz[1]']),
      expected: [[5, 'No array `keyz` is declared', 'Write `keys` if that is meant']],
      fixes: ['z <- keys[0]\nz <- z + keys[1]'],
    },
    {
      title: 'is none where a variable of that name holds an address',
      text: draft(['in a[n]', 'out z'], ['p <- addr(a)', 'z <- p[1]']),
      expected: [],
    },
  ])

  test('is declared below a `routine` line that is missing itself', () => {
    const text = 'z <- 0\nfor i from 0 to n - 1\n  z <- z + a[i]\nend\n'
    const { diagnostics } = readProgram(text)
    expect(said(diagnostics)).toEqual([
      expect.stringContaining('1: The draft has no `routine` line'),
      expect.stringContaining('3: `a` is used as an array'),
    ])
    const declared = apply(text, diagnostics[1]!)
    const next = readProgram(declared).diagnostics
    expect(said(next)).toEqual([expect.stringContaining('The draft has no `routine` line')])
    expect(readProgram(apply(declared, next[0]!)).program?.routine.sizes).toEqual(['n'])
  })
})

describe('a name that stands for nothing', () => {
  testCases([
    {
      title: 'in word code',
      text: draft(['out z'], ['z <- y + 1', 'z <- z + y']),
      expected: [[4, '`y` is neither declared nor ever set', '`in y`']],
      fixes: ['in y'],
    },
    {
      title: 'near a known one',
      text: draft(['in a[n]', 'out count'], ['count <- 0', 'count <- coutn + 1']),
      expected: [[6, '`coutn` is neither declared nor ever set', 'Write `count`']],
      fixes: ['count <- count + 1'],
    },
    {
      title: 'but for a capital',
      text: draft(['in a[n]', 'out z'], ['z <- N + W']),
      expected: [
        [5, '`N` is neither', 'Write `n`'],
        [5, '`W` is neither', 'Write `w`'],
      ],
      fixes: ['z <- n + W', 'z <- N + w'],
    },
    {
      title: 'is no slip where the numbers differ',
      text: draft(['out z'], ['x1 <- 0', 'z <- x1 + x2']),
      expected: [[5, '`x2` is neither declared nor ever set', 'Set it first']],
      fixes: ['in x2'],
    },
    {
      title: 'in a procedure',
      text: draft(
        ['out z', 'procedure f(x) -> y', 'y <- x + q', 'end', 'procedure g() -> y', 'y <- z', 'end'],
        ['z <- f(1)', 'z <- g()'],
      ),
      expected: [
        [4, '`q` is neither declared nor ever set', 'make it a parameter of `f`'],
        [7, "`z` is a variable of the routine's own body, which is not seen here", 'parameter of `g`'],
      ],
      fixes: ['none', 'none'],
    },
    {
      title: 'that only a procedure has',
      text: draft(['out z', 'procedure f(x) -> y', 'q <- x + 1', 'y <- q', 'end'], ['z <- f(1)', 'z <- q']),
      expected: [[9, '`q` is a variable of procedure `f`', 'Let `f` return it']],
    },
    {
      title: 'in a claim, a let, a length',
      text: draft(['in a[n]', 'let k = q', 'work c[r]', 'claim time <= s'], ['c[0] <- a[0] + k']),
      expected: [
        [3, '`q` is not declared', 'A size gets its name'],
        [4, '`r` is not declared'],
        [5, '`s` is not declared', '`let s = 8`'],
      ],
    },
    {
      title: 'in a check and an assert',
      text: draft(['in a[n]', 'out z', 'check z = y and sum(b) = 0'], ['z <- a[0]', 'assert z = x']),
      expected: [
        [4, '`y` is not declared'],
        [4, '`b` is used as an array'],
        [7, '`x` is neither declared nor ever set'],
      ],
    },
  ])
})

describe('arrays and words', () => {
  const declared = ['in a[n]', 'out z', 'let k = 8', 'fix t[2] = 1, 2']
  testCases([
    {
      title: 'an array without index',
      text: draft(declared, ['z <- a + 1']),
      expected: [[7, '`a` is an array (line 2), and a word is expected here', '`addr(a)`']],
      fixes: ['z <- addr(a) + 1'],
    },
    {
      title: 'an array given to a procedure',
      text: draft([...declared, 'procedure f(p) -> u', 'u <- p[0]', 'end'], ['z <- f(a)']),
      expected: [[10, '`a` is an array', '`addr(a)`']],
      fixes: ['z <- f(addr(a))'],
    },
    {
      title: 'an array that is set',
      text: draft(declared, ['a <- 5', 'z <- a[0]']),
      expected: [[7, '`a` is an array (line 2), and a word cannot be put in its place', '`a[i] <- ...`']],
    },
    {
      title: 'a word with an index',
      text: draft(declared, ['z <- k[1] + n[2] + w[3]']),
      expected: [
        [7, '`k` is a let (line 4), and only an array or a variable', '`p <- k`'],
        [7, '`n` is a size (line 2)'],
        [7, '`w` is the word width'],
      ],
    },
    {
      title: 'the address of a word',
      text: draft(declared, ['p <- addr(z)', 'z <- p + addr(k)']),
      expected: [
        [7, '`z` is a variable; arrays alone have an address'],
        [8, '`k` is a let (line 4); arrays alone'],
      ],
    },
    {
      title: 'an array as a number',
      text: draft([...declared, 'check z = a and z = old(a)', 'claim time <= a'], ['z <- a[0]']),
      expected: [[6, '`a` is an array (line 2), and a number is expected here', '`sum(a)`']],
    },
    {
      title: 'a word as an array',
      text: draft([...declared, 'check sorted(z) and sum(k) = 1 and x[0] = 1'], ['x <- a[0]', 'z <- x']),
      expected: [
        [6, '`z` is a result (line 3), and an array is expected here'],
        [6, '`k` is a let (line 4), and an array is expected here'],
        [6, '`x` is a variable, and an array is expected here'],
      ],
    },
    {
      title: 'an array that is called',
      text: draft(declared, ['z <- a(0)']),
      expected: [[7, '`a` is an array (line 2), and no procedure', '`a[i]`']],
    },
    {
      title: 'a table of the wrong length',
      text: draft(['fix t[3] = 1, 2', 'out z'], ['z <- t[0]']),
      expected: [[2, '`t` has 3 words, and its list gives 2']],
      fixes: ['fix t[2] = 1, 2'],
    },
  ])
})

describe('declarations', () => {
  testCases([
    {
      title: 'twice',
      text: draft(['in a[n]', 'out a', 'let n = 5', 'let k = 1', 'fix k = 2'], ['z <- k', 'z <- z']),
      expected: [
        [3, '`a` is an array (line 2) already', 'Choose another name'],
        [6, '`k` is a let (line 5) already'],
      ],
    },
    {
      title: 'of w',
      text: draft(['in w', 'out z'], ['z <- w']),
      expected: [[2, '`w` is the word width, and nothing else']],
    },
    {
      title: 'of a size as a word of input',
      text: draft(['in n, a[n], x', 'out z'], ['z <- a[n - 1] + x']),
      expected: [[2, '`n` is declared as an input, and it is a size as well', 'Delete it']],
      fixes: ['in a[n], x'],
    },
    {
      title: 'of a size on a line of its own',
      text: draft(['in a[n]', 'in n', 'out z'], ['z <- a[n - 1]']),
      expected: [[3, '`n` is declared as an input']],
      fixes: [''],
    },
    {
      title: 'of a single word of working memory',
      text: draft(['out z', 'work x'], ['x <- 1', 'z <- x']),
      expected: [[3, '`work x` declares a single word', 'variables need no declaration']],
      fixes: [''],
    },
    {
      title: 'of one among arrays',
      text: draft(['in a[n]', 'out z', 'work c[n], x'], ['x <- 1', 'c[0] <- a[0]', 'z <- x + c[0]']),
      expected: [[4, '`work x` declares a single word']],
      fixes: ['work c[n]'],
    },
    {
      title: 'of a work array without its length',
      text: draft(['in a[n]', 'out z', 'work c'], ['c[0] <- a[0]', 'z <- c[0]']),
      expected: [[4, 'The work array `c` has no length', '`work c[n]`']],
      fixes: ['work c[n]'],
    },
    {
      title: 'of a let through what comes later, itself or a fix',
      text: draft(
        ['in a[n]', 'out z', 'let k = m', 'let m = m + 1', 'let q = f', 'fix f = g', 'fix g = k'],
        ['z <- a[0]'],
      ),
      expected: [
        [4, '`m` is declared further down', 'above the one of `k`'],
        [5, '`m` is declared through itself'],
        [6, '`f` is a constant, and a let is there before any `fix`', 'Declare `q` with `fix`'],
        [7, '`g` is declared further down'],
      ],
    },
    {
      title: 'over data',
      text: draft(
        [
          'in a[n], x',
          'out z',
          'work c[x]',
          'need a[0] < 5',
          'claim time <= x + sum(a)',
          'claim space = z',
          'let k = old(x)',
          'fix t[i in 0 .. x] = i',
        ],
        ['y <- k', 'z <- t[0] + y', 'c[0] <- y'],
      ),
      expected: [
        [4, '`x` is an input, that is, data; the length of `c` is worked out before there is any'],
        [5, 'The content of `a` is data; a need'],
        [6, '`x` is an input, that is, data; a claim'],
        [6, 'The content of `a` is data; a claim'],
        [7, '`z` is a result, that is, data; a claim'],
        [8, '`old(x)` is data; a `let`', 'lets declared above'],
        [9, '`x` is an input, that is, data; a table'],
      ],
    },
    {
      title: 'over a result in a length',
      text: draft(['in a[n]', 'out m, b[m]'], ['m <- 1', 'b[0] <- a[0]']),
      expected: [[3, '`m` is a result, that is, data; the length of `b`']],
    },
    {
      title: 'over a procedure, and over a variable',
      text: draft(['out z', 'claim time <= f + y', 'procedure f() -> u', 'u <- 1', 'end'], ['y <- f()', 'z <- y']),
      expected: [
        [3, '`f` is a procedure (line 4); exact expressions call no procedures'],
        [3, '`y` is a variable, that is, data'],
      ],
    },
    {
      title: 'of an index that hides a name',
      text: draft(
        ['in a[n]', 'out z', 'check all n in 0 .. 3 : a[n] = z', 'fix t[w in 0 .. 3] = 1', 'feed a[z] in 0 .. 3'],
        ['z <- t[0]', 'assert (sum a in 0 .. 1 : 1) = z'],
      ),
      expected: [
        [4, '`n` is a size (line 2), and an index of this name would hide it'],
        [5, '`w` is the word width, and an index'],
        [6, '`z` is a result (line 3), and an index'],
        [9, '`a` is an array (line 2), and an index'],
      ],
    },
  ])

  testCases([
    {
      title: 'of a feed for what is no input',
      text: draft(
        ['in a[n]', 'out z', 'work c[n]', 'feed z in 0 .. 1', 'feed c distinct', 'feed q in 0 .. 1'],
        ['z <- a[0]', 'c[0] <- z'],
      ),
      expected: [
        [5, '`z` is a result (line 3), and a feed is for an input'],
        [6, '`c` is an array (line 4), and a feed is for an input'],
        [7, '`q` is not declared, and a feed is for an input'],
      ],
    },
    {
      title: 'of a feed twice',
      text: draft(
        ['in a[n], x', 'out z', 'feed a[i] in 0 .. i', 'feed a in 0 .. 5', 'feed a distinct', 'feed a distinct'],
        ['z <- a[0] + x'],
      ),
      expected: [
        [5, '`a` has a range already (line 4)'],
        [7, '`a` is declared distinct already'],
      ],
    },
    {
      title: 'of a feed of a word like one of an array',
      text: draft(['in x', 'out z', 'feed x distinct', 'feed x[i] in 0 .. 3'], ['z <- x']),
      expected: [
        [4, '`x` is a single word', 'Delete the line'],
        [5, '`x` is a single word', 'Leave the index out'],
      ],
    },
  ])
})

describe('checks', () => {
  testCases([
    {
      title: 'over variables and working memory',
      text: draft(
        ['in a[n]', 'out z', 'work c[n]', 'check z = y and z = y + 1', 'check sorted(c)'],
        ['y <- a[0]', 'c[0] <- y', 'z <- y'],
      ),
      expected: [
        [5, '`y` is a variable, and a check knows inputs and results alone', '`out y`'],
        [6, '`c` is working memory', '`out c[...]`'],
      ],
      fixes: ['out y', 'out c[n]'],
    },
    {
      title: 'over first contents that are none',
      text: draft(['in x', 'out z, b[n]', 'check old(z) = x and sorted(old(b))'], ['z <- x', 'b[0] <- z']),
      expected: [
        [4, '`z` is no input, so it has no content before the run'],
        [4, '`b` is no input'],
      ],
    },
    {
      title: 'over inputs, results, tables, sizes, lets, constants and first contents',
      text: draft(
        [
          'in a[n], x',
          'inout b[m], y',
          'out z',
          'let k = 8',
          'fix f = 1',
          'fix t[2] = 1, 2',
          'check z = a[0] + x + y + k + f + n + m + w + t[1] + sum(b)',
          'check all i in 0 .. m - 1 : b[i] = old(b)[i]',
          'check y = old(y) and x = old(x) and same(old(a), a)',
        ],
        ['z <- 0'],
      ),
      expected: [],
    },
  ])
})

describe('what may be set', () => {
  const declared = ['in a[n], x', 'out z', 'let k = 8', 'fix f = 3', 'fix t[2] = 1, 2']
  testCases([
    {
      title: 'not an input',
      text: draft(declared, ['x <- 1', 'z <- x', 'x <- 2']),
      expected: [[8, '`x` is an input (line 2), which a run does not change', '`inout x`']],
      fixes: ['in a[n]\ninout x'],
    },
    {
      title: 'not an input that stands alone',
      text: draft(['in x', 'out z'], ['x <- x + 1', 'z <- x']),
      expected: [[5, '`x` is an input']],
      fixes: ['inout x'],
    },
    {
      title: 'not a word of an input or a table',
      text: draft(declared, ['a[0] <- 1', 't[0] <- 2', 'z, a[1] <- x * x']),
      expected: [
        [8, '`a` is an input (line 2), which a run does not change', '`inout a[...]`'],
        [9, '`t` is a table of constants (line 6)'],
      ],
      fixes: ['in x\ninout a[n]', 'none'],
    },
    {
      title: 'not a size, a let, a constant or w',
      text: draft(declared, ['n <- n - 1', 'k <- 1', 'f <- 1', 'w <- 1', 'z <- x']),
      expected: [
        [8, '`n` is a size (line 2), and stays what it is', '`x <- n`'],
        [9, '`k` is a let (line 4)'],
        [10, '`f` is a constant (line 5)'],
        [11, '`w` is the word width'],
      ],
    },
    {
      title: 'not the variable of a loop inside it',
      text: draft(declared, [
        'z <- 0',
        'for i from 0 to 9',
        'i <- i + 1',
        'for i from 0 to 3',
        'z <- z + i',
        'end',
        'end',
        'i <- z',
        'z <- i',
      ]),
      expected: [[10, '`i` runs through the `for` of line 9, which alone may set it', '`while`']],
    },
    {
      title: 'not a result of a call into the variable of a loop',
      text: draft(
        ['out z', 'procedure f() -> u, v', 'u <- 1', 'v <- 2', 'end'],
        ['for i from 0 to 9', 'z, i <- f()', 'end'],
      ),
      expected: [[9, '`i` runs through the `for`']],
    },
    {
      title: 'not the same twice',
      text: draft(['out z, b[n]'], ['z, z <- z * 2', 'b[z], b[z] <- z * 3']),
      expected: [
        [4, '`z` stands twice left of the arrow'],
        [5, '`b[z]` stands twice left of the arrow'],
      ],
    },
    {
      title: 'not a procedure',
      text: draft(['out z', 'procedure f() -> u', 'u <- 1', 'end'], ['f <- 1', 'z <- f()', 'z <- z + f']),
      expected: [
        [7, '`f` is a procedure (line 3), so it is no variable'],
        [9, '`f` is a procedure (line 3), and a word is expected here', 'on a line of its own'],
      ],
    },
    {
      title: 'a step of 0 is none',
      text: draft(['out z'], ['z <- 0', 'for i from 0 to 9 by 0', 'z <- i', 'end']),
      expected: [[5, 'A step of 0 gets nowhere', '`downto`']],
    },
  ])
})

describe('labels and jumps', () => {
  testCases([
    {
      title: 'unknown, and near a known one',
      text: draft(['out z'], ['z <- 0', 'again:', 'if z = 1 goto agian', 'if z = 2 goto out', 'goto again']),
      expected: [
        [6, "No label `agian` stands in the routine's own body", 'Write `again`'],
        [7, 'No label `out` stands', 'Write `out:`'],
      ],
      fixes: ['if z = 1 goto again', 'none'],
    },
    {
      title: 'twice',
      text: draft(['out z'], ['again:', 'z <- 0', 'again:', 'goto again']),
      expected: [[6, 'The label `again` stands twice; the first is on line 4']],
    },
    {
      title: 'into each structured form',
      text: draft(
        ['out z'],
        [
          'z <- 0',
          'if z = 1 goto one',
          'if z = 2 goto two',
          'if z = 3 goto three',
          'if z = 4 goto four',
          'while z < 9',
          'one:',
          'z <- z + 1',
          'end',
          'repeat',
          'two:',
          'z <- z + 1',
          'until z > 20',
          'for i from 0 to 3',
          'three:',
          'z <- z + i',
          'end',
          'if z = 5',
          'z <- 1',
          'else',
          'four:',
          'z <- 2',
          'end',
        ],
      ),
      expected: [
        [5, 'This jumps into the `while` of line 9, where `one` stands (line 10)', 'above the loop'],
        [6, 'into the `repeat` of line 13'],
        [7, 'into the `for` of line 17', 'its variable and its end are set there'],
        [8, 'into the `if` of line 21', 'below the `end`'],
      ],
    },
    {
      title: 'from one branch into another',
      text: draft(['out z'], ['z <- 0', 'if z = 0', 'goto other', 'else', 'other:', 'z <- 2', 'end']),
      expected: [[6, 'into the `if` of line 5']],
    },
    {
      title: 'out of forms and within them are fine',
      text: draft(
        ['out z'],
        [
          'z <- 0',
          'while z < 9',
          'for i from 0 to 3',
          'if z = 5 goto next',
          'if z = 7 goto done',
          'z <- z + i',
          'next:',
          'end',
          'end',
          'done:',
          'halt',
        ],
      ),
      expected: [],
    },
    {
      title: 'across procedures',
      text: draft(
        [
          'out z',
          'procedure f(x) -> u',
          'u <- x',
          'inner:',
          'if u > 9 goto done',
          'u <- u + 1',
          'goto inner',
          'end',
        ],
        ['z <- f(1)', 'if z = 3 goto inner', 'done:', 'goto f'],
      ),
      expected: [
        [6, "`done` stands in the routine's own body, and a jump stays in the procedure `f`", '`return`'],
        [
          12,
          "`inner` stands in the procedure `f`, and a jump stays in the routine's own body",
          'Call the procedure',
        ],
        [14, '`f` is a procedure, and a jump goes to a label', '`f()`'],
      ],
    },
  ])
})

describe('procedures', () => {
  const two = ['procedure f(x, y) -> u', 'u <- x + y', 'end']
  testCases([
    {
      title: 'unknown',
      text: draft(['out z', ...two], ['z <- f(1, 2)', 'z <- min(z, 3)', 'z <- ff(z, 3)']),
      expected: [
        [8, 'No procedure `min` is defined', '`procedure min(x, y) -> u ... end`'],
        [9, 'No procedure `ff` is defined', 'Write `f`'],
      ],
      fixes: ['none', 'z <- f(z, 3)'],
    },
    {
      title: 'with too few words or results',
      text: draft(
        ['out z', ...two, 'procedure g()', 'return', 'end'],
        ['z <- f(1)', 'f(1, 2)', 'z <- g()', 'g(1)'],
      ),
      expected: [
        [10, '`f` takes 2 arguments (x, y), and is given 1'],
        [11, '`f` gives 1 result (u), and 0 are taken', '`u <- f(x, y)`'],
        [12, '`g` gives no results, and 1 is taken'],
        [13, '`g` takes no arguments, and is given 1'],
      ],
    },
    {
      title: 'that halt, and a routine that returns',
      text: draft(
        ['out z', 'procedure f() -> u', 'u <- 1', 'halt', 'end'],
        ['z <- f()', 'if z = 1', 'return', 'end', 'return z'],
      ),
      expected: [
        [5, '`halt` stands in the procedure `f`'],
        [10, '`return` stands outside of any procedure', '`halt`'],
        [12, '`return` stands outside of any procedure', 'results are declared with `out`'],
      ],
      fixes: ['return', 'halt', 'none'],
    },
    {
      title: 'that return the wrong number of words',
      text: draft(
        ['out z', 'procedure f() -> u, v', 'return 1', 'end', 'procedure g()', 'return 1', 'end'],
        ['g()', 'z, y <- f()', 'z <- z + y'],
      ),
      expected: [
        [4, '`f` returns 2 words (u, v), and 1 word stands here'],
        [7, '`g` returns no word, and 1 word stands here', '`procedure g(...) -> u`'],
      ],
    },
    {
      title: 'twice, and of a taken name',
      text: draft(
        ['in a[n]', 'out z', ...two, 'procedure f() -> u', 'u <- 1', 'end', 'procedure a()', 'end'],
        ['z <- f(1, 2)'],
      ),
      expected: [
        [7, '`f` is a procedure (line 4) already'],
        [10, '`a` is an array (line 2) already'],
      ],
    },
    {
      title: 'whose heads repeat or hide names',
      text: draft(
        [
          'in a[n]',
          'out z',
          'procedure f(x, x) -> n',
          'n <- x',
          'end',
          'procedure g(a, w) -> u, u',
          'u <- 1',
          'end',
        ],
        ['z <- f(1, 2)', 'z, y <- g(1, 2)', 'z <- z + y'],
      ),
      expected: [
        [4, '`x` stands twice in the head of `f`'],
        [4, '`n` is a size (line 2), which `f` sees by that name'],
        [5, '`n` is a size (line 2), and stays what it is'],
        [7, '`a` is an array (line 2), which `g` sees by that name', 'pass `addr(a)`'],
        [7, '`w` is the word width, which `g` sees'],
        [7, '`u` stands twice in the head of `g`'],
      ],
    },
    {
      title: 'see arrays, sizes, lets and constants, and share names of variables with the body',
      text: draft(
        ['in a[n]', 'out z', 'let k = 2', 'procedure f(i) -> z', 'z <- a[i] + n + k + w', 'return', 'end'],
        ['i <- 0', 'z <- f(i)'],
      ),
      expected: [],
    },
    {
      title: 'may stand among the instructions, call each other and themselves',
      text: draft(
        ['out z'],
        ['z <- f(3)', 'procedure f(x) -> u', 'u <- g(x)', 'end', 'procedure g(x) -> u', 'u <- f(x)', 'end'],
      ),
      expected: [],
    },
  ])
})

describe('a routine without instructions', () => {
  testCases([
    { title: 'is none', text: draft([], []), expected: [[1, 'The routine `draft` has no instruction', '`halt`']] },
    {
      title: 'is none with labels alone',
      text: draft([], ['here:']),
      expected: [[1, 'has no instruction']],
    },
    { title: 'and one that halts at once is one', text: draft([], ['halt']), expected: [] },
  ])
})

describe('warnings', () => {
  testCases(
    [
      {
        title: 'a label that nothing jumps to, alone on its line',
        text: draft(['out z'], ['z <- 0', 'here:', 'z <- z + 1']),
        expected: [[5, 'Nothing jumps to the label `here`']],
        fixes: [''],
      },
      {
        title: 'a label that nothing jumps to, before an instruction',
        text: draft(['out z'], ['here: z <- 0']),
        expected: [[4, 'Nothing jumps to the label `here`']],
        fixes: ['z <- 0'],
      },
      {
        title: 'a variable that is set and never read',
        text: draft(['out z'], ['q <- 3', 'z <- 0', 'q <- 4']),
        expected: [[4, '`q` is set and never read', '`out q`']],
      },
      {
        title: 'but not the half of a product, a result of a call, or the variable of a loop',
        text: draft(
          ['out z', 'procedure f() -> u, v', 'u <- 1', 'v <- 2', 'end'],
          ['high, z <- 3 * 4', 'y, z <- f()', 'for i from 0 to 3', 'z <- z + 1', 'end'],
        ),
        expected: [],
      },
      {
        title: 'but not what an assert or an address reads',
        text: draft(['in a[n]', 'out z'], ['q <- 3', 'p <- addr(a)', 'z <- [p]', 'assert q = 3']),
        expected: [],
      },
      {
        title: 'instructions that no run comes to, once a stretch',
        text: draft(
          ['out z'],
          ['z <- 0', 'goto done', 'z <- 1', 'z <- 2', 'done:', 'if z = 0', 'halt', 'else', 'halt', 'end', 'z <- 3'],
        ),
        expected: [
          [6, 'No run comes to this instruction: line 5 never comes past itself'],
          [14, 'No run comes to this instruction'],
        ],
      },
      {
        title: 'instructions after a loop that only jumps leave',
        text: draft(
          ['out z'],
          ['z <- 0', 'repeat', 'z <- z + 1', 'goto done', 'until z = 9', 'z <- 1', 'done:', 'halt'],
        ),
        expected: [[9, 'No run comes to this instruction']],
      },
      {
        title: 'procedures that nothing calls but themselves',
        text: draft(
          ['out z', 'procedure f(x)', 'g(x)', 'end', 'procedure g(x)', 'f(x)', 'end', 'procedure h()', 'end'],
          ['h()', 'z <- 0'],
        ),
        expected: [
          [3, 'The procedure `f` is never called'],
          [6, 'The procedure `g` is never called'],
        ],
      },
      {
        title: 'an input word with an index',
        text: draft(['in a', 'out z'], ['z <- a[0]']),
        expected: [[5, '`a` is declared as a single word (line 2)', '`in a[n]`']],
        fixes: ['in a[n]'],
      },
      {
        title: 'a result that a procedure sets for itself alone',
        text: draft(['out z', 'procedure f() -> u', 'z <- 1', 'u <- z', 'end'], ['z <- f()']),
        expected: [[4, '`z` is a variable of procedure `f` here, not a result of the routine']],
      },
    ],
    'warning',
  )

  test('are left unsaid where there are errors', () => {
    expect(said(check(draft(['out z'], ['here:', 'lo <- 1', 'z <- l0'])))).toEqual([
      expect.stringContaining('`l0` is neither declared nor ever set'),
    ])
  })
})

describe('the checked routine', () => {
  test('has its sizes in order of appearance, and read-only arrays first', () => {
    const text = draft(
      [
        'work c[k*m]',
        'out b[2*n + m]',
        'in x, a[n], s[16]',
        'let k = 8',
        'inout d[q]',
        'fix t[2] = 1, 2',
        'fix u[i in 3 .. 5] = i',
        'feed a distinct',
        'feed a[i] in 0 .. i + k',
        'need w >= lg(n)',
        'claim time <= n',
        'check sorted(b)',
        'procedure f() -> y',
        'y <- 1',
        'end',
      ],
      ['y <- f()', 'b[0] <- y + a[0] + x', 'c[0] <- y', 'd[0] <- s[0] + t[0] + u[0] + c[0]'],
    )
    const { routines } = parseText(text)
    const { routine, diagnostics } = checkRoutine(routines[0]!, text)
    expect(diagnostics).toEqual([])
    expect(routine).toMatchObject({
      name: 'draft',
      text,
      sizes: ['n', 'm', 'q'],
      scalars: [{ name: 'x', role: 'in' }],
      lets: [{ name: 'k' }],
      feeds: [{ name: 'a', distinct: true, range: { index: { text: 'i' } } }],
      claims: [{ measure: 'time', operator: '<=' }],
    })
    expect(routine!.arrays.map(({ name, role }) => `${role} ${name}`)).toEqual([
      'in a',
      'in s',
      'table t',
      'table u',
      'work c',
      'out b',
      'inout d',
    ])
    expect(routine!.needs).toHaveLength(1)
    expect(routine!.checks).toHaveLength(1)
    expect(routine!.procedures.map(({ name }) => name.text)).toEqual(['f'])
  })
})
