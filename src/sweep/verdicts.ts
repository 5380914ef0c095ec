import type { Claim } from '../routine'
import type { Verdict } from './result'

/**
 * One verdict for all trials of a point, claim by claim and check by check: broken where any trial breaks it, else
 * undecided where any trial leaves it so. A claim shows the count that comes nearest to its bound or goes farthest past
 * it: the largest for `<=`; for `=` the first that differs.
 */
export function mergeVerdicts(trials: readonly (readonly Verdict[])[], claims: readonly Claim[]): Verdict[] {
  const [first = [], ...others] = trials.map((verdicts, trial) => verdicts.map(verdict => ({ ...verdict, trial })))
  return first.map((verdict, at) => {
    const all = [verdict, ...others.map(verdicts => verdicts[at]!)]
    const worst =
      all.find(({ outcome }) => outcome === 'broken') ?? all.find(({ outcome }) => outcome === 'undecided')
    const upper = verdict.kind !== 'check' && claims[verdict.place]?.operator === '<='
    const shown = upper ? all.reduce((most, next) => ((next.count ?? 0) > (most.count ?? 0) ? next : most)) : worst
    const { trial, ...plain } = shown ?? verdict
    if (!worst) return plain
    return worst.outcome === 'broken'
      ? { ...plain, outcome: 'broken', trial: worst.trial }
      : { ...plain, outcome: 'undecided', ...(worst.reason === undefined ? {} : { reason: worst.reason }) }
  })
}
