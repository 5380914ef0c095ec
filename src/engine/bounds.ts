import type { Operand, Operation, Program } from '../routine'
import { testOnWay } from './counted'
import { type FlowGraph, type Step, shiftOperand } from './flow'
import { operationWrites } from './live'
import type { FlowOrder } from './order'

/** Nodes that one question may look at; past that the answer is that nothing is known. */
const MOST_NODES = 200
/** Operations that one answer may rest on, one on the other. */
const MOST_DEPTH = 6

/**
 * How large words can be at a place in the code, by the operations that made them and by the tests on the way. Each
 * question is answered by itself, looking back from the place: few are asked.
 */
export class Bounds {
  private readonly ones: bigint
  /** By node: the variables that it sets, once they have been asked for. */
  private readonly writes: (ReadonlySet<number> | undefined)[] = []
  private node = 0
  private step = 0
  private operation = 0
  private budget = 0

  constructor(
    private readonly program: Program,
    private readonly graph: FlowGraph,
    private readonly order: FlowOrder,
    private readonly width: number,
  ) {
    this.ones = (1n << BigInt(width)) - 1n
  }

  /** Later questions are about the words before this operation of this step. */
  moveTo(node: number, step: number, operation: number): void {
    this.node = node
    this.step = step
    this.operation = operation
  }

  /** A bound (inclusive) of the word that an operand has at the place; at most 2^w - 1. */
  most(operand: Operand): bigint {
    this.budget = MOST_NODES
    return this.mostOf(operand, this.node, this.step, this.operation, MOST_DEPTH)
  }

  private mostOf(operand: Operand, node: number, step: number, operation: number, depth: number): bigint {
    if (operand.kind === 'constant') {
      const constant = this.program.constants[operand.constant]!
      if (constant.kind === 'literal') return constant.value & this.ones
      return constant.kind === 'width' ? BigInt(this.width) : this.ones
    }
    return depth === 0 ? this.ones : this.mostOfVariable(operand.variable, node, step, operation, depth)
  }

  private mostOfVariable(variable: number, from: number, step: number, operation: number, depth: number): bigint {
    const here = this.mostInNode(variable, from, step, operation, depth)
    if (here !== undefined) return here
    const { dominator, sources, rank } = this.order
    let most = this.ones
    for (let at = from; rank[at] !== 0; ) {
      const above = dominator[at]!
      if (sources[at]!.length === 1) {
        const told = this.mostByTest(variable, above, at, depth)
        if (told < most) most = told
        this.budget--
      } else if (this.writtenBetween(variable, above, at)) return most
      if (this.budget <= 0) return most
      const steps = this.graph.nodes[above]!.steps.length
      const made = this.mostInNode(variable, above, steps, 0, depth)
      if (made !== undefined) return made < most ? made : most
      at = above
    }
    return most
  }

  /** A bound by what the variable was last set to in a node, before a place in it; undefined where it was not. */
  private mostInNode(
    variable: number,
    node: number,
    step: number,
    operation: number,
    depth: number,
  ): bigint | undefined {
    if (!this.nodeWrites(node).has(variable)) return undefined
    const { steps } = this.graph.nodes[node]!
    for (let at = Math.min(step, steps.length - 1); at >= 0; at--) {
      const each = steps[at]!
      if (each.kind === 'block') {
        const { operations } = this.program.blocks[each.block]!
        const first = (at === step ? operation : operations.length) - 1
        for (let place = first; place >= 0; place--) {
          const made = operations[place]!
          if (operationWrites(made).includes(variable - each.shift))
            return this.mostMade(made, node, at, place, each.shift, depth)
        }
      } else if (at < step && this.stepWrites(each).includes(variable)) {
        const place = each.kind === 'copy' ? each.into.indexOf(variable) : -1
        return place < 0 || each.kind !== 'copy'
          ? this.ones
          : this.mostOf(each.from[place]!, node, at, 0, depth - 1)
      }
    }
    return undefined
  }

  private mostMade(
    made: Operation,
    node: number,
    step: number,
    place: number,
    shift: number,
    depth: number,
  ): bigint {
    const of = (operand: Operand) => this.mostOf(shiftOperand(operand, shift), node, step, place, depth - 1)
    switch (made.kind) {
      case 'move':
        return of(made.from)
      case 'unary':
        return made.function === 'negate' || made.function === 'complement' ? this.ones : BigInt(this.width)
      case 'binary': {
        const [left, right] = [of(made.left), of(made.right)]
        switch (made.function) {
          case 'and':
            return least(left, right)
          case 'add':
            return this.within(left + right)
          case 'multiply':
            return this.within(left * right)
          case 'or':
          case 'xor':
            return fill(left | right)
          case 'divide':
            return left
          case 'modulo':
            return right === 0n ? left : least(left, right - 1n)
          case 'shift-right': {
            const known = made.right.kind === 'constant' && this.program.constants[made.right.constant]!.kind
            return known === 'literal' || known === 'width' ? left >> right : left
          }
          default:
            return this.ones
        }
      }
      default:
        return this.ones
    }
  }

  private mostByTest(variable: number, above: number, at: number, depth: number): bigint {
    const test = testOnWay(this.graph, above, at, variable)
    if (!test || test.operator === '>' || test.operator === '>=' || test.operator === '!=') return this.ones
    const other = this.mostOf(test.other, above, this.graph.nodes[above]!.steps.length, 0, depth - 1)
    return test.operator === '<' && other > 0n ? other - 1n : other
  }

  /** Whether a node on a way from a dominator to a node, the first left out, sets the variable. */
  private writtenBetween(variable: number, above: number, at: number): boolean {
    const seen = new Set([above])
    const waiting = [at]
    for (let node = waiting.pop(); node !== undefined; node = waiting.pop()) {
      for (const source of this.order.sources[node]!) {
        if (seen.has(source)) continue
        seen.add(source)
        if (this.nodeWrites(source).has(variable) || --this.budget <= 0) return true
        waiting.push(source)
      }
    }
    return false
  }

  private nodeWrites(node: number): ReadonlySet<number> {
    this.writes[node] ??= new Set(this.graph.nodes[node]!.steps.flatMap(step => this.stepWrites(step)))
    return this.writes[node]
  }

  private within(most: bigint): bigint {
    return most > this.ones ? this.ones : most
  }

  private blockWrites(block: number): number[] {
    return this.program.blocks[block]!.operations.flatMap(operationWrites)
  }

  private stepWrites(step: Step): readonly number[] {
    switch (step.kind) {
      case 'block':
        return this.blockWrites(step.block).map(variable => variable + step.shift)
      case 'choose': {
        const { yes, no } = this.graph.choices[step.choice]!
        return [yes, no].flatMap(block =>
          block === undefined ? [] : this.blockWrites(block).map(variable => variable + step.shift),
        )
      }
      case 'copy':
        return step.into
      case 'pull':
        return step.variables
      default:
        return []
    }
  }
}

function least(a: bigint, b: bigint): bigint {
  return a < b ? a : b
}

/** All ones up to the highest bit. */
function fill(word: bigint): bigint {
  return word === 0n ? 0n : (1n << BigInt(word.toString(2).length)) - 1n
}
