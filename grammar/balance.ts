import { deleteLineFix, editsFix, type Fix, lineEnd } from './edits'
import type { Line } from './lines'
import { lineSpan } from './lines'
import type { Notes } from './notes'
import { type FormKind, type Role, roleOf } from './roles'
import * as T from './tokens'

/** The deepest that forms may stand inside each other. */
export const MOST_FORMS = 200

/** A line with its role, or a closing line that the text lacks. */
export type Step =
  | { readonly kind: 'line'; readonly line: Line; readonly role: Role }
  /** Closes the innermost open form, whose closing line is missing and has been reported. */
  | { readonly kind: 'close' }

interface Opening {
  readonly form: FormKind
  readonly line: Line
  /** Whether the first line inside it stands further to the right. Unknown until there is one. */
  indented?: boolean
}

export interface Item {
  readonly line: Line
  readonly role: Role
}

/**
 * Makes the closing lines of one routine's lines fit its opening lines. Where they do not, the layout says where an
 * `end` is missing or one too many: the form to blame is the one whose lines stop standing to its right.
 * `items` begins with the routine's own line, where it has one. Every form opened in the answer is closed in it.
 * `endMissing` tells that a routine without a line of its own has no `end` either, which is left to the caller to say.
 */
export function balanceLines(
  items: readonly Item[],
  headed: boolean,
  notes: Notes,
): { readonly steps: readonly Step[]; readonly endMissing: boolean } {
  if (fits(items, headed)) return { steps: items.map(item => ({ kind: 'line', ...item })), endMissing: false }
  const balance = new Balance(items, headed, notes)
  return { steps: balance.run(), endMissing: balance.endMissing }
}

/** Whether closing lines match opening lines as they stand, the routine's own `end` coming last. */
function fits(items: readonly Item[], headed: boolean): boolean {
  const open: FormKind[] = headed ? [] : ['routine']
  for (const [at, { role }] of items.entries()) {
    if (role.kind === 'open') {
      if (role.form === 'routine' && at > 0) return false
      open.push(role.form)
    } else if (role.kind === 'middle') {
      if (open[open.length - 1] !== 'if') return false
    } else if (role.kind === 'close') {
      const form = open.pop()
      if (form === undefined || (form === 'repeat') !== role.until) return false
      if (open.length === 0 && at < items.length - 1) return false
    }
    if (open.length > MOST_FORMS) return false
  }
  return open.length === 0
}

class Balance {
  private readonly open: Opening[] = []
  private readonly steps: Step[] = []
  /** Closing lines too few (above 0) or too many (below), by count alone. */
  private short: number
  /** Set while lines are left out because they stand too deep: how deep. */
  private skipping = 0

  constructor(
    private readonly items: readonly Item[],
    private readonly headed: boolean,
    private readonly notes: Notes,
  ) {
    this.short = headed ? 0 : 1
    for (const { role } of items) {
      if (role.kind === 'open') this.short++
      else if (role.kind === 'close') this.short--
    }
  }

  run(): Step[] {
    const [first] = this.items
    if (!first) return []
    if (!this.headed) this.open.push({ form: 'routine', line: first.line })
    for (const [at, item] of this.items.entries()) this.take(item, at)
    const last = this.items[this.items.length - 1]!.line
    while (this.open.length > 0) this.closeMissing(last.end, true)
    return this.steps
  }

  private take(item: Item, at: number): void {
    const { line, role } = item
    if (this.skip(item)) return
    this.observe(line)
    const end = this.items[at - 1]?.line.end ?? line.start
    switch (role.kind) {
      case 'open':
        this.dedent(line, end, false)
        this.open.push({ form: role.form, line })
        if (this.open.length > MOST_FORMS) this.refuseDepth(line)
        break
      case 'middle':
        this.dedent(line, end, true)
        if (this.top()?.form !== 'if' && this.open.some(opening => opening.form === 'if'))
          while (this.top()?.form !== 'if') this.closeMissing(end, false)
        if (this.top()?.form !== 'if') {
          this.notes.correct(
            lineSpan(line),
            '`else` stands outside of any `if`.',
            'Delete it, or put it between an `if C` line and its `end`.',
          )
          return
        }
        break
      case 'close':
        if (!this.close(line, end, role.until)) return
        break
      default:
        this.dedent(line, end, false)
    }
    if (this.skipping === 0) this.steps.push({ kind: 'line', line, role })
  }

  private top(): Opening | undefined {
    return this.open[this.open.length - 1]
  }

  private observe(line: Line): void {
    const top = this.top()
    // Labels stand at the left edge wherever they are.
    if (line.tokens[1]?.tokenType === T.Colon) return
    if (top && top.indented === undefined && line !== top.line) top.indented = line.column > top.line.column
  }

  /** Closes forms that a line has left by its place, while closing lines are too few. */
  private dedent(line: Line, end: number, middle: boolean): void {
    if (line.tokens[1]?.tokenType === T.Colon) return
    while (this.short > 0) {
      const top = this.top()
      if (!top?.indented || top.form === 'routine') return
      const left = middle ? line.column < top.line.column : line.column <= top.line.column
      if (!left) return
      this.closeMissing(end, false)
    }
  }

  /** Closes the innermost form for want of its closing line, and says so at the form. */
  private closeMissing(at: number, last: boolean): void {
    const opening = this.open.pop()!
    this.short--
    this.steps.push({ kind: 'close' })
    const { line, form } = opening
    const word = form === 'repeat' ? '`until C`' : '`end`'
    const text = `\n${' '.repeat(line.column - 1)}${form === 'repeat' ? 'until 0 = 0' : 'end'}`
    if (form === 'routine' && !this.headed) {
      this.endMissing = true
      return
    }
    this.notes.correct(
      { ...lineSpan(line) },
      `This \`${form}\` has no ${word}${last ? '' : ' of its own'}.`,
      form === 'repeat'
        ? 'Close it with `until C`.'
        : `Close it with \`end\` on a line of its own${form === 'routine' && this.items.some(opensInner) ? '; or close the form inside it that lacks its own' : ''}.`,
      form === 'repeat' ? undefined : insertEnd(this.notes.text, at, text),
    )
  }

  /** Whether the routine that the text does not name has no `end` either. */
  endMissing = false

  /** Takes a closing line. Answers whether it closes anything. */
  private close(line: Line, end: number, until: boolean): boolean {
    while (this.short > 0) {
      const top = this.top()
      const exact = this.open.some(opening => opening.line.column === line.column)
      if (!top || top.form === 'routine' || !exact || top.line.column <= line.column) break
      this.closeMissing(end, false)
    }
    const top = this.top()
    if (until && top?.form !== 'repeat') {
      if (!this.open.some(opening => opening.form === 'repeat')) {
        this.short++
        this.notes.correct(
          lineSpan(line),
          '`until` stands outside of any `repeat`.',
          'Delete it, or open the loop with `repeat`.',
        )
        return false
      }
      while (this.top()?.form !== 'repeat') this.closeMissing(end, false)
    }
    const opening = this.top()
    const extra =
      !opening ||
      (this.short < 0 && opening.form === 'routine' && line.column > opening.line.column && this.headed) ||
      (this.short < 0 && opening.indented === true && line.column > opening.line.column)
    if (extra) {
      this.short++
      this.notes.correct(
        lineSpan(line),
        'This `end` closes nothing.',
        'Delete it.',
        deleteLineFix(this.notes.text, line),
      )
      return false
    }
    if (opening.form === 'repeat' && !until)
      this.notes.correct(
        lineSpan(line),
        `The \`repeat\` on line ${opening.line.line} is closed by \`until C\`, not by \`end\`.`,
        'Write `until` and the condition on which the loop ends.',
      )
    this.open.pop()
    return true
  }

  private refuseDepth(line: Line): void {
    this.open.pop()
    this.short--
    this.skipping = 1
    this.notes.correct(
      lineSpan(line),
      `More than ${MOST_FORMS} forms stand inside each other here.`,
      'Move the inner ones into a procedure.',
    )
  }

  /** Leaves out what stands inside a form that is too deep. */
  private skip({ role }: Item): boolean {
    if (this.skipping === 0) return false
    if (role.kind === 'open') this.skipping++
    else if (role.kind === 'close') this.skipping--
    return true
  }
}

function insertEnd(source: string, after: number, text: string): Fix {
  const place = lineEnd(source, after)
  return editsFix('Insert `end`', [{ start: place, end: place, text }])
}

function opensInner({ role }: Item): boolean {
  return role.kind === 'open' && role.form !== 'routine'
}

/** The lines with their roles. */
export function withRoles(lines: readonly Line[]): Item[] {
  return lines.map(line => ({ line, role: roleOf(line) }))
}
