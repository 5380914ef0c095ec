import fc from 'fast-check'
import { expect, test } from 'vitest'
import type { Exact, ExactCondition, ExactOperator } from '../../grammar'
import { evaluateExact, holdsExact, isProblem } from '../../src/routine'

// Random expressions by an oracle that knows nothing of machine numbers, closures or lowest terms: pairs of BigInts,
// worked out from the tree, undefined where there is no value.

type Pair = readonly [bigint, bigint]

const SPAN = { start: 0, end: 0, line: 1, column: 1 }
const NAMES: Record<string, bigint> = { zero: 0n, n: 5n, edge: 2n ** 53n - 1n, wide: 2n ** 60n + 1n }
const WORDS = [3, 0, 2 ** 32 - 1, 7]

function name(text: string) {
  return { text, span: SPAN }
}

function number(numerator: bigint, denominator = 1n): Exact {
  return { kind: 'number', numerator, denominator, span: SPAN }
}

const leaf: fc.Arbitrary<Exact> = fc.oneof(
  fc.bigInt({ min: 0n, max: 9n }).map(value => number(value)),
  fc.bigInt({ min: 0n, max: 2n ** 64n }).map(value => number(value)),
  fc.constant(number(1n, 2n)),
  fc
    .constantFrom(...Object.keys(NAMES), 'i')
    .map((text): Exact => ({ kind: 'name', name: name(text), span: SPAN })),
)

const { expression, condition } = fc.letrec<{ expression: Exact; condition: ExactCondition }>(tie => ({
  expression: fc.oneof(
    { depthSize: 'small', withCrossShrink: true },
    leaf,
    fc
      .tuple(fc.constantFrom<ExactOperator>('+', '-', '*', '/', 'mod'), tie('expression'), tie('expression'))
      .map(([operator, left, right]): Exact => ({ kind: 'binary', operator, left, right, span: SPAN })),
    fc.tuple(tie('expression'), fc.bigInt({ min: 0n, max: 3n })).map(
      ([left, exponent]): Exact => ({
        kind: 'binary',
        operator: '^',
        left,
        right: number(exponent),
        span: SPAN,
      }),
    ),
    tie('expression').map((operand): Exact => ({ kind: 'negate', operand, span: SPAN })),
    fc
      .tuple(fc.constantFrom('floor' as const, 'ceil' as const, 'abs' as const), tie('expression'))
      .map(([called, argument]): Exact => ({ kind: 'call', function: called, arguments: [argument], span: SPAN })),
    fc
      .tuple(
        fc.constantFrom('min' as const, 'max' as const),
        fc.array(tie('expression'), { minLength: 1, maxLength: 3 }),
      )
      .map(([called, given]): Exact => ({ kind: 'call', function: called, arguments: given, span: SPAN })),
    fc.tuple(fc.nat(4), fc.nat(4), tie('expression')).map(
      ([from, to, body]): Exact => ({
        kind: 'sum',
        index: name('i'),
        from: number(BigInt(from)),
        to: number(BigInt(to)),
        body,
        span: SPAN,
      }),
    ),
    tie('expression').map(
      (index): Exact => ({
        kind: 'element',
        array: { name: name('a'), old: false, span: SPAN },
        index,
        span: SPAN,
      }),
    ),
  ),
  condition: fc.oneof(
    { depthSize: 'small' },
    fc
      .tuple(
        fc.constantFrom('=' as const, '!=' as const, '<' as const, '<=' as const, '>' as const, '>=' as const),
        tie('expression'),
        tie('expression'),
      )
      .map(([operator, left, right]): ExactCondition => ({ kind: 'compare', operator, left, right, span: SPAN })),
    fc
      .tuple(fc.constantFrom('and' as const, 'or' as const), tie('condition'), tie('condition'))
      .map(([kind, left, right]): ExactCondition => ({ kind, left, right, span: SPAN })),
    tie('condition').map((operand): ExactCondition => ({ kind: 'not', operand, span: SPAN })),
    fc.tuple(fc.constantFrom('all' as const, 'any' as const), fc.nat(4), tie('condition')).map(
      ([kind, to, body]): ExactCondition => ({
        kind,
        index: name('i'),
        from: number(0n),
        to: number(BigInt(to)),
        body,
        span: SPAN,
      }),
    ),
  ),
}))

const order = ([a, b]: Pair, [c, d]: Pair) => (a * d < c * b ? -1 : a * d > c * b ? 1 : 0)
const down = ([a, b]: Pair) => (a - (((a % b) + b) % b)) / b

function value(tree: Exact, i: bigint | undefined): Pair | undefined {
  switch (tree.kind) {
    case 'number':
      return [tree.numerator, tree.denominator]
    case 'name': {
      const known = tree.name.text === 'i' ? i : NAMES[tree.name.text]
      return known === undefined ? undefined : [known, 1n]
    }
    case 'negate': {
      const operand = value(tree.operand, i)
      return operand && [-operand[0], operand[1]]
    }
    case 'binary': {
      const left = value(tree.left, i)
      const right = left && value(tree.right, i)
      return right && combine(tree.operator, left, right)
    }
    case 'call': {
      const given = tree.arguments.map(argument => value(argument, i))
      if (given.includes(undefined)) return undefined
      const values = given as Pair[]
      const [first] = values as [Pair]
      if (tree.function === 'floor') return [down(first), 1n]
      if (tree.function === 'ceil') return [-down([-first[0], first[1]]), 1n]
      if (tree.function === 'abs') return first[0] < 0n ? [-first[0], first[1]] : first
      const sorted = [...values].sort(order)
      return tree.function === 'min' ? sorted[0] : sorted[sorted.length - 1]
    }
    case 'sum': {
      let sum: Pair | undefined = [0n, 1n]
      const [from, to] = [value(tree.from, i)![0], value(tree.to, i)![0]]
      for (let at = from; at <= to && sum; at++) {
        const term = value(tree.body, at)
        sum = term && combine('+', sum, term)
      }
      return sum
    }
    case 'element': {
      const index = value(tree.index, i)
      if (!index || index[0] % index[1] !== 0n) return undefined
      const word = WORDS[Number(index[0] / index[1])]
      return word === undefined ? undefined : [BigInt(word), 1n]
    }
    default:
      throw new Error(`the oracle knows no ${tree.kind}`)
  }
}

function combine(operator: ExactOperator, x: Pair, y: Pair): Pair | undefined {
  const [a, b] = x
  const [c, d] = y
  switch (operator) {
    case '+':
      return [a * d + c * b, b * d]
    case '-':
      return [a * d - c * b, b * d]
    case '*':
      return [a * c, b * d]
    case '/':
      return c === 0n ? undefined : c < 0n ? [-a * d, -b * c] : [a * d, b * c]
    case '^':
      return [a ** c, b ** c]
    case 'mod': {
      const quotient = combine('/', x, y)
      return quotient && combine('-', x, combine('*', y, [down(quotient), 1n])!)
    }
  }
}

function holds(tree: ExactCondition, i: bigint | undefined): boolean | undefined {
  switch (tree.kind) {
    case 'compare': {
      const left = value(tree.left, i)
      const right = left && value(tree.right, i)
      if (!right) return undefined
      const way = order(left, right)
      return { '=': way === 0, '!=': way !== 0, '<': way < 0, '<=': way <= 0, '>': way > 0, '>=': way >= 0 }[
        tree.operator
      ]
    }
    case 'and':
    case 'or': {
      const left = holds(tree.left, i)
      return left === undefined || left === (tree.kind === 'or') ? left : holds(tree.right, i)
    }
    case 'not': {
      const operand = holds(tree.operand, i)
      return operand === undefined ? undefined : !operand
    }
    case 'all':
    case 'any': {
      const to = value(tree.to, i)![0]
      for (let at = 0n; at <= to; at++) {
        const each = holds(tree.body, at)
        if (each === undefined || each === (tree.kind === 'any')) return each
      }
      return tree.kind === 'all'
    }
    default:
      throw new Error(`the oracle knows no ${tree.kind}`)
  }
}

const scope = {
  number: (text: string) => NAMES[text],
  content: () => Uint32Array.from(WORDS),
}
const RUNS = { numRuns: 2000 }

test('random expressions have the value that pairs of whole numbers give', () => {
  let values = 0
  fc.assert(
    fc.property(expression, tree => {
      const expected = value(tree, undefined)
      const found = evaluateExact(tree, scope)
      expect(isProblem(found)).toBe(expected === undefined)
      if (isProblem(found) || !expected) return
      values++
      if (typeof found === 'bigint') expect(found * expected[1]).toBe(expected[0])
      else {
        if (found.kind === 'real') throw new Error('a rational expression came out real')
        expect(found.numerator * expected[1]).toBe(expected[0] * found.denominator)
        expect(found.numerator % found.denominator).not.toBe(0n)
      }
    }),
    RUNS,
  )
  expect(values).toBeGreaterThan(RUNS.numRuns / 3)
})

test('random conditions hold where pairs of whole numbers say so', () => {
  const found = new Map<boolean | undefined, number>()
  fc.assert(
    fc.property(condition, tree => {
      const expected = holds(tree, undefined)
      const answer = holdsExact(tree, scope)
      expect(isProblem(answer) ? undefined : answer).toBe(expected)
      found.set(expected, (found.get(expected) ?? 0) + 1)
    }),
    RUNS,
  )
  for (const answer of [true, false]) expect(found.get(answer)).toBeGreaterThan(RUNS.numRuns / 10)
})
