import { useMemo } from 'react'
import type { SweepView } from '../store/record'
import { widthLook } from '../store/series'
import { compareSets, trialsDiffer } from './captions'
import { Figure } from './Figure'
import type { PlotCurve } from './Plot'
import { ScaleSwitch } from './ScaleSwitch'
import { type Axis, boundPoints, plotSeries, shownClaim, timeOf } from './series'
import { drawReading, findRead, heldSize, planAxes } from './shared'

const HEIGHT = 300

/** Operations against the size, or against the width at the size read; a claim of time as a toothed hairline. */
export function OperationsFigure(props: {
  readonly view: SweepView
  readonly axis: Axis
  readonly onAxis: (axis: Axis) => void
}) {
  const { view, axis, onAxis } = props
  const { record, reading, scales } = view
  const { charges } = record.setting
  const held = heldSize(view)
  const series = useMemo(
    () => plotSeries(record, axis, held, tally => timeOf(tally, charges)),
    [record, axis, held, charges],
  )
  const facts = useMemo(() => {
    const compared = compareSets(record, result =>
      meanTime(result.trials.map(({ tally }) => timeOf(tally, charges))),
    )
    const differ = trialsDiffer(record, (result, trial) => timeOf(result.trials[trial]!.tally, charges))
    return differ
      ? `${compared} Means of ${record.setting.trials} trials, with the least and the most.`.trim()
      : compared
  }, [record, charges])
  const claim = useMemo(() => shownClaim(record, 'time'), [record])
  const readPoint = reading && record.points[reading.point]
  const bounded = series.find(
    each => each.set === readPoint?.set && (axis === 'w' || each.width === readPoint.widthChoice),
  )
  const curves = useMemo<PlotCurve[]>(() => {
    if (claim === undefined || !bounded) return []
    const colour = bounded.width === undefined ? 'var(--ink2)' : `var(--${widthLook(bounded.width).colour})`
    const points = boundPoints(record, bounded, claim)
    return points.length > 0 ? [{ key: 'claim', label: 'claim', points, kind: 'claim', colour }] : []
  }, [record, bounded, claim])
  const line = claim === undefined ? undefined : record.program.routine.claims[claim]?.span.line
  const size = record.program.routine.sizes[0]
  return (
    <Figure
      view={view}
      number={1}
      title={axis === 'n' ? `Operations against ${size ?? 'n'}` : 'Operations against w'}
      head={
        <>
          Operations against{' '}
          <button
            type="button"
            className="slot"
            aria-label={`Axis: ${axis}; change it`}
            onClick={() => onAxis(axis === 'n' ? 'w' : 'n')}
          >
            <var>{axis === 'n' ? (size ?? 'n') : 'w'}</var>
          </button>
          {axis === 'w' && size !== undefined && ` at ${size} = ${held}`},{' '}
          <ScaleSwitch
            name="Operations"
            scale={scales.operations}
            onScale={operations => view.onScales({ ...scales, operations })}
          />{' '}
          over{' '}
          <ScaleSwitch
            name={axis === 'n' ? 'Size' : 'Width'}
            scale={axis === 'n' ? scales.n : scales.w}
            onScale={scale => view.onScales(axis === 'n' ? { ...scales, n: scale } : { ...scales, w: scale })}
          />
          .
        </>
      }
      sentence={
        <>
          {facts}
          {curves.length > 0 &&
            ` Toothed: the time claim of line ${line}${axis === 'n' ? ` at w = ${readPoint?.width}` : ''}.`}
        </>
      }
      height={HEIGHT}
      quantity="operations"
      series={series}
      plot={width => {
        const read = findRead(view, series)
        return {
          curves,
          ...planAxes(
            view,
            axis,
            series,
            { width, height: HEIGHT },
            {
              scale: scales.operations,
              more: curves.flatMap(curve => curve.points.map(point => point.y)),
            },
          ),
          letter: axis === 'n' ? (size ?? 'n') : 'w',
          reading: drawReading(view, axis, read),
        }
      }}
    />
  )
}

function meanTime(times: readonly number[]): number {
  return times.reduce((sum, time) => sum + time, 0) / times.length
}
