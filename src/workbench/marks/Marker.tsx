import type { InstructionSetName } from '../../machine/machine'
import { SET_LOOKS, widthLook } from '../store/series'
import { crossPath, markerPath } from './shape'

const RADIUS = 4

export interface MarkerProps {
  /** Place in `setting.widths`. */
  readonly width: number
  readonly set: InstructionSetName
  /** Of a disc, in user units of the surrounding SVG. */
  readonly radius?: number
}

/** A series' marker around the origin, to stand inside an SVG. */
export function MarkerShape({ width, set, radius = RADIUS }: MarkerProps) {
  const { marker, colour, round } = widthLook(width)
  const { fill } = SET_LOOKS[set]
  const stroke = `var(--${colour})`
  const path = markerPath(marker, radius)
  return (
    <>
      <path
        d={path}
        stroke={stroke}
        strokeWidth={1.5}
        fill={fill === 'filled' || fill === 'dotted' ? stroke : 'var(--paper)'}
      />
      {fill === 'dotted' && <circle r={radius * 0.4} fill="var(--paper)" />}
      {fill === 'ringed' && <path d={markerPath(marker, radius * 0.4)} fill={stroke} />}
      {round > 0 && <circle r={radius * 0.25 * round} fill={fill === 'filled' ? 'var(--paper)' : stroke} />}
    </>
  )
}

/** The same as a mark in running text. It says nothing to a screen reader: a word beside it does. */
export function MarkerKey(props: MarkerProps) {
  return (
    <svg className="key" viewBox="-6 -6 12 12" width="12" height="12" aria-hidden="true">
      <MarkerShape {...props} />
    </svg>
  )
}

/** A short line in the dash of an instruction set, as a mark in running text. */
export function DashKey({ set }: { readonly set: InstructionSetName }) {
  return (
    <svg className="key key-line" viewBox="0 0 26 12" width="26" height="12" aria-hidden="true">
      <path
        d="M0 6H26"
        stroke="var(--ink)"
        strokeWidth={1.7}
        fill="none"
        strokeDasharray={SET_LOOKS[set].dash || undefined}
      />
    </svg>
  )
}

/** The cross of a broken claim, as a mark in running text. */
export function CrossKey() {
  return (
    <svg className="key key-verdict" viewBox="-5 -5 10 10" width="10" height="10" aria-hidden="true">
      <path d={crossPath(3.6)} stroke="var(--broken)" strokeWidth={2} fill="none" />
    </svg>
  )
}

/** The disc of a claim that holds, as a mark in running text. */
export function DiscKey() {
  return (
    <svg className="key key-verdict" viewBox="-5 -5 10 10" width="10" height="10" aria-hidden="true">
      <circle r={3.4} fill="var(--ink2)" />
    </svg>
  )
}
