import { INSTRUCTION_SETS, type InstructionSetName, type OffPolicy, refuseClasses } from '../../machine'
import type { Program } from '../../routine'
import { sentenceOf } from '../store/standing'
import { useWorkbenchState } from '../use'

/** Whether a picked set lacks a class that the routine uses. */
export function leansOnOff(program: Program | undefined, sets: readonly InstructionSetName[]): boolean {
  return program !== undefined && sets.some(set => refuseClasses(program, INSTRUCTION_SETS[set]).length > 0)
}

/** What the routine uses and a picked set lacks, with its lines, and what comes of it. */
export function OffUses(props: { readonly sets: readonly InstructionSetName[]; readonly off: OffPolicy }) {
  const program = useWorkbenchState(state => state.checked.program)
  if (!program) return null
  const uses = props.sets
    .map(set => ({ set, found: refuseClasses(program, INSTRUCTION_SETS[set]) }))
    .filter(({ found }) => found.length > 0)
  if (uses.length === 0) return null
  return (
    <ul className="remarks">
      {uses.map(({ set, found }) => (
        <li key={set}>
          {sentenceOf(found[0]!.message)}
          {found.length > 1 && ` So do ${found.length - 1} more.`}{' '}
          {props.off === 'refuse' && 'No point is run there.'}
        </li>
      ))}
    </ul>
  )
}
