import { useMemo, useState } from 'react'
import type { SweepView } from '../store/record'
import { isStale } from '../store/state'
import { useTheme, useWorkbench, useWorkbenchState } from '../use'
import { OperationsFigure } from './OperationsFigure'
import { RatioFigure } from './RatioFigure'
import { SpaceFigure } from './SpaceFigure'
import type { Axis } from './series'
import '../style/figures.css'

/** The figures of the latest sweep. */
export function FiguresSection() {
  const workbench = useWorkbench()
  const theme = useTheme()
  const stale = useWorkbenchState(isStale)
  const { record, reading, scales } = useWorkbenchState(state => ({
    record: state.record,
    reading: state.reading,
    scales: state.scales,
  }))
  const [axis, setAxis] = useState<Axis>('n')
  const view = useMemo<SweepView | undefined>(
    () =>
      record && {
        record,
        reading,
        scales,
        theme,
        stale,
        onRead: next => workbench.read(next),
        onScales: next => workbench.takeScales(next),
      },
    [record, reading, scales, theme, stale, workbench],
  )
  return (
    <section id="figures" className={stale ? 'figures is-stale' : 'figures'} aria-label="Figures">
      {!view && (
        <p>
          <b className="run-in">Figures.</b> No sweep has run yet.
        </p>
      )}
      {view && (
        <>
          <OperationsFigure view={view} axis={axis} onAxis={setAxis} />
          <div className="figure-pair">
            <RatioFigure view={view} axis={axis} />
            <SpaceFigure view={view} axis={axis} />
          </div>
        </>
      )}
    </section>
  )
}
