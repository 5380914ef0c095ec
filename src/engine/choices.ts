import type { Operation, Program } from '../routine'
import { type FlowGraph, targetsOf } from './flow'

/** Operations that an arm may have, at most. */
export const MOST_OPERATIONS = 3

/**
 * Turns branches over a few plain operations into choices between words: both arms are worked out and the test picks,
 * which no processor mispredicts. A carry, a swap or a step of a binary search goes either way as the data has it,
 * and a wrong guess costs more than all of the arm.
 */
export function makeChoices(program: Program, graph: FlowGraph): void {
  const { nodes } = graph
  const arrivals = new Int32Array(nodes.length)
  for (const { end } of nodes) for (const target of targetsOf(end)) arrivals[target]!++
  for (let at = 0; at < nodes.length; at++) {
    const { end, steps } = nodes[at]!
    if (end.kind !== 'branch' || end.yes === end.no) continue
    const afterYes = arrivals[end.yes] === 1 ? plainArm(program, graph, end.yes) : undefined
    const afterNo = arrivals[end.no] === 1 ? plainArm(program, graph, end.no) : undefined
    const [yes, no, after] =
      afterYes !== undefined && afterYes === afterNo
        ? [end.yes, end.no, afterYes]
        : afterYes === end.no
          ? [end.yes, undefined, afterYes]
          : afterNo === end.yes
            ? [undefined, end.no, afterNo]
            : [undefined, undefined, at]
    if (after === at) continue
    const block = (arm: number | undefined) => (arm === undefined ? undefined : nodes[arm]!.block)
    const choice = graph.choices.push({ node: at, yes: block(yes), no: block(no) }) - 1
    steps.push({ kind: 'choose', choice, test: end.test, shift: end.shift })
    nodes[at]!.end = { kind: 'jump', to: after }
    // Where the arms met, one way stands for what were two.
    arrivals[after]!--
  }
}

/** A branch whose arms have become a choice; the blocks of its arms, where it has them. */
export interface Choice {
  readonly node: number
  readonly yes: number | undefined
  readonly no: number | undefined
}

/** The node that an arm goes on to, if all that the arm does can be done in vain. */
function plainArm({ blocks }: Program, { nodes }: FlowGraph, arm: number): number | undefined {
  const { block, steps, end } = nodes[arm]!
  if (block === -1 || steps.length !== 1 || end.kind !== 'jump') return undefined
  const { operations, checkpoint } = blocks[block]!
  if (checkpoint !== undefined || operations.length > MOST_OPERATIONS || !operations.every(isPlain))
    return undefined
  return end.to
}

/** Whether an operation cannot fail, touches no memory and takes a cycle or two. */
function isPlain(operation: Operation): boolean {
  switch (operation.kind) {
    case 'move':
      return true
    case 'unary':
      return operation.function === 'negate' || operation.function === 'complement'
    case 'binary':
      return !['multiply', 'divide', 'modulo'].includes(operation.function)
    default:
      return false
  }
}
