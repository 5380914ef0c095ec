import type { Diagnostic } from '../../grammar/diagnostic'
import type { Span } from '../../grammar/span'
import type { Operation, Program } from '../routine'
import { type InstructionSet, SWITCHED_CLASSES, type SwitchedClass } from './machine'

/** One error for each line that uses a class which the set lacks, in order of lines. */
export function refuseClasses(program: Program, set: InstructionSet): Diagnostic[] {
  const found = new Map<string, { span: Span; off: SwitchedClass }>()
  for (const { operations, costs } of program.blocks) {
    for (const { class: charged, line } of costs) {
      const off = SWITCHED_CLASSES.find(each => each === charged)
      if (!off || set.on.has(off)) continue
      const use = operations.find(operation => operation.span.line === line && classOf(operation) === off)
      if (use && !found.has(`${off} ${line}`)) found.set(`${off} ${line}`, { span: use.span, off })
    }
  }
  return [...found.values()]
    .sort((a, b) => a.span.start - b.span.start)
    .map(({ span, off }) => ({
      severity: 'error',
      span,
      message: `line ${span.line} uses ${off}, which the instruction set ${set.name} lacks`,
      remedy: `Choose an instruction set that has ${off}, have it expanded, or write line ${span.line} without it.`,
    }))
}

/** The switched class of an operation; undefined for those that every machine has. */
export function classOf(operation: Operation): SwitchedClass | undefined {
  switch (operation.kind) {
    case 'product':
      return 'multiply'
    case 'unary':
      return operation.function === 'negate' ? undefined : operation.function === 'complement' ? 'logic' : 'bitscan'
    case 'binary':
      switch (operation.function) {
        case 'multiply':
          return 'multiply'
        case 'divide':
        case 'modulo':
          return 'divide'
        case 'and':
        case 'or':
        case 'xor':
          return 'logic'
        case 'shift-left':
        case 'shift-right':
          return 'shift'
        default:
          return undefined
      }
    default:
      return undefined
  }
}
