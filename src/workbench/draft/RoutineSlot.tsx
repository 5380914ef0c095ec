import { useWorkbench, useWorkbenchState } from '../use'

/** Which of several routines in the draft is run. Nothing where there is one. */
export function RoutineSlot() {
  const workbench = useWorkbench()
  const { names, routine } = useWorkbenchState(({ checked, draft }) => ({
    names: checked.names,
    routine: draft.routine,
  }))
  if (names.length < 2) return null
  const picked = routine !== undefined && names.includes(routine) ? routine : names[0]
  return (
    <>
      <select
        className="pick"
        aria-label="Routine to run"
        value={picked}
        onChange={event => workbench.pickRoutine(event.currentTarget.value)}
      >
        {names.map(name => (
          <option key={name}>{name}</option>
        ))}
      </select>{' '}
    </>
  )
}
