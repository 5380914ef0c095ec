import type { Binding } from '../machine'

/** Something that a run leans on. */
export interface Note {
  readonly kind: 'constant' | 'table'
  readonly line: number
  readonly message: string
}

/** What is known before the run: fix words with their values at this point, fix tables with their lengths. */
export function notesOf({ program, names, arrays }: Binding): Note[] {
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
  return [...words, ...tables].sort((a, b) => a.line - b.line)
}
