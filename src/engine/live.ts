import type { Operand, Operation, Program, Terminator } from '../routine'
import { successors } from '../routine/block-builder'

/**
 * For each call in a procedure's blocks, by the block's number: the procedure's variables whose words are read
 * after the call's return and not set by it, in order. That is what a frame must keep.
 */
export function liveAcrossCalls(program: Program, procedure: number): Map<number, number[]> {
  const { blocks, variables } = program.procedures[procedure]!
  const stride = (variables.length + 31) >>> 5
  const first = blocks[0]!
  const liveIn = new Int32Array(stride * blocks.length)
  const live = new Int32Array(stride)
  const add = (variable: number) => {
    live[variable >>> 5]! |= 1 << (variable & 31)
  }
  const remove = (variable: number) => {
    live[variable >>> 5]! &= ~(1 << (variable & 31))
  }
  const read = (operand: Operand) => {
    if (operand.kind === 'variable') add(operand.variable)
  }
  /** Sets `live` to what is live where the block's terminator has run, results of a call not yet set. */
  const liveAfter = (terminator: Terminator) => {
    live.fill(0)
    for (const next of successors(terminator)) {
      const from = (next - first) * stride
      for (let at = 0; at < stride; at++) live[at]! |= liveIn[from + at]!
    }
    if (terminator.kind === 'call') terminator.results.forEach(remove)
  }
  for (let changed = true; changed; ) {
    changed = false
    for (let place = blocks.length - 1; place >= 0; place--) {
      const { operations, terminator } = program.blocks[first + place]!
      liveAfter(terminator)
      terminatorReads(terminator).forEach(read)
      for (let at = operations.length - 1; at >= 0; at--) {
        const operation = operations[at]!
        operationWrites(operation).forEach(remove)
        operationReads(operation).forEach(read)
      }
      for (let at = 0; at < stride; at++) {
        if (liveIn[place * stride + at] === live[at]) continue
        liveIn[place * stride + at] = live[at]!
        changed = true
      }
    }
  }
  const across = new Map<number, number[]>()
  for (const at of blocks) {
    const { terminator } = program.blocks[at]!
    if (terminator.kind !== 'call') continue
    liveAfter(terminator)
    const kept = variables.map((_, variable) => variable)
    across.set(
      at,
      kept.filter(variable => live[variable >>> 5]! & (1 << (variable & 31))),
    )
  }
  return across
}

/** The same operation on other operands and variables. */
export function mapOperation(
  operation: Operation,
  read: (operand: Operand) => Operand,
  write: (variable: number) => number,
): Operation {
  switch (operation.kind) {
    case 'binary': {
      const [left, right] = [read(operation.left), read(operation.right)]
      return { ...operation, left, right, into: write(operation.into) }
    }
    case 'unary':
      return { ...operation, operand: read(operation.operand), into: write(operation.into) }
    case 'move':
      return { ...operation, from: read(operation.from), into: write(operation.into) }
    default:
      throw new Error(`no operation of kind ${operation.kind} is worked out in vain`)
  }
}

/** The operands that an operation reads. */
export function operationReads(operation: Operation): readonly Operand[] {
  switch (operation.kind) {
    case 'binary':
    case 'product':
      return [operation.left, operation.right]
    case 'unary':
    case 'check-step':
      return [operation.operand]
    case 'move':
      return [operation.from]
    case 'load':
      return [operation.index]
    case 'store':
      return [operation.index, operation.value]
    case 'load-at':
      return operation.index ? [operation.base, operation.index] : [operation.base]
    case 'store-at':
      return operation.index
        ? [operation.base, operation.index, operation.value]
        : [operation.base, operation.value]
    case 'assert':
      return [...operation.reads.values()].map(variable => ({ kind: 'variable', variable }))
  }
}

/** The variables that an operation sets. */
export function operationWrites(operation: Operation): readonly number[] {
  switch (operation.kind) {
    case 'product':
      return [operation.high, operation.low]
    case 'store':
    case 'store-at':
    case 'assert':
    case 'check-step':
      return []
    default:
      return [operation.into]
  }
}

function terminatorReads(terminator: Terminator): readonly Operand[] {
  switch (terminator.kind) {
    case 'branch':
      return [terminator.left, terminator.right]
    case 'call':
      return terminator.arguments
    case 'return':
      return terminator.values
    default:
      return []
  }
}
