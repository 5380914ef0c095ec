import type { Span } from '../../grammar/span'
import type {
  Block,
  BlockProcedure,
  ChargedClass,
  Constant,
  Cost,
  Operand,
  Operation,
  Terminator,
  Variable,
} from './block'

/** A block under construction. Targets in its terminator are drafts' ids until `closeProcedure` numbers them. */
export interface BlockDraft {
  readonly id: number
  readonly operations: Operation[]
  readonly costs: Map<string, { class: ChargedClass; line: number; count: number }>
  terminator: Terminator | undefined
  line: number
}

/** Gathers the constants of a program, each once. */
export class ConstantPool {
  readonly constants: Constant[] = []
  private readonly places = new Map<string, number>()

  operand(constant: Constant): Operand {
    const key = constantKey(constant)
    let place = this.places.get(key)
    if (place === undefined) {
      place = this.constants.push(constant) - 1
      this.places.set(key, place)
    }
    return { kind: 'constant', constant: place }
  }
}

function constantKey(constant: Constant): string {
  switch (constant.kind) {
    case 'literal':
      return `literal ${constant.value}`
    case 'width':
      return 'width'
    case 'address':
      return `address ${constant.array}`
    default:
      return `${constant.kind} ${constant.name}`
  }
}

/**
 * Builds the blocks of one procedure. Code goes to the current block; after a terminator, code that nothing can
 * reach goes to a block of its own, which `close` drops.
 */
export class BlockBuilder {
  private readonly drafts: BlockDraft[] = []
  private readonly variables: Variable[] = []
  private readonly variableByName = new Map<string, number>()
  /** Hidden variables for intermediate values, by depth: one instruction's are free for the next. */
  private readonly scratch: number[] = []
  private scratchDepth = 0
  private current: BlockDraft

  constructor(line: number) {
    this.current = this.draft(line)
  }

  /** The variable of that name, made at first mention. */
  variable(name: string): number {
    let place = this.variableByName.get(name)
    if (place === undefined) {
      place = this.variables.push({ name, hidden: false }) - 1
      this.variableByName.set(name, place)
    }
    return place
  }

  hasVariable(name: string): boolean {
    return this.variableByName.has(name)
  }

  /** A hidden variable that nothing else will write to. */
  heldVariable(name: string): number {
    return this.variables.push({ name, hidden: true }) - 1
  }

  /** A hidden variable for an intermediate value, free again after `releaseScratch` to an earlier mark. */
  takeScratch(): number {
    const depth = this.scratchDepth++
    let place = this.scratch[depth]
    if (place === undefined) {
      place = this.heldVariable(`(value ${depth + 1})`)
      this.scratch.push(place)
    }
    return place
  }

  scratchMark(): number {
    return this.scratchDepth
  }

  releaseScratch(mark: number): void {
    this.scratchDepth = mark
  }

  draft(line: number): BlockDraft {
    const draft: BlockDraft = {
      id: this.drafts.length,
      operations: [],
      costs: new Map(),
      terminator: undefined,
      line,
    }
    this.drafts.push(draft)
    return draft
  }

  /** Makes `draft` the current block; the block before, if it is still open, goes on there at no cost. */
  enter(draft: BlockDraft): void {
    if (!this.current.terminator) this.current.terminator = { kind: 'jump', to: draft.id }
    this.current = draft
  }

  emit(operation: Operation): void {
    this.current.operations.push(operation)
  }

  cost(charged: ChargedClass, line: number, count = 1): void {
    if (count === 0) return
    const key = `${charged} ${line}`
    const entry = this.current.costs.get(key)
    if (entry) entry.count += count
    else this.current.costs.set(key, { class: charged, line, count })
  }

  terminate(terminator: Terminator): void {
    const line = 'span' in terminator ? terminator.span.line : this.current.line
    this.current.terminator = terminator
    this.current = this.draft(line)
  }

  /** Numbers the blocks that can be reached, entry first, from `first` on. */
  close(procedure: Omit<BlockProcedure, 'variables' | 'entry' | 'blocks'>, first: number): ClosedProcedure {
    if (!this.current.terminator) this.current.terminator = { kind: 'halt', span: procedure.span }
    const order = this.reachableDrafts()
    const numbers = new Map(order.map((draft, place) => [draft.id, first + place]))
    const renumber = (id: number) => numbers.get(id)!
    const blocks = order.map(
      (draft): Block => ({
        operations: draft.operations,
        terminator: retargetTerminator(draft.terminator!, renumber),
        costs: [...draft.costs.values()] satisfies Cost[],
        line: draft.line,
      }),
    )
    return {
      blocks,
      procedure: {
        ...procedure,
        variables: this.variables,
        entry: first,
        blocks: order.map((_, place) => first + place),
      },
    }
  }

  private reachableDrafts(): BlockDraft[] {
    const seen = new Set<number>([0])
    const waiting = [0]
    while (waiting.length > 0) {
      for (const next of successors(this.drafts[waiting.pop()!]!.terminator!)) {
        if (seen.has(next)) continue
        seen.add(next)
        waiting.push(next)
      }
    }
    return this.drafts.filter(draft => seen.has(draft.id))
  }
}

export interface ClosedProcedure {
  readonly blocks: Block[]
  readonly procedure: BlockProcedure
}

/** The blocks of the same procedure that can come next; a call goes on at its `next`. */
export function successors(terminator: Terminator): readonly number[] {
  switch (terminator.kind) {
    case 'jump':
      return [terminator.to]
    case 'branch':
      return terminator.yes === terminator.no ? [terminator.yes] : [terminator.yes, terminator.no]
    case 'call':
      return [terminator.next]
    default:
      return []
  }
}

/** The terminator with its blocks renumbered. */
export function retargetTerminator(terminator: Terminator, renumber: (id: number) => number): Terminator {
  switch (terminator.kind) {
    case 'jump':
      return { ...terminator, to: renumber(terminator.to) }
    case 'branch':
      return { ...terminator, yes: renumber(terminator.yes), no: renumber(terminator.no) }
    case 'call':
      return { ...terminator, next: renumber(terminator.next) }
    default:
      return terminator
  }
}

/** The line a span starts on, for costs. */
export function lineOf(place: { readonly span: Span }): number {
  return place.span.line
}
