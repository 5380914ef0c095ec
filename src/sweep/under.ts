import type { Diagnostic } from '../../grammar'
import { expandProgram } from '../engine'
import { INSTRUCTION_SETS, type InstructionSetName, type OffPolicy, refuseClasses } from '../machine'
import type { Program } from '../routine'

const expanded = new WeakMap<Program, Map<InstructionSetName, Program>>()

/**
 * A program as it runs under an instruction set: itself where it uses nothing that is off, or with those uses replaced
 * where the policy is to expand them. Else what it may not use, line by line. The same program gives the same answer,
 * identity and all, so that modules and results can be kept by it.
 */
export function programUnder(
  program: Program,
  set: InstructionSetName,
  off: OffPolicy,
): { program: Program } | { refused: readonly Diagnostic[] } {
  const refused = refuseClasses(program, INSTRUCTION_SETS[set])
  if (refused.length === 0) return { program }
  if (off === 'refuse') return { refused }
  const known = expanded.get(program) ?? new Map<InstructionSetName, Program>()
  expanded.set(program, known)
  const own = known.get(set) ?? expandProgram(program, INSTRUCTION_SETS[set])
  known.set(set, own)
  return { program: own }
}
