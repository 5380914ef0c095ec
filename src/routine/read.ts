import type { Diagnostic } from '../../grammar'
import { parseText, type RoutineTree } from '../../grammar'
import type { Program } from './block'
import { checkRoutine } from './check/check'
import { lowerRoutine } from './lower'

/**
 * Reads a text of any number of routines, and makes a program of the one named, or of the first. `names` lists the
 * routines of the text in order. Diagnostics are the parser's for the whole text and all others for the routine that is
 * read. There is no program where that routine has errors.
 */
export function readProgram(
  text: string,
  name?: string,
): { program?: Program; names: string[]; diagnostics: Diagnostic[] } {
  const { routines, diagnostics: parsed } = parseText(text)
  const names = routines.map(routine => routine.name.text)
  const chosen = name === undefined ? routines[0] : routines.find(routine => routine.name.text === name)
  const found = [...parsed, ...repeatedNames(routines)]
  if (!chosen) {
    if (name !== undefined && routines.length > 0) found.push(unknownRoutine(name, names))
    return { names, diagnostics: found }
  }
  const elsewhere = (diagnostic: Diagnostic) =>
    routines.some(routine => routine !== chosen && contains(routine, diagnostic))
  const broken = parsed.filter(diagnostic => diagnostic.severity === 'error' && !elsewhere(diagnostic))
  const checked = checkRoutine(
    chosen,
    text,
    broken.map(({ span }) => span),
  )
  found.push(...checked.diagnostics)
  if (!checked.routine || broken.length > 0) return { names, diagnostics: inOrder(found) }
  const lowered = lowerRoutine(checked.routine)
  found.push(...lowered.diagnostics)
  return { names, diagnostics: inOrder(found), ...(lowered.program && { program: lowered.program }) }
}

function contains({ span }: RoutineTree, diagnostic: Diagnostic): boolean {
  return diagnostic.span.start >= span.start && diagnostic.span.start < span.end
}

function inOrder(diagnostics: readonly Diagnostic[]): Diagnostic[] {
  return [...diagnostics].sort((a, b) => a.span.start - b.span.start)
}

function repeatedNames(routines: readonly RoutineTree[]): Diagnostic[] {
  const first = new Map<string, RoutineTree>()
  const found: Diagnostic[] = []
  for (const routine of routines) {
    const { text, span } = routine.name
    const known = first.get(text)
    if (!known) first.set(text, routine)
    else
      found.push({
        severity: 'warning',
        span,
        message: `A routine \`${text}\` stands above already (line ${known.span.line}), and is the one that the name picks.`,
        remedy: 'Give this one another name.',
      })
  }
  return found
}

function unknownRoutine(name: string, names: readonly string[]): Diagnostic {
  return {
    severity: 'error',
    span: { start: 0, end: 0, line: 1, column: 1 },
    message: `The text has no routine \`${name}\`.`,
    remedy: `Pick one of those that it has: ${names.join(', ')}.`,
  }
}
