import { CHARGES, type Charges, INSTRUCTION_SETS, type InstructionSetName } from '../../machine/machine'
import type { ChargedClass } from '../../routine/block'
import type { FeedPattern, SizeRange } from '../../sweep/setting'

/** All instruction sets, in the order in which the sentence and the grid have them. */
export const SET_ORDER = Object.keys(INSTRUCTION_SETS) as readonly InstructionSetName[]

export const PATTERN_WORDS: Readonly<Record<FeedPattern, string>> = {
  uniform: 'uniform keys',
  sorted: 'sorted keys',
  reversed: 'reversed keys',
  equal: 'equal keys',
  permutation: 'a permutation',
}

/** How a range reads: its ends where it doubles or steps, its values where they are few, else how many they are. */
export type RangeReading =
  | { readonly kind: 'doubling'; readonly from: number; readonly to: number }
  | { readonly kind: 'stepping'; readonly from: number; readonly to: number; readonly by: number }
  | { readonly kind: 'list'; readonly values: readonly number[] }
  | { readonly kind: 'many'; readonly count: number; readonly from: number; readonly to: number }

/** A list of more sizes than this is told by number. */
const FEW = 5

export function readRange({ values }: SizeRange): RangeReading {
  const from = values[0] ?? 0
  const to = values.at(-1) ?? 0
  if (values.length > 2) {
    const pairs = values.slice(1).map((value, place) => [values[place]!, value] as const)
    if (from > 0 && pairs.every(([before, after]) => after === 2 * before)) return { kind: 'doubling', from, to }
    const by = values[1]! - from
    if (pairs.every(([before, after]) => after - before === by)) return { kind: 'stepping', from, to, by }
  }
  return values.length <= FEW ? { kind: 'list', values } : { kind: 'many', count: values.length, from, to }
}

export type ChargesReading =
  | { readonly kind: 'unit' }
  | { readonly kind: 'operators' }
  /** Classes whose price is not 1 (of `index`: not 0), in their order. */
  | { readonly kind: 'own'; readonly prices: readonly (readonly [ChargedClass, number])[] }

export function readCharges(charges: Charges): ChargesReading {
  const classes = Object.keys(CHARGES.unit) as ChargedClass[]
  if (classes.every(name => charges[name] === CHARGES.unit[name])) return { kind: 'unit' }
  if (classes.every(name => charges[name] === CHARGES.operators[name])) return { kind: 'operators' }
  return {
    kind: 'own',
    prices: classes
      .filter(name => charges[name] !== CHARGES.unit[name])
      .map(name => [name, charges[name]] as const),
  }
}
