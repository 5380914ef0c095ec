import { useEffect, useMemo, useRef, useState } from 'react'
import { writeCsv } from '../../sweep/csv'
import type { PointResult } from '../../sweep/result'
import { downloadText } from '../download'
import { Count } from '../marks/Count'
import { MarkerKey } from '../marks/Marker'
import { countOf } from '../store/point-words'
import type { SweepRecord } from '../store/record'
import { isStale } from '../store/state'
import { useWorkbench, useWorkbenchState } from '../use'
import { COLUMNS, type Column, OUTCOME_WORDS, type PointRow, pointRows, sortRows } from './point-rows'

const ROW_HEIGHT = 28
/** Rows drawn above and below those in sight. */
const SPARE_ROWS = 10
const TALLEST = 420

/** Every point of the sweep in figures, also those that were not run. */
export function PointsSection() {
  const stale = useWorkbenchState(isStale)
  const record = useWorkbenchState(state => state.record)
  const [open, setOpen] = useState(false)
  if (!record) return null
  return (
    <section id="points" className={stale ? 'table is-stale' : 'table'} aria-label="Points">
      <h2>
        <b className="run-in">Points.</b>{' '}
        <button type="button" className="slot" aria-expanded={open} onClick={() => setOpen(!open)}>
          {open ? 'Hide the table' : `Show the table of ${countOf(record.points.length, 'point')}`}
        </button>
        <button type="button" className="small csv" onClick={() => saveCsv(record)}>
          CSV
        </button>
      </h2>
      {open && <PointTable record={record} />}
    </section>
  )
}

function saveCsv(record: SweepRecord): void {
  const { setting, program, text, status } = record
  const points = record.results.filter((result): result is PointResult => result !== undefined)
  const { name } = program.routine
  const result = { setting, routine: name, text, points, complete: status === 'done' }
  downloadText(`${name}-points.csv`, writeCsv(result), 'text/csv')
}

function PointTable({ record }: { readonly record: SweepRecord }) {
  const workbench = useWorkbench()
  const read = useWorkbenchState(state => state.reading?.point)
  const [sort, setSort] = useState<{ column: Column; down: boolean }>()
  const rows = useMemo(() => {
    const all = pointRows(record)
    return sort ? sortRows(all, sort.column, sort.down) : all
  }, [record, sort])
  const box = useRef<HTMLDivElement>(null)
  const [first, setFirst] = useState(0)
  const shown = Math.ceil(TALLEST / ROW_HEIGHT) + 2 * SPARE_ROWS
  const from = Math.max(0, Math.min(first - SPARE_ROWS, rows.length - shown))
  const window = rows.slice(from, from + shown)
  // Another order starts at its top.
  // biome-ignore lint/correctness/useExhaustiveDependencies: runs when the order changes
  useEffect(() => {
    box.current?.scrollTo({ top: 0 })
  }, [sort])
  const size = record.program.routine.sizes[0] ?? 'n'

  return (
    <div
      className="scroll point-table"
      ref={box}
      style={{ maxHeight: TALLEST }}
      onScroll={event => setFirst(Math.floor(event.currentTarget.scrollTop / ROW_HEIGHT))}
    >
      <table className="figures-table" aria-rowcount={rows.length + 1}>
        <thead>
          <tr>
            {COLUMNS.map(column => (
              <th
                key={column}
                scope="col"
                aria-sort={sort?.column === column ? (sort.down ? 'descending' : 'ascending') : 'none'}
              >
                <button
                  type="button"
                  onClick={() =>
                    setSort({
                      column,
                      down: sort?.column === column ? !sort.down : column !== 'n' && column !== 'w',
                    })
                  }
                >
                  {column === 'n' ? size : column}
                  {sort?.column === column && <span aria-hidden="true">{sort.down ? ' ↓' : ' ↑'}</span>}
                </button>
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {from > 0 && <tr style={{ height: from * ROW_HEIGHT }} />}
          {window.map((row, at) => (
            <Row
              key={row.point.index}
              row={row}
              place={from + at}
              isRead={row.point.index === read}
              onRead={() => workbench.read({ point: row.point.index, trial: 0 })}
            />
          ))}
          {from + shown < rows.length && <tr style={{ height: (rows.length - from - shown) * ROW_HEIGHT }} />}
        </tbody>
      </table>
    </div>
  )
}

function Row(props: {
  readonly row: PointRow
  readonly place: number
  readonly isRead: boolean
  readonly onRead: () => void
}) {
  const { row, place, isRead, onRead } = props
  const { point, outcome, reason } = row
  const sizes = Object.values(point.sizes)
  return (
    <tr className={isRead ? 'is-read' : undefined} aria-rowindex={place + 2} style={{ height: ROW_HEIGHT }}>
      <th scope="row">
        <button type="button" aria-label={`Read n = ${point.n}, w = ${point.width}, ${row.set}`} onClick={onRead}>
          {sizes.length === 0
            ? '–'
            : sizes.map((size, at) => <SizeCell key={Object.keys(point.sizes)[at]} at={at} size={size} />)}
        </button>
      </th>
      <td>
        <MarkerKey width={point.widthChoice} set={point.set} />
        {point.width}
      </td>
      <td className="word">{row.set}</td>
      {row.least === undefined || row.most === undefined || row.mean === undefined ? (
        <td className="word" colSpan={4} title={reason}>
          {reason}
        </td>
      ) : (
        <>
          <td>
            <Count of={row.least} />
          </td>
          <td>{Number.isInteger(row.mean) ? <Count of={row.mean} /> : row.mean.toFixed(1)}</td>
          <td>
            <Count of={row.most} />
          </td>
          <td>
            <Count of={row.working ?? 0} />
          </td>
        </>
      )}
      <td className={outcome === 'broken' ? 'word verdict-broken' : 'word'}>{OUTCOME_WORDS[outcome]}</td>
    </tr>
  )
}

function SizeCell({ at, size }: { readonly at: number; readonly size: number }) {
  return (
    <>
      {at > 0 && ', '}
      <Count of={size} />
    </>
  )
}
