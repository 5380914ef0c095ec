import { standingOf } from '../store/standing'
import { useWorkbenchState } from '../use'

/** The rule under the setting, which fills while a sweep runs. */
export function ProgressRule() {
  const record = useWorkbenchState(state => state.record)
  if (record?.status !== 'running') return <div className="progress" />
  const { settled, points } = standingOf(record)
  return (
    <div
      className="progress is-running"
      role="progressbar"
      aria-label="Sweep"
      aria-valuemin={0}
      aria-valuemax={points}
      aria-valuenow={settled}
    >
      <i style={{ width: `${(100 * settled) / Math.max(1, points)}%` }} />
    </div>
  )
}
