import type { Span } from '../../grammar/span'
import { classOf, type InstructionSet, type SwitchedClass } from '../machine'
import type {
  Block,
  BlockProcedure,
  Constant,
  Cost,
  Operand,
  Operation,
  Program,
  Terminator,
  Variable,
} from '../routine'
import { markCheckpoints, retargetTerminator } from '../routine'
import { type ExpandedFunction, type Expansion, expansionFor } from './expansions/expansion'

/**
 * Replaces every operation whose class is off by a call of a procedure that uses only what is on. The call is
 * charged like any other; all its operations stand on the line of the use, marked with the class they stand in for.
 * One copy of a procedure serves one line, so that visits tell lines apart. A program without such uses comes back as it is.
 */
export function expandProgram(program: Program, set: InstructionSet): Program {
  const known = expanded.get(program) ?? new Map<InstructionSet, Program>()
  expanded.set(program, known)
  const answer = known.get(set) ?? new ProgramExpander(program, set).expand()
  known.set(set, answer)
  return answer
}

/** Kept, so that the points of a grid share one expanded program, and so its modules. */
const expanded = new WeakMap<Program, Map<InstructionSet, Program>>()

/** What stands in for a use on a line, as a user reads it: a routine whose one procedure is called. */
export interface ExpansionUse {
  readonly line: number
  readonly class: SwitchedClass
  readonly text: string
}

/** The stand-ins that a program takes on a machine with this set, each line's once, in order of lines. */
export function listExpansions(program: Program, set: InstructionSet): ExpansionUse[] {
  const found = new Map<string, ExpansionUse>()
  for (const operation of program.blocks.flatMap(block => block.operations)) {
    const use = findUse(operation)
    if (!use || set.on.has(use.class)) continue
    const { line } = use.span
    found.set(`${use.function} ${line}`, { line, class: use.class, text: expansionFor(use.function, set).text })
  }
  return [...found.values()].sort((a, b) => a.line - b.line)
}

/** An operation that the set takes away: what stands in, what it is given and where its results go. */
interface Use {
  readonly function: ExpandedFunction
  readonly class: SwitchedClass
  readonly arguments: readonly Operand[]
  readonly results: readonly number[]
  readonly span: Span
}

interface Copy {
  readonly number: number
  readonly use: Use
  readonly expansion: Expansion
}

/** A stretch of an old block, up to the call of an expansion or to the block's own end. */
interface Piece {
  readonly operations: Operation[]
  costs: readonly Cost[]
  readonly use?: Use
}

class ProgramExpander {
  private readonly constants: Constant[]
  private readonly copies = new Map<string, Copy>()
  private readonly variables: Variable[][]

  constructor(
    private readonly program: Program,
    private readonly set: InstructionSet,
  ) {
    this.constants = [...program.constants]
    this.variables = program.procedures.map(procedure => [...procedure.variables])
  }

  expand(): Program {
    const pieces: Piece[][] = new Array(this.program.blocks.length)
    for (const [number, procedure] of this.program.procedures.entries()) {
      for (const at of procedure.blocks) pieces[at] = this.split(this.program.blocks[at]!, number)
    }
    if (this.copies.size === 0) return this.program
    const starts: number[] = []
    let total = 0
    for (const each of pieces) {
      starts.push(total)
      total += each.length
    }
    const blocks = pieces.flatMap((each, at) => this.join(this.program.blocks[at]!, each, starts, at))
    const procedures = this.program.procedures.map(
      (procedure, number): BlockProcedure => ({
        ...procedure,
        variables: this.variables[number]!,
        entry: starts[procedure.entry]!,
        blocks: procedure.blocks.flatMap(at => pieces[at]!.map((_, place) => starts[at]! + place)),
      }),
    )
    for (const copy of this.copies.values()) {
      const { procedure, copied } = this.copyProcedure(copy, blocks.length)
      procedures.push(procedure)
      blocks.push(...copied)
    }
    return { ...this.program, blocks: markCheckpoints(blocks, procedures), procedures, constants: this.constants }
  }

  private split(block: Block, procedure: number): Piece[] {
    const lost = new Map<string, number>()
    const calls: Cost[] = []
    const pieces: Piece[] = []
    let operations: Operation[] = []
    for (const operation of block.operations) {
      const use = findUse(operation)
      if (!use || this.set.on.has(use.class)) {
        operations.push(operation)
        continue
      }
      this.copyFor(use)
      if (use.class === 'divide') operations.push(this.divisorTest(operation, procedure))
      const { line } = use.span
      const key = costKey(use.class, line)
      lost.set(key, (lost.get(key) ?? 0) + 1)
      calls.push(
        { class: 'move', line, count: use.arguments.length, expanded: use.class },
        { class: 'call', line, count: 1, expanded: use.class },
      )
      pieces.push({ operations, costs: [], use })
      operations = []
    }
    pieces.push({ operations, costs: [] })
    // All costs stand on the first piece, which is visited as often as the block was.
    const kept = block.costs
      .map(cost => ({ ...cost, count: cost.count - (lost.get(costKey(cost.class, cost.line)) ?? 0) }))
      .filter(cost => cost.count > 0)
    pieces[0]!.costs = [...kept, ...calls]
    return pieces
  }

  /** The division itself, into a variable nobody reads and at no cost: it stops the run where the divisor is 0. */
  private divisorTest(operation: Operation, procedure: number): Operation {
    if (operation.kind !== 'binary') throw new Error('only a binary operation divides')
    const into = this.variables[procedure]!.push({ name: '(divisor test)', hidden: true }) - 1
    return { ...operation, into }
  }

  private join(block: Block, pieces: readonly Piece[], starts: readonly number[], at: number): Block[] {
    return pieces.map(({ operations, costs, use }, place): Block => {
      const terminator: Terminator = use
        ? {
            kind: 'call',
            procedure: this.copyFor(use).number,
            arguments: use.arguments,
            results: use.results,
            next: starts[at]! + place + 1,
            span: use.span,
          }
        : retargetTerminator(block.terminator, id => starts[id]!)
      return { operations, costs, terminator, line: block.line }
    })
  }

  private copyFor(use: Use): Copy {
    const key = `${use.function} ${use.span.line}`
    let copy = this.copies.get(key)
    if (!copy) {
      const number = this.program.procedures.length + this.copies.size
      copy = { number, use, expansion: expansionFor(use.function, this.set) }
      this.copies.set(key, copy)
    }
    return copy
  }

  private copyProcedure({ use, expansion }: Copy, first: number) {
    const source = expansion.program
    const called = source.procedures[1]!
    const constants = source.constants.map(constant => this.adopt(constant, source, use.span))
    const operand = (each: Operand): Operand =>
      each.kind === 'variable' ? each : { kind: 'constant', constant: constants[each.constant]! }
    const renumber = (id: number) => id - called.entry + first
    const copied = called.blocks.map((at): Block => {
      const { operations, costs, terminator } = source.blocks[at]!
      return {
        operations: operations.map(each => mapOperands({ ...each, span: use.span }, operand)),
        terminator: retargetTerminator(placeTerminator(terminator, use.span, operand), renumber),
        costs: costs.map(cost => ({ ...cost, line: use.span.line, expanded: use.class })),
        line: use.span.line,
      }
    })
    const blocks = called.blocks.map(renumber)
    return { procedure: { ...called, entry: first, blocks, span: use.span }, copied }
  }

  /** A constant of an expansion as one of the program's; fix words of an expansion are exact in w alone. */
  private adopt(constant: Constant, source: Program, span: Span): number {
    if (constant.kind === 'width' || constant.kind === 'literal') return this.constants.push(constant) - 1
    const fix = source.routine.fixes.find(each => constant.kind === 'fix' && each.name === constant.name)
    if (!fix) throw new Error(`an expansion reads a constant of kind ${constant.kind}`)
    return this.constants.push({ kind: 'exact', name: fix.name, value: fix.value, span }) - 1
  }
}

function costKey(charged: string, line: number): string {
  return `${charged} ${line}`
}

function findUse(operation: Operation): Use | undefined {
  const switched = classOf(operation)
  if (!switched) return undefined
  const { span } = operation
  switch (operation.kind) {
    case 'product': {
      const { left, right, high, low } = operation
      return { function: 'product', class: switched, arguments: [left, right], results: [high, low], span }
    }
    case 'binary': {
      const { left, right, into } = operation
      const name = operation.function as ExpandedFunction
      return { function: name, class: switched, arguments: [left, right], results: [into], span }
    }
    case 'unary': {
      const name = operation.function as ExpandedFunction
      return { function: name, class: switched, arguments: [operation.operand], results: [operation.into], span }
    }
    default:
      return undefined
  }
}

/** The operations that expansions are made of, with other operands. */
function mapOperands(operation: Operation, map: (operand: Operand) => Operand): Operation {
  switch (operation.kind) {
    case 'binary':
      return { ...operation, left: map(operation.left), right: map(operation.right) }
    case 'unary':
      return { ...operation, operand: map(operation.operand) }
    case 'move':
      return { ...operation, from: map(operation.from) }
    default:
      throw new Error(`an expansion holds an operation of kind ${operation.kind}`)
  }
}

function placeTerminator(terminator: Terminator, span: Span, map: (operand: Operand) => Operand): Terminator {
  switch (terminator.kind) {
    case 'branch':
      return { ...terminator, left: map(terminator.left), right: map(terminator.right), span }
    case 'return':
      return { ...terminator, values: terminator.values.map(map), span }
    case 'jump':
      return terminator
    default:
      throw new Error(`an expansion ends a block by ${terminator.kind}`)
  }
}
