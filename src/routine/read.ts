import { parseText } from '../../grammar'
import type { Diagnostic } from '../../grammar/diagnostic'
import type { Program } from './block'
import { gatherDeclarations } from './declare'
import { lowerRoutine } from './lower'

/**
 * Reads the first routine of a text, or the named one, as far as blocks. `names` lists the text's routines. There is no
 * program where a diagnostic is an error.
 */
export function readProgram(
  text: string,
  name?: string,
): { program?: Program; names: string[]; diagnostics: Diagnostic[] } {
  const { routines, diagnostics } = parseText(text)
  const names = routines.map(routine => routine.name.text)
  const tree = name === undefined ? routines[0] : routines.find(routine => routine.name.text === name)
  if (!tree || diagnostics.some(each => each.severity === 'error')) return { names, diagnostics }
  const lowered = lowerRoutine(gatherDeclarations(tree, text))
  return { ...lowered, names, diagnostics: [...diagnostics, ...lowered.diagnostics] }
}
