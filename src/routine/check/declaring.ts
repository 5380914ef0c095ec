import type { Edit } from '../../../grammar/diagnostic'
import { deleteLineFix, lineEnd, lineStart } from '../../../grammar/edits'
import type { Declaration, DeclaredItem, RoutineTree } from '../../../grammar/tree'
import type { Fix } from './report'

type Listing = Extract<Declaration, { kind: 'in' | 'out' | 'inout' | 'work' }>

/** Remedies that change the declarations of a routine's text. */
export class Declaring {
  constructor(
    private readonly tree: RoutineTree,
    private readonly text: string,
  ) {}

  /** Inserts a declaration line below the others. */
  insert(line: string): Fix {
    return { label: `Insert \`${line}\``, edits: [this.insertion(line)] }
  }

  /** Declares an item in another role than it has: `in x` as `inout x`. */
  changeRole(name: string, role: Listing['kind']): Fix | undefined {
    const found = this.find(name)
    if (!found) return undefined
    const { listing, item } = found
    const label = `Declare \`${role} ${this.read(item)}\``
    if (listing.items.length === 1) {
      const { start } = listing.span
      return { label, edits: [{ start, end: start + listing.kind.length, text: role }] }
    }
    const below = lineEnd(this.text, listing.span.end)
    const line = `\n${' '.repeat(listing.span.column - 1)}${role} ${this.read(item)}`
    return { label, edits: [removal(listing, item), { start: below, end: below, text: line }] }
  }

  /** Takes an item out of its declaration, and the line with it where nothing is left on it. */
  remove(item: DeclaredItem): Fix | undefined {
    const listing = this.listings().find(each => each.items.includes(item))
    if (!listing) return undefined
    if (listing.items.length === 1) return deleteLineFix(this.text, listing.span)
    return { label: `Delete \`${this.read(item)}\``, edits: [removal(listing, item)] }
  }

  /** Gives an item that stands without one a length. */
  lengthen(name: string, length: string): Fix | undefined {
    const found = this.find(name)
    if (!found) return undefined
    const { end } = found.item.name.span
    return { label: `Write \`${name}[${length}]\``, edits: [{ start: end, end, text: `[${length}]` }] }
  }

  private insertion(line: string): Edit {
    const { name, declarations, span } = this.tree
    const lines = declarations.filter(each => each.kind !== 'procedure')
    const last = lines[lines.length - 1]
    if (last) {
      const at = lineEnd(this.text, last.span.end)
      return { start: at, end: at, text: `\n${' '.repeat(last.span.column - 1)}${line}` }
    }
    // A draft without a `routine` line: the parser has its own remedy for that, which reads this line as a declaration.
    if (name.span.start === name.span.end) {
      const at = lineStart(span)
      return { start: at, end: at, text: `${line}\n` }
    }
    const at = lineEnd(this.text, name.span.end)
    return { start: at, end: at, text: `\n${' '.repeat(span.column + 1)}${line}` }
  }

  private listings(): Listing[] {
    return this.tree.declarations.filter((each): each is Listing => 'items' in each)
  }

  private find(name: string): { listing: Listing; item: DeclaredItem } | undefined {
    for (const listing of this.listings()) {
      const item = listing.items.find(each => each.name.text === name)
      if (item) return { listing, item }
    }
    return undefined
  }

  private read(item: DeclaredItem): string {
    return this.text.slice(item.span.start, item.span.end)
  }
}

/** Takes an item and one comma out of a list of several. */
function removal({ items }: Listing, item: DeclaredItem): Edit {
  const at = items.indexOf(item)
  const next = items[at + 1]
  if (next) return { start: item.span.start, end: next.span.start, text: '' }
  return { start: items[at - 1]!.span.end, end: item.span.end, text: '' }
}
