import { type GridPoint, printCharges, printWidth, type Setting } from '../sweep'

/** `n = 64, w = 16, full`. */
export function sayPlace({ sizes, width, set }: GridPoint): string {
  return [...Object.entries(sizes).map(([name, value]) => `${name} = ${value}`), `w = ${width}`, set].join(', ')
}

/** A setting in one sentence. */
export function saySetting(routine: string, setting: Setting): string {
  const { sizes, widths, lets, sets, charges, pattern, trials, seed } = setting
  const parts = [
    `w = ${widths.map(printWidth).join(', ')}`,
    ...Object.entries(sizes).map(([name, { text }]) => `${name} = ${text}`),
    ...Object.entries(lets).map(([name, value]) => `${name} = ${value}`),
    `instruction set ${sets.join(', ')}`,
    `charges ${printCharges(charges)}`,
    `${pattern} input`,
    `${trials} ${trials === 1 ? 'trial' : 'trials'} a point`,
    `seed ${seed}`,
  ]
  return `${routine}: ${parts.join('; ')}`
}
