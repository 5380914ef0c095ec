import { memo, useState } from 'react'
import type { PointResult } from '../../sweep/result'
import { printWidth } from '../../sweep/widths'
import { PointName } from '../draft/ReadingSlot'
import { binaryExponent, SizeValue } from '../marks/Count'
import { CrossKey, DiscKey, MarkerKey } from '../marks/Marker'
import { crossPath } from '../marks/shape'
import { countOf, pointWords } from '../store/point-words'
import { type PointOutcome, pointOutcome, type Reading, type SweepRecord } from '../store/record'
import { type Reason, sentenceOf, standingOf } from '../store/standing'
import { isStale } from '../store/state'
import { useWorkbench, useWorkbenchState } from '../use'
import { type Arrangement, arrange, step } from './arrangement'

/** Past this many points single marks say nothing any more: the table of points has them. */
const MOST_CELLS = 4000

const OUTCOME_WORDS: Readonly<Record<PointOutcome, string>> = {
  waiting: 'waiting',
  holds: 'holds',
  broken: 'broken',
  undecided: 'undecided',
  refused: 'not run',
  failed: 'failed',
}

/** Progress, verdicts and choice of the reading point in one. */
export function GridSection() {
  const { record, reading } = useWorkbenchState(state => ({ record: state.record, reading: state.reading }))
  const stale = useWorkbenchState(isStale)
  return (
    <section id="grid" className={stale ? 'grid-section is-stale' : 'grid-section'} aria-label="Grid">
      <h2>
        <b className="run-in">Grid.</b> {record ? <Legend record={record} /> : 'No point is counted yet.'}
      </h2>
      {record && record.points.length <= MOST_CELLS && <Points record={record} reading={reading} />}
      {record && record.points.length > MOST_CELLS && (
        <p>{record.points.length} points are too many to mark one by one; the table of points has them.</p>
      )}
    </section>
  )
}

function Legend({ record }: { readonly record: SweepRecord }) {
  const outcomes = new Set(record.results.map(pointOutcome))
  if (record.status === 'running') return <>{standingOf(record).counted} points counted</>
  const parts = [
    outcomes.has('broken') && (
      <span key="broken" className="together">
        <CrossKey />
        broken
      </span>
    ),
    outcomes.has('holds') && (
      <span key="holds" className="together">
        <DiscKey />
        {record.program.routine.claims.length + record.program.routine.checks.length > 0 ? 'holds' : 'counted'}
      </span>
    ),
    outcomes.has('undecided') && <span key="undecided">? undecided</span>,
    (outcomes.has('refused') || outcomes.has('failed')) && <span key="refused">– not run</span>,
    outcomes.has('waiting') && <span key="waiting">○ not reached</span>,
  ].filter(part => part !== false)
  return parts.map((part, place) => [place > 0 && ', ', part])
}

function Points({ record, reading }: { readonly record: SweepRecord; readonly reading: Reading | undefined }) {
  const workbench = useWorkbench()
  const [pointed, setPointed] = useState<number>()
  const arrangement = arrange(record)
  const { rows, columns } = arrangement
  const current = record.status === 'running' ? record.results.indexOf(undefined) : -1
  const focusable = reading?.point ?? 0

  function read(index: number) {
    const trial = Math.min(reading?.trial ?? 0, record.setting.trials - 1)
    workbench.read({ point: index, trial })
  }

  return (
    <>
      {/* biome-ignore lint/a11y/useSemanticElements: a table of marks that is moved through by arrow keys is a grid */}
      <div
        className="points"
        role="grid"
        aria-label="Points: arrow keys move the reading"
        style={{ '--columns': columns } as React.CSSProperties}
        onMouseLeave={() => setPointed(undefined)}
        onKeyDown={event => {
          const to = step(event.key, focusable, arrangement)
          if (to === undefined) return
          event.preventDefault()
          read(to)
          event.currentTarget.querySelector<HTMLElement>(`[data-point="${to}"]`)?.focus()
        }}
      >
        {rows.map(({ set, width, first }, place) => (
          // biome-ignore lint/a11y/useFocusableInteractive: the cells take the focus
          // biome-ignore lint/a11y/useSemanticElements: see above
          <div
            key={first}
            role="row"
            className={place > 0 && rows[place - 1]?.set !== set ? 'points-row apart' : 'points-row'}
          >
            <RowHead width={width} set={set} label={printWidth(record.setting.widths[width]!)} />
            {Array.from({ length: columns }, (_, column) => first + column).map(index => (
              <Cell
                key={index}
                index={index}
                label={`${pointWords(record.points[index]!)}: ${OUTCOME_WORDS[pointOutcome(record.results[index])]}`}
                outcome={pointOutcome(record.results[index])}
                isNow={index === current}
                isRead={index === reading?.point}
                isFocusable={index === focusable}
                onRead={read}
                onPoint={setPointed}
              />
            ))}
          </div>
        ))}
        <ColumnHeads record={record} arrangement={arrangement} />
      </div>
      <Remark record={record} index={pointed ?? reading?.point} />
      <Reasons reasons={standingOf(record).reasons} />
    </>
  )
}

function RowHead(props: {
  readonly width: number
  readonly set: SweepRecord['setting']['sets'][number]
  readonly label: string
}) {
  return (
    // biome-ignore lint/a11y/useFocusableInteractive: a heading takes no focus
    // biome-ignore lint/a11y/useSemanticElements: see the grid
    <span className="row-head" role="rowheader">
      <MarkerKey width={props.width} set={props.set} />
      <code title={props.label}>{props.label}</code>
    </span>
  )
}

interface CellProps {
  readonly index: number
  readonly label: string
  readonly outcome: PointOutcome
  readonly isNow: boolean
  readonly isRead: boolean
  readonly isFocusable: boolean
  readonly onRead: (index: number) => void
  readonly onPoint: (index: number | undefined) => void
}

const Cell = memo(
  function Cell({ index, label, outcome, isNow, isRead, isFocusable, onRead, onPoint }: CellProps) {
    return (
      // biome-ignore lint/a11y/useSemanticElements: see the grid
      // biome-ignore lint/a11y/useKeyWithClickEvents: the grid takes the keys
      <div
        role="gridcell"
        className="point"
        data-point={index}
        data-outcome={outcome}
        tabIndex={isFocusable ? 0 : -1}
        aria-selected={isRead}
        aria-label={label}
        onClick={() => onRead(index)}
        onMouseEnter={() => onPoint(index)}
        onFocus={() => onPoint(index)}
        onBlur={() => onPoint(undefined)}
      >
        <svg viewBox="-8 -8 16 16" width="16" height="16" aria-hidden="true">
          <Mark outcome={outcome} isNow={isNow} />
        </svg>
      </div>
    )
  },
  (before, after) =>
    before.label === after.label &&
    before.outcome === after.outcome &&
    before.isNow === after.isNow &&
    before.isRead === after.isRead &&
    before.isFocusable === after.isFocusable,
)

function Mark({ outcome, isNow }: { readonly outcome: PointOutcome; readonly isNow: boolean }) {
  switch (outcome) {
    case 'waiting':
      return <circle r="2.9" className={isNow ? 'mark-now' : 'mark-waiting'} />
    case 'holds':
      return <circle r="3.2" className="mark-holds" />
    case 'broken':
      return <path d={crossPath(3.6)} className="mark-broken" />
    case 'undecided':
      return (
        <text className="mark-undecided" textAnchor="middle" y="4">
          ?
        </text>
      )
    case 'refused':
      return <path d="M-3.500 0H3.500" className="mark-refused" />
    case 'failed':
      return <path d="M-3.500 0H3.500M0 -3.500V-1.500" className="mark-failed" />
  }
}

/** Pixels of a column and of a digit in its heading; of the exponents of powers, and of the 2 before them. */
const COLUMN = 22
const DIGIT = 7
const POWER = 20
const MOST_HEADS = 12

function ColumnHeads({ record, arrangement }: { readonly record: SweepRecord; readonly arrangement: Arrangement }) {
  const heads = record.points.slice(0, arrangement.columns).map(({ n }) => n)
  if (Object.keys(record.points[0]?.sizes ?? {}).length === 0) return null
  const powers = heads.every(n => binaryExponent(n) !== undefined)
  const widest = powers ? POWER : Math.max(...heads.map(n => String(n).length * DIGIT))
  const every = Math.max(1, Math.ceil((widest + DIGIT) / COLUMN), Math.ceil(arrangement.columns / MOST_HEADS))
  return (
    <div className="points-row points-heads" aria-hidden="true">
      <span className="row-head">
        <i>{Object.keys(record.points[0]?.sizes ?? {})[0]}</i>
      </span>
      {heads.map((n, column) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: columns of several sizes may share their first
        <span key={column}>
          {column % every === 0 && (
            <span>
              <SizeValue of={n} />
            </span>
          )}
        </span>
      ))}
    </div>
  )
}

/** What is to be said of the point under the pointer, or of the one that is read. */
function Remark({ record, index }: { readonly record: SweepRecord; readonly index: number | undefined }) {
  const point = index === undefined ? undefined : record.points[index]
  if (!point || index === undefined) return <p className="remark points-remark" />
  const result = record.results[index]
  return (
    <p className="remark points-remark">
      <PointName point={point} />: {remarkOf(result)}
    </p>
  )
}

function remarkOf(result: PointResult | undefined): string {
  if (!result) return 'waiting.'
  if (result.status === 'refused') return `not run. ${sentenceOf(result.reason)}`
  if (result.status === 'failed') return `failed. ${sentenceOf(result.reason)}`
  const broken = result.verdicts.filter(({ outcome }) => outcome === 'broken')
  if (broken.length > 0)
    return `broken at ${broken.length === 1 ? 'line' : 'lines'} ${broken.map(({ line }) => line).join(', ')}.`
  return result.verdicts.length > 0 ? 'claims and checks hold.' : 'counted.'
}

/** Reasons past this many stand in the table of points alone. */
const MOST_REASONS = 4

function Reasons({ reasons }: { readonly reasons: readonly Reason[] }) {
  if (reasons.length === 0) return null
  return (
    <ul className="reasons" aria-label="Points that are not run">
      {reasons.slice(0, MOST_REASONS).map(({ reason, count, failed }) => (
        <li key={reason}>
          <span aria-hidden="true">–</span> {countOf(count, 'point')} {failed ? 'failed' : 'not run'}:{' '}
          {sentenceOf(reason)}
        </li>
      ))}
      {reasons.length > MOST_REASONS && (
        <li>{reasons.length - MOST_REASONS} more reasons in the table of points.</li>
      )}
    </ul>
  )
}
