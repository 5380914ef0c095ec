import { useMemo } from 'react'
import type { SweepView } from '../store/record'
import { Figure } from './Figure'
import { type Axis, claimVerdict, type Measure, plotSeries, shownClaim, timeOf } from './series'
import { drawReading, findRead, heldSize, planAxes } from './shared'

const HEIGHT = 216

/** Operations over the time claim, which forbids what lies above 1; without a claim of time, operations a word of input. */
export function RatioFigure({ view, axis }: { readonly view: SweepView; readonly axis: Axis }) {
  const { record } = view
  const { charges } = record.setting
  const held = heldSize(view)
  const claim = useMemo(() => shownClaim(record, 'time'), [record])
  const size = record.program.routine.sizes[0]
  const series = useMemo(() => {
    const overClaim: Measure = (tally, result) => {
      const verdict = claim === undefined ? undefined : claimVerdict(result, claim)
      if (verdict?.ratio === undefined || !verdict.count) return verdict?.ratio
      // The verdict's ratio is that of its own trial's count; the others have the same bound.
      return (verdict.ratio * timeOf(tally, charges)) / verdict.count
    }
    const overSize: Measure = (tally, { point }) => (point.n > 0 ? timeOf(tally, charges) / point.n : undefined)
    return plotSeries(record, axis, held, claim === undefined ? overSize : overClaim)
  }, [record, axis, held, charges, claim])
  const line = claim === undefined ? undefined : record.program.routine.claims[claim]?.span.line
  const title =
    claim === undefined ? `Operations over ${size ?? 'n'}` : `Operations over the time claim of line ${line}`
  return (
    <Figure
      view={view}
      number={2}
      title={title}
      head={
        claim === undefined ? (
          <>
            Operations over <var>{size ?? 'n'}</var>.
          </>
        ) : (
          `Operations over the time claim of line ${line}.`
        )
      }
      sentence={claim === undefined ? 'No time is claimed.' : 'Above 1 it is broken.'}
      height={HEIGHT}
      quantity={title}
      series={series}
      plot={width => {
        const read = findRead(view, series)
        const reading = drawReading(view, axis, read)
        return {
          ...planAxes(
            view,
            axis,
            series,
            { width, height: HEIGHT },
            {
              scale: 'linear',
              fromZero: true,
              more: claim === undefined ? [] : [1.1],
            },
          ),
          letter: axis === 'n' ? (size ?? 'n') : 'w',
          reading: reading && read ? { ...reading, figure: read.y.toPrecision(4) } : reading,
          ...(claim === undefined ? {} : { forbiddenAbove: 1 }),
        }
      }}
    />
  )
}
