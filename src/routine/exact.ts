import type { Span } from '../../grammar/span'
import type { Exact, ExactCondition } from '../../grammar/tree'
import { compileCondition, compileExact, type Scope } from './exact-compile'
import { ceil, compare } from './exact-number'
import { type ExactProblem, exactProblem, placeProblem } from './exact-problem'
import type { ExactValue } from './exact-real'

const expressions = new WeakMap<Exact, (scope: Scope) => ExactValue | ExactProblem>()
const conditions = new WeakMap<ExactCondition, (scope: Scope) => boolean | ExactProblem>()

/**
 * The value of an exact expression: a whole number (bigint), a fraction, or a real. It is never rounded. The expression
 * is compiled on its first evaluation and kept with its tree.
 */
export function evaluateExact(expression: Exact, scope: Scope): ExactValue | ExactProblem {
  let evaluate = expressions.get(expression)
  if (!evaluate) {
    evaluate = compileExact(expression)
    expressions.set(expression, evaluate)
  }
  return evaluate(scope)
}

/** Whether an exact condition holds; a problem where that cannot be worked out. */
export function holdsExact(condition: ExactCondition, scope: Scope): boolean | ExactProblem {
  let holds = conditions.get(condition)
  if (!holds) {
    holds = compileCondition(condition)
    conditions.set(condition, holds)
  }
  return holds(scope)
}

/** Whether count <= bound, or count = bound, exactly. */
export function meetsBound(
  count: number | bigint,
  operator: '<=' | '=',
  bound: ExactValue,
): boolean | ExactProblem {
  const order = compare(BigInt(count), bound)
  if (typeof order !== 'number') return order
  return operator === '=' ? order === 0 : order <= 0
}

/** The number where it is whole; else a problem. `what` names it in the message ("the length of a"). */
export function wholeNumber(value: ExactValue, what: string, span?: Span): bigint | ExactProblem {
  if (typeof value === 'bigint') return value
  const problem = exactProblem('undefined', `${what} is not a whole number.`)
  return span ? placeProblem(problem, span) : problem
}

/** The least whole number that is not below. */
export function ceilWhole(value: ExactValue): bigint | ExactProblem {
  return ceil(value)
}
