import type { Binding, Tally } from '../machine'

/** Something that a run leans on. */
export interface Note {
  readonly kind: 'constant' | 'table' | 'expanded'
  readonly line: number
  readonly message: string
}

/**
 * What is known before the run (fix words with their values at this point, fix tables with their lengths), and which uses of
 * classes that are off were expanded, at which mean cost.
 */
export function notesOf({ program, names, arrays }: Binding, { expanded = [] }: Tally): Note[] {
  const { routine } = program
  const words = routine.fixes.map(
    ({ name, span }): Note => ({
      kind: 'constant',
      line: span.line,
      message: `${name} = ${names.get(name)} is known before the run`,
    }),
  )
  const tables = routine.arrays.flatMap(({ name, role, span }, number): Note[] =>
    role === 'table'
      ? [
          {
            kind: 'table',
            line: span.line,
            message: `${name}: ${arrays[number]!.length} words known before the run`,
          },
        ]
      : [],
  )
  const uses = expanded.map(
    ({ line, class: off, uses, operations }): Note => ({
      kind: 'expanded',
      line,
      message: `${off} is off and was expanded: ${counted(uses, 'use')}, ${counted(operations, 'operation')}, ${mean(operations, uses)} a use`,
    }),
  )
  return [...words, ...tables, ...uses].sort((a, b) => a.line - b.line)
}

function counted(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? '' : 's'}`
}

/** The mean, to a tenth where it is not whole. */
function mean(sum: number, count: number): string {
  return sum % count === 0 ? String(sum / count) : (sum / count).toFixed(1)
}
