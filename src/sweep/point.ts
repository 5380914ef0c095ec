import { type CompiledProgram, compileProgram } from '../engine'
import { feedInput, trialSeed } from '../feed'
import {
  type Binding,
  bindProgram,
  DEFAULT_LIMITS,
  type Input,
  interpretProgram,
  judgeRun,
  type Limits,
  type Refusal,
  type RunResult,
  type Tally,
  tallyRun,
} from '../machine'
import type { Program } from '../routine'
import type { GridPoint, PointResult, TrialTally, Verdict } from './result'
import type { Setting } from './setting'
import { programUnder } from './under'
import { mergeVerdicts } from './verdicts'
import { widthAt } from './widths'

/** Who runs the blocks: compiled code, or the BigInt interpreter that it is checked against. */
export type Way = 'engine' | 'reference'

/** The widest word that compiled code takes; wider ones are interpreted. */
export const ENGINE_WIDTH = 64

export interface PointOptions {
  readonly limits?: Limits
  /** Absent: the engine wherever it takes the width. */
  readonly way?: Way
  /** Called between trials, so that a long point leaves room for messages; true stops it. */
  readonly breathe?: () => Promise<boolean>
}

type Failed = Extract<PointResult, { status: 'failed' }>

/** The program's modules by width: source that stays the same is compiled once a width. */
const modules = new WeakMap<Program, Map<number, Promise<CompiledProgram>>>()

function moduleOf(program: Program, width: number): Promise<CompiledProgram> {
  const known = modules.get(program) ?? new Map<number, Promise<CompiledProgram>>()
  modules.set(program, known)
  const compiled = known.get(width) ?? compileProgram(program, width)
  known.set(width, compiled)
  return compiled
}

/** Runs a bound program once, by the way asked for. */
export async function runBinding(binding: Binding, input: Input, options: PointOptions = {}): Promise<RunResult> {
  const { limits = DEFAULT_LIMITS } = options
  const { width } = binding.point
  const way = options.way ?? (width <= ENGINE_WIDTH ? 'engine' : 'reference')
  if (way === 'reference') return interpretProgram(binding, input, limits)
  return (await moduleOf(binding.program, width)).run(binding, input, limits)
}

/**
 * The problem behind an exception where this computer, not the limits, has too little memory for a run; throws whatever
 * is something else.
 */
export function memoryProblem(error: unknown, { words }: Binding): { problem: string } {
  if (!(error instanceof RangeError) || /call stack/.test(error.message)) throw error
  return { problem: `this computer has no memory for the ${words} words of the run: ${error.message}` }
}

/** Why words of a width cannot be run by the way asked for; undefined where they can. */
export function wayProblem(width: number, way: Way | undefined): string | undefined {
  if (way !== 'engine' || width <= ENGINE_WIDTH) return undefined
  return `words of ${width} bits are not compiled, only those of up to ${ENGINE_WIDTH}: run them by the reference`
}

/** Binds a program to a point of a setting, or says why the point is not run. */
export function bindPoint(
  program: Program,
  setting: Setting,
  point: GridPoint,
  limits = DEFAULT_LIMITS,
): { binding: Binding } | Refusal {
  const choice = setting.widths[point.widthChoice]
  const at = choice ? widthAt(choice, point.sizes) : { width: point.width }
  if ('problem' in at) return { reason: at.problem }
  const under = programUnder(program, point.set, setting.off)
  if ('refused' in under) {
    const { message, span } = under.refused[0]!
    return { reason: message, span }
  }
  const bound = bindProgram(under.program, { width: point.width, sizes: point.sizes, lets: setting.lets }, limits)
  return 'binding' in bound ? bound : bound.refusal
}

/**
 * All trials of one point: refused where it cannot be run, failed at the first trial that goes wrong, else done. Undefined
 * where `breathe` stops it.
 */
export async function runPoint(
  program: Program,
  setting: Setting,
  point: GridPoint,
  options: PointOptions = {},
): Promise<PointResult | undefined> {
  const bound = bindPoint(program, setting, point, options.limits)
  if (!('binding' in bound)) {
    const { reason, span } = bound
    return { status: 'refused', point, reason, ...(span ? { line: span.line } : {}) }
  }
  const { binding } = bound
  const unfit = wayProblem(point.width, options.way)
  if (unfit) return { status: 'refused', point, reason: unfit }
  const trials: TrialTally[] = []
  const verdicts: Verdict[][] = []
  for (let trial = 0; trial < setting.trials; trial++) {
    const seed = trialSeed(setting.seed, point, trial)
    const fed = feedInput(binding, setting.pattern, seed)
    if ('problem' in fed) return { status: 'refused', point, reason: fed.problem }
    const result = await runBinding(binding, fed.input, options).catch(error => memoryProblem(error, binding))
    if ('problem' in result) return { status: 'refused', point, reason: result.problem }
    if (!result.ok) {
      const { message, span } = result.failure
      return { status: 'failed', point, reason: message, line: span.line, seed }
    }
    const tally = tallyRun(binding, result)
    trials.push({ seed, tally: shareTally(tally, trials.at(-1)?.tally) })
    verdicts.push(judgeRun(binding, fed.input, result, tally, setting.charges))
    if (await options.breathe?.()) return undefined
  }
  return { status: 'done', point, trials, verdicts: mergeVerdicts(verdicts, program.routine.claims) }
}

/** Which trial of its point failed, from 0: the one that has the seed. */
export function failedTrial({ seed, trials }: Setting, { point, seed: failed }: Failed): number | undefined {
  for (let trial = 0; trial < trials; trial++) if (trialSeed(seed, point, trial) === failed) return trial
  return undefined
}

/** The earlier tally where both say the same: trials of a routine that does not look at its input keep one between them. */
function shareTally(tally: Tally, earlier: Tally | undefined): Tally {
  return earlier && JSON.stringify(tally) === JSON.stringify(earlier) ? earlier : tally
}
