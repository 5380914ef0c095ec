import fc from 'fast-check'

/** What a piece of random text may name where it stands. */
export interface Scope {
  readonly modulus: bigint
  /**
   * Whether the routine takes risks: wild indices and addresses, divisors of 0, loops and recursion without end, asserts
   * that fail, early halts. One that does not runs through most of its text.
   */
  readonly bold: boolean
  readonly arrays: readonly ArrayShape[]
  readonly readable: readonly string[]
  readonly assignable: readonly string[]
  /** Labels that a jump from here may go to. */
  readonly labels: readonly string[]
  readonly procedures: readonly { readonly name: string; readonly parameters: number; readonly results: number }[]
  /** The expression that a call passes on as the depth left; absent in the routine's own body. */
  readonly depth: string | undefined
  /** Variables of the loops around, outermost first. */
  readonly loops: readonly string[]
  /** Loop variables that are free to take, outermost first. */
  readonly loopNames: readonly string[]
  readonly fresh: () => number
}

export interface ArrayShape {
  readonly name: string
  readonly role: 'in' | 'fix' | 'inout' | 'out' | 'work'
  /** Whether its length grows with n, and what comes on top. */
  readonly sized: boolean
  readonly extra: number
  readonly length: number
  readonly declared: string
}

/** A piece of text that waits for the scope it stands in, so that all names are good by construction. */
export type Piece<T> = (scope: Scope) => T
export type Word = Piece<string>
export type Lines = Piece<string[]>

export function pick<T>(items: readonly T[], at: number): T {
  return items[at % items.length]!
}

/** A place in a list that `pick` takes. */
export const place = fc.nat(59)

/** Arrays with words in them, and if they are to be stored to, only those that may be. */
export function arraysInReach({ arrays }: Scope, stored = false): ArrayShape[] {
  return arrays.filter(({ role, length }) => length > 0 && !(stored && (role === 'in' || role === 'fix')))
}

/** Stands in for what the routine has no procedure, label or array for. */
export function assignNothing({ assignable }: Scope): string[] {
  return [`${assignable[0]} <- ${assignable[1]}`]
}
