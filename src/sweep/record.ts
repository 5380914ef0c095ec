import { GENERATOR } from '../feed'
import { type Charges, type Count, weighTally } from '../machine'
import { printCharges } from './charges'
import type { PointResult, SweepResult, TrialTally } from './result'
import { printWidth } from './widths'

/**
 * A sweep as JSON text: the setting as its user would write it, the routine's text, and every point with its trials.
 * Counts are numbers, or strings past 2^53; lets are strings. Times are at the setting's charges.
 */
export function writeRecord(result: SweepResult): string {
  const { setting, routine, text, points, complete } = result
  const record = {
    routine,
    text,
    setting: {
      sizes: Object.fromEntries(Object.entries(setting.sizes).map(([name, range]) => [name, range.text])),
      widths: setting.widths.map(printWidth),
      lets: Object.fromEntries(Object.entries(setting.lets).map(([name, value]) => [name, String(value)])),
      sets: setting.sets,
      off: setting.off,
      charges: printCharges(setting.charges),
      feed: setting.pattern,
      trials: setting.trials,
      seed: setting.seed,
    },
    generator: GENERATOR,
    complete,
  }
  // A line a point: readable, and a fraction of what it takes laid out in full.
  const head = JSON.stringify(record, undefined, 1).replace(/\n\}$/, '')
  const lines = points.map(point => `  ${JSON.stringify(plainPoint(point, setting.charges))}`)
  return `${head},\n "points": [\n${lines.join(',\n')}\n ]\n}\n`
}

function plainPoint(result: PointResult, charges: Charges) {
  const { sizes, width, set } = result.point
  const place = { sizes, w: width, set, status: result.status }
  if (result.status === 'done')
    return { ...place, trials: result.trials.map(trial => plainTrial(trial, charges)), verdicts: result.verdicts }
  const { status: _, point: __, ...rest } = result
  return { ...place, ...rest }
}

function plainTrial({ seed, tally }: TrialTally, charges: Charges) {
  const { byClass, byLine, indexed, space } = tally
  return { seed, time: plainCount(weighTally(tally, charges).time), byClass, indexed, space, byLine }
}

/** As a number where a JSON reader keeps it exactly, else as text. */
export function plainCount(count: Count): number | string {
  return typeof count === 'number' ? count : String(count)
}
