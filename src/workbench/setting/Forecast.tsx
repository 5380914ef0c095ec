import { gridPoints } from '../../sweep/grid'
import type { Setting } from '../../sweep/setting'
import { Count } from '../marks/Count'
import { useWorkbenchState } from '../use'

/** What the setting would run. */
export function Forecast({ setting }: { readonly setting: Setting | undefined }) {
  const program = useWorkbenchState(state => state.checked.program)
  if (!setting || !program) return null
  const [first] = program.routine.sizes
  if (first !== undefined && !setting.sizes[first]) return null
  const points = gridPoints(setting, program)
  // The machine's own need: an index fits a word.
  const large = points.filter(
    ({ width, sizes }) => width > 0 && width < 53 && Object.values(sizes).some(size => size >= 2 ** width),
  )
  return (
    <p className="forecast">
      <Count of={points.length} /> {points.length === 1 ? 'point' : 'points'},{' '}
      <Count of={points.length * setting.trials} /> {points.length * setting.trials === 1 ? 'tally' : 'tallies'}.
      {large.length > 0 && (
        <>
          {' '}
          <Count of={large.length} /> of the points will not be run: {first} &lt; 2<sup>w</sup> fails there.
        </>
      )}
    </p>
  )
}
