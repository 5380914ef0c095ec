import { bindProgram, type Charges, DEFAULT_LIMITS, type Input, judgeRun, type RunResult } from '../../machine'
import type { Program } from '../../routine/block'
import type { PointResult } from '../../sweep/result'
import type { Setting } from '../../sweep/setting'
import { mergeVerdicts } from '../../sweep/verdicts'

// What claims look at is the tally and the point. Contents of a run are for checks, which no charge can change.
const NO_INPUT: Input = { arrays: {}, scalars: {}, junk: 0 }
const NO_CONTENTS: Extract<RunResult, { ok: true }> = {
  ok: true,
  visits: new Float64Array(),
  arrays: {},
  scalars: {},
  touched: 0,
  frames: 0,
}

/** A result under other charges: its tallies as they were counted, its claims judged anew. Nothing is run. */
export function weighResult(
  program: Program,
  setting: Setting,
  result: PointResult,
  charges: Charges,
): PointResult {
  if (result.status !== 'done' || program.routine.claims.length === 0) return result
  const { width, sizes } = result.point
  const bare: Program = { ...program, routine: { ...program.routine, checks: [] } }
  const bound = bindProgram(bare, { width, sizes, lets: setting.lets }, DEFAULT_LIMITS)
  if ('refusal' in bound) throw new Error(`A point that was run cannot be bound: ${bound.refusal.reason}`)
  const trials = result.trials.map(({ tally }) => judgeRun(bound.binding, NO_INPUT, NO_CONTENTS, tally, charges))
  const checks = result.verdicts.filter(({ kind }) => kind === 'check')
  return { ...result, verdicts: [...mergeVerdicts(trials, program.routine.claims), ...checks] }
}
