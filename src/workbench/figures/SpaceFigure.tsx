import { useMemo } from 'react'
import type { Space } from '../../machine/tally'
import type { FigureRow } from '../../sheet'
import type { SweepView } from '../store/record'
import { coincides } from './captions'
import { Figure } from './Figure'
import type { PlotCurve } from './Plot'
import { ScaleSwitch } from './ScaleSwitch'
import { type Axis, boundPoints, type PlotSeries, plotSeries, shownClaim } from './series'
import { drawReading, findRead, heldSize, planAxes } from './shared'

const HEIGHT = 216
const OTHERS = ['input', 'output', 'constants'] as const satisfies readonly (keyof Space)[]

/** Words of space: working words as series, with input, output and constants as dotted lines of the width read. */
export function SpaceFigure({ view, axis }: { readonly view: SweepView; readonly axis: Axis }) {
  const { record, reading, scales } = view
  const held = heldSize(view)
  const all = useMemo(() => plotSeries(record, axis, held, ({ space }) => space.working), [record, axis, held])
  const same = useMemo(
    () => axis === 'n' && coincides(record, result => result.trials[0]?.tally.space.working),
    [record, axis],
  )
  const longest = all.reduce<PlotSeries | undefined>(
    (most, each) => (most && most.points.length >= each.points.length ? most : each),
    undefined,
  )
  const series = same && longest ? [{ ...longest, label: 'working' }] : all
  const readPoint = reading && record.points[reading.point]
  const readSeries =
    all.find(each => each.set === readPoint?.set && (axis === 'w' || each.width === readPoint.widthChoice)) ??
    longest
  const claim = useMemo(() => shownClaim(record, 'space'), [record])
  const others = useMemo(
    () =>
      OTHERS.map(name => ({
        name,
        series: plotSeries(record, axis, held, ({ space }) => space[name]).find(
          each => each.key === readSeries?.key,
        ),
      })).filter(each => each.series?.points.some(point => point.y > 0)),
    [record, axis, held, readSeries?.key],
  )
  const curves: PlotCurve[] = others.map(({ name, series: drawn }) => ({
    key: name,
    label: name,
    points: (drawn?.points ?? []).filter(point => point.y > 0),
    kind: 'plain',
    colour: 'var(--ink2)',
  }))
  if (claim !== undefined && readSeries) {
    const points = boundPoints(record, readSeries, claim)
    if (points.length > 0)
      curves.push({ key: 'claim', label: 'claim', points, kind: 'claim', colour: 'var(--ink2)' })
  }
  const size = record.program.routine.sizes[0]
  const letter = axis === 'n' ? (size ?? 'n') : 'w'
  const moreRows = others.flatMap(({ name, series: drawn }) =>
    (drawn?.points ?? []).map((point): FigureRow => {
      const { n, width, set } = record.points[point.index]!
      return {
        n,
        width,
        set,
        quantity: `${name} words`,
        mean: point.y,
        least: point.low,
        most: point.high,
        verdict: '',
      }
    }),
  )
  return (
    <Figure
      view={view}
      number={3}
      title={`Words of space against ${letter}`}
      head={
        <>
          Words of space against <var>{letter}</var>,{' '}
          <ScaleSwitch name="Words" scale={scales.space} onScale={space => view.onScales({ ...scales, space })} />.
        </>
      }
      sentence={same && all.length > 1 ? 'Working words are the same at every width and set.' : ''}
      height={HEIGHT}
      quantity="working words"
      series={series}
      moreRows={moreRows}
      plot={width => {
        const read = findRead(view, same ? all : series)
        return {
          plainSeries: same,
          curves,
          ...planAxes(
            view,
            axis,
            series,
            { width, height: HEIGHT },
            {
              scale: scales.space,
              more: curves.flatMap(curve => curve.points.map(point => point.y)),
            },
          ),
          letter,
          reading: drawReading(view, axis, read),
        }
      }}
    />
  )
}
