import type { Diagnostic } from './diagnostic'
import { parseText } from './parse'
import { printRoutine } from './printer'

/**
 * A text in canonical layout, one blank line between routines. `text` is absent where there are errors: a layout of
 * half a text would lose the other half.
 */
export function formatText(text: string): { text?: string; diagnostics: Diagnostic[] } {
  const { routines, diagnostics } = parseText(text)
  if (diagnostics.length > 0) return { diagnostics }
  return { text: `${routines.map(printRoutine).join('\n\n')}\n`, diagnostics }
}
