import type { KeyboardEvent } from 'react'
import { CartesianGrid, Line, LineChart, usePlotArea, useXAxisScale, useYAxisScale, XAxis, YAxis } from 'recharts'
import { MarkerShape } from '../marks/Marker'
import { crossPath, markerPath } from '../marks/shape'
import { SET_LOOKS, widthLook } from '../store/series'
import { spreadLabels } from './end-labels'
import type { PlotPoint, PlotSeries } from './series'
import type { AxisPlan, Tick } from './ticks'

/** A further line of a figure: a claim's bound, or words of input. */
export interface PlotCurve {
  readonly key: string
  readonly label: string
  readonly points: readonly { readonly x: number; readonly y: number }[]
  /** `claim`: a hairline with teeth on the side that the claim forbids. `plain`: a dotted line. */
  readonly kind: 'claim' | 'plain'
  /** A CSS colour. */
  readonly colour: string
}

export interface PlotReading {
  readonly x: number
  /** Of the point read; absent where it has no figure here. */
  readonly y?: number
  /** Stands above the dotted line. */
  readonly name: string
  /** Stands beside its foot. */
  readonly figure?: string
}

export interface PlotProps {
  readonly width: number
  readonly height: number
  readonly series: readonly PlotSeries[]
  /** Series in ink with diamonds, where widths and sets coincide. */
  readonly plainSeries?: boolean
  readonly curves?: readonly PlotCurve[]
  readonly x: AxisPlan
  readonly y: AxisPlan
  /** The italic letter at the end of the axis. */
  readonly letter: string
  readonly reading?: PlotReading | undefined
  /** Shades all above this figure: what a claim forbids. */
  readonly forbiddenAbove?: number
  /** What the figure shows, in a sentence, for those who cannot see it. */
  readonly says: string
  readonly onPick: (point: PlotPoint) => void
  readonly onKeyDown: (event: KeyboardEvent) => void
}

const TICK_WIDTH = 48
const LABEL_HEIGHT = 13
const LABEL_CHARACTER = 6.6
/** Past this many points in a series its markers would hide each other. */
const MOST_MARKERS = 60

/** A figure's drawing. Recharts lays out axes and lines; markers, bounds, reading and labels are drawn over its scales. */
export function Plot(props: PlotProps) {
  const { width, height, series, curves = [], x, y } = props
  const labels = [...series.map(each => each.label), ...curves.map(each => each.label)]
  const longest = Math.max(0, ...labels.map(label => label.length))
  const right = Math.min(width * 0.34, longest > 0 ? longest * LABEL_CHARACTER + 26 : 18)
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: arrow keys move the reading point from here
    <div className="plot" role="img" aria-label={props.says} tabIndex={0} onKeyDown={props.onKeyDown}>
      <LineChart
        width={width}
        height={height}
        margin={{ top: 20, right, bottom: 4, left: 0 }}
        accessibilityLayer={false}
        tabIndex={-1}
      >
        <CartesianGrid vertical={false} stroke="var(--rule)" syncWithTicks />
        <XAxis
          type="number"
          dataKey="x"
          scale={x.scale}
          domain={[...x.domain]}
          ticks={x.ticks.map(tick => tick.value)}
          tick={<TickLabel ticks={x.ticks} side="below" />}
          interval={0}
          height={26}
          axisLine={{ stroke: 'var(--edge)' }}
          tickLine={{ stroke: 'var(--edge)' }}
          tickSize={5}
          allowDataOverflow
        />
        <YAxis
          type="number"
          scale={y.scale}
          domain={[...y.domain]}
          ticks={y.ticks.map(tick => tick.value)}
          tick={<TickLabel ticks={y.ticks} side="left" />}
          interval={0}
          width={TICK_WIDTH}
          axisLine={false}
          tickLine={false}
          allowDataOverflow
        />
        <Forbidden above={props.forbiddenAbove} />
        {curves.map(curve => (
          <Curve key={curve.key} curve={curve} />
        ))}
        <ReadingLine reading={props.reading} />
        {series.map(each => (
          <Line
            key={each.key}
            data={[...each.points]}
            dataKey="y"
            type="linear"
            stroke={colourOf(each, props.plainSeries)}
            strokeWidth={1.5}
            strokeDasharray={props.plainSeries ? '' : SET_LOOKS[each.set].dash}
            dot={false}
            activeDot={false}
            isAnimationActive={false}
          />
        ))}
        <Points {...props} />
        <ReadingMark reading={props.reading} />
        <EndLabels {...props} curves={curves} />
        <Letter letter={props.letter} />
      </LineChart>
    </div>
  )
}

function colourOf(series: PlotSeries, plain?: boolean): string {
  if (plain || series.width === undefined) return 'var(--ink)'
  return `var(--${widthLook(series.width).colour})`
}

interface TickLabelProps {
  readonly ticks: readonly Tick[]
  readonly side: 'below' | 'left'
  readonly x?: number
  readonly y?: number
  readonly payload?: { readonly value: number }
}

function TickLabel({ ticks, side, x = 0, y = 0, payload }: TickLabelProps) {
  const tick = ticks.find(each => each.value === payload?.value)
  if (!tick || tick.bare) return null
  return (
    <text
      className="tick"
      x={x}
      y={side === 'below' ? y + 10 : y + 4}
      textAnchor={side === 'below' ? 'middle' : 'end'}
    >
      {tick.text}
      {tick.exponent !== undefined && (
        <tspan dy={-4} fontSize="0.78em">
          {tick.exponent}
        </tspan>
      )}
    </text>
  )
}

/** The plot's scales, where Recharts has worked them out. */
function useScales() {
  const x = useXAxisScale()
  const y = useYAxisScale()
  const area = usePlotArea()
  if (!x || !y || !area) return undefined
  return {
    area,
    at: (point: { readonly x: number; readonly y: number }) => ({
      left: Number(x(point.x)),
      top: Number(y(point.y)),
    }),
  }
}

function Points({ series, plainSeries, onPick }: PlotProps) {
  const scales = useScales()
  if (!scales) return null
  return (
    <g className="markers">
      {series.map(each => (
        <g key={each.key}>
          {thinned(each.points).map(point => {
            const { left, top } = scales.at(point)
            if (!Number.isFinite(left) || !Number.isFinite(top)) return null
            return (
              // biome-ignore lint/a11y/noStaticElementInteractions: the keyboard's way is the arrow keys of the figure
              <g
                key={point.index}
                transform={`translate(${round(left)} ${round(top)})`}
                onClick={() => onPick(point)}
              >
                {point.high > point.low && <Spread point={point} top={top} at={scales.at} />}
                <PointMark point={point} plain={plainSeries === true} />
              </g>
            )
          })}
        </g>
      ))}
    </g>
  )
}

/** From the least to the most of the trials. */
function Spread(props: {
  readonly point: PlotPoint
  readonly top: number
  readonly at: (point: { x: number; y: number }) => { top: number }
}) {
  const { point, top, at } = props
  const reach = (y: number) => round(at({ x: point.x, y }).top - top)
  const path = `M0 ${reach(point.high)}V${reach(point.low)}M-3 ${reach(point.high)}h6M-3 ${reach(point.low)}h6`
  return <path className="spread" d={path} stroke={`var(--${widthLook(point.width).colour})`} fill="none" />
}

function PointMark({ point, plain }: { readonly point: PlotPoint; readonly plain: boolean }) {
  if (point.outcome === 'broken')
    return <path className="mark" d={crossPath(3.8)} stroke="var(--broken)" strokeWidth={2} fill="none" />
  return (
    <g className="mark">
      {plain ? (
        <path d={markerPath('diamond', 3.4)} fill="var(--ink)" stroke="var(--ink)" />
      ) : (
        <MarkerShape width={point.width} set={point.set} radius={3.6} />
      )}
    </g>
  )
}

/** Every so many points where there are a great many; the first, the last, extremes and broken points always stay. */
function thinned(points: readonly PlotPoint[]): readonly PlotPoint[] {
  if (points.length <= MOST_MARKERS) return points
  const every = Math.ceil(points.length / MOST_MARKERS)
  const most = Math.max(...points.map(point => point.y))
  const least = Math.min(...points.map(point => point.y))
  return points.filter(
    (point, at) =>
      at % every === 0 ||
      at === points.length - 1 ||
      point.outcome === 'broken' ||
      point.y === most ||
      point.y === least,
  )
}

const TOOTH_SPACING = 11
const TOOTH_HEIGHT = 4

function Curve({ curve }: { readonly curve: PlotCurve }) {
  const scales = useScales()
  if (!scales || curve.points.length === 0) return null
  const places = curve.points
    .map(scales.at)
    .filter(({ left, top }) => Number.isFinite(left) && Number.isFinite(top))
  if (places.length === 0) return null
  const line = `M${places.map(({ left, top }) => `${round(left)} ${round(top)}`).join('L')}`
  if (curve.kind === 'plain')
    return <path d={line} stroke={curve.colour} strokeWidth={1} strokeDasharray="1.5 3" fill="none" />
  return (
    <>
      <path d={line} stroke={curve.colour} strokeWidth={1} fill="none" />
      <path d={teeth(places)} stroke={curve.colour} strokeWidth={0.8} fill="none" />
    </>
  )
}

/** Short strokes above the line, evenly along it. */
function teeth(places: readonly { readonly left: number; readonly top: number }[]): string {
  let path = ''
  let ahead = TOOTH_SPACING / 2
  for (const [at, from] of places.slice(0, -1).entries()) {
    const to = places[at + 1]!
    const length = Math.hypot(to.left - from.left, to.top - from.top)
    while (ahead <= length) {
      const part = ahead / length
      const left = from.left + part * (to.left - from.left)
      const top = from.top + part * (to.top - from.top)
      path += `M${round(left)} ${round(top)}l-2 ${-TOOTH_HEIGHT}`
      ahead += TOOTH_SPACING
    }
    ahead -= length
  }
  return path
}

function Forbidden({ above }: { readonly above?: number | undefined }) {
  const scales = useScales()
  if (!scales || above === undefined) return null
  const { area } = scales
  const { top } = scales.at({ x: 0, y: above })
  if (!Number.isFinite(top) || top <= area.y) return null
  return <rect x={area.x} y={area.y} width={area.width} height={top - area.y} fill="var(--over)" />
}

function ReadingLine({ reading }: { readonly reading?: PlotReading | undefined }) {
  const scales = useScales()
  if (!scales || !reading) return null
  const { area } = scales
  const { left } = scales.at({ x: reading.x, y: reading.y ?? 1 })
  if (!Number.isFinite(left)) return null
  const foot = area.y + area.height
  return <path d={`M${round(left)} ${area.y}V${foot}`} stroke="var(--ink2)" strokeDasharray="1.5 2.5" fill="none" />
}

/** Over the markers, so that its words stay legible. */
function ReadingMark({ reading }: { readonly reading?: PlotReading | undefined }) {
  const scales = useScales()
  if (!scales || !reading) return null
  const { area } = scales
  const { left, top } = scales.at({ x: reading.x, y: reading.y ?? 1 })
  if (!Number.isFinite(left)) return null
  const nearRight = left > area.x + area.width * 0.72
  return (
    <g className="reading">
      {reading.y !== undefined && Number.isFinite(top) && (
        <circle cx={left} cy={top} r={7.5} fill="none" stroke="var(--ink)" strokeWidth={1.3} />
      )}
      <text className="plot-label strong" x={left} y={area.y - 7} textAnchor="middle">
        {reading.name}
      </text>
      {reading.figure && (
        <text
          className="tick strong"
          x={left + (nearRight ? -5 : 5)}
          y={area.y + area.height - 6}
          textAnchor={nearRight ? 'end' : 'start'}
        >
          {reading.figure}
        </text>
      )}
    </g>
  )
}

function EndLabels({ series, curves, plainSeries }: PlotProps & { readonly curves: readonly PlotCurve[] }) {
  const scales = useScales()
  if (!scales) return null
  const ends = [
    ...series.map(each => ({
      key: each.key,
      label: each.label,
      colour: colourOf(each, plainSeries),
      end: each.points.at(-1),
    })),
    ...curves.map(each => ({ key: each.key, label: each.label, colour: 'var(--ink2)', end: each.points.at(-1) })),
  ].flatMap(({ end, ...label }) => (end && label.label !== '' ? [{ ...label, ...scales.at(end) }] : []))
  const { area } = scales
  const tops = spreadLabels(
    ends.map(({ top }) => Math.max(area.y, Math.min(area.y + area.height, top))),
    LABEL_HEIGHT,
    area.y + 2,
    area.y + area.height - 2,
  )
  const edge = area.x + area.width
  return (
    <g className="end-labels">
      {ends.map(({ key, label, colour, left, top }, at) => (
        <g key={key}>
          <path
            d={`M${round(Math.min(left + 7, edge + 3))} ${round(top)}L${edge + 8} ${round(tops[at]!)}h4`}
            stroke={colour}
            strokeWidth={0.7}
            fill="none"
          />
          <text className="plot-label" x={edge + 15} y={tops[at]! + 4} fill={colour} style={{ fill: colour }}>
            {label}
          </text>
        </g>
      ))}
    </g>
  )
}

function Letter({ letter }: { readonly letter: string }) {
  const scales = useScales()
  if (!scales) return null
  const { area } = scales
  return (
    <text className="plot-label letter" x={area.x + area.width + 12} y={area.y + area.height + 17}>
      {letter}
    </text>
  )
}

function round(value: number): number {
  return Math.round(value * 10) / 10
}
