import { useEffect, useRef, useState } from 'react'
import type { GridPoint } from '../../sweep/result'
import { printWidth } from '../../sweep/widths'
import { SizeValue } from '../marks/Count'
import { Slot } from '../setting/Slot'
import { SET_WORDS } from '../store/point-words'
import type { Reading, SweepRecord } from '../store/record'
import { useWorkbench, useWorkbenchState } from '../use'

/** "Read at n = 4096, w = 16, without multiplication": the reading point, and an editor for it. `opens` its sentence. */
export function ReadingSlot({ opens }: { readonly opens: boolean }) {
  const workbench = useWorkbench()
  const { record, reading } = useWorkbenchState(state => ({ record: state.record, reading: state.reading }))
  const [before, setBefore] = useState<Reading>()
  if (!record || !reading) return null
  const point = record.points[reading.point]
  if (!point) return null
  const isOpen = before !== undefined
  function close(restore: boolean) {
    if (restore && before) workbench.read(before)
    setBefore(undefined)
    document.getElementById('slot-reading')?.focus()
  }
  return (
    <span className="reading">
      {opens ? 'Read' : 'read'} at{' '}
      <Slot
        id="slot-reading"
        opens="change the point that is read"
        isOpen={isOpen}
        onOpen={() => setBefore(reading)}
      >
        <PointName point={point} />
        {record.setting.trials > 1 && `, trial ${reading.trial + 1}`}
      </Slot>
      {isOpen && <ReadingEditor record={record} point={point} reading={reading} onClose={close} />}
    </span>
  )
}

/** A point as words, sizes as powers of two where they are. */
export function PointName({ point }: { readonly point: GridPoint }) {
  return (
    <>
      {Object.entries(point.sizes).map(([name, value]) => (
        <span key={name}>
          <i>{name}</i> = <SizeValue of={value} />,{' '}
        </span>
      ))}
      <i>w</i> = {point.width}, {SET_WORDS[point.set]}
    </>
  )
}

interface ReadingEditorProps {
  readonly record: SweepRecord
  readonly point: GridPoint
  readonly reading: Reading
  readonly onClose: (restore: boolean) => void
}

function sizesKey(point: GridPoint): string {
  return Object.values(point.sizes).join()
}

/** Picks a reading by its parts; it takes effect at once. */
function ReadingEditor({ record, point, reading, onClose }: ReadingEditorProps) {
  const workbench = useWorkbench()
  const first = useRef<HTMLSelectElement>(null)
  useEffect(() => first.current?.focus(), [])
  const { points, setting } = record
  function read(wanted: Partial<Record<'sizes' | 'width' | 'set', string>>) {
    const sizes = wanted.sizes ?? sizesKey(point)
    const width = wanted.width ?? String(point.widthChoice)
    const set = wanted.set ?? point.set
    const found = points.find(
      each => sizesKey(each) === sizes && String(each.widthChoice) === width && each.set === set,
    )
    if (found) workbench.read({ point: found.index, trial: reading.trial })
  }
  const placements = new Map(points.map(each => [sizesKey(each), each]))
  return (
    <div
      className="editor reading-editor"
      role="dialog"
      aria-label="Point that is read"
      onKeyDown={event => {
        if (event.key === 'Escape') onClose(true)
        if (event.key === 'Enter') onClose(false)
      }}
    >
      <div className="reading-fields">
        {placements.size > 1 && (
          <label>
            <span>{Object.keys(point.sizes).join(', ')}</span>
            <select
              ref={first}
              value={sizesKey(point)}
              onChange={event => read({ sizes: event.currentTarget.value })}
            >
              {[...placements].map(([key, each]) => (
                <option key={key} value={key}>
                  {Object.values(each.sizes).join(', ')}
                </option>
              ))}
            </select>
          </label>
        )}
        <label>
          <span>w</span>
          <select value={point.widthChoice} onChange={event => read({ width: event.currentTarget.value })}>
            {setting.widths.map((choice, place) => (
              <option key={printWidth(choice)} value={place}>
                {printWidth(choice)}
              </option>
            ))}
          </select>
        </label>
        <label>
          <span>set</span>
          <select value={point.set} onChange={event => read({ set: event.currentTarget.value })}>
            {setting.sets.map(set => (
              <option key={set} value={set}>
                {SET_WORDS[set]}
              </option>
            ))}
          </select>
        </label>
        {setting.trials > 1 && (
          <label>
            <span>trial</span>
            <select
              value={reading.trial}
              onChange={event => workbench.read({ point: point.index, trial: Number(event.currentTarget.value) })}
            >
              {Array.from({ length: setting.trials }, (_, trial) => trial).map(trial => (
                <option key={trial} value={trial}>
                  {trial + 1}
                </option>
              ))}
            </select>
          </label>
        )}
      </div>
      <div className="buttons">
        <button type="button" className="go" onClick={() => onClose(false)}>
          Read here
        </button>
        <button type="button" className="leave" onClick={() => onClose(true)}>
          <kbd>Esc</kbd> <span>leaves it as it was</span>
        </button>
      </div>
    </div>
  )
}
