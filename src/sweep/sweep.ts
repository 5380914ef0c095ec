import type { Program } from '../routine'
import { gridPoints } from './grid'
import { type PointOptions, runPoint } from './point'
import type { GridPoint, PointResult, SweepResult } from './result'
import type { Setting } from './setting'
import { programUnder } from './under'

export interface SweepOptions extends Omit<PointOptions, 'breathe'> {
  /** Takes each result as it comes, in the grid's order, with how many there are and will be. */
  readonly onPoint?: (result: PointResult, done: number, all: number) => void
  readonly signal?: AbortSignal
}

/** Longest stretch of work, in milliseconds, before messages and cancels get their turn. */
const STRETCH = 12

/**
 * Runs every point of a setting, small sizes before large ones at each width, and gives the results as they come. An
 * aborted sweep gives the points it got to, `complete` false. A point that differs from an
 * earlier one in its set alone, and runs the same program, takes over that one's trials: they would be the same.
 */
export async function runSweep(
  program: Program,
  setting: Setting,
  options: SweepOptions = {},
): Promise<SweepResult> {
  const { onPoint, signal } = options
  const grid = gridPoints(setting, program)
  const breathe = makeBreath(signal)
  const points: PointResult[] = []
  const known = new Map<Program, Map<string, PointResult>>()
  for (const point of grid) {
    const under = programUnder(program, point.set, setting.off)
    const runs = 'program' in under ? under.program : undefined
    const earlier = runs && known.get(runs)?.get(keyOf(point))
    const result = earlier
      ? { ...earlier, point }
      : await runPoint(program, setting, point, { ...options, breathe })
    if (!result || (await breathe())) break
    if (runs && result.status !== 'refused')
      known.set(runs, (known.get(runs) ?? new Map<string, PointResult>()).set(keyOf(point), result))
    points.push(result)
    onPoint?.(result, points.length, grid.length)
  }
  const { name, text } = program.routine
  return { setting, routine: name, text, points, complete: points.length === grid.length }
}

function keyOf({ width, sizes }: GridPoint): string {
  return `${width};${Object.values(sizes).join()}`
}

/** Lets the event loop turn once a stretch; says whether to stop. */
function makeBreath(signal: AbortSignal | undefined): () => Promise<boolean> {
  let last = performance.now()
  return async () => {
    if (performance.now() - last > STRETCH) {
      await new Promise(resolve => setTimeout(resolve, 0))
      last = performance.now()
    }
    return signal?.aborted ?? false
  }
}
