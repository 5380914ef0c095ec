import type { Program } from '../routine'
import type { GridPoint } from './result'
import type { Setting } from './setting'
import { widthAt } from './widths'

/** The width of a point whose expression gives none that a machine can have; such a point is refused. */
export const NO_WIDTH = 0

/**
 * The points of a setting: sets outermost, then widths, then sizes, each ascending. Sizes that are not given go along
 * with the routine's first. Throws where the first has no values: `findMismatch` tells that to the user.
 */
export function gridPoints(setting: Setting, program: Program): GridPoint[] {
  const placements = placeSizes(setting, program.routine.sizes)
  const points: GridPoint[] = []
  for (const set of setting.sets)
    for (const [widthChoice, choice] of setting.widths.entries())
      for (const { n, sizes } of placements) {
        const at = widthAt(choice, sizes)
        const width = 'width' in at ? at.width : NO_WIDTH
        points.push({ index: points.length, sizes, n, width, widthChoice, set })
      }
  return points
}

interface Placement {
  readonly n: number
  readonly sizes: Readonly<Record<string, number>>
}

function placeSizes(setting: Setting, names: readonly string[]): Placement[] {
  const [first, ...further] = names
  if (first === undefined) return [{ n: 0, sizes: {} }]
  const range = setting.sizes[first]
  if (!range) throw new Error(`the setting gives no values for ${first}`)
  let placements: Placement[] = range.values.map(n => ({ n, sizes: { [first]: n } }))
  for (const name of further) {
    const own = setting.sizes[name]
    placements = placements.flatMap(({ n, sizes }) =>
      (own?.values ?? [n]).map(value => ({ n, sizes: { ...sizes, [name]: value } })),
    )
  }
  return placements
}
