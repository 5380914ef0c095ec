import type { Operand, Program, Terminator } from '../routine'
import { type CallPlan, planCalls } from './calls'
import type { Choice } from './choices'
import type { CountedLoop } from './counted'
import { liveAcrossCalls } from './live'

// One flow graph for a whole program: procedures are copied to their calls, or stand in it once. Variables of all
// procedures are numbered throughout; copies of one procedure share its variables, since no two are in flight at once.

type Of<K extends Terminator['kind']> = Extract<Terminator, { kind: K }>

/** What a node does, in order. Operands and variables are numbered throughout the graph. */
export type Step =
  /**
   * The operations of a program's block, its checkpoint before them. `shift`: number of its first variable. `charged`:
   * its checkpoint is seen to elsewhere.
   */
  | { readonly kind: 'block'; readonly block: number; readonly shift: number; readonly charged: boolean }
  /** All words are read before one is written. */
  | { readonly kind: 'copy'; readonly from: readonly Operand[]; readonly into: readonly number[] }
  /**
   * Words in frames grow by `words` (checked against the limit), those of frames of copied procedures included.
   * `base`: whether the count in flight is added, that is, whether this stands in a shared procedure. `kept`: whether
   * the sum becomes the count in flight.
   */
  | {
      readonly kind: 'frame'
      readonly words: number
      readonly base: boolean
      readonly kept: boolean
      readonly block: number
    }
  /** The count of words in frames falls back by `words`. */
  | { readonly kind: 'unframe'; readonly words: number }
  /** Puts variables and the number of the place to return to on the stack of frames. */
  | { readonly kind: 'push'; readonly variables: readonly number[]; readonly place: number; readonly block: number }
  /** Takes variables off the stack of frames; the place has gone before. */
  | { readonly kind: 'pull'; readonly variables: readonly number[] }
  /** Sets a selector to a number. */
  | { readonly kind: 'select'; readonly selector: number; readonly value: number }
  /** The operations of both arms of a branch are worked out, and the test picks the words. */
  | { readonly kind: 'choose'; readonly choice: number; readonly test: Of<'branch'>; readonly shift: number }
  /** Works out how far the variable of a counted loop may go; the run ends where not even one pass is left. */
  | { readonly kind: 'begin'; readonly loop: number }
  /** Counts and charges the passes of a counted loop since its `begin`: what its variable tells, and `passes` more. */
  | { readonly kind: 'settle'; readonly loop: number; readonly passes: 0 | 1 }

export type End =
  | { readonly kind: 'jump'; readonly to: number }
  | {
      readonly kind: 'branch'
      readonly test: Of<'branch'>
      readonly shift: number
      readonly yes: number
      readonly no: number
    }
  /** To the target that a selector tells, or the place on top of the stack of frames. */
  | { readonly kind: 'dispatch'; readonly selector: number | 'stack'; readonly targets: readonly number[] }
  /** Before each pass of a counted loop: `past` its bound, or `to` its head. */
  | { readonly kind: 'guard'; readonly loop: number; readonly past: number; readonly to: number }
  | { readonly kind: 'finish' }

export interface FlowNode {
  /** The program's block that a visit of this node is a visit of; -1 for none. */
  readonly block: number
  steps: Step[]
  end: End
  /** Whether ways to and from it are left out of all counts: they lead round a circle that does no work. */
  readonly aside?: boolean
}

export interface FlowGraph {
  /** The first is the entry; the second the only one that finishes. */
  readonly nodes: FlowNode[]
  /** Number of variables, and of selectors. */
  variables: number
  selectors: number
  /** Whether any procedure keeps frames on a stack. */
  readonly stacked: boolean
  readonly choices: Choice[]
  readonly counted: CountedLoop[]
}

export const FINISH = 1

/** The nodes that can come after one, in the order of its end's slots; may repeat. */
export function targetsOf(end: End): readonly number[] {
  switch (end.kind) {
    case 'jump':
      return [end.to]
    case 'branch':
      return [end.yes, end.no]
    case 'dispatch':
      return end.targets
    case 'guard':
      return [end.past, end.to]
    case 'finish':
      return []
  }
}

/** The same end with other targets, slot by slot. */
export function withTargets(end: End, targets: readonly number[]): End {
  switch (end.kind) {
    case 'jump':
      return { kind: 'jump', to: targets[0]! }
    case 'branch':
      return { ...end, yes: targets[0]!, no: targets[1]! }
    case 'dispatch':
      return { ...end, targets }
    case 'guard':
      return { ...end, past: targets[0]!, to: targets[1]! }
    case 'finish':
      return end
  }
}

export function shiftOperand(operand: Operand, shift: number): Operand {
  if (shift === 0 || operand.kind === 'constant') return operand
  return { kind: 'variable', variable: operand.variable + shift }
}

export function buildFlow(program: Program): FlowGraph {
  return new FlowBuilder(program, planCalls(program)).build()
}

/** Where a copy of a procedure stands. */
interface Site {
  /** The shared procedure that it is copied into, 0 for the routine's own body. */
  readonly unit: number
  /** Words of the frames of copied procedures around it, its own included. */
  readonly depth: number
  readonly onReturn: (node: FlowNode, end: Of<'return'>) => void
}

/** A procedure that stands in the graph once. */
interface SharedProcedure {
  readonly entry: number
  /** The nodes that a return leads to, by place. */
  readonly continuations: number[]
  /** Where results wait between a return and its place. */
  readonly transfers: readonly number[]
  readonly selector: number | 'stack'
}

class FlowBuilder {
  private readonly nodes: FlowNode[] = []
  private readonly shifts: number[] = []
  private readonly sharedProcedures = new Map<number, SharedProcedure>()
  private readonly live = new Map<number, Map<number, number[]>>()
  private variables = 0
  private selectors = 0

  constructor(
    private readonly program: Program,
    private readonly plan: CallPlan,
  ) {
    for (const procedure of program.procedures) {
      this.shifts.push(this.variables)
      this.variables += procedure.variables.length
    }
  }

  build(): FlowGraph {
    const start = this.node(-1)
    this.nodes[start]!.end = { kind: 'jump', to: 2 }
    this.node(-1)
    const unused = () => {
      throw new Error('a return in the body of the routine')
    }
    this.copy(0, { unit: 0, depth: 0, onReturn: unused })
    const stacked = [...this.sharedProcedures.values()].some(({ selector }) => selector === 'stack')
    return {
      nodes: this.nodes,
      variables: this.variables,
      selectors: this.selectors,
      stacked,
      choices: [],
      counted: [],
    }
  }

  private node(block: number): number {
    return this.nodes.push({ block, steps: [], end: { kind: 'finish' } }) - 1
  }

  /** Copies a procedure's blocks; gives the node of its entry. */
  private copy(procedure: number, site: Site): number {
    const { blocks, entry } = this.program.procedures[procedure]!
    const shift = this.shifts[procedure]!
    const first = this.nodes.length - blocks[0]!
    for (const at of blocks) {
      const node = this.nodes[this.node(at)]!
      node.steps.push({ kind: 'block', block: at, shift, charged: false })
    }
    for (const at of blocks) {
      const node = this.nodes[first + at]!
      const { terminator } = this.program.blocks[at]!
      switch (terminator.kind) {
        case 'jump':
          node.end = { kind: 'jump', to: first + terminator.to }
          break
        case 'branch': {
          const { yes, no } = terminator
          node.end = { kind: 'branch', test: terminator, shift, yes: first + yes, no: first + no }
          break
        }
        case 'halt':
          node.end = { kind: 'jump', to: FINISH }
          break
        case 'return':
          site.onReturn(node, terminator)
          break
        case 'call':
          this.call(procedure, at, node, terminator, first + terminator.next, site)
          break
      }
    }
    return first + entry
  }

  private call(caller: number, block: number, node: FlowNode, call: Of<'call'>, next: number, site: Site): void {
    const callee = call.procedure
    const shift = this.shifts[caller]!
    const shared = this.plan.shared[callee]!
    const { frame } = this.program.procedures[callee]!
    const words = site.depth + frame
    node.steps.push({ kind: 'frame', words, base: site.unit !== 0, kept: shared, block })
    const given = call.arguments.map(operand => shiftOperand(operand, shift))
    const passed = given.map((_, at) => this.shifts[callee]! + at)
    const results = call.results.map(variable => variable + shift)
    if (!shared) {
      node.steps.push({ kind: 'copy', from: given, into: passed })
      const onReturn = (last: FlowNode, { values }: Of<'return'>) => {
        const from = values.slice(0, results.length).map(value => shiftOperand(value, this.shifts[callee]!))
        last.steps.push({ kind: 'copy', from, into: results })
        last.end = { kind: 'jump', to: next }
      }
      node.end = { kind: 'jump', to: this.copy(callee, { unit: site.unit, depth: words, onReturn }) }
      return
    }
    const target = this.share(callee)
    const after = this.nodes[this.node(-1)]!
    const place = target.continuations.push(this.nodes.length - 1) - 1
    if (target.selector === 'stack') {
      const kept = this.plan.component[caller] === this.plan.component[callee] ? this.liveAfter(caller, block) : []
      const variables = kept.map(variable => variable + shift)
      node.steps.push({ kind: 'push', variables, place, block })
      after.steps.push({ kind: 'pull', variables })
    } else {
      node.steps.push({ kind: 'select', selector: target.selector, value: place })
    }
    node.steps.push({ kind: 'copy', from: given, into: passed })
    node.end = { kind: 'jump', to: target.entry }
    if (site.unit !== 0) after.steps.push({ kind: 'unframe', words })
    const from = target.transfers
      .slice(0, results.length)
      .map((variable): Operand => ({ kind: 'variable', variable }))
    after.steps.push({ kind: 'copy', from, into: results })
    after.end = { kind: 'jump', to: next }
  }

  private share(procedure: number): SharedProcedure {
    const known = this.sharedProcedures.get(procedure)
    if (known) return known
    const { results, blocks, entry } = this.program.procedures[procedure]!
    const transfers = Array.from({ length: results }, (_, at) => this.variables + at)
    this.variables += results
    const selector = this.plan.recursive[procedure] ? 'stack' : this.selectors++
    const leave = this.node(-1)
    const continuations: number[] = []
    // Known before its blocks are copied, since they may call it.
    const shared = { entry: this.nodes.length + entry - blocks[0]!, continuations, transfers, selector } as const
    this.sharedProcedures.set(procedure, shared)
    this.nodes[leave]!.end = { kind: 'dispatch', selector, targets: continuations }
    const onReturn = (node: FlowNode, { values }: Of<'return'>) => {
      const from = values.map(value => shiftOperand(value, this.shifts[procedure]!))
      node.steps.push({ kind: 'copy', from, into: transfers })
      node.end = { kind: 'jump', to: leave }
    }
    this.copy(procedure, { unit: procedure, depth: 0, onReturn })
    return shared
  }

  private liveAfter(procedure: number, block: number): number[] {
    let across = this.live.get(procedure)
    if (!across) {
      across = liveAcrossCalls(this.program, procedure)
      this.live.set(procedure, across)
    }
    return across.get(block)!
  }
}
