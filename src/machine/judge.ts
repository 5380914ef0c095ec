import { evaluateExact, exactText, holdsExact, isProblem, meetsBound, quotientDouble } from '../routine'
import type { Charges } from './machine'
import type { Binding, Input, RunResult } from './run'
import { checkScope, namesScope } from './scope'
import type { Tally } from './tally'
import { type Count, weighTally } from './weigh'

/** A claim or a check of one run. Figures are exact; `ratio` is for plots alone. */
export interface RunVerdict {
  readonly kind: 'time' | 'space' | 'check'
  /** Place among the routine's claims, or among its checks. */
  readonly place: number
  readonly line: number
  readonly outcome: 'holds' | 'broken' | 'undecided'
  readonly count?: number
  readonly bound?: string
  readonly ratio?: number
  readonly reason?: string
}

/** Judges every claim, then every check, of a finished run, exactly. */
export function judgeRun(
  binding: Binding,
  input: Input,
  result: Extract<RunResult, { ok: true }>,
  tally: Tally,
  charges: Charges,
): RunVerdict[] {
  const { claims, checks } = binding.program.routine
  const { time } = weighTally(tally, charges)
  const scope = checkScope(binding, input, result)
  return [
    ...claims.map((claim, place): RunVerdict => {
      const count: Count = claim.measure === 'time' ? time : tally.space.working
      const head = { kind: claim.measure, place, line: claim.span.line, count: Number(count) } as const
      const bound = evaluateExact(claim.bound, namesScope(binding.names))
      if (isProblem(bound)) return { ...head, outcome: 'undecided', reason: bound.message }
      const ratio = quotientDouble(count, bound)
      const figures = {
        bound: exactText(bound),
        ...(ratio !== undefined && Number.isFinite(ratio) ? { ratio } : {}),
      }
      const holds = meetsBound(count, claim.operator, bound)
      if (isProblem(holds)) return { ...head, ...figures, outcome: 'undecided', reason: holds.message }
      return { ...head, ...figures, outcome: holds ? 'holds' : 'broken' }
    }),
    ...checks.map((check, place): RunVerdict => {
      const head = { kind: 'check', place, line: check.span.line } as const
      const holds = holdsExact(check.condition, scope)
      if (isProblem(holds)) return { ...head, outcome: 'undecided', reason: holds.message }
      return { ...head, outcome: holds ? 'holds' : 'broken' }
    }),
  ]
}
