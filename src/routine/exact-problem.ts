import type { Span } from '../../grammar/span'

/**
 * Why an exact expression has no answer. `undefined`: it has no value (lg of 0, a division by zero, an index outside
 * its array). `undecided`: it has one, which the precision or the work allowed does not settle. `too-large`: its value
 * has more bits than are worked out. `unknown`: the scope does not give a name.
 */
export interface ExactProblem {
  readonly kind: 'problem'
  readonly cause: 'undefined' | 'undecided' | 'too-large' | 'unknown'
  /** A plain sentence. */
  readonly message: string
  /** What it is about; absent for a problem of a value that stands in no text. */
  readonly span?: Span
}

export function exactProblem(cause: ExactProblem['cause'], message: string): ExactProblem {
  return { kind: 'problem', cause, message }
}

/** Whether an answer is a problem. */
export function isProblem(answer: unknown): answer is ExactProblem {
  return typeof answer === 'object' && answer !== null && (answer as ExactProblem).kind === 'problem'
}

/** The problem with a place, unless it has one already: the innermost part that fails is the one to point at. */
export function placeProblem(problem: ExactProblem, span: Span): ExactProblem {
  return problem.span ? problem : { ...problem, span }
}
