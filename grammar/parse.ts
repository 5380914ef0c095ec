import { assembleRoutines } from './assembly'
import type { Diagnostic } from './diagnostic'
import { readExact, readExactCondition } from './exact'
import { type Line, readLines } from './lines'
import { Notes } from './notes'
import type { Phrase } from './phrase'
import { LineReader } from './reader'
import type { Exact, ExactCondition, RoutineTree } from './tree'

export interface ParsedText {
  /** Every routine of the text, in order. Where there are errors, trees lack the lines that they stand in. */
  readonly routines: RoutineTree[]
  /** In the order of the text. */
  readonly diagnostics: Diagnostic[]
}

/** Parses a text of any number of routines. Never throws: whatever is wrong is a diagnostic. */
export function parseText(text: string): ParsedText {
  const notes = new Notes(text)
  const reading = readLines(text)
  const routines = assembleRoutines(reading, notes)
  if (reading.lines.length === 0)
    notes.correct(
      { start: 0, end: 0, line: 1, column: 1 },
      reading.comments.length > 0 ? 'The text has comments, and no routine.' : 'The text is empty.',
      'Write a routine: `routine NAME`, its declarations, `begin`, its instructions, `end`.',
    )
  return { routines, diagnostics: notes.diagnostics() }
}

/** Parses an exact expression that stands alone, such as `lg(n)^2`. `exact` is absent where there are errors. */
export function parseExact(text: string): { exact?: Exact; diagnostics: Diagnostic[] } {
  const { tree, diagnostics } = parsePhrase(text, readExact)
  return tree && diagnostics.length === 0 ? { exact: tree, diagnostics } : { diagnostics }
}

/** Parses an exact condition that stands alone, such as `w >= 2*lg(n)`. `condition` is absent where there are errors. */
export function parseCondition(text: string): { condition?: ExactCondition; diagnostics: Diagnostic[] } {
  const { tree, diagnostics } = parsePhrase(text, readExactCondition)
  return tree && diagnostics.length === 0 ? { condition: tree, diagnostics } : { diagnostics }
}

function parsePhrase<Tree>(
  text: string,
  read: (phrase: Phrase, notes: Notes) => Tree,
): { tree?: Tree; diagnostics: Diagnostic[] } {
  const notes = new Notes(text)
  const { lines } = readLines(text)
  const [first] = lines
  const last = lines[lines.length - 1]
  if (!first || !last) {
    notes.refuse(
      { start: 0, end: 0, line: 1, column: 1 },
      'There is no expression.',
      'Write one, such as `2*lg(n)`.',
    )
    return { diagnostics: notes.diagnostics() }
  }
  // Line breaks mean nothing here.
  const line: Line = {
    ...first,
    end: last.end,
    tokens: lines.flatMap(({ tokens }) => tokens),
    strays: lines.flatMap(({ strays }) => strays),
  }
  const phrase = new LineReader(notes).readPhrase(line)
  const tree = phrase && read(phrase, notes)
  return { ...(tree && { tree }), diagnostics: notes.diagnostics() }
}
