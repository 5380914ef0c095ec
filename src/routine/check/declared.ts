import type { Span } from '../../../grammar/span'
import type { ProcedureTree } from '../../../grammar/tree'
import type { ArrayRole } from '../routine'

/** What a declared name stands for. */
export type Meaning =
  | { readonly kind: 'width' }
  | { readonly kind: 'size'; readonly span: Span }
  | { readonly kind: 'let' | 'fix'; readonly span: Span }
  | { readonly kind: 'array'; readonly role: ArrayRole; readonly span: Span }
  | { readonly kind: 'scalar'; readonly role: 'in' | 'out' | 'inout'; readonly span: Span }
  | { readonly kind: 'procedure'; readonly tree: ProcedureTree; readonly span: Span }

const ROLE_WORDS = {
  in: 'an input',
  out: 'a result',
  inout: 'an input and result',
  work: 'a work array',
  table: 'a table',
} as const

/** What a meaning is called, with its article. */
export function describeMeaning(meaning: Meaning): string {
  switch (meaning.kind) {
    case 'width':
      return 'the word width'
    case 'size':
      return 'a size'
    case 'let':
      return 'a let'
    case 'fix':
      return 'a constant'
    case 'array':
      return meaning.role === 'table' ? 'a table' : 'an array'
    case 'scalar':
      return ROLE_WORDS[meaning.role]
    case 'procedure':
      return 'a procedure'
  }
}

/** `a size (line 3)`. */
export function locateMeaning(meaning: Meaning): string {
  const what = describeMeaning(meaning)
  return meaning.kind === 'width' ? what : `${what} (line ${meaning.span.line})`
}

/** Every declared name of a routine. */
export class Declared {
  private readonly meanings = new Map<string, Meaning>([['w', { kind: 'width' }]])

  get(name: string): Meaning | undefined {
    return this.meanings.get(name)
  }

  set(name: string, meaning: Meaning): void {
    this.meanings.set(name, meaning)
  }

  names(wanted: (meaning: Meaning) => boolean = () => true): string[] {
    return [...this.meanings].filter(([, meaning]) => wanted(meaning)).map(([name]) => name)
  }
}
