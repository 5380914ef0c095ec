import fc from 'fast-check'

/** What a piece of random text may name where it stands. */
export interface Scope {
  readonly modulus: bigint
  readonly arrays: Arrays
  readonly readable: readonly string[]
  readonly assignable: readonly string[]
  /** Labels that a jump from here may go to. */
  readonly labels: readonly string[]
  readonly procedures: readonly { readonly name: string; readonly parameters: number; readonly results: number }[]
  /** The expression that a call passes on as the depth left; absent in the routine's own body. */
  readonly depth: string | undefined
  /** Variables of the loops around, outermost first. */
  readonly loops: readonly string[]
  /** Loop variables that are free to take, outermost first. */
  readonly loopNames: readonly string[]
  readonly fresh: () => number
}

export type Arrays = readonly {
  readonly name: string
  readonly role: 'in' | 'fix' | 'inout' | 'out' | 'work'
  /** Whether its length grows with n, and what comes on top. */
  readonly sized: boolean
  readonly extra: number
  readonly length: number
  readonly declared: string
}[]

/** A piece of text that waits for the scope it stands in, so that all names are good by construction. */
type Piece<T> = (scope: Scope) => T
type Word = Piece<string>
type Lines = Piece<string[]>

const pick = <T>(items: readonly T[], at: number): T => items[at % items.length]!

/** A word below the modulus: small ones, those near the top and the sign, and any. */
export const drawWord: fc.Arbitrary<(modulus: bigint) => bigint> = fc.oneof(
  fc.nat(5).map(small => (modulus: bigint) => BigInt(small) % modulus),
  fc.nat(2).map(below => (modulus: bigint) => modulus - 1n - (BigInt(below) % modulus)),
  fc.nat(2).map(near => (modulus: bigint) => (modulus / 2n + BigInt(near) - 1n) % modulus),
  fc.bigInt({ min: 0n, max: (1n << 64n) - 1n }).map(any => (modulus: bigint) => any % modulus),
)

const array = (name: string, role: Arrays[number]['role'], sized: boolean) =>
  fc.option(
    fc.integer({ min: sized || role !== 'fix' ? 0 : 1, max: 4 }).map(extra => ({ name, role, sized, extra })),
    { freq: 3, nil: undefined },
  )

/** Which arrays a routine has; lengths are worked out once n is known. */
export const randomArrays: fc.Arbitrary<Arrays> = fc
  .tuple(
    array('ia', 'in', true),
    array('ta', 'fix', false),
    array('ua', 'inout', true),
    array('oa', 'out', false),
    array('wa', 'work', false),
    array('wb', 'work', true),
  )
  .map(drawn => {
    const present = drawn.filter(item => item !== undefined)
    // A length of work memory may use n only where an input or output array sets it.
    const hasSize = present.some(({ sized, role }) => sized && role !== 'work')
    return present.map(item => ({ ...item, sized: item.sized && hasSize, length: 0, declared: '' }))
  })

const literal: fc.Arbitrary<Word> = drawWord.map(draw => scope => String(draw(scope.modulus)))
const name: fc.Arbitrary<Word> = fc.nat(50).map(at => scope => pick(scope.readable, at))
const smallLiteral: fc.Arbitrary<Word> = fc.nat(6).map(value => scope => String(BigInt(value) % scope.modulus))

const BINARY = ['+', '-', '*', '&', '|', 'xor', '<<', '>>', '/', 'mod']
const UNARY: readonly ((inner: string) => string)[] = [
  inner => `-${inner}`,
  inner => `~${inner}`,
  inner => `popcount(${inner})`,
  inner => `msb(${inner})`,
  inner => `lsb(${inner})`,
]

const plain = fc.oneof({ weight: 3, arbitrary: name }, { weight: 1, arbitrary: literal })

function isReadOnly({ role }: Arrays[number]): boolean {
  return role === 'in' || role === 'fix'
}

/** An index: most often one that lies in the array, by a literal, a remainder, a mask, or near a loop's variable. */
function indexInto(word: fc.Arbitrary<Word>): fc.Arbitrary<(length: number) => Word> {
  const wrapped = (operator: string) =>
    word.map(inner => (length: number) => (scope: Scope) => {
      const bound = Math.max(1, Math.min(length, Number(scope.modulus - 1n)))
      return `(${inner(scope)}) ${operator} ${operator === '&' ? bound - 1 : bound}`
    })
  return fc.oneof(
    { weight: 6, arbitrary: fc.nat(50).map(at => (length: number) => () => String(at % Math.max(1, length))) },
    { weight: 3, arbitrary: wrapped('mod') },
    { weight: 3, arbitrary: wrapped('&') },
    {
      weight: 5,
      arbitrary: fc.nat(4).map(offset => () => (scope: Scope) => {
        const variable = scope.loops[scope.loops.length - 1]
        if (variable === undefined) return '0'
        return [variable, variable, variable, `${variable} + 1`, `${variable} - 1`][offset]!
      }),
    },
    { weight: 1, arbitrary: word.map(inner => () => inner) },
  )
}

/** `a[i]` of some array, `p[i]`, `[p]`; a variable where the routine has no array that will do. */
function access(word: fc.Arbitrary<Word>, stored: boolean): fc.Arbitrary<Word> {
  const inReach = (scope: Scope) => scope.arrays.filter(array => array.length > 0 && !(stored && isReadOnly(array)))
  const otherwise = (scope: Scope) => pick(stored ? scope.assignable : scope.readable, 0)
  const byName = fc.tuple(fc.nat(20), indexInto(word)).map(
    ([at, index]): Word =>
      scope => {
        const arrays = inReach(scope)
        if (arrays.length === 0) return otherwise(scope)
        const chosen = pick(arrays, at)
        return `${chosen.name}[${index(chosen.length)(scope)}]`
      },
  )
  const byAddress = fc.tuple(fc.nat(20), indexInto(word), fc.nat(12)).map(
    ([at, index, form]): Word =>
      scope => {
        const arrays = inReach(scope)
        if (arrays.length === 0) return otherwise(scope)
        const chosen = pick(arrays, at)
        const offset = index(chosen.length)(scope)
        if (form < 3) return `[addr(${chosen.name})]`
        return form < 12 ? `[addr(${chosen.name}) + (${offset})]` : `${pick(scope.assignable, at)}[${offset}]`
      },
  )
  const wild = word.map(
    (address): Word =>
      scope =>
        `[${address(scope)}]`,
  )
  return fc.oneof(
    { weight: 20, arbitrary: byName },
    { weight: 8, arbitrary: byAddress },
    { weight: 1, arbitrary: wild },
  )
}

const { expression } = fc.letrec<{ expression: Word; compound: Word }>(tie => ({
  expression: fc.oneof(
    { maxDepth: 3, depthSize: 'small', withCrossShrink: true },
    { weight: 3, arbitrary: plain },
    { weight: 4, arbitrary: tie('compound') },
  ),
  compound: fc.oneof(
    {
      weight: 8,
      arbitrary: fc
        .tuple(fc.nat(19), tie('expression'), tie('expression'))
        // Division half as often: a divisor of 0 ends the run.
        .map(
          ([operator, left, right]): Word =>
            scope =>
              `(${left(scope)} ${BINARY[operator < 16 ? operator % 8 : operator % 10]} ${right(scope)})`,
        ),
    },
    {
      weight: 2,
      arbitrary: fc.tuple(fc.nat(4), tie('expression')).map(
        ([operator, inner]): Word =>
          scope =>
            `(${UNARY[operator]!(inner(scope))})`,
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
      arbitrary: fc.nat(20).map(
        (at): Word =>
          scope => {
            const arrays = scope.arrays.filter(({ length }) => length > 0)
            return arrays.length > 0 ? `addr(${pick(arrays, at).name})` : '1'
          },
      ),
    },
    { weight: 4, arbitrary: access(tie('expression'), false) },
  ),
}))

const COMPARISONS = ['=', '!=', '<', '<=', '>', '>=']

const { condition } = fc.letrec<{ condition: Word; single: Word }>(tie => ({
  condition: fc.oneof(
    { maxDepth: 2, withCrossShrink: true },
    { weight: 5, arbitrary: tie('single') },
    {
      weight: 2,
      arbitrary: fc.tuple(fc.boolean(), tie('condition'), tie('condition')).map(
        ([both, left, right]): Word =>
          scope =>
            `(${left(scope)} ${both ? 'and' : 'or'} ${right(scope)})`,
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
  single: fc.tuple(fc.nat(5), fc.nat(3), expression, expression).map(
    ([operator, signed, left, right]): Word =>
      scope => {
        const [x, y] = [left(scope), right(scope)]
        const sides = signed === 3 ? [`signed(${x})`, `signed(${y})`] : [x, y]
        return `${sides[0]} ${COMPARISONS[operator]} ${sides[1]}`
      },
  ),
}))

const target: fc.Arbitrary<Word> = fc.oneof(
  {
    weight: 3,
    arbitrary: fc.nat(20).map(
      (at): Word =>
        scope =>
          pick(scope.assignable, at),
    ),
  },
  { weight: 1, arbitrary: access(expression, true) },
)

/** Two different targets, one of them perhaps in memory. */
const twoTargets = fc.tuple(fc.nat(20), fc.nat(20), fc.nat(3), access(expression, true)).map(
  ([first, second, form, stored]): Piece<[string, string]> =>
    scope => {
      const high = pick(scope.assignable, first)
      const low = pick(
        scope.assignable.filter(variable => variable !== high),
        second,
      )
      const place = stored(scope)
      if (form > 0 || !place.includes('[')) return [high, low]
      return first % 2 === 0 ? [high, place] : [place, high]
    },
)

const assign = fc.tuple(target, expression).map(
  ([into, value]): Lines =>
    scope => [`${into(scope)} <- ${value(scope)}`],
)

const product = fc.tuple(twoTargets, expression, expression).map(
  ([into, left, right]): Lines =>
    scope => [`${into(scope).join(', ')} <- ${left(scope)} * ${right(scope)}`],
)

/** Through a variable that holds an address: `p[i]` as a load and as a store. */
const pointed = fc.tuple(fc.nat(20), fc.nat(20), fc.nat(50), fc.boolean(), expression).map(
  ([at, which, index, stored, value]): Lines =>
    scope => {
      const arrays = scope.arrays.filter(array => array.length > 0 && !(stored && isReadOnly(array)))
      if (arrays.length === 0) return assignNothing(scope)
      const { name, length } = pick(arrays, which)
      const [pointer, other] = [pick(scope.assignable, at), pick(scope.assignable, at + 1)]
      const element = `${pointer}[${index % length}]`
      return [`${pointer} <- addr(${name})`, stored ? `${element} <- ${value(scope)}` : `${other} <- ${element}`]
    },
)

/** Halved at each use, so that it reaches 0 and what it guards ends. */
const burn = 'fuel <- fuel >> 1'

const jump = fc.tuple(fc.nat(20), fc.nat(9), condition).map(
  ([at, form, test]): Lines =>
    scope => {
      if (scope.labels.length === 0) return assignNothing(scope)
      const label = pick(scope.labels, at)
      if (form === 0) return [`goto ${label}`]
      if (form < 3) return [`if ${test(scope)} goto ${label}`]
      return [burn, `if fuel != 0 and ${test(scope)} goto ${label}`]
    },
)

/** Stands in for what the routine has no procedure, label or array for. */
function assignNothing(scope: Scope): string[] {
  return [`${pick(scope.assignable, 0)} <- ${pick(scope.assignable, 0)}`]
}

const call = fc
  .tuple(fc.nat(20), fc.array(expression, { minLength: 2, maxLength: 2 }), twoTargets, target, fc.nat(4))
  .map(
    ([at, words, pair, single, depth]): Lines =>
      scope => {
        if (scope.procedures.length === 0) return assignNothing(scope)
        const { name, parameters, results } = pick(scope.procedures, at)
        const left = scope.depth ?? String(BigInt(depth) % scope.modulus)
        const given = [left, ...words.slice(0, parameters).map(word => word(scope))]
        const into = results === 2 ? pair(scope) : results === 1 ? [single(scope)] : []
        return [`${into.length > 0 ? `${into.join(', ')} <- ` : ''}${name}(${given.join(', ')})`]
      },
  )

/** An exact condition over variables, arrays and constants; most of them hold. */
const assertion = fc.tuple(fc.nat(20), fc.nat(20), fc.nat(13), fc.bigInt({ min: 0n, max: 40n })).map(
  ([first, second, form, value]): Lines =>
    scope => {
      const [x, y] = [pick(scope.readable, first), pick(scope.readable, second)]
      const arrays = scope.arrays.filter(({ length }) => length > 0)
      const array = arrays.length > 0 ? pick(arrays, first).name : undefined
      const forms = [
        `assert ${x} + ${y} >= ${x}`,
        `assert ${x} * ${y} < 2^(2*w)`,
        `assert ${x} - ${y} <= ${x}`,
        `assert ${x} < 2^w and ${y} != 2^w`,
        `assert ${x} >= ${value} or ${x} < ${value}`,
        array ? `assert sum(${array}) >= ${array}[0]` : `assert ${x} >= 0`,
        array ? `assert all v in 0..1 : ${array}[0] + v >= v` : `assert not ${x} < 0`,
        // This one may well fail.
        `assert ${x} != ${value % 2n}`,
      ]
      return [forms[Math.min(form, forms.length - 1)]!]
    },
)

/** A body one level further in, with its own labels. */
function nested(body: Lines, scope: Scope, changes: Partial<Scope> = {}): string[] {
  return body({ ...scope, ...changes }).map(line => `  ${line}`)
}

const { statements: list } = fc.letrec<{ statements: Lines; statement: Lines; form: Lines }>(tie => ({
  statements: fc.array(fc.tuple(fc.nat(4), tie('statement')), { minLength: 1, maxLength: 7 }).map(
    (items): Lines =>
      scope => {
        // Labels of this list are known to every jump in it, forward and backward.
        const labels = items.map(([draw]) => (draw >= 3 ? `l${scope.fresh()}` : undefined))
        const own = labels.filter(label => label !== undefined)
        const inner = { ...scope, labels: [...own, ...scope.labels] }
        return items.flatMap(([, statement], at) => [
          ...(labels[at] ? [`${labels[at]}:`] : []),
          ...statement(inner),
        ])
      },
  ),
  statement: fc.oneof(
    { maxDepth: 3, depthSize: 'small', withCrossShrink: true },
    { weight: 9, arbitrary: assign },
    { weight: 2, arbitrary: product },
    { weight: 1, arbitrary: pointed },
    { weight: 4, arbitrary: jump },
    { weight: 3, arbitrary: call },
    { weight: 3, arbitrary: assertion },
    { weight: 7, arbitrary: tie('form') },
    {
      weight: 1,
      arbitrary: condition.map(
        (test): Lines =>
          scope => [`if ${test(scope)}`, scope.depth === undefined ? '  halt' : '  return', 'end'],
      ),
    },
  ),
  form: fc.oneof(
    { weight: 3, arbitrary: writtenOut(tie('statements')) },
    {
      weight: 2,
      arbitrary: fc
        .tuple(
          condition,
          tie('statements'),
          fc.option(tie('statements')),
          fc.option(fc.tuple(condition, tie('statements'))),
        )
        .map(
          ([test, body, otherwise, further]): Lines =>
            scope => [
              `if ${test(scope)}`,
              ...nested(body, scope),
              ...(further ? [`else if ${further[0](scope)}`, ...nested(further[1], scope)] : []),
              ...(otherwise ? ['else', ...nested(otherwise, scope)] : []),
              'end',
            ],
        ),
    },
    {
      weight: 2,
      arbitrary: fc.tuple(condition, tie('statements'), fc.nat(7)).map(
        ([test, body, form]): Lines =>
          scope => [
            form === 0 ? `while ${test(scope)}` : `while fuel != 0 and ${test(scope)}`,
            `  ${burn}`,
            ...nested(body, scope),
            'end',
          ],
      ),
    },
    {
      weight: 1,
      arbitrary: fc.tuple(condition, tie('statements'), fc.nat(7)).map(
        ([test, body, form]): Lines =>
          scope => [
            'repeat',
            `  ${burn}`,
            ...nested(body, scope),
            form === 0 ? `until ${test(scope)}` : `until fuel = 0 or ${test(scope)}`,
          ],
      ),
    },
    {
      weight: 3,
      arbitrary: fc
        .tuple(fc.nat(7), fc.boolean(), bound(), bound(), fc.option(bound(), { freq: 2 }), tie('statements'))
        .map(
          ([near, down, from, to, by, body]): Lines =>
            scope => {
              const [variable, ...rest] = scope.loopNames
              if (variable === undefined) return nested(body, scope).map(line => line.slice(2))
              // Near the ends of the word, where a loop must not run round.
              const top = String(scope.modulus - 1n)
              const [start, stop] =
                near === 0
                  ? down
                    ? [from(scope), '0']
                    : [String(scope.modulus - 2n), top]
                  : [from(scope), to(scope)]
              const step = by ? ` by ${by(scope) === '0' ? '1' : by(scope)}` : ''
              return [
                `for ${variable} from ${start} ${down ? 'downto' : 'to'} ${stop}${step}`,
                ...nested(body, scope, {
                  loopNames: rest,
                  loops: [...scope.loops, variable],
                  readable: [...scope.readable, variable],
                }),
                'end',
              ]
            },
        ),
    },
  ),
}))

/**
 * A loop written out, as drafts have it: by `while` or by labels, up or down; its variable moves last, first, between two
 * parts of the body, or in some passes only.
 */
function writtenOut(body: fc.Arbitrary<Lines>): fc.Arbitrary<Lines> {
  return fc
    .record({
      test: fc.nat(3),
      down: fc.boolean(),
      labelled: fc.boolean(),
      move: fc.constantFrom('last', 'last', 'first', 'between', 'sometimes'),
      touched: fc.nat(9),
      from: bound(),
      to: bound(),
      sometimes: condition,
      body,
      second: body,
    })
    .map(
      ({ test, down, labelled, move, touched, from, to, sometimes, body, second }): Lines =>
        scope => {
          const [variable, ...rest] = scope.loopNames
          if (variable === undefined) return nested(body, scope).map(line => line.slice(2))
          const going = (down ? ['>', '!=', '>=', '>'] : ['<', '!=', '<=', '<'])[test]!
          const ending = (down ? ['<=', '=', '<', '<='] : ['>=', '=', '>', '>='])[test]!
          const [again, done] = [`l${scope.fresh()}`, `l${scope.fresh()}`]
          const inner = {
            loopNames: rest,
            loops: [...scope.loops, variable],
            readable: [...scope.readable, variable],
            assignable: touched === 0 ? [...scope.assignable, variable] : scope.assignable,
            labels: labelled ? [again, done, ...scope.labels] : scope.labels,
          }
          const step = `  ${variable} <- ${variable} ${down ? '-' : '+'} 1`
          const moving =
            move === 'sometimes' ? [`  if ${sometimes({ ...scope, ...inner })}`, `  ${step}`, '  end'] : [step]
          const before = move === 'first' ? [] : nested(body, scope, inner)
          const after = move === 'first' || move === 'between' ? nested(second, scope, inner) : []
          const pass = [...before, ...moving, ...after]
          const start = `${variable} <- ${from(scope)}`
          if (!labelled) return [start, `while ${variable} ${going} ${to(scope)}`, ...pass, 'end']
          const leave = `if ${variable} ${ending} ${to(scope)} goto ${done}`
          return [start, `${again}:`, leave, ...pass, `goto ${again}`, `${done}:`]
        },
    )
}

/** A bound or step of a loop: small most often, so that loops end. */
function bound(): fc.Arbitrary<Word> {
  return fc.oneof(
    { weight: 5, arbitrary: smallLiteral },
    { weight: 2, arbitrary: fc.constant((scope: Scope) => (scope.readable.includes('n') ? 'n' : '3')) },
    { weight: 1, arbitrary: expression },
  )
}

/** A list of statements: instructions, structured forms, jumps among its labels. */
export const statements: fc.Arbitrary<Lines> = list
