import type { Operand, Operation, Program, Terminator } from '../routine'
import { MOST_OPERATIONS } from './choices'
import type { CodeBuilder, LocalPool } from './code'
import { type FlowGraph, type Step, shiftOperand } from './flow'
import { mapOperation } from './live'
import { I32, I32_OPS, I64_OPS, OP } from './opcode'
import type { WordCode } from './word-code'

/** Code of choices: both arms of a branch worked out, and the test picks the words. */
export class ChoiceCode {
  private readonly taken: number[] = []
  private testLocal: number | undefined

  constructor(
    private readonly program: Program,
    private readonly graph: FlowGraph,
    private readonly words: WordCode,
    private readonly code: CodeBuilder,
    private readonly pool: LocalPool,
    private readonly pushTest: (test: Extract<Terminator, { kind: 'branch' }>, shift: number) => void,
    private readonly operation: (operation: Operation, block: number) => void,
  ) {}

  /** The arms work on variables of their own, until the test picks. */
  emit({ choice, test, shift }: Extract<Step, { kind: 'choose' }>): void {
    const { code } = this
    const { yes, no } = this.graph.choices[choice]!
    this.testLocal ??= this.pool.take(I32)
    this.pushTest(test, shift)
    code.set(this.testLocal)
    const arms = [this.arm(yes, shift, 0), this.arm(no, shift, MOST_SPARE)]
    const written = new Set([...arms[0]!.keys(), ...arms[1]!.keys()])
    for (const variable of written) {
      const [first, second] = arms.map(
        (spares): Operand => ({
          kind: 'variable',
          variable: spares.get(variable) ?? variable,
        }),
      )
      this.words.choose(variable, this.testLocal, first!, second!)
    }
    const taken = this.takenOf(choice)
    code.get(taken)
    code.get(this.testLocal)
    if (yes === undefined) code.op(I32_OPS.eqz)
    code.op(OP.i64ExtendI32U)
    code.op(I64_OPS.add)
    code.set(taken)
  }

  /** Works out an arm on spare variables, from a number on; gives the spare of each variable that it sets. */
  private arm(block: number | undefined, shift: number, first: number): Map<number, number> {
    const spares = new Map<number, number>()
    if (block === undefined) return spares
    for (const operation of this.program.blocks[block]!.operations) {
      const moved = mapOperation(
        operation,
        operand => {
          const shifted = shiftOperand(operand, shift)
          const spare = shifted.kind === 'variable' ? spares.get(shifted.variable) : undefined
          return spare === undefined ? shifted : { kind: 'variable', variable: spare }
        },
        variable => {
          const spare = spares.get(variable + shift) ?? this.graph.variables + first + spares.size
          spares.set(variable + shift, spare)
          return spare
        },
      )
      this.operation(moved, block)
    }
    return spares
  }

  /** The local that counts how often a choice took its arm, or the first of its two. */
  takenOf(choice: number): number {
    this.taken[choice] ??= this.pool.take(I64_OPS.type)
    return this.taken[choice]!
  }
}

/** Spare variables of one arm of a choice: as many as it may have operations. */
const MOST_SPARE = MOST_OPERATIONS
