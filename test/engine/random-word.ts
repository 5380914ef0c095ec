import fc from 'fast-check'
import { type ArrayShape, arraysInReach, type Lines, pick, place, type Word } from './random-scope'

/** A word below the modulus: small ones, those near the top and the sign, and any. */
export const drawWord: fc.Arbitrary<(modulus: bigint) => bigint> = fc.oneof(
  fc.nat(5).map(small => (modulus: bigint) => BigInt(small) % modulus),
  fc.nat(2).map(below => (modulus: bigint) => modulus - 1n - (BigInt(below) % modulus)),
  fc.nat(2).map(near => (modulus: bigint) => (modulus / 2n + BigInt(near) - 1n) % modulus),
  fc.bigInt({ min: 0n, max: (1n << 64n) - 1n }).map(any => (modulus: bigint) => any % modulus),
)

const literal = drawWord.map(
  (draw): Word =>
    ({ modulus }) =>
      String(draw(modulus)),
)
const name = place.map(
  (at): Word =>
    ({ readable }) =>
      pick(readable, at),
)
export const smallLiteral = fc.nat(6).map(
  (value): Word =>
    ({ modulus }) =>
      String(BigInt(value) % modulus),
)

const UNARY: readonly ((inner: string) => string)[] = [
  inner => `-${inner}`,
  inner => `~${inner}`,
  inner => `popcount(${inner})`,
  inner => `msb(${inner})`,
  inner => `lsb(${inner})`,
]

type Index = (array: ArrayShape) => Word

/** An index: most often one that lies in the array, by a literal, a remainder, a mask; or near a loop's variable. */
function indexBy(word: fc.Arbitrary<Word>): fc.Arbitrary<Index> {
  // An array may have more words than a literal can say.
  const bound = (length: number, modulus: bigint) => Math.min(length, Number(modulus - 1n))
  const literal = place.map(
    (at): Index =>
      ({ length }) =>
      () =>
        String(at % length),
  )
  const remainder = word.map(
    (inner): Index =>
      ({ length }) =>
      scope => {
        return `(${inner(scope)}) mod ${bound(length, scope.modulus)}`
      },
  )
  const masked = word.map(
    (inner): Index =>
      ({ length }) =>
      scope => {
        return `(${inner(scope)}) & ${2 ** Math.floor(Math.log2(bound(length, scope.modulus))) - 1}`
      },
  )
  const nearLoop = fc.constantFrom('', '', '', ' + 1', ' - 1').map(
    (by): Index =>
      ({ length }) =>
      scope => {
        const variable = scope.loops[scope.loops.length - 1]
        if (variable === undefined) return '0'
        return scope.bold ? `${variable}${by}` : `(${variable}${by}) mod ${bound(length, scope.modulus)}`
      },
  )
  const wild = word.map(
    (inner): Index =>
      () =>
      scope =>
        scope.bold ? inner(scope) : '0',
  )
  return fc.oneof(
    { weight: 6, arbitrary: literal },
    { weight: 3, arbitrary: remainder },
    { weight: 3, arbitrary: masked },
    { weight: 4, arbitrary: nearLoop },
    { weight: 1, arbitrary: wild },
  )
}

/** `a[i]`, `[addr(a) + i]`, and in bold routines `p[i]` and `[x]`; a variable where no array will do. */
export function access(word: fc.Arbitrary<Word>, stored: boolean): fc.Arbitrary<Word> {
  return fc.tuple(fc.nat(14), place, indexBy(word), word).map(
    ([form, at, index, address]): Word =>
      scope => {
        const arrays = arraysInReach(scope, stored)
        if (scope.bold && form === 0) return `[${address(scope)}]`
        if (arrays.length === 0) return pick(stored ? scope.assignable : scope.readable, at)
        const array = pick(arrays, at)
        if (scope.bold && form === 1) return `${pick(scope.assignable, at)}[${index(array)(scope)}]`
        if (form < 4) return `[addr(${array.name})]`
        if (form < 6) return `[addr(${array.name}) + (${index(array)(scope)})]`
        return `${array.name}[${index(array)(scope)}]`
      },
  )
}

const { expression: compound } = fc.letrec<{ expression: Word; compound: Word }>(tie => ({
  expression: fc.oneof(
    { maxDepth: 3, depthSize: 'small', withCrossShrink: true },
    { weight: 4, arbitrary: name },
    { weight: 1, arbitrary: literal },
    { weight: 6, arbitrary: tie('compound') },
  ),
  compound: fc.oneof(
    {
      weight: 8,
      arbitrary: fc
        .tuple(fc.constantFrom('+', '-', '*', '&', '|', 'xor', '<<', '>>'), tie('expression'), tie('expression'))
        .map(
          ([operator, left, right]): Word =>
            scope =>
              `(${left(scope)} ${operator} ${right(scope)})`,
        ),
    },
    {
      weight: 2,
      arbitrary: fc.tuple(fc.constantFrom('/', 'mod'), tie('expression'), tie('expression')).map(
        ([operator, left, right]): Word =>
          scope => {
            const divisor = scope.bold ? right(scope) : `(${right(scope)} | 1)`
            return `(${left(scope)} ${operator} ${divisor})`
          },
      ),
    },
    {
      weight: 2,
      arbitrary: fc.tuple(fc.constantFrom(...UNARY), tie('expression')).map(
        ([operator, inner]): Word =>
          scope =>
            `(${operator(inner(scope))})`,
      ),
    },
    {
      weight: 1,
      arbitrary: fc.tuple(tie('expression'), fc.nat(3)).map(
        ([left, bits]): Word =>
          scope =>
            `(${left(scope)} >> (w - ${BigInt(bits) % scope.modulus}))`,
      ),
    },
    {
      weight: 1,
      arbitrary: place.map(
        (at): Word =>
          scope => {
            const arrays = arraysInReach(scope)
            return arrays.length > 0 ? `addr(${pick(arrays, at).name})` : '1'
          },
      ),
    },
    { weight: 4, arbitrary: access(tie('expression'), false) },
  ),
}))

/** An expression of word code. */
export const expression: fc.Arbitrary<Word> = compound

const { condition: anyCondition } = fc.letrec<{ condition: Word; single: Word }>(tie => ({
  condition: fc.oneof(
    { maxDepth: 2, withCrossShrink: true },
    { weight: 5, arbitrary: tie('single') },
    {
      weight: 2,
      arbitrary: fc.tuple(fc.constantFrom('and', 'or'), tie('condition'), tie('condition')).map(
        ([join, left, right]): Word =>
          scope =>
            `(${left(scope)} ${join} ${right(scope)})`,
      ),
    },
    {
      weight: 1,
      arbitrary: tie('condition').map(
        (inner): Word =>
          scope =>
            `not (${inner(scope)})`,
      ),
    },
  ),
  single: fc.tuple(fc.constantFrom('=', '!=', '<', '<=', '>', '>='), fc.nat(3), expression, expression).map(
    ([operator, signed, left, right]): Word =>
      scope => {
        const sides = [left, right].map(side => (signed === 3 ? `signed(${side(scope)})` : side(scope)))
        return sides.join(` ${operator} `)
      },
  ),
}))

/** A condition of word code. */
export const condition: fc.Arbitrary<Word> = anyCondition

/** What an arrow points at: a variable most often. */
export const target: fc.Arbitrary<Word> = fc.oneof(
  {
    weight: 3,
    arbitrary: place.map(
      (at): Word =>
        ({ assignable }) =>
          pick(assignable, at),
    ),
  },
  { weight: 1, arbitrary: access(expression, true) },
)

/** Two different targets, one of them perhaps in memory. */
export const twoTargets: fc.Arbitrary<Lines> = fc.tuple(place, place, fc.nat(3), access(expression, true)).map(
  ([first, second, form, stored]): Lines =>
    scope => {
      const high = pick(scope.assignable, first)
      const others = scope.assignable.filter(variable => variable !== high)
      const memory = stored(scope)
      if (form > 0 || !memory.includes('[')) return [high, pick(others, second)]
      return first % 2 === 0 ? [high, memory] : [memory, high]
    },
)
