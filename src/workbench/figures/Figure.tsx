import { type ReactNode, useLayoutEffect, useRef, useState } from 'react'
import { type FigureRow, stateModel, UNIT_COST_NOTE, writeFigureCsv } from '../../sheet'
import { downloadText } from '../download'
import { arrange, step } from '../grid/arrangement'
import type { SweepView } from '../store/record'
import { savePng, saveSvg } from './export-figure'
import { Plot, type PlotProps } from './Plot'
import { type PlotPoint, type PlotSeries, plotRows } from './series'

export interface FigureProps {
  readonly view: SweepView
  readonly number: number
  /** Plain words of the caption's head, for exports and for those who cannot see the figure. */
  readonly title: string
  readonly head: ReactNode
  readonly sentence: ReactNode
  readonly height: number
  /** What the drawn series show, for the CSV. */
  readonly quantity: string
  readonly series: readonly PlotSeries[]
  readonly moreRows?: readonly FigureRow[]
  /** Draws at a width in pixels. */
  readonly plot: (width: number) => Omit<PlotProps, 'width' | 'height' | 'series' | 'onPick' | 'onKeyDown' | 'says'>
}

/** A numbered figure: caption, drawing, and what can be taken away of it. */
export function Figure(props: FigureProps) {
  const { view, number, title, series, height } = props
  const frame = useRef<HTMLDivElement>(null)
  const width = useWidth(frame)
  const [trouble, setTrouble] = useState('')
  const { record, reading, onRead } = view
  const file = `${record.program.routine.name}-figure-${number}`
  const text = {
    title: `Fig. ${number}. ${title}: ${record.program.routine.name}`,
    description: `${stateModel(record.setting, record.program.routine.sizes)} ${UNIT_COST_NOTE}`,
  }
  const drawing = () => frame.current?.querySelector<SVGSVGElement>('svg.recharts-surface')
  const read = (index: number) =>
    onRead({ point: index, trial: Math.min(reading?.trial ?? 0, record.setting.trials - 1) })
  const save = (how: (drawing: SVGSVGElement) => void | Promise<void>) => {
    const drawn = drawing()
    if (!drawn) return setTrouble('There is no drawing to save yet.')
    setTrouble('')
    Promise.resolve(how(drawn)).catch((error: Error) => setTrouble(`Not saved: ${error.message}`))
  }

  return (
    <figure className="plate" aria-labelledby={`figure-${number}`}>
      <figcaption id={`figure-${number}`}>
        <b className="run-in">Fig. {number}.</b> {props.head} <span className="remark">{props.sentence}</span>
      </figcaption>
      {/* biome-ignore lint/a11y/useSemanticElements: a fieldset would bring a frame */}
      <div className="takes" role="group" aria-label={`Save figure ${number}`}>
        <button type="button" className="small" onClick={() => save(drawn => saveSvg(file, drawn, text))}>
          SVG
        </button>
        <button type="button" className="small" onClick={() => save(drawn => savePng(file, drawn, text))}>
          PNG
        </button>
        <button
          type="button"
          className="small"
          onClick={() =>
            downloadText(
              `${file}.csv`,
              writeFigureCsv([...plotRows(record, series, props.quantity), ...(props.moreRows ?? [])]),
              'text/csv',
            )
          }
        >
          CSV
        </button>
      </div>
      <div ref={frame} className="plate-frame" style={{ minHeight: height }}>
        {series.length === 0 && <p className="remark">No point is counted yet.</p>}
        {series.length > 0 && width > 0 && (
          <Plot
            {...props.plot(width)}
            width={width}
            height={height}
            series={series}
            says={`${title}. ${summary(series)} The table of points has every figure; arrow keys move the reading point.`}
            onPick={(point: PlotPoint) => read(point.index)}
            onKeyDown={event => {
              const to = step(event.key, reading?.point ?? 0, arrange(record))
              if (to === undefined) return
              event.preventDefault()
              read(to)
            }}
          />
        )}
      </div>
      {trouble !== '' && (
        <p className="remark" role="alert">
          {trouble}
        </p>
      )}
    </figure>
  )
}

function summary(series: readonly PlotSeries[]): string {
  const points = series.reduce((sum, each) => sum + each.points.length, 0)
  const values = series.flatMap(each => each.points.map(point => point.y))
  if (values.length === 0) return 'No points.'
  return `${points} points, from ${Math.min(...values)} to ${Math.max(...values)}.`
}

/** The width of an element in whole pixels, as it changes; figures are drawn anew at each, never scaled. */
function useWidth(element: React.RefObject<HTMLElement | null>): number {
  const [width, setWidth] = useState(0)
  useLayoutEffect(() => {
    const watched = element.current
    if (!watched) return
    const measure = () => setWidth(Math.floor(watched.getBoundingClientRect().width))
    measure()
    const observer = new ResizeObserver(measure)
    observer.observe(watched)
    return () => observer.disconnect()
  }, [element])
  return width
}
