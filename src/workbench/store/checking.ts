import { readProgram } from '../../routine'
import type { CheckedDraft, Draft } from './draft'

/** Checks a draft. Where the routine that was picked is there no more, the first is read. */
export function checkDraft({ text, routine }: Draft): CheckedDraft {
  const picked = readProgram(text, routine)
  const gone = routine !== undefined && !picked.names.includes(routine) && picked.names.length > 0
  const { program, names, diagnostics } = gone ? readProgram(text) : picked
  return { text, routine, names, diagnostics, program }
}
