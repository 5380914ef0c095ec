import type { InstructionSetName } from '../../src/machine/machine'
import { CHARGES } from '../../src/machine/machine'
import { readProgram } from '../../src/routine'
import { gridPoints, parseSizes, parseWidths, runPoint, type Setting } from '../../src/sweep'
import type { SweepRecord } from '../../src/workbench/store/record'

/** A finished sweep of a text, run by the interpreter. */
export async function swept(
  text: string,
  sizes: string,
  widths: string,
  changes: Partial<Setting> & { readonly sets?: readonly InstructionSetName[] } = {},
): Promise<SweepRecord> {
  const { program, diagnostics } = readProgram(text)
  if (!program) throw new Error(diagnostics.map(each => each.message).join('\n'))
  const ranges = parseSizes(sizes)
  const chosen = parseWidths(widths)
  if (!('range' in ranges) || !('widths' in chosen)) throw new Error('The grid is not understood.')
  const [first] = program.routine.sizes
  const setting: Setting = {
    sizes: first === undefined ? {} : { [first]: ranges.range },
    widths: chosen.widths,
    lets: {},
    sets: ['full'],
    off: 'refuse',
    charges: CHARGES.unit,
    pattern: 'uniform',
    trials: 1,
    seed: 1,
    ...changes,
  }
  const points = gridPoints(setting, program)
  const results = await Promise.all(points.map(point => runPoint(program, setting, point, { way: 'reference' })))
  return {
    number: 1,
    file: 'draft.tally',
    text,
    program,
    setting,
    points,
    results,
    status: 'done',
    startedAt: 0,
    elapsed: 1,
  }
}

export const SCALE = `routine scale
  inout a[n]
  fix   m = 2^(w - 1) + 1
  claim time  <= 6*n + 4
  claim time  =  6*n + 3
  claim time  <= 5*n
  claim space <= 3
  check all i in 0..n-1 : a[i] = floor(old(a)[i] * m / 2^w)
begin
  for i from 0 to n - 1
    hi, lo <- a[i] * m
    a[i] <- hi
  end
end
`
