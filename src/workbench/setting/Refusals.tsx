import { refuseClasses } from '../../machine'
import type { InstructionSet } from '../../machine/machine'
import { sentenceOf } from '../store/standing'
import { useWorkbenchState } from '../use'

/** What the routine uses and the picked sets lack: it is refused there, at its line. */
export function Refusals({ sets }: { readonly sets: readonly InstructionSet[] }) {
  const program = useWorkbenchState(state => state.checked.program)
  if (!program) return null
  const refused = sets.map(set => ({ set, first: refuseClasses(program, set)[0] })).filter(({ first }) => first)
  if (refused.length === 0) return null
  return (
    <ul className="remarks">
      {refused.map(({ set, first }) => (
        <li key={set.name}>
          <code>{program.routine.name}</code> is not run there: {first && sentenceOf(first.message)}
        </li>
      ))}
    </ul>
  )
}
