import type { ChargedClass, OperationClass } from '../routine/block'

export const MIN_WIDTH = 2
export const MAX_WIDTH = 4096

/** The classes that a machine may lack; the others are always there. */
export const SWITCHED_CLASSES = ['logic', 'shift', 'multiply', 'divide', 'bitscan'] as const
export type SwitchedClass = (typeof SWITCHED_CLASSES)[number]

export interface InstructionSet {
  readonly name: string
  readonly on: ReadonlySet<SwitchedClass>
}

export const INSTRUCTION_SETS = {
  full: { name: 'full', on: new Set<SwitchedClass>(['logic', 'shift', 'multiply']) },
  'no-multiply': { name: 'no-multiply', on: new Set<SwitchedClass>(['logic', 'shift']) },
  'add-only': { name: 'add-only', on: new Set<SwitchedClass>() },
  extended: { name: 'extended', on: new Set<SwitchedClass>(SWITCHED_CLASSES) },
} as const satisfies Record<string, InstructionSet>
export type InstructionSetName = keyof typeof INSTRUCTION_SETS

/** What becomes of a use of a class that is off. */
export type OffPolicy = 'refuse' | 'expand'

/** The price of one operation of each class: whole numbers >= 0. */
export type Charges = Readonly<Record<ChargedClass, number>>

const ONE: Record<OperationClass, number> = {
  add: 1,
  logic: 1,
  shift: 1,
  multiply: 1,
  divide: 1,
  bitscan: 1,
  load: 1,
  store: 1,
  move: 1,
  compare: 1,
  jump: 1,
  call: 1,
}

export const CHARGES = {
  unit: { ...ONE, index: 0 },
  /** How bit-trick collections count: S. E. Anderson, "Bit Twiddling Hacks", preface. */
  operators: { ...ONE, move: 0, compare: 0, jump: 0, call: 0, index: 0 },
} as const satisfies Record<string, Charges>
export type ChargesName = keyof typeof CHARGES
