import type { AxisScale } from '../store/record'

/** A word of a caption that turns into the other at a press. */
export function ScaleSwitch(props: {
  readonly name: string
  readonly scale: AxisScale
  readonly onScale: (scale: AxisScale) => void
}) {
  const { name, scale, onScale } = props
  const other = scale === 'log' ? 'linear' : 'log'
  return (
    <button
      type="button"
      className="slot"
      aria-label={`${name}: ${scale} scale; make it ${other}`}
      onClick={() => onScale(other)}
    >
      {scale}
    </button>
  )
}
