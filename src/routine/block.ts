import type { Span } from '../../grammar/span'
import type { Comparison, Exact, ExactCondition } from '../../grammar/tree'

/** The classes of unit operations, in the order in which tallies list them. */
export const OPERATION_CLASSES = [
  'add',
  'logic',
  'shift',
  'multiply',
  'divide',
  'bitscan',
  'load',
  'store',
  'move',
  'compare',
  'jump',
  'call',
] as const
export type OperationClass = (typeof OPERATION_CLASSES)[number]
/** `index` is the addition inside a base-plus-index access: no operation of its own, priced apart on request. */
export type ChargedClass = OperationClass | 'index'

/** How often one visit of a block performs operations of a class on a source line. */
export interface Cost {
  readonly class: ChargedClass
  readonly line: number
  readonly count: number
  /** Of a cost inside an expansion: the class that is off and that it stands in for. */
  readonly expanded?: OperationClass
}

/** A word that an operation reads: a variable of the procedure, or an entry of the program's constants. */
export type Operand =
  | { readonly kind: 'variable'; readonly variable: number }
  | { readonly kind: 'constant'; readonly constant: number }

export type BinaryFunction =
  | 'add'
  | 'subtract'
  | 'multiply'
  | 'divide'
  | 'modulo'
  | 'and'
  | 'or'
  | 'xor'
  | 'shift-left'
  | 'shift-right'
export type UnaryFunction = 'negate' | 'complement' | 'popcount' | 'msb' | 'lsb'

/**
 * One step of word code. What it costs stands in its block's `costs`, never here: a step of the lowering's own
 * (the exact end test of a `for`, say) costs nothing. All words are taken mod 2^w.
 */
export type Operation =
  | {
      readonly kind: 'binary'
      readonly function: BinaryFunction
      readonly into: number
      readonly left: Operand
      readonly right: Operand
      readonly span: Span
    }
  | {
      readonly kind: 'unary'
      readonly function: UnaryFunction
      readonly into: number
      readonly operand: Operand
      readonly span: Span
    }
  | { readonly kind: 'move'; readonly into: number; readonly from: Operand; readonly span: Span }
  /** Two-word product; `high` and `low` differ, and are written after both factors are read. */
  | {
      readonly kind: 'product'
      readonly high: number
      readonly low: number
      readonly left: Operand
      readonly right: Operand
      readonly span: Span
    }
  /** `array` indexes the program's arrays; checked against the array's length. */
  | {
      readonly kind: 'load'
      readonly into: number
      readonly array: number
      readonly index: Operand
      readonly span: Span
    }
  | {
      readonly kind: 'store'
      readonly array: number
      readonly index: Operand
      readonly value: Operand
      readonly span: Span
    }
  /** At address base + index mod 2^w; checked against the memory in use, a store also against read-only arrays. */
  | {
      readonly kind: 'load-at'
      readonly into: number
      readonly base: Operand
      readonly index?: Operand
      readonly span: Span
    }
  | {
      readonly kind: 'store-at'
      readonly base: Operand
      readonly index?: Operand
      readonly value: Operand
      readonly span: Span
    }
  /** Stops the run where the exact condition is false. `reads` gives the variable behind each scalar name in it. */
  | {
      readonly kind: 'assert'
      readonly condition: ExactCondition
      readonly reads: ReadonlyMap<string, number>
      readonly span: Span
    }
  /** Fails the run with kind `step` where `operand` is 0: a `for` whose step is no number of words. */
  | { readonly kind: 'check-step'; readonly operand: Operand; readonly span: Span }

export type Terminator =
  | { readonly kind: 'jump'; readonly to: number }
  | {
      readonly kind: 'branch'
      readonly operator: Comparison
      readonly signed: boolean
      readonly left: Operand
      readonly right: Operand
      readonly yes: number
      readonly no: number
      readonly span: Span
    }
  /** `results` are variables of the caller, all different; written after the return. */
  | {
      readonly kind: 'call'
      readonly procedure: number
      readonly arguments: readonly Operand[]
      readonly results: readonly number[]
      readonly next: number
      readonly span: Span
    }
  | { readonly kind: 'return'; readonly values: readonly Operand[]; readonly span: Span }
  | { readonly kind: 'halt'; readonly span: Span }

/** A basic block: entered at its top alone, left at its terminator alone; a visit performs all its costs. */
export interface Block {
  readonly operations: readonly Operation[]
  readonly terminator: Terminator
  readonly costs: readonly Cost[]
  /** The line a reader would point at for this block. */
  readonly line: number
  /**
   * Set on targets of retreating edges and on entries of procedures, that is at least once on every cycle: a lower
   * bound (>= 1) on the operations until the next checkpoint. Ways of running add these up to stop a run that
   * cannot end within the operation limit; both stop at the same visit.
   */
  readonly checkpoint?: number
}

export interface Variable {
  readonly name: string
  /** Intermediate values and the like: no word of the author's, so no word of space. */
  readonly hidden: boolean
}

export interface BlockProcedure {
  /** '' for the routine's own body, which is procedure 0. */
  readonly name: string
  readonly variables: readonly Variable[]
  /** The first `parameters` variables are the parameters, in order. For procedure 0: the scalar inputs. */
  readonly parameters: number
  /** Number of words a return gives. */
  readonly results: number
  /** Index of the entry block; blocks of a procedure are contiguous in the program, the entry first. */
  readonly entry: number
  readonly blocks: readonly number[]
  /** Words of a frame in flight: parameters, locals, return address. 0 for procedure 0. */
  readonly frame: number
  readonly span: Span
}

/** A word that is known when a run is bound to (w, sizes, lets), never before. */
export type Constant =
  | { readonly kind: 'literal'; readonly value: bigint; readonly span: Span }
  | { readonly kind: 'width' }
  | { readonly kind: 'size' | 'let' | 'fix'; readonly name: string; readonly span: Span }
  /** An exact expression over `w` alone. */
  | { readonly kind: 'exact'; readonly name: string; readonly value: Exact; readonly span: Span }
  /** The address of an array's first word. */
  | { readonly kind: 'address'; readonly array: number; readonly span: Span }

/** A checked routine as blocks of unit operations: what both ways of running take. Blocks are numbered throughout. */
export interface Program {
  readonly routine: import('./routine').Routine
  readonly blocks: readonly Block[]
  readonly procedures: readonly BlockProcedure[]
  readonly constants: readonly Constant[]
  /** For each scalar result (and inout scalar), the variable of procedure 0 that holds it at the end. */
  readonly results: ReadonlyMap<string, number>
}
