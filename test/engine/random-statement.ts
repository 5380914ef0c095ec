import fc from 'fast-check'
import { arraysInReach, assignNothing, type Lines, pick, place, type Scope } from './random-scope'
import { condition, expression, smallLiteral, target, twoTargets } from './random-word'

const assign = fc.tuple(target, expression).map(
  ([into, value]): Lines =>
    scope => [`${into(scope)} <- ${value(scope)}`],
)

/** A count of something that happens, as drafts keep it. */
const increment = fc.tuple(place, fc.constantFrom('+ 1', '- 1', '+ 2', '<< 1', '>> 1', '& 3')).map(
  ([at, by]): Lines =>
    ({ assignable }) => [`${pick(assignable, at)} <- ${pick(assignable, at)} ${by}`],
)

const product = fc.tuple(twoTargets, expression, expression).map(
  ([into, left, right]): Lines =>
    scope => [`${into(scope).join(', ')} <- ${left(scope)} * ${right(scope)}`],
)

/** Through a variable that holds an address: `p[i]` as a load and as a store. */
const pointed = fc.tuple(place, place, place, fc.boolean(), expression).map(
  ([at, which, index, stored, value]): Lines =>
    scope => {
      const arrays = arraysInReach(scope, stored)
      if (arrays.length === 0) return assignNothing(scope)
      const { name, length } = pick(arrays, which)
      const pointer = pick(scope.assignable, at)
      const element = `${pointer}[${index % length}]`
      const other = pick(scope.assignable, at + 1)
      return [`${pointer} <- addr(${name})`, stored ? `${element} <- ${value(scope)}` : `${other} <- ${element}`]
    },
)

/** Halved at each use, so that it reaches 0 and what it guards ends. */
const BURN = 'fuel <- fuel >> 1'

const jump = fc.tuple(place, fc.nat(5), condition).map(
  ([at, form, test]): Lines =>
    scope => {
      if (scope.labels.length === 0) return assignNothing(scope)
      const label = pick(scope.labels, at)
      if (scope.bold && form === 0) return [`goto ${label}`]
      if (scope.bold && form === 1) return [`if ${test(scope)} goto ${label}`]
      return [BURN, `if fuel != 0 and ${test(scope)} goto ${label}`]
    },
)

const call = fc.tuple(place, expression, expression, twoTargets, target, fc.nat(3)).map(
  ([at, first, second, pair, single, depth]): Lines =>
    scope => {
      if (scope.procedures.length === 0) return assignNothing(scope)
      const { name, parameters, results } = pick(scope.procedures, at)
      const left = scope.depth ?? String(BigInt(depth) % scope.modulus)
      const given = [left, ...[first(scope), second(scope)].slice(0, parameters)].join(', ')
      if (results === 0) return [`${name}(${given})`]
      const into = results === 2 ? pair(scope) : [single(scope)]
      return [`${into.join(', ')} <- ${name}(${given})`]
    },
)

/** An exact condition over variables, arrays and constants; in bold routines one that may well fail. */
const assertion = fc.tuple(place, place, fc.nat(9)).map(
  ([first, second, form]): Lines =>
    scope => {
      const [x, y] = [pick(scope.readable, first), pick(scope.readable, second)]
      if (scope.bold && form > 2) return [`assert ${x} != ${second % 2}`]
      const arrays = arraysInReach(scope)
      const array = arrays.length > 0 ? pick(arrays, first).name : undefined
      const forms = [
        `assert ${x} + ${y} >= ${x}`,
        `assert ${x} * ${y} < 2^(2*w)`,
        `assert ${x} - ${y} <= ${x}`,
        `assert ${x} < 2^w and ${y} != 2^w`,
        `assert ${x} >= ${first} or ${x} < ${first}`,
        array ? `assert sum(${array}) >= ${array}[0]` : `assert ${x} >= 0`,
        array ? `assert all v in 0..1 : ${array}[0] + v >= v` : `assert not ${x} < 0`,
      ]
      return [pick(forms, form)]
    },
)

/** Ends the routine or the procedure before its end. */
const leave = condition.map(
  (test): Lines =>
    scope => [
      scope.bold ? `if ${test(scope)}` : `if fuel = 0 and ${test(scope)}`,
      scope.depth === undefined ? '  halt' : '  return',
      'end',
    ],
)

/** A body one level further in. */
function nested(body: Lines, scope: Scope, changes: Partial<Scope> = {}): string[] {
  return body({ ...scope, ...changes }).map(line => `  ${line}`)
}

/** The scope within a loop over a variable; undefined where there is none left to take. */
function loopScope(scope: Scope): { variable: string; inner: Partial<Scope> } | undefined {
  const [variable, ...loopNames] = scope.loopNames
  if (variable === undefined) return undefined
  const inner = { loopNames, loops: [...scope.loops, variable], readable: [...scope.readable, variable] }
  return { variable, inner }
}

/** Where a loop starts and ends: small words a little apart most often, in bold routines any. */
const range = fc
  .record({ from: smallLiteral, passes: smallLiteral, wildFrom: expression, wildTo: expression, form: fc.nat(9) })
  .map(({ from, passes, wildFrom, wildTo, form }) => (scope: Scope, down: boolean): [string, string] => {
    const top = scope.modulus - 1n
    // Near the ends of the word, where a loop must not run round.
    if (form === 0) return down ? [from(scope), '0'] : [String(top - 1n), String(top)]
    if (form === 1 && scope.bold) return [wildFrom(scope), wildTo(scope)]
    if (form < 4 && scope.readable.includes('n')) return down ? ['n', '1'] : ['1', 'n']
    const low = BigInt(from(scope))
    const sum = low + BigInt(passes(scope))
    const high = String(sum > top ? top : sum)
    return down ? [high, String(low)] : [String(low), high]
  })

function forLoop(body: fc.Arbitrary<Lines>): fc.Arbitrary<Lines> {
  const step = fc.option(fc.oneof({ weight: 3, arbitrary: smallLiteral }, { weight: 1, arbitrary: expression }), {
    freq: 2,
  })
  return fc.tuple(range, fc.boolean(), step, body).map(
    ([range, down, step, body]): Lines =>
      scope => {
        const loop = loopScope(scope)
        if (!loop) return body(scope)
        const [from, to] = range(scope, down)
        const by = step?.(scope)
        // A literal step of 0 is refused; another word that is 0 fails the run.
        const risk = by !== undefined && !/^\d+$/.test(by)
        const stride = by === '0' || (risk && !scope.bold) ? '1' : by
        return [
          `for ${loop.variable} from ${from} ${down ? 'downto' : 'to'} ${to}${stride === undefined ? '' : ` by ${stride}`}`,
          ...nested(body, scope, loop.inner),
          'end',
        ]
      },
  )
}

/** A loop over an array's own places, its variable being the index as it is. */
function sweep(body: fc.Arbitrary<Lines>): fc.Arbitrary<Lines> {
  return fc.tuple(place, place, fc.nat(3), expression, body).map(
    ([which, at, form, value, body]): Lines =>
      scope => {
        const arrays = arraysInReach(scope, form % 2 === 0)
        const loop = loopScope(scope)
        if (!loop || arrays.length === 0) return body(scope)
        const { name, declared } = pick(arrays, which)
        const { variable, inner } = loop
        const element = `${name}[${variable}]`
        const within = { ...scope, ...inner }
        const variables = pick(scope.assignable, at)
        const line = form % 2 === 0 ? `${element} <- ${value(within)}` : `${variables} <- ${variables} + ${element}`
        const pass = [...nested(body, scope, inner), `  ${line}`]
        if (form < 2) return [`for ${variable} from 0 to ${declared} - 1`, ...pass, 'end']
        return [
          `${variable} <- 0`,
          `while ${variable} < ${declared}`,
          ...pass,
          `  ${variable} <- ${variable} + 1`,
          'end',
        ]
      },
  )
}

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
      range,
      sometimes: condition,
      body,
      second: body,
    })
    .map(
      ({ test, down, labelled, move, touched, range, sometimes, body, second }): Lines =>
        scope => {
          const loop = loopScope(scope)
          if (!loop) return body(scope)
          const { variable } = loop
          const going = (down ? ['>', '!=', '>=', '>'] : ['<', '!=', '<=', '<'])[test]!
          const ending = (down ? ['<=', '=', '<', '<='] : ['>=', '=', '>', '>='])[test]!
          const [again, done] = [`l${scope.fresh()}`, `l${scope.fresh()}`]
          const inner = {
            ...loop.inner,
            assignable: touched === 0 ? [...scope.assignable, variable] : scope.assignable,
            labels: labelled ? [again, done, ...scope.labels] : scope.labels,
          }
          const step = `  ${variable} <- ${variable} ${down ? '-' : '+'} 1`
          const moving =
            move === 'sometimes'
              ? [`  ${BURN}`, `  if fuel = 0 or ${sometimes({ ...scope, ...inner })}`, `  ${step}`, '  end']
              : [step]
          const before = move === 'first' ? [] : nested(body, scope, inner)
          const after = move === 'first' || move === 'between' ? nested(second, scope, inner) : []
          const pass = [...before, ...moving, ...after]
          const [from, to] = range(scope, down)
          const start = `${variable} <- ${from}`
          if (!labelled) return [start, `while ${variable} ${going} ${to}`, ...pass, 'end']
          return [
            start,
            `${again}:`,
            `if ${variable} ${ending} ${to} goto ${done}`,
            ...pass,
            `goto ${again}`,
            `${done}:`,
          ]
        },
    )
}

function whileLoop(body: fc.Arbitrary<Lines>): fc.Arbitrary<Lines> {
  return fc.tuple(condition, body, fc.nat(4)).map(
    ([test, body, form]): Lines =>
      scope => [
        scope.bold && form === 0 ? `while ${test(scope)}` : `while fuel != 0 and ${test(scope)}`,
        `  ${BURN}`,
        ...nested(body, scope),
        'end',
      ],
  )
}

function repeatLoop(body: fc.Arbitrary<Lines>): fc.Arbitrary<Lines> {
  return fc.tuple(condition, body, fc.nat(4)).map(
    ([test, body, form]): Lines =>
      scope => [
        'repeat',
        `  ${BURN}`,
        ...nested(body, scope),
        scope.bold && form === 0 ? `until ${test(scope)}` : `until fuel = 0 or ${test(scope)}`,
      ],
  )
}

function ifForm(body: fc.Arbitrary<Lines>): fc.Arbitrary<Lines> {
  const further = fc.option(fc.tuple(condition, body))
  return fc.tuple(condition, body, further, fc.option(body)).map(
    ([test, body, further, otherwise]): Lines =>
      scope => [
        `if ${test(scope)}`,
        ...nested(body, scope),
        ...(further ? [`else if ${further[0](scope)}`, ...nested(further[1], scope)] : []),
        ...(otherwise ? ['else', ...nested(otherwise, scope)] : []),
        'end',
      ],
  )
}

/** A few instructions in a row: what most inner loops are made of. */
const instructions: fc.Arbitrary<Lines> = fc
  .array(
    fc.oneof(
      { weight: 4, arbitrary: assign },
      { weight: 2, arbitrary: increment },
      { weight: 1, arbitrary: product },
      { weight: 1, arbitrary: pointed },
      { weight: 1, arbitrary: jump },
    ),
    { minLength: 1, maxLength: 3 },
  )
  .map(
    (lines): Lines =>
      scope =>
        lines.flatMap(each => each(scope)),
  )

/** A list of statements, some with labels that every jump in it knows, forward and backward. */
function listOf(statement: fc.Arbitrary<Lines>, least: number, most: number): fc.Arbitrary<Lines> {
  return fc.array(fc.tuple(fc.nat(4), statement), { minLength: least, maxLength: most }).map(
    (items): Lines =>
      scope => {
        const labels = items.map(([draw]) => (draw === 0 ? `l${scope.fresh()}` : undefined))
        const own = labels.filter(label => label !== undefined)
        const inner = { ...scope, labels: [...own, ...scope.labels] }
        return items.flatMap(([, statement], at) => [
          ...(labels[at] ? [`${labels[at]}:`] : []),
          ...statement(inner),
        ])
      },
  )
}

const { body } = fc.letrec<{ body: Lines; statements: Lines; statement: Lines; form: Lines; pass: Lines }>(tie => ({
  body: listOf(fc.oneof({ weight: 1, arbitrary: tie('form') }, { weight: 1, arbitrary: tie('statement') }), 3, 9),
  statements: listOf(tie('statement'), 1, 5),
  statement: fc.oneof(
    { maxDepth: 3, depthSize: 'small', withCrossShrink: true },
    { weight: 8, arbitrary: assign },
    { weight: 2, arbitrary: increment },
    { weight: 2, arbitrary: product },
    { weight: 1, arbitrary: pointed },
    { weight: 4, arbitrary: jump },
    { weight: 4, arbitrary: call },
    { weight: 3, arbitrary: assertion },
    { weight: 1, arbitrary: leave },
    { weight: 9, arbitrary: tie('form') },
  ),
  form: fc.oneof(
    { weight: 3, arbitrary: writtenOut(tie('pass')) },
    { weight: 3, arbitrary: forLoop(tie('pass')) },
    { weight: 2, arbitrary: sweep(tie('pass')) },
    { weight: 2, arbitrary: ifForm(tie('statements')) },
    { weight: 1, arbitrary: whileLoop(tie('pass')) },
    { weight: 1, arbitrary: repeatLoop(tie('pass')) },
  ),
  pass: fc.oneof({ weight: 2, arbitrary: instructions }, { weight: 1, arbitrary: tie('statements') }),
}))

/** The body of a routine or of a procedure: instructions, structured forms, jumps among its labels. */
export const bodyLines: fc.Arbitrary<Lines> = body
