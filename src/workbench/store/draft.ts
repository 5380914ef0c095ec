import type { Diagnostic } from '../../../grammar/diagnostic'
import type { Program } from '../../routine/block'

/** The text being written. */
export interface Draft {
  /** Name of its file, with its ending. */
  readonly file: string
  readonly text: string
  /** Name of the routine to run, of several in one text; undefined for the first. */
  readonly routine: string | undefined
}

/** What the notation's rules say of a draft. */
export interface CheckedDraft {
  readonly text: string
  readonly routine: string | undefined
  /** Names of all routines in the text, in order. */
  readonly names: readonly string[]
  readonly diagnostics: readonly Diagnostic[]
  /** Absent where an error stands in the way. */
  readonly program: Program | undefined
}

/** Whether a check is of the draft as it stands. */
export function isCheckOf(checked: CheckedDraft, draft: Draft): boolean {
  return checked.text === draft.text && checked.routine === draft.routine
}

export function firstError(checked: CheckedDraft): Diagnostic | undefined {
  return checked.diagnostics.find(({ severity }) => severity === 'error')
}

const ENDING = '.tally'

/** A file name from what a user typed: trimmed, without the signs that file systems refuse, with the ending. */
export function fileName(typed: string): string {
  const kept = [...typed]
    .map(character => ('\\/:*?"<>|'.includes(character) || character < ' ' ? '-' : character))
    .join('')
    .trim()
    .replace(/^\.+/, '')
  if (kept === '' || `.${kept}` === ENDING) return `draft${ENDING}`
  return kept.endsWith(ENDING) ? kept : `${kept.replace(/\.txt$/, '')}${ENDING}`
}
