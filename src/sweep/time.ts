import type { Charges, Tally } from '../machine'
import { type ChargedClass, OPERATION_CLASSES } from '../routine'

/** Operations at their charges, exact however large. */
export function exactTime({ byClass, indexed }: Tally, charges: Charges): bigint {
  const counts: [ChargedClass, number][] = OPERATION_CLASSES.map(name => [name, byClass[name]])
  return [...counts, ['index', indexed] as const].reduce(
    (sum, [name, count]) => sum + BigInt(count) * BigInt(charges[name]),
    0n,
  )
}
