import type { AxisScale, SweepView } from '../store/record'
import type { PlotReading } from './Plot'
import type { Axis, PlotPoint, PlotSeries } from './series'
import { type AxisPlan, plainLabel, planAxis } from './ticks'

/** Height of what stands above and below the plot area, in pixels. */
const FRAME = { across: 50, along: 90 } as const

/** The two axes of a figure over its series and further values. */
export function planAxes(
  view: SweepView,
  axis: Axis,
  series: readonly PlotSeries[],
  size: { readonly width: number; readonly height: number },
  y: { readonly scale: AxisScale; readonly more?: readonly number[]; readonly fromZero?: boolean },
): { x: AxisPlan; y: AxisPlan } {
  const points = series.flatMap(each => each.points)
  const marks = [...new Set(points.map(point => point.x))]
  const values = [...points.flatMap(point => [point.low, point.high]), ...(y.more ?? [])]
  return {
    x: planAxis(marks, axis === 'n' ? view.scales.n : view.scales.w, size.width - FRAME.along, {
      marks,
      along: true,
      digits: axis === 'w',
    }),
    y: planAxis(values, y.scale, size.height - FRAME.across, { fromZero: y.fromZero ?? y.scale === 'linear' }),
  }
}

/** The point read, where it stands among the drawn ones. */
export function findRead(view: SweepView, series: readonly PlotSeries[]): PlotPoint | undefined {
  const at = view.reading?.point
  return at === undefined ? undefined : series.flatMap(each => each.points).find(point => point.index === at)
}

/** The dotted line of the point read. It stands even where the point itself has no figure here. */
export function drawReading(view: SweepView, axis: Axis, read: PlotPoint | undefined): PlotReading | undefined {
  const point = view.reading && view.record.points[view.reading.point]
  if (!point) return undefined
  const x = axis === 'n' ? point.n : point.width
  const name = `${axis === 'n' ? (view.record.program.routine.sizes[0] ?? 'n') : 'w'} = ${x}`
  return { x, name, ...(read ? { y: read.y, figure: plainLabel(read.y) } : {}) }
}

/** The size that figures along w hold fast: that of the point read, else the largest. */
export function heldSize(view: SweepView): number {
  const { record, reading } = view
  const point = reading && record.points[reading.point]
  return point?.n ?? Math.max(0, ...record.points.map(each => each.n))
}
