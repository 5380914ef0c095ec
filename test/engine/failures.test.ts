import { describe, expect, test } from 'vitest'
import { type Given, TwoWays } from '../outside/two-ways'

const cases: readonly {
  readonly name: string
  readonly text: string
  readonly given: Given
  readonly failure: object
}[] = [
  {
    name: 'a load outside its array',
    text: 'routine r\n  in a[n]\n  out y\nbegin\n  y <- a[n]\nend\n',
    given: { width: 16, sizes: { n: 3 }, arrays: { a: [1, 2, 3] } },
    failure: { kind: 'index', value: 3n, span: { line: 5 } },
  },
  {
    name: 'a load at an index of all ones',
    text: 'routine r\n  in a[n], x\n  out y\nbegin\n  y <- a[x - 1]\nend\n',
    given: { width: 64, sizes: { n: 3 }, arrays: { a: [1, 2, 3] }, scalars: { x: 0 } },
    failure: { kind: 'index', value: 2n ** 64n - 1n },
  },
  {
    name: 'an index whose low 32 bits are inside',
    text: 'routine r\n  in a[n], x\n  out y\nbegin\n  y <- a[x]\nend\n',
    given: { width: 48, sizes: { n: 3 }, arrays: { a: [1, 2, 3] }, scalars: { x: 2n ** 32n + 1n } },
    failure: { kind: 'index', value: 2n ** 32n + 1n },
  },
  {
    name: 'a store outside its array, into one that follows',
    text: 'routine r\n  in n0\n  out b[2], c[2]\nbegin\n  b[n0] <- 5\nend\n',
    given: { width: 32, scalars: { n0: 2 } },
    failure: { kind: 'index', value: 2n },
  },
  {
    name: 'an element of an empty array',
    text: 'routine r\n  in a[n]\n  out y\nbegin\n  y <- a[0]\nend\n',
    given: { width: 32, sizes: { n: 0 }, arrays: { a: [] } },
    failure: { kind: 'index', value: 0n },
  },
  {
    name: 'an address outside memory',
    text: 'routine r\n  in a[n]\n  out y\nbegin\n  p <- addr(a)\n  y <- p[n]\nend\n',
    given: { width: 64, sizes: { n: 3 }, arrays: { a: [1, 2, 3] } },
    failure: { kind: 'address', value: 3n, span: { line: 6 } },
  },
  {
    name: 'an address whose low 32 bits are inside',
    text: 'routine r\n  in a[n], x\n  out y\nbegin\n  y <- [x]\nend\n',
    given: { width: 40, sizes: { n: 3 }, arrays: { a: [1, 2, 3] }, scalars: { x: 2n ** 33n } },
    failure: { kind: 'address', value: 2n ** 33n },
  },
  {
    name: 'a store by address to an array that is only read',
    text: 'routine r\n  in a[n]\n  out b[n]\nbegin\n  p <- addr(b)\n  q <- 0 - 1\n  p[q] <- 7\nend\n',
    given: { width: 13, sizes: { n: 3 }, arrays: { a: [1, 2, 3] } },
    failure: { kind: 'address', value: 2n, span: { line: 7 } },
  },
  {
    name: 'a store by address past the memory in use',
    text: 'routine r\n  in a[n]\n  out b[n]\nbegin\n  p <- addr(b)\n  p[n] <- 7\nend\n',
    given: { width: 32, sizes: { n: 3 }, arrays: { a: [1, 2, 3] } },
    failure: { kind: 'address', value: 6n },
  },
  {
    name: 'a division by zero',
    text: 'routine r\n  in x\n  out y\nbegin\n  y <- 9 / x\nend\n',
    given: { width: 8, scalars: { x: 0 } },
    failure: { kind: 'divide', value: 9n },
  },
  {
    name: 'a remainder by zero',
    text: 'routine r\n  in x\n  out y\nbegin\n  y <- x\n  y <- 9 mod y\nend\n',
    given: { width: 64, scalars: { x: 0 } },
    failure: { kind: 'divide', value: 9n, span: { line: 6 } },
  },
  {
    name: 'a step of zero',
    text: 'routine r\n  in x\n  out y\nbegin\n  y <- 0\n  for i from 0 to 9 by x\n    y <- y + 1\n  end\nend\n',
    given: { width: 32, scalars: { x: 0 } },
    failure: { kind: 'step', value: 0n, span: { line: 6 } },
  },
  {
    name: 'a false assertion in the third pass',
    text: 'routine r\n  in a[n]\n  out y\nbegin\n  y <- 0\n  for i from 0 to n - 1\n    y <- y + a[i]\n    assert y <= 2^w / 4 and sum j in 0 .. i : a[j] = y\n  end\nend\n',
    given: { width: 8, sizes: { n: 4 }, arrays: { a: [30, 30, 30, 30] } },
    failure: { kind: 'assert', value: 0n, span: { line: 8 } },
  },
  {
    name: 'an assertion over what memory holds',
    text: 'routine r\n  inout a[n]\n  work b[n]\nbegin\n  for i from 0 to n - 1\n    b[i] <- a[i]\n    a[i] <- 0\n  end\n  assert same(b, old(a))\n  assert sum(a) = 0\n  b[0] <- 1\n  assert same(b, old(a))\nend\n',
    given: { width: 64, sizes: { n: 3 }, arrays: { a: [9, 8, 2n ** 64n - 1n] } },
    failure: { kind: 'assert', span: { line: 12 } },
  },
  {
    name: 'an assertion that cannot be worked out',
    text: 'routine r\n  in x\n  out y\nbegin\n  y <- x\n  assert 1 / (x - y) = 1\nend\n',
    given: { width: 32, scalars: { x: 3 } },
    failure: { kind: 'assert', span: { line: 6 } },
  },
  {
    name: 'an endless loop',
    text: 'routine r\n  out y\nbegin\n  y <- 0\nagain:\n  goto again\nend\n',
    given: { width: 32, limits: { operations: 1000 } },
    failure: { kind: 'operation-limit', value: 1000n },
  },
  {
    name: 'an endless recursion',
    text: 'routine r\n  out y\nprocedure f(x) -> z\n  z <- f(x + 1)\nend\nbegin\n  y <- f(0)\nend\n',
    given: { width: 32, limits: { frames: 100 } },
    failure: { kind: 'frame-limit', value: 100n, span: { line: 4 } },
  },
  {
    name: 'more operations than the limit, seen at the end',
    text: 'routine r\n  out y\nbegin\n  y <- 0\n  y <- y + 1\n  y <- y + 1\nend\n',
    given: { width: 32, limits: { operations: 2 } },
    failure: { kind: 'operation-limit', value: 2n },
  },
]

describe('failing runs name the same place and value both ways', () => {
  test.each(cases)('$name', ({ text, given, failure }) => {
    expect(new TwoWays(text).fail(given)).toMatchObject(failure)
  })
})

test('the failure is that of the first operation that fails', () => {
  const routine = new TwoWays(
    'routine r\n  in a[n], x\n  out y\nbegin\n  y <- 4 / x + a[x + 5]\n  y <- a[y]\nend\n',
  )
  const given = { width: 32, sizes: { n: 2 }, arrays: { a: [1, 2] } }
  expect(routine.fail({ ...given, scalars: { x: 0 } }).kind).toBe('divide')
  expect(routine.fail({ ...given, scalars: { x: 1 } }).kind).toBe('index')
})
