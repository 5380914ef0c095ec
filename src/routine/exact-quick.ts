import { type ExactProblem, isProblem } from './exact-problem'
import type { ExactValue } from './exact-real'

/**
 * A value on its way through an evaluation. Machine numbers stand for safe whole numbers, and only for those, so that
 * arithmetic on them is exact; words past them are bigints, which may also be small.
 */
export type Quick = number | ExactValue

/** What a part of an expression comes to. Errors travel as values, so that the quick path pays nothing for them. */
export type QuickAnswer = Quick | ExactProblem

export function quicken(value: ExactValue): Quick {
  return typeof value === 'bigint' && isSafe(value) ? Number(value) : value
}

export function quickenAnswer(answer: ExactValue | ExactProblem): QuickAnswer {
  return isProblem(answer) ? answer : quicken(answer)
}

export function settle(quick: Quick): ExactValue {
  return typeof quick === 'number' ? BigInt(quick) : quick
}

const SAFE = BigInt(Number.MAX_SAFE_INTEGER)

function isSafe(value: bigint): boolean {
  return value <= SAFE && value >= -SAFE
}
