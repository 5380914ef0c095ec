import { readFile } from 'node:fs/promises'
import { resolve } from 'node:path'
import type { Diagnostic, Span } from '../../grammar'
import type { Failure } from '../machine'
import { type Program, readProgram } from '../routine'
import { EXIT, Leave, misuse, type Terminal } from './terminal'

/** Stands for standard input among the files. */
export const STDIN = '-'

/** A routine as the command got it. `file` is the name for messages. */
export interface Source {
  readonly file: string
  readonly program: Program
}

/** The text of a file, or of standard input. */
export async function readText(terminal: Terminal, file: string): Promise<string> {
  if (file === STDIN) return terminal.readInput()
  try {
    return await readFile(resolve(terminal.folder, file), 'utf8')
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException
    const why = code === 'ENOENT' ? 'there is no such file' : code === 'EISDIR' ? 'it is a folder' : String(code)
    throw misuse(`cannot read ${file}: ${why}`, 'give the path of a routine, or - for standard input')
  }
}

/**
 * The one file of `files`, read, checked and lowered; `routine` picks among several in it, else the first is taken and
 * the others are named. Errors leave the command, each with its place and remedy.
 */
export async function readSource(
  terminal: Terminal,
  verb: string,
  files: readonly string[],
  routine: string | undefined,
): Promise<Source> {
  const [path, ...others] = files
  if (path === undefined)
    throw misuse(`${verb} needs a file`, `write tallyword ${verb} FILE, or - for standard input`)
  if (others.length > 0)
    throw misuse(`${verb} takes one file, and ${others.join(', ')} came on top`, 'quote values that hold blanks')
  const text = await readText(terminal, path)
  const file = path === STDIN ? 'stdin' : path
  const { program, names, diagnostics } = readProgram(text, routine)
  const errors = diagnostics.filter(({ severity }) => severity === 'error')
  for (const warning of diagnostics) if (!errors.includes(warning)) terminal.complain(sayDiagnostic(file, warning))
  if (errors.length > 0) throw new Leave(EXIT.usage, errors.map(error => sayDiagnostic(file, error)).join('\n'))
  if (routine !== undefined && !names.includes(routine))
    throw misuse(`${file} has no routine ${routine}`, `it has ${names.join(', ') || 'none'}`)
  if (!program) throw misuse(`${file} holds no routine`, 'a routine begins with a line such as: routine total')
  if (routine === undefined && names.length > 1)
    terminal.complain(`${file}: it holds ${names.join(', ')}; taking ${names[0]} (--routine NAME takes another)`)
  return { file, program }
}

/** `file:line:column: message. Remedy.`, and the further places of the message below it. */
export function sayDiagnostic(file: string, { severity, span, message, remedy, path = [] }: Diagnostic): string {
  const kind = severity === 'warning' ? 'warning: ' : ''
  const further = path.map(step => `\n  ${sayAt(file, step.span, step.note)}`)
  return sayAt(file, span, `${kind}${message.replace(/\.?$/, '.')} ${remedy}`.trimEnd()) + further.join('')
}

/** A message at its place. */
export function sayAt(file: string, span: Span | undefined, message: string): string {
  return span ? `${file}:${span.line}:${span.column}: ${message}` : `${file}: ${message}`
}

/** A failed run at its place; the message names the line too, which here stands before it. */
export function sayFailure(file: string, { span, message }: Failure): string {
  return sayAt(file, span, message.replace(/^line \d+: /, ''))
}
