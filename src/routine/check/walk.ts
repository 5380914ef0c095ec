import type { Statement, Target, WordCondition, WordExpression } from '../../../grammar/tree'

/** Every statement of a body, those inside structured forms included, those of procedures not. In order of the text. */
export function* eachStatement(body: readonly Statement[]): Generator<Statement> {
  for (const statement of body) {
    yield statement
    for (const inner of bodiesOf(statement)) yield* eachStatement(inner)
  }
}

/** The bodies of a structured form. */
export function bodiesOf(statement: Statement): (readonly Statement[])[] {
  switch (statement.kind) {
    case 'while':
    case 'repeat':
    case 'for':
      return [statement.body]
    case 'if': {
      const bodies = statement.branches.map(branch => branch.body)
      return statement.otherwise ? [...bodies, statement.otherwise.body] : bodies
    }
    default:
      return []
  }
}

/** The places that a statement writes to. */
export function targetsOf(statement: Statement): readonly Target[] {
  switch (statement.kind) {
    case 'assign':
      return [statement.target]
    case 'product':
      return [statement.high, statement.low]
    case 'call':
      return statement.results
    case 'for':
      return [{ kind: 'name', name: statement.variable, span: statement.variable.span }]
    default:
      return []
  }
}

/** The words that a statement itself reads, those of its bodies and addresses of targets left out. */
export function wordsOf(statement: Statement): readonly WordExpression[] {
  switch (statement.kind) {
    case 'assign':
      return [statement.value]
    case 'product':
      return [statement.left, statement.right]
    case 'call':
      return statement.arguments
    case 'if-goto':
    case 'while':
      return wordsOfCondition(statement.condition)
    case 'repeat':
      return wordsOfCondition(statement.until)
    case 'for':
      return statement.step ? [statement.from, statement.to, statement.step] : [statement.from, statement.to]
    case 'if':
      return statement.branches.flatMap(branch => wordsOfCondition(branch.condition))
    case 'return':
      return statement.values ?? []
    default:
      return []
  }
}

function wordsOfCondition(condition: WordCondition): WordExpression[] {
  switch (condition.kind) {
    case 'compare':
      return [condition.left, condition.right]
    case 'not':
      return wordsOfCondition(condition.operand)
    default:
      return [...wordsOfCondition(condition.left), ...wordsOfCondition(condition.right)]
  }
}

/** The parts of a word expression. */
export function partsOfWord(expression: WordExpression): readonly WordExpression[] {
  switch (expression.kind) {
    case 'binary':
      return [expression.left, expression.right]
    case 'negate':
    case 'complement':
      return [expression.operand]
    case 'call':
      return [expression.argument]
    case 'element':
      return [expression.index]
    case 'indirect':
      return [expression.address]
    default:
      return []
  }
}
