import type { Diagnostic, Edit } from './diagnostic'
import type { Span } from './span'

/** A remedy as edits. */
export type Fix = NonNullable<Diagnostic['fix']>

/** A fix that puts `text` in place of what stands under `span`. */
export function replaceFix(label: string, span: { start: number; end: number }, text: string): Fix {
  return { label, edits: [{ start: span.start, end: span.end, text }] }
}

/** A fix of several edits, put in order. */
export function editsFix(label: string, edits: readonly Edit[]): Fix {
  return { label, edits: [...edits].sort((a, b) => a.start - b.start) }
}

/** A fix that takes the source line out on which `line` stands alone. */
export function deleteLineFix(text: string, line: Pick<Span, 'start' | 'end' | 'column'>): Fix {
  return { label: 'Delete this line', edits: [{ start: lineStart(line), end: nextLine(text, line.end), text: '' }] }
}

/** Where the source line begins that a span begins on. */
export function lineStart({ start, column }: Pick<Span, 'start' | 'column'>): number {
  return start - (column - 1)
}

/** Where the source line ends on which `offset` stands, before its line break. */
export function lineEnd(text: string, offset: number): number {
  let at = offset
  while (at < text.length && text[at] !== '\n' && text[at] !== '\r') at++
  return at
}

/** Where the source line after the one on which `offset` stands begins. */
export function nextLine(text: string, offset: number): number {
  const end = lineEnd(text, offset)
  return text.startsWith('\r\n', end) ? end + 2 : Math.min(end + 1, text.length)
}

/** Edits in order, those at one place as one. */
export function mergeEdits(edits: readonly Edit[]): Edit[] {
  const merged: Edit[] = []
  for (const edit of edits) {
    const last = merged[merged.length - 1]
    if (last && last.start === edit.start && last.end === edit.end)
      merged[merged.length - 1] = { ...last, text: last.text + edit.text }
    else merged.push(edit)
  }
  return merged
}
