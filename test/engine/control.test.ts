import { describe, expect, test } from 'vitest'
import { compileProgramSync } from '../../src/engine'
import { CountPlan } from '../../src/engine/count'
import { buildFlow, targetsOf } from '../../src/engine/flow'
import { findLoops, orderFlow } from '../../src/engine/order'
import { readyFlow } from '../../src/engine/reduce'
import { readProgram } from '../../src/routine'
import { TwoWays } from '../outside/two-ways'

const routines = {
  'a loop of two entries': `routine two
  in  n0, x
  out y
begin
  i <- 0
  y <- 0
  if x > 5 goto inside
top:
  y <- y + 1
inside:
  y <- y + 10
  i <- i + 1
  if i < n0 goto top
end
`,
  'two loops of two entries, one in the other': `routine nested
  in  n0, x
  out y
begin
  i <- 0
  j <- 0
  y <- x
  if x > 5 goto inside
  if x > 3 goto deep
outer:
  y <- y + 1
inside:
  j <- 0
  if y & 1 = 0 goto deep
middle:
  y <- y + 3
deep:
  y <- y xor j
  j <- j + 1
  if j < 4 goto middle
  i <- i + 1
  if i < n0 goto outer
end
`,
  'a jump into the middle of three': `routine three
  in  n0, x
  out y
begin
  i <- 0
  y <- 0
  if x = 0 goto a
  if x = 1 goto b
  goto c
a:
  y <- y + 1
  i <- i + 1
  if i > n0 goto done
b:
  y <- y * 3
  i <- i + 1
  if y & 4 = 4 goto a
c:
  y <- y + 7
  i <- i + 1
  if i > n0 goto done
  if y & 2 = 2 goto b
  goto a
done:
end
`,
  'loops that leave several at once': `routine leave
  in  n0, x
  out y
begin
  y <- 0
  i <- 0
  while i < n0
    j <- 0
    while j < n0
      k <- 0
      while k < n0
        y <- y + 1
        if y = x goto out
        if y & 7 = 5 goto next
        k <- k + 1
      end
      j <- j + 1
    end
next:
    i <- i + 1
  end
  y <- y + 12
out:
  y <- y + i
end
`,
  'loops counted by a variable, every way': `routine counted
  in  n0, x
  out y
begin
  y <- 0
  for i from 0 to n0
    y <- y + i
    if y > x goto one
  end
one:
  for i from n0 downto 0
    y <- y xor i
  end
  i <- 0
  while i < n0
    i <- i + 1
    if i = x goto two
    y <- y + 2
  end
two:
  i <- n0
  while i > 0
    if y & 3 = 1 goto three
    i <- i - 1
    y <- y + i
  end
three:
  i <- ~0 - n0
  repeat
    i <- i + 1
    y <- y + 1
  until i = 3
  for i from ~0 - 3 to ~0
    y <- y + 5
  end
  for i from 3 downto 0
    if i = x
      y <- y + 9
    end
  end
end
`,
  'empty bodies and loops that do not run': `routine empty
  in  n0, x
  out y
begin
  y <- x
  for i from 5 to 4
    y <- y + 1
  end
  for i from 0 to n0
  end
  while y > 9
    y <- y >> 1
  end
  if x = 1
  else
  end
end
`,
}

describe.each(Object.entries(routines))('%s', (_, text) => {
  const routine = new TwoWays(text)
  test.each([4, 8, 32, 47, 64])('counts as the reference does, w = %i', width => {
    for (let n0 = 0; n0 < 7; n0++) {
      for (let x = 0; x < 9; x++) {
        const { reference, engine } = routine.results({ width, scalars: { n0, x }, limits: { operations: 5000 } })
        expect(engine).toEqual(reference)
      }
    }
  })

  test('stops at the same visit, whatever the limit', () => {
    for (let operations = 0; operations < 130; operations++) {
      for (const x of [0, 1, 4, 6]) {
        const { reference, engine } = routine.results({ width: 8, scalars: { n0: 4, x }, limits: { operations } })
        expect(engine).toEqual(reference)
      }
    }
  })
})

describe('order of a flow graph', () => {
  const graphOf = (text: string) => buildFlow(readProgram(text).program!)

  test.each(Object.entries(routines))('%s: dominators are those of the definition', (_, text) => {
    const graph = graphOf(text)
    const { order, dominator, rank } = orderFlow(graph)
    for (const node of order) {
      // A node dominates another if no way leads there without it.
      const without = (banned: number) => {
        const seen = new Set<number>()
        const waiting = banned === 0 ? [] : [0]
        for (let at = waiting.pop(); at !== undefined; at = waiting.pop()) {
          if (seen.has(at) || at === banned) continue
          seen.add(at)
          waiting.push(...targetsOf(graph.nodes[at]!.end))
        }
        return !seen.has(node)
      }
      const above = [...order].filter(other => other !== node && without(other))
      const nearest = above.sort((a, b) => rank[b]! - rank[a]!)[0] ?? 0
      expect(dominator[node]).toBe(nearest)
    }
  })

  test.each(Object.entries(routines))('%s: is made reducible', (_, text) => {
    const graph = graphOf(text)
    expect(readyFlow(graph).reducible).toBe(true)
    expect(orderFlow(graph).reducible).toBe(true)
  })

  test('a graph of single entries gets no node more', () => {
    const graph = graphOf(routines['loops that leave several at once'])
    const before = graph.nodes.length
    readyFlow(graph)
    expect(graph.nodes.length).toBe(before)
  })
})

test('counters stand on fewer edges than there are blocks', () => {
  const { program } = readProgram(routines['loops that leave several at once'])
  const graph = buildFlow(program!)
  const order = readyFlow(graph)
  const { counters } = new CountPlan(graph, order, findLoops(order))
  const edges = graph.nodes.reduce((sum, { end }) => sum + targetsOf(end).length, 0)
  // Edges less nodes, the known way from the finish back to the entry left out.
  expect(counters).toBe(edges - graph.nodes.length + 1)
  expect(counters).toBeLessThan(program!.blocks.length)
})

describe('long routines', () => {
  const repeated = (count: number, stretch: (at: number) => string) =>
    `routine long\n  in  x\n  out y\nbegin\n  y <- 0\n${Array.from({ length: count }, (_, at) => stretch(at)).join('\n')}\nend\n`
  const shapes = {
    branches: repeated(500, at => `  if x = ${at & 63} goto l${at}\n  y <- y + 1\nl${at}:`),
    'early ends': repeated(
      700,
      at => `  if y = ${(at * 5) & 1023}\n    y <- ${at & 63}\n    halt\n  end\n  y <- y + 1`,
    ),
    loops: repeated(400, at => `  for i from 0 to ${at & 3}\n    y <- y + i\n  end`),
    'jumps to one end': `${repeated(900, at => `  if x = ${at & 1023} goto done\n  y <- y + 1`).replace(/end\n$/, '')}done:\nend\n`,
    'loops in loops': `${repeated(300, at => `l${at}:\n  y <- y + 1`).replace(/end\n$/, '')}${Array.from({ length: 300 }, (_, at) => `  if y < x * ${300 - at} goto l${299 - at}`).join('\n')}\nend\n`,
    'repeats in repeats': `${repeated(0, () => '')}`.replace(
      '  y <- 0\n',
      `  y <- 0\n${'  repeat\n'.repeat(190)}  y <- y + 1\n${'  until y >= x\n'.repeat(190)}`,
    ),
    'entries of one loop': `${repeated(300, at => `  if x = ${at} goto l${at}`).replace(/end\n$/, '')}again:\n${Array.from({ length: 300 }, (_, at) => `l${at}:\n  y <- y + 1`).join('\n')}\n  if y < 700 goto again\nend\n`,
  }
  test.each(Object.entries(shapes))('%s', (_, text) => {
    const routine = new TwoWays(text)
    for (const x of [0, 3, 60]) routine.run({ width: 32, scalars: { x } })
    const start = performance.now()
    compileProgramSync(routine.program, 64)
    // Far above what it takes: only a cost that grows with the square or worse would reach this.
    expect(performance.now() - start).toBeLessThan(3000)
  })
})
