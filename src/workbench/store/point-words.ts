import type { InstructionSetName } from '../../machine/machine'
import type { GridPoint } from '../../sweep/result'

/** How the page calls each instruction set. */
export const SET_WORDS: Readonly<Record<InstructionSetName, string>> = {
  full: 'with multiplication',
  'no-multiply': 'without multiplication',
  'add-only': 'by addition alone',
  extended: 'with every class',
}

/** The same where a line has little room. */
export const SHORT_SET_WORDS: Readonly<Record<InstructionSetName, string>> = {
  full: 'with',
  'no-multiply': 'without',
  'add-only': 'add only',
  extended: 'extended',
}

/** `n = 4096, m = 64`; '' for a routine without sizes. */
export function sizeWords(point: Pick<GridPoint, 'sizes'>): string {
  return Object.entries(point.sizes)
    .map(([name, value]) => `${name} = ${value}`)
    .join(', ')
}

/** `n = 4096, w = 16, without multiplication`. */
export function pointWords(point: GridPoint): string {
  const width = point.width > 0 ? `w = ${point.width}` : 'no width'
  return [sizeWords(point), width, SET_WORDS[point.set]].filter(part => part !== '').join(', ')
}

/** `1 point`, `12 points`: a number with its noun. */
export function countOf(number: number, noun: string): string {
  if (number === 1) return `1 ${noun}`
  return `${number} ${noun.endsWith('y') ? `${noun.slice(0, -1)}ies` : `${noun}s`}`
}
