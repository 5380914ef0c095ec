import type { Diagnostic } from '../../grammar/diagnostic'
import type { Span } from '../../grammar/span'
import type { Block, BlockProcedure, Operand, Operation, Program, Terminator } from './block'
import { successors } from './block-builder'

/** One read of a variable, in the order of execution within its block. */
interface Read {
  readonly variable: number
  readonly span: Span
  readonly purpose: 'word' | 'result' | 'assert'
}

/**
 * Finds variables that may be read before they are set, by forward data flow over the blocks. One diagnostic for each
 * variable of a procedure, at its first such read, with the turns of a shortest path that leads there unset.
 */
export function findUnsetReads(program: Program): Diagnostic[] {
  return program.procedures.flatMap((procedure, place) => {
    const results = place === 0 ? resultReads(program) : []
    return findInProcedure(program, procedure, results)
  })
}

/** The routine's scalar results are read when it halts. */
function resultReads(program: Program): number[] {
  return [...program.results.values()]
}

function findInProcedure(program: Program, procedure: BlockProcedure, results: readonly number[]): Diagnostic[] {
  const set = setOnEntry(program.blocks, procedure)
  const found = new Map<number, { read: Read; block: number }>()
  for (const at of procedure.blocks) {
    const known = set.get(at)!.slice()
    visitBlock(program.blocks[at]!, results, {
      read(read) {
        if (known[read.variable] || procedure.variables[read.variable]!.hidden) return
        const earlier = found.get(read.variable)
        if (!earlier || read.span.start < earlier.read.span.start) found.set(read.variable, { read, block: at })
      },
      write(variable) {
        known[variable] = true
      },
    })
  }
  return [...found.entries()]
    .map(([variable, { read, block }]) => describe(program, procedure, variable, read, block))
    .sort((a, b) => a.span.start - b.span.start)
}

/** For each block, which variables are set on every path to it. */
function setOnEntry(blocks: readonly Block[], procedure: BlockProcedure): Map<number, boolean[]> {
  const count = procedure.variables.length
  const state = new Map<number, boolean[]>()
  state.set(
    procedure.entry,
    Array.from({ length: count }, (_, variable) => variable < procedure.parameters),
  )
  const waiting = [procedure.entry]
  while (waiting.length > 0) {
    const at = waiting.pop()!
    const leaving = state.get(at)!.slice()
    for (const variable of writesOf(blocks[at]!)) leaving[variable] = true
    for (const next of successors(blocks[at]!.terminator)) {
      const known = state.get(next)
      if (!known) {
        state.set(next, leaving.slice())
        waiting.push(next)
        continue
      }
      let changed = false
      for (let variable = 0; variable < count; variable++) {
        if (!known[variable] || leaving[variable]) continue
        known[variable] = false
        changed = true
      }
      if (changed) waiting.push(next)
    }
  }
  return state
}

function writesOf(block: Block): number[] {
  const written: number[] = []
  visitBlock(block, [], { read() {}, write: variable => written.push(variable) })
  return written
}

function visitBlock(
  block: Block,
  results: readonly number[],
  visit: { read(read: Read): void; write(variable: number): void },
): void {
  for (const operation of block.operations) {
    const { reads, writes } = effectsOf(operation)
    for (const operand of reads) {
      if (operand.kind === 'variable')
        visit.read({ variable: operand.variable, span: operation.span, purpose: 'word' })
    }
    if (operation.kind === 'assert') {
      for (const variable of operation.reads.values())
        visit.read({ variable, span: operation.span, purpose: 'assert' })
    }
    for (const variable of writes) visit.write(variable)
  }
  visitTerminator(block.terminator, results, visit)
}

function visitTerminator(
  terminator: Terminator,
  results: readonly number[],
  visit: { read(read: Read): void; write(variable: number): void },
): void {
  const read = (operands: readonly Operand[], span: Span, purpose: Read['purpose']) => {
    for (const operand of operands) {
      if (operand.kind === 'variable') visit.read({ variable: operand.variable, span, purpose })
    }
  }
  switch (terminator.kind) {
    case 'branch':
      read([terminator.left, terminator.right], terminator.span, 'word')
      break
    case 'call':
      read(terminator.arguments, terminator.span, 'word')
      for (const variable of terminator.results) visit.write(variable)
      break
    case 'return':
      read(terminator.values, terminator.span, 'result')
      break
    case 'halt':
      for (const variable of results) visit.read({ variable, span: terminator.span, purpose: 'result' })
      break
    case 'jump':
      break
  }
}

/** The operands an operation reads (those of an assert aside) and the variables it writes. */
export function effectsOf(operation: Operation): { reads: readonly Operand[]; writes: readonly number[] } {
  switch (operation.kind) {
    case 'binary':
      return { reads: [operation.left, operation.right], writes: [operation.into] }
    case 'unary':
      return { reads: [operation.operand], writes: [operation.into] }
    case 'move':
      return { reads: [operation.from], writes: [operation.into] }
    case 'product':
      return { reads: [operation.left, operation.right], writes: [operation.high, operation.low] }
    case 'load':
      return { reads: [operation.index], writes: [operation.into] }
    case 'store':
      return { reads: [operation.index, operation.value], writes: [] }
    case 'load-at':
      return {
        reads: operation.index ? [operation.base, operation.index] : [operation.base],
        writes: [operation.into],
      }
    case 'store-at': {
      const address = operation.index ? [operation.base, operation.index] : [operation.base]
      return { reads: [...address, operation.value], writes: [] }
    }
    case 'assert':
      return { reads: [], writes: [] }
    case 'check-step':
      return { reads: [operation.operand], writes: [] }
  }
}

function describe(
  program: Program,
  procedure: BlockProcedure,
  variable: number,
  read: Read,
  block: number,
): Diagnostic {
  const { name } = procedure.variables[variable]!
  const path = unsetPath(program, procedure, variable, block)
  const turns = path.map(({ span, note }) => `line ${span.line}: ${note}`).join(', ')
  const reached = turns === '' ? '' : ` (${turns})`
  const isResult = read.purpose === 'result'
  const where = procedure.name === '' ? `the routine's result ${name}` : `the result ${name} of ${procedure.name}`
  return {
    severity: 'error',
    span: read.span,
    message: isResult
      ? `${where} may still be unset when line ${read.span.line} ends the run of it${reached}`
      : `${name} may be read before it is set${reached}`,
    remedy: isResult
      ? `Set ${name} on every path, for example ${name} <- 0 at the start.`
      : `Set ${name} first on every path to line ${read.span.line}, for example ${name} <- 0 before the first branch; what comes from outside is declared: in ${name}.`,
    ...(path.length > 0 ? { path } : {}),
  }
}

/** The turns of a shortest path from the entry to `goal` that never sets the variable. */
function unsetPath(program: Program, procedure: BlockProcedure, variable: number, goal: number) {
  const cameFrom = new Map<number, number>([[procedure.entry, -1]])
  const waiting = [procedure.entry]
  for (let head = 0; head < waiting.length && !cameFrom.has(goal); head++) {
    const at = waiting[head]!
    const block = program.blocks[at]!
    if (writesOf(block).includes(variable)) continue
    for (const next of successors(block.terminator)) {
      if (cameFrom.has(next)) continue
      cameFrom.set(next, at)
      waiting.push(next)
    }
  }
  const turns: { span: Span; note: string }[] = []
  for (let at = goal; cameFrom.get(at) !== undefined && cameFrom.get(at) !== -1; at = cameFrom.get(at)!) {
    const before = program.blocks[cameFrom.get(at)!]!
    const { terminator } = before
    if (terminator.kind !== 'branch' || terminator.yes === terminator.no) continue
    // A branch without a compare is the lowering's own (the last pass of a `for`), no turn of the author's.
    if (!before.costs.some(cost => cost.class === 'compare')) continue
    turns.unshift({ span: terminator.span, note: terminator.yes === at ? 'the test holds' : 'the test fails' })
  }
  return turns
}
