import type { InstructionSetName } from '../../machine/machine'

/**
 * How a series looks. A width has a colour and a marker, an instruction set has a dash and a fill, so that no
 * difference rests on colour alone. Past the last marker the shapes start again with an inner dot.
 */
export const MARKERS = ['disc', 'square', 'triangle', 'diamond', 'cap', 'pentagon', 'bowtie', 'star'] as const
export type Marker = (typeof MARKERS)[number]

/**
 * CSS custom properties of the page's palette, in the order of the setting's widths. Under simulated colour blindness
 * (Machado, Oliveira, Fernandes 2009) no two come closer than 18 (CIE76), nor to the ink or to what is broken.
 */
export const WIDTH_COLOURS = ['sand', 'tide', 'deep', 'fourth', 'fifth', 'sixth'] as const
export type WidthColour = (typeof WIDTH_COLOURS)[number]

/** The hues as drawn, for exports that stand without the page's style sheet. */
export const COLOUR_VALUES = {
  light: {
    sand: '#96610a',
    tide: '#00758a',
    deep: '#4a3ba3',
    fourth: '#9112e8',
    fifth: '#4a1a5e',
    sixth: '#4c1c00',
  },
  dark: {
    sand: '#dda548',
    tide: '#49bcca',
    deep: '#a99bff',
    fourth: '#ee4d92',
    fifth: '#a9e82c',
    sixth: '#627af0',
  },
} as const satisfies Record<'light' | 'dark', Record<WidthColour, string>>

/** How markers of an instruction set are filled: in the series' colour, with paper, a dot in paper, a ring in a ring. */
export type Fill = 'filled' | 'hollow' | 'dotted' | 'ringed'

export interface SetLook {
  /** An SVG stroke-dasharray; '' is a solid line. */
  readonly dash: string
  readonly fill: Fill
}

export const SET_LOOKS: Readonly<Record<InstructionSetName, SetLook>> = {
  full: { dash: '', fill: 'filled' },
  'no-multiply': { dash: '6 3.5', fill: 'hollow' },
  'add-only': { dash: '1.5 3', fill: 'dotted' },
  extended: { dash: '9 3 2 3', fill: 'ringed' },
}

export interface WidthLook {
  readonly marker: Marker
  readonly colour: WidthColour
  /** From the ninth width on: how often the shapes have been gone through; drawn as that many inner dots. */
  readonly round: number
}

/** The look of the width at a place of `setting.widths`. */
export function widthLook(place: number): WidthLook {
  return {
    marker: MARKERS[place % MARKERS.length]!,
    colour: WIDTH_COLOURS[place % WIDTH_COLOURS.length]!,
    round: Math.floor(place / MARKERS.length),
  }
}
