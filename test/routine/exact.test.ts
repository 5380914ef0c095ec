import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { parseCondition, parseExact } from '../../grammar'
import {
  ceilWhole,
  type ExactValue,
  evaluateExact,
  exactText,
  holdsExact,
  isProblem,
  meetsBound,
  nearestDouble,
  quotientDouble,
  type Scope,
  wholeNumber,
} from '../../src/routine'
import { encloseValue, isReal } from '../../src/routine/exact-real'

const NAMES: Record<string, bigint> = { n: 1000n, w: 64n, k: 8n, wide: 4096n }
const SCOPE: Scope = {
  number: (name, old) => (old ? NAMES[name]! + 1n : NAMES[name]),
  content: (name, old) =>
    ({
      a: Uint32Array.of(5, 1, 4),
      b: BigUint64Array.of(1n, 4n, 5n),
      c: [1n, 4n, 2n ** 100n],
      none: new Uint32Array(0),
      x: old ? Uint32Array.of(1) : Uint32Array.of(2),
    })[name],
}

function evaluate(text: string, scope = SCOPE) {
  const { exact, diagnostics } = parseExact(text)
  if (!exact) throw new Error(`${text}: ${diagnostics[0]?.message}`)
  return evaluateExact(exact, scope)
}

function value(text: string): ExactValue {
  const answer = evaluate(text)
  if (isProblem(answer)) throw new Error(`${text}: ${answer.message}`)
  return answer
}

function holds(text: string) {
  const { condition, diagnostics } = parseCondition(text)
  if (!condition) throw new Error(`${text}: ${diagnostics[0]?.message}`)
  return holdsExact(condition, SCOPE)
}

describe('the value of', () => {
  test.each([
    ['2 + 3*4', '14'],
    ['1/3 + 1/6', '1/2'],
    ['0.5 - 1', '-1/2'],
    ['2^w', '18446744073709551616'],
    ['2^-3', '1/8'],
    ['(2/3)^-2', '9/4'],
    ['0^0', '1'],
    ['(-1)^1000000000000000000001', '-1'],
    ['n*ceil(w/k)', '8000'],
    ['7 mod 3', '1'],
    ['-7 mod 3', '2'],
    ['7 mod -3', '-2'],
    ['-7 mod -3', '-1'],
    ['(7/2) mod (3/4)', '1/2'],
    ['-1/4 mod 1', '3/4'],
    ['floor(-7/2)', '-4'],
    ['ceil(-7/2)', '-3'],
    ['abs(-7/2)', '7/2'],
    ['min(3, 1/2, 2)', '1/2'],
    ['max(lg(n), 5)', '9.96578428466208...'],
    ['min(lg(n), 5)', '5'],
    ['popcount(2^w - 1)', '64'],
    ['popcount(255)', '8'],
    ['lg(1024)', '10'],
    ['lg(1/8)', '-3'],
    ['lg(2^wide)', '4096'],
    ['ceil(lg(n))', '10'],
    ['floor(lg(n)^2)', '99'],
    ['1024^0.5', '32'],
    ['8^(2/3)', '4'],
    ['(27/8)^(1/3)', '3/2'],
    ['2^lg(n)', '1000'],
    ['2^(lg(16*n) - 4)', '1000'],
    ['n^0.5 * n^0.5', '1000'],
    ['2^0.5 * 8^0.5', '4'],
    ['8^0.5 - 2*2^0.5', '0'],
    ['lg(6) - lg(3)', '1'],
    ['2*lg(6) - lg(36)', '0'],
    ['ceil(lg(n)/lg(10))', '3'],
    ['lg(27)/lg(9)', '3/2'],
    ['(lg(n)/2)/lg(10)', '3/2'],
    ['lg(12)/lg(18)', '0.859718699852197...'],
    ['lg(n^2) / lg(n^2) * lg(8)', '3'],
    ['lg(12)/2 - lg(3)/2', '1'],
    ['lg(n^0.5) * 2 - lg(n)', '0'],
    ['old(k)', '9'],
    ['sum(a)', '10'],
    ['sum(b)', '10'],
    ['sum(c) - 2^100', '5'],
    ['sum(none)', '0'],
    ['sum(old(x)) + sum(x)', '3'],
    ['a[0] * b[1] + c[2]', '1267650600228229401496703205396'],
    ['sum i in 0..2 : a[i]*i', '9'],
    ['sum i in 5..4 : 1/0', '0'],
    ['sum i in 1..3 : sum j in i..3 : i*j', '25'],
    ['sum i in 1..10 : 1/i', '7381/2520'],
    ['sum i in 1..65536 : 1/i', '11.6675781832357...'],
    ['sum i in 1..2^16 : ceil(lg(i))', '983041'],
    ['sum i in 1..2^16 : floor(lg(i) + 1)', '983058'],
    ['ceil(lg(1/3))', '-1'],
    ['floor(lg(1/3))', '-2'],
    ['ceil(lg(2^53 - 1)) + floor(lg(2^52 + 1))', '105'],
    ['ceil(lg(2^40 + 1)) + floor(lg(2^40 - 1)) + ceil(lg(2^32)) + floor(lg(2^32))', '144'],
    ['sum i in 1..4 : lg(i)', '4.58496250072115...'],
    ['sum i in 2^60..2^60 + 2 : i', '3458764513820540931'],
    ['sum i in 1..65536 : 1/2', '32768'],
  ])('%s is %s', (text, expected) => {
    expect(exactText(value(text))).toBe(expected)
  })
})

describe('there is no value of', () => {
  test.each([
    ['1/0', 'undefined', 'divides by zero', 1],
    ['2 + 1/(n - 1000)', 'undefined', 'divides by zero', 5],
    ['1 mod 0', 'undefined', 'remainder by zero', 1],
    ['lg(0)', 'undefined', 'lg of zero', 1],
    ['lg(-1)', 'undefined', 'lg of a negative number', 1],
    ['lg(lg(n) - lg(n))', 'undefined', 'lg of zero', 1],
    ['0^-1', 'undefined', 'zero to a negative power', 1],
    ['0^-0.5', 'undefined', 'zero to a negative power', 1],
    ['(-8)^(1/3)', 'undefined', 'negative number to a power that is not whole', 1],
    ['2^(2^40)', 'too-large', 'more than 4194304 bits', 1],
    ['2^(2^21) * 2^(2^21)', 'too-large', 'more than 4194304 bits', 1],
    ['(1/3)^(2^40)', 'too-large', 'more than 4194304 bits', 1],
    ['lg(3)^(2^40)', 'too-large', 'more than 4194304 bits', 1],
    ['2^(2^30*lg(3))', 'too-large', 'more than 4194304 bits', 1],
    ['a[3]', 'undefined', 'The index 3 is outside a, which has 3 words.', 1],
    ['a[-1]', 'undefined', 'The index -1 is outside a', 1],
    ['a[1/2]', 'undefined', 'is not a whole number', 1],
    ['none[0]', 'undefined', 'which has 0 words', 1],
    ['sum i in 0..1/2 : i', 'undefined', 'end of a range', 13],
    ['sum i in 0..2^40 : i', 'undecided', 'passes', 13],
    ['popcount(-1)', 'undefined', 'not negative', 1],
    ['popcount(1/2)', 'undefined', 'not negative', 1],
    ['m + 1', 'unknown', 'm has no value here', 1],
    ['sum(m)', 'unknown', 'words of m', 5],
    ['ceil((2^0.5 + 3^0.5)^2 - 2*6^0.5)', 'undecided', 'too close to call', 1],
  ])('%s: %s', (text, cause, message, column) => {
    const answer = evaluate(text)
    if (!isProblem(answer)) throw new Error(exactText(answer))
    expect(answer.cause).toBe(cause)
    expect(answer.message).toContain(message)
    expect(answer.span?.column).toBe(column)
  })
})

describe('whether', () => {
  test.each([
    ['lg(n) < 10', true],
    ['lg(n) > 9.96578428466208', true],
    ['n^0.5 = 1000^(1/2)', true],
    ['n*lg(n) = lg(n)*n', true],
    ['lg(n) + lg(k) = lg(n*k)', true],
    ['2^0.5 + 3^0.5 < 3.1463', true],
    ['n < 2^w and n != 2^w', true],
    ['not (n >= 2^w or 1 = 2)', true],
    ['sorted(b)', true],
    ['sorted(a)', false],
    ['sorted(c)', true],
    ['sorted(none)', true],
    ['same(a, b)', true],
    ['same(a, c)', false],
    ['same(a, none)', false],
    ['all i in 0..1 : b[i] <= b[i+1]', true],
    ['all i in 0..1 : a[i] <= a[i+1]', false],
    ['any i in 0..2 : c[i] = 2^100', true],
    ['all i in 1..0 : 1/0 = 1', true],
    ['any i in 1..0 : 1/0 = 1', false],
    ['k = 0 or 1/k > 0', true],
    ['1 = 2 and 1/0 = 1', false],
    ['1 = 1 or 1/0 = 1', true],
  ])('%s: %s', (text, expected) => {
    expect(holds(text)).toBe(expected)
  })

  test.each([['1/0 = 1'], ['not (a[9] = 1)'], ['all i in 0..3 : a[i] > 0'], ['5 = (2^0.5 + 3^0.5)^2 - 2*6^0.5']])(
    '%s cannot be told',
    text => {
      expect(isProblem(holds(text))).toBe(true)
    },
  )
})

describe('numbers out of values', () => {
  test.each([
    ['3', 3],
    ['1/3', 1 / 3],
    ['lg(3)', Math.log2(3)],
    ['-(2^0.5)', -Math.SQRT2],
    ['2^1024', Number.POSITIVE_INFINITY],
    ['-(2^1024)', Number.NEGATIVE_INFINITY],
    ['2^1024 - 2^970', Number.POSITIVE_INFINITY],
    ['2^1024 - 2^970 - 1', Number.MAX_VALUE],
    ['(10^400 + 1)/(3*10^400)', 1 / 3],
    ['2^-1074', Number.MIN_VALUE],
    ['2^-1100', 0],
    ['(2^53 + 1)/2^53', 1],
    ['(2^54 + 3)/2^54', 1 + 2 ** -52],
  ])('the nearest double of %s', (text, expected) => {
    expect(nearestDouble(value(text))).toBe(expected)
  })

  test.each([
    ['2^16384', /^1\.18973149535723\.\.\.e4932$/],
    ['1/3 + 10^-30', /^0\.333333333333333\.\.\.$/],
    ['lg(3)*10^25', /^1\.58496250072115\.\.\.e25$/],
    ['-lg(3)/10^25', /^-1\.58496250072115\.\.\.e-25$/],
    ['lg(3)/1000', /^0\.00158496250072115\.\.\.$/],
    ['lg(3)*10^17', /^158496250072115618\.\.\.\.$|^158496250072115\d{3}\.\.\.\.$/],
    ['2^(2^22)', /e1262611$/],
  ])('the text of %s', (text, expected) => {
    expect(exactText(value(text))).toMatch(expected)
  })

  test('whole numbers, or a problem', () => {
    expect(wholeNumber(value('6/2'), 'the length')).toBe(3n)
    expect(wholeNumber(value('5/2'), 'the length of a')).toMatchObject({
      message: 'the length of a is not a whole number.',
    })
    expect(ceilWhole(value('5/2'))).toBe(3n)
    expect(ceilWhole(value('2*lg(n)'))).toBe(20n)
  })

  test.each([
    [10, '<=', 'lg(1025)', true],
    [11, '<=', 'lg(1025)', false],
    [32, '=', '1024^0.5', true],
    [31, '=', 'n^0.5', false],
    [2n ** 70n, '<=', '2^70', true],
    [2n ** 70n, '<=', '2^70 - 1/2', false],
  ] as const)('%s %s %s is %s', (count, operator, bound, expected) => {
    expect(meetsBound(count, operator, value(bound))).toBe(expected)
  })

  test('the quotient of a count and a bound', () => {
    expect(quotientDouble(3, value('4'))).toBe(0.75)
    expect(quotientDouble(3, value('0'))).toBeUndefined()
    expect(quotientDouble(10, value('lg(n)'))).toBeCloseTo(10 / Math.log2(1000), 14)
  })
})

const whole = fc.bigInt({ min: -(10n ** 30n), max: 10n ** 30n })
const positive = fc.bigInt({ min: 1n, max: 10n ** 20n })
const fraction = fc.tuple(whole, positive)

/** Writes a fraction so that it is read as one operand. */
function written([top, bottom]: readonly [bigint, bigint]): string {
  return `((${top})/${bottom})`
}

/** Whether a value is top / bottom. */
function isFraction(answer: ExactValue, top: bigint, bottom: bigint): boolean {
  if (isReal(answer)) return false
  const [a, b] = typeof answer === 'bigint' ? [answer, 1n] : [answer.numerator, answer.denominator]
  return a * bottom === b * top && (typeof answer === 'bigint' || b > 1n)
}

describe('laws', () => {
  test('rational arithmetic is that of pairs of whole numbers', () => {
    fc.assert(
      fc.property(fraction, fraction, (x, y) => {
        const [a, b] = x
        const [c, d] = y
        expect(isFraction(value(`${written(x)} + ${written(y)}`), a * d + c * b, b * d)).toBe(true)
        expect(isFraction(value(`${written(x)} - ${written(y)}`), a * d - c * b, b * d)).toBe(true)
        expect(isFraction(value(`${written(x)} * ${written(y)}`), a * c, b * d)).toBe(true)
        if (c !== 0n) expect(isFraction(value(`${written(x)} / ${written(y)}`), a * d, b * c)).toBe(true)
        expect(holds(`${written(x)} < ${written(y)}`)).toBe(a * d < c * b)
        expect(holds(`${written(x)} = ${written(y)}`)).toBe(a * d === c * b)
      }),
    )
  })

  test('floor(x) <= x < floor(x) + 1, and ceil(x) = -floor(-x)', () => {
    fc.assert(
      fc.property(fraction, x => {
        const text = written(x)
        expect(holds(`floor(${text}) <= ${text} and ${text} < floor(${text}) + 1`)).toBe(true)
        expect(holds(`ceil(${text}) = -floor(-${text})`)).toBe(true)
      }),
    )
  })

  test('x = y * floor(x / y) + x mod y, and x mod y lies between 0 and y', () => {
    fc.assert(
      fc.property(fraction, fraction, (x, y) => {
        fc.pre(y[0] !== 0n)
        const [a, b] = [written(x), written(y)]
        expect(holds(`${a} = ${b} * floor(${a}/${b}) + ${a} mod ${b}`)).toBe(true)
        const sign = y[0] > 0n ? '' : '-'
        expect(holds(`0 <= ${sign}(${a} mod ${b}) and ${sign}(${a} mod ${b}) < abs(${b})`)).toBe(true)
      }),
    )
  })

  test('machine numbers and big ones give the same, at the edge of 2^53 too', () => {
    const near = fc.bigInt({ min: 2n ** 53n - 5n, max: 2n ** 53n + 5n })
    fc.assert(
      fc.property(near, fc.bigInt({ min: -6n, max: 6n }), (x, y) => {
        expect(value(`${x} + ${y}`)).toBe(x + y)
        expect(value(`${x} - ${y}`)).toBe(x - y)
        expect(value(`${x} * (${y})`)).toBe(x * y)
        expect(holds(`${x} + ${y} < ${x}`)).toBe(y < 0n)
      }),
    )
  })

  test('lg lies where Math.log2 says, to 1e-12, and its enclosures close in', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2 ** 53 - 1 }), fc.integer({ min: -900, max: 900 }), (m, e) => {
        const x = m * 2 ** e
        const text = `lg(${m} * 2^(${e}))`
        const lg = value(text)
        expect(Math.abs(nearestDouble(lg) - Math.log2(x))).toBeLessThanOrEqual(
          1e-12 * Math.max(1, Math.abs(Math.log2(x))),
        )
        if (!isReal(lg)) return
        const rough = encloseValue(lg, 64)!
        const close = encloseValue(lg, 512)!
        expect(close.high - close.low <= 4n).toBe(true)
        expect(rough.low << 448n <= close.low && close.high <= rough.high << 448n).toBe(true)
      }),
    )
  })

  test.each([1, 2, 3, 31, 32, 33, 63, 64, 65, 1000, 4095, 4096])('ceil(lg(x)) is exact around 2^%i', k => {
    expect(value(`ceil(lg(2^${k} - 1))`)).toBe(BigInt(k === 1 ? 0 : k))
    expect(value(`ceil(lg(2^${k}))`)).toBe(BigInt(k))
    expect(value(`ceil(lg(2^${k} + 1))`)).toBe(BigInt(k + 1))
    expect(value(`floor(lg(2^${k} - 1))`)).toBe(BigInt(k - 1))
    expect(value(`floor(lg(2^${k} + 1))`)).toBe(BigInt(k))
  })

  test('lg turns products into sums, and 2^ undoes it', () => {
    fc.assert(
      fc.property(positive, positive, (x, y) => {
        expect(holds(`lg(${x} * ${y}) = lg(${x}) + lg(${y})`)).toBe(true)
        expect(holds(`lg(${x} / ${y}) + lg(${y}) - lg(${x}) = 0`)).toBe(true)
        expect(value(`2^lg(${x})`)).toBe(x)
      }),
    )
  })

  test('roots: floor(x^(1/q))^q <= x < (floor(x^(1/q)) + 1)^q', () => {
    fc.assert(
      fc.property(positive, fc.integer({ min: 2, max: 40 }), (x, q) => {
        const root = value(`floor(${x}^(1/${q}))`) as bigint
        expect(root ** BigInt(q) <= x && x < (root + 1n) ** BigInt(q)).toBe(true)
        expect(value(`(${x}^${q})^(1/${q})`)).toBe(x)
      }),
    )
  })

  test('powers with real parts agree with Math.pow', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 3, max: 1000 }),
        fc.integer({ min: 1, max: 99 }),
        fc.integer({ min: 3, max: 1000 }),
        (x, p, y) => {
          const close = (text: string, expected: number) =>
            expect(Math.abs(nearestDouble(value(text)) / expected - 1)).toBeLessThan(1e-11)
          close(`${x}^(${p}/97)`, x ** (p / 97))
          close(`${x}^lg(${y})`, x ** Math.log2(y))
          close(`lg(${x})^${p % 7}`, Math.log2(x) ** (p % 7))
          close(`lg(${x})/lg(${y})`, Math.log2(x) / Math.log2(y))
          close(`lg(${x} + ${y}^0.5)`, Math.log2(x + Math.sqrt(y)))
          close(`${x}^0.5 * lg(${y}) + 1/${p}`, Math.sqrt(x) * Math.log2(y) + 1 / p)
          close(`${p} - ${x}^0.5 - 1000`, p - Math.sqrt(x) - 1000)
        },
      ),
    )
  })

  test('a fraction of safe numbers has the double that a division gives', () => {
    fc.assert(
      fc.property(fc.maxSafeInteger(), fc.integer({ min: 1, max: Number.MAX_SAFE_INTEGER }), (x, y) => {
        expect(nearestDouble(value(`(${x})/${y}`))).toBe(x / y === 0 ? 0 : x / y)
      }),
    )
  })

  test('the text of a real is cut off, not rounded', () => {
    fc.assert(
      fc.property(fc.integer({ min: 3, max: 1_000_000 }), x => {
        const text = exactText(value(`lg(${x})`))
        if (!text.endsWith('...')) return
        const cut = text.slice(0, -3)
        expect(holds(`${cut} < lg(${x}) and lg(${x}) < ${cut} + 10^-${cut.split('.')[1]!.length}`)).toBe(true)
      }),
    )
  })
})
