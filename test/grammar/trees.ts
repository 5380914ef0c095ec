import fc from 'fast-check'
import type { Span } from '../../grammar/span'
import type {
  Content,
  Declaration,
  Exact,
  ExactCondition,
  Name,
  ProcedureTree,
  RoutineTree,
  Statement,
  Target,
  WordCondition,
  WordExpression,
} from '../../grammar/tree'

const span: Span = { start: 0, end: 0, line: 0, column: 1 }

/** Among them words that mean something elsewhere. */
const NAMES = [
  'x',
  'y',
  'i',
  'n',
  'w',
  'lo',
  'count',
  "x'",
  'α',
  'x₁',
  'to',
  'in',
  'out',
  'sum',
  'all',
  'then',
  'do',
]
const MORE_NAMES = [
  'by',
  'from',
  'time',
  'space',
  'distinct',
  'check',
  'need',
  'let',
  'fix',
  'feed',
  'work',
  'max',
  'lg',
]
const PROCEDURES = ['f', 'merge', 'sum', 'check', 'min']

const name: fc.Arbitrary<Name> = fc.constantFrom(...NAMES, ...MORE_NAMES).map(text => ({ text, span }))
const procedureName: fc.Arbitrary<Name> = fc.constantFrom(...PROCEDURES).map(text => ({ text, span }))
const content: fc.Arbitrary<Content> = fc.record({ name, old: fc.boolean(), span: fc.constant(span) })

const wordNumber: fc.Arbitrary<WordExpression> = fc.oneof(
  fc.bigInt({ min: 0n, max: 1n << 80n }).map(value => ({ kind: 'number', value, span }) as const),
  fc
    .bigInt({ min: 0n, max: 1n << 40n })
    .map(value => ({ kind: 'number', value, written: `0x${value.toString(16)}`, span }) as const),
)

const exactNumber: fc.Arbitrary<Exact> = fc.oneof(
  fc
    .bigInt({ min: 0n, max: 1n << 80n })
    .map(numerator => ({ kind: 'number', numerator, denominator: 1n, span }) as const),
  fc
    .bigInt({ min: 0n, max: 1n << 20n })
    .map(
      value =>
        ({ kind: 'number', numerator: value, denominator: 1n, written: `0b${value.toString(2)}`, span }) as const,
    ),
  fc
    .constantFrom([1n, 2n], [5n, 4n], [7n, 1000n], [123n, 125n])
    .map(([numerator, denominator]) => ({ kind: 'number', numerator, denominator, span }) as Exact),
)

export const exact: fc.Arbitrary<Exact> = fc.letrec<{ exact: Exact }>(tie => {
  const inner = tie('exact')
  return {
    exact: fc.oneof(
      { maxDepth: 4, depthIdentifier: 'exact' },
      exactNumber,
      name.map(name => ({ kind: 'name', name, span }) as const),
      fc.record({ kind: fc.constant('old' as const), name, span: fc.constant(span) }),
      fc.record({ kind: fc.constant('total' as const), array: content, span: fc.constant(span) }),
      fc.record({
        kind: fc.constant('binary' as const),
        operator: fc.constantFrom('+', '-', '*', '/', '^', 'mod'),
        left: inner,
        right: inner,
        span: fc.constant(span),
      }),
      fc.record({ kind: fc.constant('negate' as const), operand: inner, span: fc.constant(span) }),
      fc.record({
        kind: fc.constant('call' as const),
        function: fc.constantFrom('lg', 'ceil', 'floor', 'abs', 'popcount'),
        arguments: fc.tuple(inner),
        span: fc.constant(span),
      }),
      fc.record({
        kind: fc.constant('call' as const),
        function: fc.constantFrom('min', 'max'),
        arguments: fc.array(inner, { minLength: 1, maxLength: 3 }),
        span: fc.constant(span),
      }),
      fc.record({ kind: fc.constant('element' as const), array: content, index: inner, span: fc.constant(span) }),
      fc.record({
        kind: fc.constant('sum' as const),
        index: name,
        from: inner,
        to: inner,
        body: inner,
        span: fc.constant(span),
      }),
    ) as fc.Arbitrary<Exact>,
  }
}).exact

const comparison = fc.constantFrom('=', '!=', '<', '<=', '>', '>=')

export const condition: fc.Arbitrary<ExactCondition> = fc.letrec<{ condition: ExactCondition }>(tie => {
  const inner = tie('condition')
  return {
    condition: fc.oneof(
      { maxDepth: 4, depthIdentifier: 'condition' },
      fc.record({
        kind: fc.constant('compare' as const),
        operator: comparison,
        left: exact,
        right: exact,
        span: fc.constant(span),
      }),
      fc.record({ kind: fc.constant('sorted' as const), array: content, span: fc.constant(span) }),
      fc.record({ kind: fc.constant('same' as const), left: content, right: content, span: fc.constant(span) }),
      fc.record({ kind: fc.constantFrom('and', 'or'), left: inner, right: inner, span: fc.constant(span) }),
      fc.record({ kind: fc.constant('not' as const), operand: inner, span: fc.constant(span) }),
      fc.record({
        kind: fc.constantFrom('all', 'any'),
        index: name,
        from: exact,
        to: exact,
        body: inner,
        span: fc.constant(span),
      }),
    ) as fc.Arbitrary<ExactCondition>,
  }
}).condition

export const word: fc.Arbitrary<WordExpression> = fc.letrec<{ word: WordExpression }>(tie => {
  const inner = tie('word')
  return {
    word: fc.oneof(
      { maxDepth: 4, depthIdentifier: 'word' },
      wordNumber,
      name.map(name => ({ kind: 'name', name, span }) as const),
      name.map(array => ({ kind: 'address', array, span }) as const),
      fc.record({
        kind: fc.constant('binary' as const),
        operator: fc.constantFrom('+', '-', '*', '/', 'mod', '&', '|', 'xor', '<<', '>>'),
        left: inner,
        right: inner,
        span: fc.constant(span),
      }),
      fc.record({ kind: fc.constantFrom('negate', 'complement'), operand: inner, span: fc.constant(span) }),
      fc.record({
        kind: fc.constant('call' as const),
        function: fc.constantFrom('popcount', 'msb', 'lsb'),
        argument: inner,
        span: fc.constant(span),
      }),
      fc.record({ kind: fc.constant('element' as const), base: name, index: inner, span: fc.constant(span) }),
      fc.record({ kind: fc.constant('indirect' as const), address: inner, span: fc.constant(span) }),
    ) as fc.Arbitrary<WordExpression>,
  }
}).word

export const wordCondition: fc.Arbitrary<WordCondition> = fc.letrec<{ condition: WordCondition }>(tie => {
  const inner = tie('condition')
  return {
    condition: fc.oneof(
      { maxDepth: 3, depthIdentifier: 'condition' },
      fc.record({
        kind: fc.constant('compare' as const),
        operator: comparison,
        signed: fc.boolean(),
        left: word,
        right: word,
        span: fc.constant(span),
      }),
      fc.record({ kind: fc.constantFrom('and', 'or'), left: inner, right: inner, span: fc.constant(span) }),
      fc.record({ kind: fc.constant('not' as const), operand: inner, span: fc.constant(span) }),
    ) as fc.Arbitrary<WordCondition>,
  }
}).condition

const target: fc.Arbitrary<Target> = fc.oneof(
  name.map(name => ({ kind: 'name', name, span }) as const),
  fc.record({ kind: fc.constant('element' as const), base: name, index: word, span: fc.constant(span) }),
  fc.record({ kind: fc.constant('indirect' as const), address: word, span: fc.constant(span) }),
)

/** Whether an expression would be taken for a product or a call where it stands right of an arrow. */
const statement: fc.Arbitrary<Statement> = fc.letrec<{ statement: Statement; body: Statement[] }>(tie => {
  const body = tie('body')
  const at = fc.constant(span)
  const branch = fc.record({ condition: wordCondition, body, span: at })
  return {
    body: fc.array(tie('statement'), { maxLength: 4, depthIdentifier: 'statement' }),
    statement: fc.oneof(
      { maxDepth: 3, depthIdentifier: 'statement' },
      fc.record({ kind: fc.constant('assign' as const), target, value: word, span: at }),
      fc.record({
        kind: fc.constant('product' as const),
        high: target,
        low: target,
        left: word,
        right: word,
        span: at,
      }),
      fc.record({
        kind: fc.constant('call' as const),
        results: fc.array(target, { maxLength: 3 }),
        procedure: procedureName,
        arguments: fc.array(word, { maxLength: 3 }),
        span: at,
      }),
      fc.record({ kind: fc.constant('label' as const), name, span: at }),
      fc.record({ kind: fc.constant('goto' as const), label: name, span: at }),
      fc.record({ kind: fc.constant('if-goto' as const), condition: wordCondition, label: name, span: at }),
      fc.record({ kind: fc.constant('halt' as const), span: at }),
      fc.record({ kind: fc.constant('return' as const), span: at }),
      fc.record({
        kind: fc.constant('return' as const),
        values: fc.array(word, { minLength: 1, maxLength: 3 }),
        span: at,
      }),
      fc.record({ kind: fc.constant('assert' as const), condition, span: at }),
      fc.record({ kind: fc.constant('while' as const), condition: wordCondition, body, end: at, span: at }),
      fc.record({ kind: fc.constant('repeat' as const), body, until: wordCondition, end: at, span: at }),
      fc.record(
        {
          kind: fc.constant('for' as const),
          variable: name,
          from: word,
          to: word,
          step: word,
          down: fc.boolean(),
          body,
          end: at,
          span: at,
        },
        { requiredKeys: ['kind', 'variable', 'from', 'to', 'down', 'body', 'end', 'span'] },
      ),
      fc.record(
        {
          kind: fc.constant('if' as const),
          branches: fc.array(branch, { minLength: 1, maxLength: 3 }),
          otherwise: fc.record({ body, span: at }),
          end: at,
          span: at,
        },
        { requiredKeys: ['kind', 'branches', 'end', 'span'] },
      ),
    ) as fc.Arbitrary<Statement>,
  }
}).statement

const procedure: fc.Arbitrary<ProcedureTree> = fc.record({
  kind: fc.constant('procedure' as const),
  name: procedureName,
  parameters: fc.array(name, { maxLength: 3 }),
  results: fc.array(name, { maxLength: 3 }),
  body: fc.array(statement, { maxLength: 4 }),
  end: fc.constant(span),
  span: fc.constant(span),
})

const at = fc.constant(span)
const item = fc.record({ name, length: exact, span: at }, { requiredKeys: ['name', 'span'] })
const declaration = fc.oneof(
  fc.record({
    kind: fc.constantFrom('in', 'out', 'inout', 'work'),
    items: fc.array(item, { minLength: 1, maxLength: 3 }),
    span: at,
  }),
  fc.record({ kind: fc.constantFrom('let', 'fix'), name, value: exact, span: at }),
  fc.record({
    kind: fc.constant('table'),
    name,
    length: exact,
    values: fc.array(exact, { minLength: 1, maxLength: 9 }),
    span: at,
  }),
  // `t[sum in in .. 3]` can be read in two ways.
  fc.record({
    kind: fc.constant('formula'),
    name,
    index: name.filter(({ text }) => text !== 'sum' && text !== 'all'),
    from: exact,
    to: exact,
    value: exact,
    span: at,
  }),
  fc.record({ kind: fc.constantFrom('need', 'check'), condition, span: at }),
  fc.record(
    { kind: fc.constant('feed-range'), name, index: name, from: exact, to: exact, span: at },
    { requiredKeys: ['kind', 'name', 'from', 'to', 'span'] },
  ),
  fc.record({ kind: fc.constant('feed-distinct'), name, span: at }),
  fc.record({
    kind: fc.constant('claim'),
    measure: fc.constantFrom('time', 'space'),
    operator: fc.constantFrom('<=', '='),
    bound: exact,
    span: at,
  }),
) as fc.Arbitrary<Declaration>

/** Whole routines of any shape that the notation can write, meaningful or not. */
export const routine: fc.Arbitrary<RoutineTree> = fc.record({
  name,
  declarations: fc.array(fc.oneof({ weight: 6, arbitrary: declaration }, { weight: 1, arbitrary: procedure }), {
    maxLength: 6,
  }),
  body: fc.array(fc.oneof({ weight: 9, arbitrary: statement }, { weight: 1, arbitrary: procedure }), {
    maxLength: 8,
  }),
  begin: at,
  end: at,
  span: at,
  comments: fc.constant([]),
  blanks: fc.constant([]),
})

const PLACES: ReadonlySet<string> = new Set(['span', 'begin', 'end', 'comments', 'blanks'])

/** A tree without places and comments: what printing and parsing keep. */
export function bare<Tree>(tree: Tree): Tree {
  if (Array.isArray(tree)) return tree.map(bare) as Tree
  if (typeof tree !== 'object' || tree === null) return tree
  const kept = Object.entries(tree).filter(([key]) => !PLACES.has(key))
  return Object.fromEntries(kept.map(([key, value]) => [key, bare(value)])) as Tree
}
