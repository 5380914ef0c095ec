import { countOf } from '../store/point-words'
import { durationWords, type Standing, sentenceOf, standingOf } from '../store/standing'
import { isStale, type WorkbenchState } from '../store/state'
import { obstacle } from '../store/sweeping'
import { useWorkbench, useWorkbenchState } from '../use'

/** What the sweep is at, and the one thing to do about it. */
export function Status() {
  const workbench = useWorkbench()
  const { record, checked, draft, settingRead } = useWorkbenchState(({ record, checked, draft, settingRead }) => ({
    record,
    checked,
    draft,
    settingRead,
  }))
  const standing = record && standingOf(record)
  const running = record?.status === 'running'
  const stale = isStale({ record, checked, draft, settingRead })
  const wall = running ? undefined : obstacle({ checked, draft, settingRead })

  return (
    <div className="status">
      <div className="status-words">
        {wall ? (
          <p className="big">{wall.text}</p>
        ) : (
          standing && <p className="big">{headline(standing, record)}</p>
        )}
        {wall && record && stale && <p>Figures below are from the draft before.</p>}
        {!wall && stale && !running && <p>The draft or the setting has changed since.</p>}
        {!wall && !stale && standing && <p className="reason">{detail(standing, record)}</p>}
        {!wall && !record && <p className="big">Nothing is counted yet.</p>}
      </div>
      <div className="buttons">
        {running && standing ? (
          <button type="button" className="go plain" onClick={() => workbench.cancel()}>
            Cancel, keep {countOf(standing.settled, 'point')}
          </button>
        ) : wall ? (
          wall.line !== undefined && (
            <button type="button" className="go plain" onClick={() => workbench.goToLine(wall.line ?? 1)}>
              Go to line {wall.line}
            </button>
          )
        ) : (
          <button type="button" className={record && !stale ? 'go plain' : 'go'} onClick={() => workbench.sweep()}>
            {record && !stale ? 'Run again' : 'Run the sweep'}
          </button>
        )}
      </div>
      <p className="sr" role="status">
        {wall?.text ?? spoken(record, standing)}
      </p>
    </div>
  )
}

type Record_ = NonNullable<WorkbenchState['record']>

function headline({ points, settled, counted, tallies }: Standing, { status, elapsed }: Record_): string {
  const time = durationWords(elapsed)
  switch (status) {
    case 'running':
      return `${settled} of ${countOf(points, 'point')}, ${countOf(tallies, 'tally')}.`
    case 'done':
      return `${counted} of ${countOf(points, 'point')}, ${countOf(tallies, 'tally')}, ${time}.`
    case 'cancelled':
      return `Cancelled: ${counted} of ${countOf(points, 'point')}, ${countOf(tallies, 'tally')}, ${time}.`
    case 'crashed':
      return `The sweep broke off: ${counted} of ${countOf(points, 'point')} stand.`
  }
}

function detail({ reasons, points, settled }: Standing, { status, crash, elapsed }: Record_): string {
  if (status === 'crashed') return `A fault of this page's, not of the draft: ${crash}`
  const [first, ...others] = reasons
  if (first) {
    const how = first.failed ? 'failed' : first.count === 1 ? 'is not run' : 'are not run'
    return `${countOf(first.count, 'point')} ${how}: ${sentenceOf(first.reason)}${others.length > 0 ? ' More below the grid.' : ''}`
  }
  if (status === 'running') return `${durationWords(elapsed)} so far.`
  if (status === 'cancelled') return `${countOf(points - settled, 'point')} were not reached.`
  return 'Unit operations: not cycles, not seconds.'
}

/** What a screen reader is told: beginnings and ends, not every step. */
function spoken(record: Record_ | undefined, standing: Standing | undefined): string {
  if (!record || !standing) return ''
  return record.status === 'running'
    ? `Sweeping ${countOf(standing.points, 'point')}.`
    : `${headline(standing, record)} ${detail(standing, record)}`
}
