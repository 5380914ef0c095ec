import { describe, expect, test } from 'vitest'
import {
  bindProgram,
  DEFAULT_LIMITS,
  type Input,
  interpretProgram,
  makeWords,
  tallyRun,
  weighTally,
} from '../../src/machine'
import { CHARGES } from '../../src/machine/machine'
import { readProgram } from '../../src/routine'

interface Given {
  readonly width?: number
  readonly arrays?: Record<string, number[]>
  readonly scalars?: Record<string, number>
}

/** Runs a routine of declarations and body by the reference; gives its counts by class and by line, and its scalars. */
function count(declarations: string, body: string, given: Given = {}) {
  const text = `routine draft\n${declarations}\nbegin\n${body}\nend\n`
  const { program, diagnostics } = readProgram(text)
  if (!program) throw new Error(diagnostics.map(each => `${each.span.line}: ${each.message}`).join('\n'))
  const width = given.width ?? 16
  const arrays = Object.fromEntries(
    Object.entries(given.arrays ?? {}).map(([name, words]) => [name, makeWords(width, words.map(BigInt))]),
  )
  const sizes = Object.fromEntries(
    program.routine.sizes.map(size => [size, Object.values(given.arrays ?? {})[0]!.length]),
  )
  const bound = bindProgram(program, { width, sizes, lets: {} }, DEFAULT_LIMITS)
  if (!('binding' in bound)) throw new Error(bound.refusal.reason)
  const scalars = Object.fromEntries(
    Object.entries(given.scalars ?? {}).map(([name, word]) => [name, BigInt(word)]),
  )
  const input: Input = { arrays, scalars, junk: 1 }
  const result = interpretProgram(bound.binding, input, DEFAULT_LIMITS)
  if (!result.ok) throw new Error(result.failure.message)
  const tally = tallyRun(bound.binding, result)
  const weighed = weighTally(tally, CHARGES.unit)
  const used = Object.fromEntries(Object.entries(tally.byClass).filter(([, operations]) => operations > 0))
  const first = text.split('\n').indexOf('begin') + 2
  const byLine = Object.fromEntries(weighed.byLine.map(({ line, count }) => [line - first + 1, count]))
  return {
    used,
    byLine,
    time: Number(weighed.time),
    scalars: result.scalars,
    arrays: result.arrays,
    indexed: tally.indexed,
  }
}

const out = '  out z'

describe('an assignment', () => {
  test.each([
    ['z <- 5', { move: 1 }],
    ['z <- w', { move: 1 }],
    ['z <- 1 + 2', { add: 1 }],
    ['z <- -1', { add: 1 }],
    ['z <- ~1', { logic: 1 }],
    ['z <- 3 * 4', { multiply: 1 }],
    ['z <- 3 / 4', { divide: 1 }],
    ['z <- 3 mod 4', { divide: 1 }],
    ['z <- 3 << 4', { shift: 1 }],
    ['z <- popcount(3)', { bitscan: 1 }],
    ['z <- (1 + 2) * (3 + 4)', { add: 2, multiply: 1 }],
    ['z <- (5 >> 1) & 3 | 8 xor 1', { shift: 1, logic: 3 }],
    ['high, z <- 3 * (4 + 5)', { multiply: 1, add: 1 }],
  ])('%s', (body, expected) => {
    expect(count(out, body).used).toEqual(expected)
  })

  test.each([
    ['z <- a[1]', { load: 1 }],
    ['z <- a[1] + a[0]', { load: 2, add: 1 }],
    ['z <- a[a[0]]', { load: 2 }],
    ['z <- 0\nb[1] <- 5', { move: 1, store: 1 }],
    ['z <- 0\nb[1] <- a[0]', { move: 1, load: 1, store: 1 }],
    ['z <- 0\nb[z + 1] <- a[0] + 1', { move: 1, add: 2, load: 1, store: 1 }],
    ['p <- addr(b)\n[p] <- 7\nz <- [p]', { move: 1, store: 1, load: 1 }],
    ['p <- addr(b)\np[1] <- 7\nz <- p[1]', { move: 1, store: 1, load: 1 }],
    ['p <- addr(b) + 1\n[p] <- 7\nz <- [p - 1 + 1]', { add: 3, store: 1, load: 1 }],
  ])('%s', (body, expected) => {
    const given = { arrays: { a: [1, 0] } }
    expect(count('  in a[n]\n  work b[n]\n  out z', body, given).used).toEqual(expected)
  })

  test('counts base-plus-index accesses apart', () => {
    const given = { arrays: { a: [1, 0] } }
    expect(count('  in a[n]\n  out z', 'p <- addr(a)\nz <- a[0] + p[1] + [p]', given).indexed).toBe(2)
  })
})

describe('several results at once', () => {
  test('are written after both factors are read', () => {
    const { scalars } = count('  out high, low', 'high <- 300\nlow <- 400\nhigh, low <- high * low')
    expect(scalars).toEqual({ high: 1n, low: 54464n })
  })

  test('go to memory before variables change, since an index may be one of them', () => {
    const { arrays, used } = count('  in a[n]\n  out b[n]', 'b[0] <- 0\ni <- 1\ni, b[i] <- 300 * 400', {
      arrays: { a: [1, 2] },
    })
    expect(arrays.b![1]).toBe(54464)
    expect(used).toEqual({ store: 2, move: 1, multiply: 1 })
  })
})

describe('a for loop', () => {
  test.each([
    ['0 to 9', 10, 10],
    ['0 to 0', 1, 1],
    ['1 to 0', 0, 1],
    ['0 to 9 by 3', 4, 12],
    ['0 to 10 by 5', 3, 15],
    ['9 downto 0', 10, 65535],
    ['9 downto 0 by 4', 3, 65533],
    ['0 downto 1', 0, 0],
    ['65530 to 65535', 6, 0],
    ['65530 to 65535 by 4', 2, 2],
    ['3 downto 0 by 65535', 1, 4],
  ])('from %s makes %i passes and leaves the variable at %i', (range, passes, left) => {
    const { byLine, scalars } = count('  out z, c', `c <- 0\nfor i from ${range}\nc <- c + 1\nend\nz <- i`)
    expect(scalars).toEqual({ c: BigInt(passes), z: BigInt(left) })
    expect(byLine[2]).toBe(1 + (passes + 1) + passes + passes)
    expect(byLine[3] ?? 0).toBe(passes)
  })

  test('works its end out once, before the loop, on its own line', () => {
    const { byLine, scalars } = count('  out z', 'z <- 3\nfor i from 1 to z + 1\nz <- z + i\nend')
    expect(scalars.z).toBe(13n)
    expect(byLine).toEqual({ 1: 1, 2: 1 + 1 + 5 + 4 + 4, 3: 4 })
  })

  test('reads a variable end before the loop, whatever the body does to it', () => {
    expect(count('  out z', 'z <- 3\nfor i from 1 to z\nz <- z + 1\nend').scalars.z).toBe(6n)
  })
})

describe('structured forms', () => {
  test('a while pays a compare a test and a jump a completed pass, on its own line', () => {
    const { byLine } = count(out, 'z <- 0\nwhile z < 4\nz <- z + 1\nend')
    expect(byLine).toEqual({ 1: 1, 2: 5 + 4, 3: 4 })
  })

  test('a repeat pays its condition once a pass, on the until line', () => {
    const { byLine } = count(out, 'z <- 0\nrepeat\nz <- z + 1\nuntil z = 4')
    expect(byLine).toEqual({ 1: 1, 3: 4, 4: 4 })
  })

  test('a jump leaves each branch of an if that is not last, on the line of the else that it leaps over', () => {
    const body = (z: number) => `z <- ${z}\nif z = 0\nz <- 5\nelse if z = 1\nz <- 6\nelse\nz <- 7\nend`
    expect(count(out, body(0)).byLine).toEqual({ 1: 1, 2: 1, 3: 1, 4: 1 })
    expect(count(out, body(1)).byLine).toEqual({ 1: 1, 2: 1, 4: 1, 5: 1, 6: 1 })
    expect(count(out, body(2)).byLine).toEqual({ 1: 1, 2: 1, 4: 1, 7: 1 })
  })

  test('conditions stop at the first comparison that decides', () => {
    const used = (condition: string) => count(out, `z <- 1\nif ${condition}\nz <- 2\nend`).used
    expect(used('z = 0 and z = 1')).toEqual({ move: 1, compare: 1 })
    expect(used('z = 1 or z = 0')).toEqual({ move: 2, compare: 1 })
    expect(used('not (z = 1 and z < 5) or z = 0')).toEqual({ move: 1, compare: 3 })
  })

  test('a taken conditional jump is one compare and no jump', () => {
    expect(count(out, 'z <- 1\nif z = 1 goto done\nz <- 2\ndone:\nhalt').used).toEqual({ move: 1, compare: 1 })
  })
})

describe('a procedure', () => {
  const double = '  procedure double(x) -> y\n    y <- x + x\n  end'

  test('costs a call and a move an argument, and as much on the way back', () => {
    const { used } = count(`${out}\n${double}`, 'z <- double(4)')
    expect(used).toEqual({ add: 1, call: 2, move: 2 })
  })

  test('returns what it is told to', () => {
    const declared = '  out u, v\n  procedure swapped(x, y) -> s, t\n    return y, x\n  end'
    const { scalars, used } = count(declared, 'u <- 1\nv <- 2\nu, v <- swapped(u, v)')
    expect(scalars).toEqual({ u: 2n, v: 1n })
    expect(used).toEqual({ move: 6, call: 2 })
  })
})

describe('a variable that may be read before it is set', () => {
  const diagnose = (body: string, declarations = out) =>
    readProgram(`routine draft\n${declarations}\nbegin\n${body}\nend\n`).diagnostics.filter(
      each => each.severity === 'error',
    )

  test('is an error at the read, with the path', () => {
    const [first, ...rest] = diagnose('if w < 8\nx <- 1\nend\nz <- x + x')
    expect(rest).toEqual([])
    expect(first!.span.line).toBe(7)
    expect(first!.message).toContain('x may be read before it is set (line 4: the test fails)')
    expect(first!.remedy).toContain('x <- 0')
  })

  test('is an error where only a loop sets it', () => {
    const [first] = diagnose('for i from 1 to w\nx <- i\nend\nz <- x')
    expect(first!.message).toContain('x may be read before it is set (line 4: the test fails)')
  })

  test('is an error where a result is left unset', () => {
    const [first] = diagnose('if w < 8 goto done\nz <- 1\ndone:\nhalt')
    expect(first!.message).toContain('result z may still be unset')
  })

  test('is an error in a procedure that may not set its result', () => {
    const declared = `${out}\n  procedure f(x) -> y\n    if x = 0\n      y <- 1\n    end\n  end`
    expect(diagnose('z <- f(1)', declared)[0]!.message).toContain('the result y of f may still be unset')
  })

  test.each([
    ['if w < 8\nx <- 1\nelse\nx <- 2\nend\nz <- x'],
    ['repeat\nx <- 1\nuntil x = 1\nz <- x'],
    ['x <- 1\nagain:\nz <- x\nif z = 1 goto done\ngoto again\ndone:\nhalt'],
  ])('is not seen in %j', body => {
    expect(diagnose(body)).toEqual([])
  })
})

describe('checkpoints', () => {
  test('stand on every cycle, and weigh no more than the cheapest way on', () => {
    const { program } = readProgram(
      'routine draft\n  out z\nbegin\nz <- 0\nagain:\nif z >= 9 goto done\nz <- z + 1\ngoto again\ndone:\nhalt\nend\n',
    )
    const marked = program!.blocks.filter(block => block.checkpoint !== undefined)
    expect(marked.map(block => block.checkpoint)).toEqual([1])
  })
})
