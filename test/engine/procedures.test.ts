import { describe, expect, test } from 'vitest'
import { compileProgramSync } from '../../src/engine'
import { planCalls } from '../../src/engine/calls'
import { bindProgram, DEFAULT_LIMITS } from '../../src/machine'
import { readProgram } from '../../src/routine'
import { TwoWays } from '../outside/two-ways'

const routines = {
  'copied to each call': `routine copied
  in  x
  out y
procedure twice(a) -> b
  b <- a + a
  return b
end
procedure four(a) -> b
  c <- twice(a)
  b <- twice(c)
end
begin
  y <- four(x)
  z <- twice(y)
  y <- y + z
end
`,
  'recursive, with words to keep': `routine ways
  in  x
  out y
procedure ways(n, k) -> r
  if k = 0 or k = n
    return 1
  end
  a <- ways(n - 1, k)
  for i from 0 to k
    a <- a + 0
  end
  b <- ways(n - 1, k - 1)
  return a + b
end
begin
  y <- 0
  for i from 0 to x
    z <- ways(x, i)
    y <- y + z
  end
end
`,
  'recursive through each other': `routine mutual
  in  x
  out y, z
procedure even(n) -> r, steps
  if n = 0
    return 1, 0
  end
  r, steps <- odd(n - 1)
  steps <- steps + 1
end
procedure odd(n) -> r, steps
  if n = 0
    return 0, 0
  end
  r, steps <- even(n - 1)
  twice <- steps
  steps <- twice + 1
end
begin
  y, z <- even(x)
  y, t <- odd(x)
  z <- z + t
end
`,
  'recursion inside a loop inside a procedure that is copied': `routine walk
  in  x
  out y
  work seen[64]
procedure visit(at)
  if at >= 8 goto done
  seen[at] <- seen[at] + 1
  for next from 1 to 2
    visit(at * 2 + next)
  end
done:
end
procedure rounds(k) -> total
  total <- 0
  for i from 0 to 7
    seen[i] <- i
  end
  for i from 1 to k
    visit(0)
  end
  for i from 0 to 7
    total <- total + seen[i]
  end
end
begin
  u <- rounds(x & 3)
  y <- rounds(1)
  y <- y + u
end
`,
  'results into elements and variables': `routine drop
  in  x
  out y
  work a[4]
procedure pair(p) -> s, t
  s <- p + 1
  t <- p + 2
end
begin
  i <- 1
  i, a[i] <- pair(x)
  a[0], a[2] <- pair(i)
  i, y <- pair(3)
  y <- a[1] + a[0] + a[2] + i
end
`,
}

describe.each(Object.entries(routines))('%s', (_, text) => {
  const routine = new TwoWays(text)
  test.each([8, 32, 47, 64])('counts as the reference does, w = %i', width => {
    for (let x = 0; x < 8; x++) {
      const { reference, engine } = routine.results({ width, scalars: { x } })
      expect(engine).toEqual(reference)
    }
  })

  test('stops at the same place, whatever the limits', () => {
    for (let limit = 0; limit < 80; limit++) {
      for (const limits of [{ operations: limit * 3 }, { frames: limit }]) {
        const { reference, engine } = routine.results({ width: 16, scalars: { x: 4 }, limits })
        expect(engine).toEqual(reference)
      }
    }
  })
})

test('a large procedure of many calls stands in the module once, and counts the same', () => {
  const body = Array.from({ length: 60 }, (_, at) => `  b <- b xor (a << ${at % 7}) + ${at}`).join('\n')
  const loops = Array.from(
    { length: 12 },
    (_, at) => `  for i from 0 to ${at % 3}\n    z <- large(y)\n    y <- y + z\n  end`,
  ).join('\n')
  const routine = new TwoWays(`routine shared
  in  x
  out y
procedure large(a) -> b
  b <- 1
${body}
  if a & 3 = 1
    return a
  end
end
procedure outer(a) -> b
  b <- large(a)
  c <- large(b)
  b <- b + c
end
begin
  y <- outer(x)
${loops}
end
`)
  const plan = planCalls(routine.program)
  expect(plan.shared[1]).toBe(true)
  expect(plan.recursive[1]).toBe(false)
  for (const width of [9, 32, 64]) {
    for (let x = 0; x < 5; x++) routine.run({ width, scalars: { x } })
    for (let frames = 0; frames < 12; frames++) {
      const { reference, engine } = routine.results({ width, scalars: { x: 3 }, limits: { frames } })
      expect(engine).toEqual(reference)
    }
  }
})

describe('deep recursion', () => {
  const { program } = readProgram(`routine deep
  in  x
  out y
procedure down(n) -> r
  if n = 0
    return 0
  end
  r <- down(n - 1)
  return r + n
end
begin
  y <- down(x)
end
`)
  const compiled = compileProgramSync(program!, 64)
  const run = (x: bigint, frames: number) => {
    const bound = bindProgram(program!, { width: 64, sizes: {}, lets: {} }, DEFAULT_LIMITS)
    if ('refusal' in bound) throw new Error(bound.refusal.reason)
    return compiled.run(bound.binding, { arrays: {}, scalars: { x }, junk: 1 }, { ...DEFAULT_LIMITS, frames })
  }

  test('of a million levels and more runs, and tells its peak', () => {
    for (const depth of [1_000_000n, 5_000_000n]) {
      const result = run(depth, DEFAULT_LIMITS.frames)
      expect(result.ok && result.scalars.y).toBe((depth * (depth + 1n)) / 2n)
      // A parameter, a result and a return address for each level, the last included.
      expect(result.ok && result.frames).toBe(3 * (Number(depth) + 1))
    }
  })

  test('stops at the limit of frames', () => {
    const result = run(10_000_000n, 300_000)
    expect(result.ok ? undefined : result.failure).toMatchObject({ kind: 'frame-limit', value: 300_000n })
  })
})
