import { balanceLines, type Item, type Step, withRoles } from './balance'
import { readDeclaration } from './declaration'
import { deleteLineFix, editsFix, lineEnd, lineStart, mergeEdits, nextLine, replaceFix } from './edits'
import { opensForeignDeclaration, opensForeignRoutine } from './foreign'
import { Forms, type Frame } from './forms'
import { type Line, lineSpan, type Mark, markSpan, type Reading, restSpan } from './lines'
import type { Notes } from './notes'
import { LineReader } from './reader'
import { labelTokens, type Role } from './roles'
import { joinSpans, type Span } from './span'
import { readStatement } from './statement'
import * as T from './tokens'
import type { Declaration, Name, ProcedureTree, RoutineTree, Statement, WordCondition } from './tree'
import { blankCondition, nameOf } from './word'

/** The name of a routine whose text does not give it one. */
const UNNAMED = 'draft'

/** Puts the lines of a text together to routines. What is wrong is said to `notes`. */
export function assembleRoutines(reading: Reading, notes: Notes): RoutineTree[] {
  const items = withRoles(correctHead(reading.lines, notes))
  const reader = new LineReader(notes)
  const routines: RoutineTree[] = []
  let from = 0
  for (let at = 1; at <= items.length; at++) {
    if (at < items.length && !isHeader(items[at]!.role)) continue
    new Assembly(items.slice(from, at), reader, routines).run()
    from = at
  }
  return shareMargins(routines, reading)
}

/** Gives each routine its comments and blank lines: from the end of the one before to its own; the last has the rest. */
function shareMargins(routines: readonly RoutineTree[], { comments, blanks }: Reading): RoutineTree[] {
  let after = 0
  return routines.map((routine, at) => {
    const last = at === routines.length - 1 ? Number.POSITIVE_INFINITY : routine.end.line
    const first = after
    after = last
    const here = (line: number): boolean => line > first && line <= last
    return {
      ...routine,
      comments: comments.filter(({ line }) => here(line)).map(({ text, line, own }) => ({ text, line, own })),
      blanks: blanks.filter(here),
    }
  })
}

/** The lines, the first of them as `routine NAME` where it says so in other words. */
function correctHead(lines: readonly Line[], notes: Notes): readonly Line[] {
  const [first, ...rest] = lines
  const mark = first?.tokens[0]
  if (!first || !mark || !opensForeignRoutine(first.tokens)) return lines
  const span = markSpan(mark)
  notes.correct(
    span,
    `\`${mark.image}\` is no word of the notation.`,
    'Write `routine`.',
    replaceFix('Write `routine`', span, 'routine'),
  )
  const head = { ...mark, tokenType: T.Routine, tokenTypeIdx: T.Routine.tokenTypeIdx! }
  return [{ ...first, tokens: [head, ...first.tokens.slice(1)] }, ...rest]
}

function isHeader(role: Role): boolean {
  return role.kind === 'open' && role.form === 'routine'
}

/** Builds the routine that the lines from one `routine` to the next make up. */
class Assembly {
  private readonly notes: Notes
  private phase: 'before' | 'declarations' | 'body' | 'after' = 'before'
  private name: Name = { text: UNNAMED, span: { start: 0, end: 0, line: 1, column: 1 } }
  private start: Span = this.name.span
  private begin: Span | undefined
  private declarations: (Declaration | ProcedureTree)[] = []
  private body: Statement[] = []
  private readonly forms: Forms
  private readonly steps: readonly Step[]
  private readonly endMissing: boolean
  private at = 0
  /** The line taken last: what is missing goes below it. */
  private last: Line | undefined
  private outside = false
  /** Set once it has been said that `begin` is missing or comes too late. */
  private beginReported = false
  /** Place of the last `begin` line among the steps. */
  private readonly lastBegin: number

  constructor(
    items: readonly Item[],
    private readonly reader: LineReader,
    private readonly routines: RoutineTree[],
  ) {
    this.notes = reader.notes
    this.forms = new Forms(reader)
    const headed = items[0] !== undefined && isHeader(items[0].role)
    const balance = balanceLines(items, headed, this.notes)
    this.steps = balance.steps
    this.endMissing = balance.endMissing
    this.lastBegin = this.steps.findLastIndex(step => step.kind === 'line' && step.role.kind === 'begin')
  }

  run(): void {
    for (const [at, step] of this.steps.entries()) {
      this.at = at
      if (step.kind === 'close') this.closeMissing()
      else {
        this.take(step.line, step.role)
        this.last = step.line
      }
    }
  }

  private take(line: Line, role: Role): void {
    if (isHeader(role)) {
      this.open(line)
      return
    }
    if (this.phase === 'before') this.openUnnamed(line)
    if (this.phase === 'after' && !this.reopen(line, role)) return

    const from = this.takeLabels(line, role)
    if (from === line.tokens.length && from > 0) return
    switch (role.kind) {
      case 'open':
        if (role.form !== 'procedure' && !this.forms.innermost()) this.requireBody(line)
        this.forms.open(line, from, role.form as Frame['kind'])
        break
      case 'middle':
        this.forms.turn(line, from)
        break
      case 'close':
        this.takeEnd(line, from, role.until)
        break
      case 'begin':
        this.takeBegin(line, from)
        break
      case 'declaration':
        this.takeDeclaration(line, from)
        break
      case 'instruction':
        this.takeInstruction(line, from)
        break
    }
  }

  // The routine's own lines

  private open(line: Line): void {
    this.phase = 'declarations'
    this.start = lineSpan(line)
    const form = this.reader.readInstruction(line, 0)
    const second = line.tokens[1]
    if (form?.kind === 'routine') this.name = nameOf(form.name)
    else this.name = { text: UNNAMED, span: second ? markSpan(second) : lineSpan(line) }
  }

  /** Begins a routine whose text does not say so, and says which lines are missing. */
  private openUnnamed(line: Line): void {
    const span = lineSpan(line)
    this.phase = 'declarations'
    this.start = { ...span, end: span.start }
    this.name = { text: UNNAMED, span: this.start }
    const begins = this.expectsBegin()
    const ahead = this.linesAhead()
    const margin = lineStart(line)
    const edits = [{ start: margin, end: margin, text: `routine ${UNNAMED}\n` }]
    const missing = [`\`routine\` line above it`]
    if (!begins) {
      missing.push('`begin` line before the first instruction')
      const first = ahead.find(({ role }) => role.kind !== 'declaration')?.line
      const place = first ? lineStart(first) : line.end
      edits.push({ start: place, end: place, text: 'begin\n' })
    }
    if (this.endMissing) {
      const place = lineEnd(this.notes.text, ahead[ahead.length - 1]?.line.end ?? line.end)
      missing.push('`end` line below it')
      edits.push({ start: place, end: place, text: '\nend' })
    }
    this.notes.correct(
      span,
      `The draft has no ${missing.join(', and no ')}.`,
      `Insert ${edits.map(edit => `\`${edit.text.trim()}\``).join(', ')}.`,
      { label: 'Insert the missing lines', edits: mergeEdits(edits) },
    )
    this.beginReported = !begins
  }

  /** Whether a `begin` line is still to come, before the routine's end. */
  private expectsBegin(): boolean {
    return this.lastBegin >= this.at
  }

  /** The lines from here on. */
  private linesAhead(): { readonly line: Line; readonly role: Role }[] {
    return this.steps.slice(this.at).filter(step => step.kind === 'line')
  }

  private takeBegin(line: Line, from: number): void {
    this.reader.readInstruction(line, from)
    this.notes.lost = false
    const span = lineSpan(line)
    const frame = this.forms.innermost()
    if (frame || this.phase !== 'declarations') {
      this.notes.correct(
        span,
        frame
          ? `A ${frame.kind === 'procedure' ? 'procedure' : `\`${frame.kind}\``} has no \`begin\` line: its instructions follow at once.`
          : 'The routine has begun already.',
        'Delete this `begin`.',
        deleteLineFix(this.notes.text, line),
      )
      return
    }
    this.phase = 'body'
    this.begin = span
  }

  /** Steps into the body where `begin` is missing, and says so. */
  private requireBody(line: Line): void {
    if (this.phase !== 'declarations') return
    const span = lineSpan(line)
    const place = lineStart(line)
    if (this.expectsBegin()) {
      if (!this.beginReported)
        this.notes.correct(
          span,
          'An instruction stands before `begin`.',
          'Move it below the `begin` line, or declare there what it was to declare.',
        )
      this.beginReported = true
      return
    }
    if (!this.beginReported)
      this.notes.correct(
        span,
        'A `begin` line is missing before the first instruction.',
        'Insert `begin` above this line.',
        editsFix('Insert `begin`', [{ start: place, end: place, text: 'begin\n' }]),
      )
    this.beginReported = true
    this.begin = { ...span, end: span.start }
    this.phase = 'body'
  }

  private finish(end: Span): void {
    this.routines.push({
      name: this.name,
      declarations: this.declarations,
      body: this.body,
      begin: this.begin ?? end,
      end,
      span: joinSpans(this.start, end),
      comments: [],
      blanks: [],
    })
    this.phase = 'after'
    this.declarations = []
    this.body = []
    this.begin = undefined
    this.beginReported = false
  }

  /** After a routine's end: whether a line opens another one, though no `routine` line says so. */
  private reopen(line: Line, role: Role): boolean {
    if (role.kind === 'declaration' || role.kind === 'begin') {
      this.openUnnamed(line)
      return true
    }
    if (!this.outside) {
      const last = this.routines[this.routines.length - 1]
      this.notes.correct(
        lineSpan(line),
        `The routine${last ? ` \`${last.name.text}\` ended on line ${last.end.line}` : ' has ended'}; what follows stands outside of it.`,
        'Delete the `end` that is one too many, or open a new routine with `routine NAME`.',
      )
    }
    this.outside = true
    return false
  }

  // Lines

  /** Takes the labels before an instruction. Gives the place of the first token after them. */
  private takeLabels(line: Line, role: Role): number {
    const count = labelTokens(line)
    if (count === 0) return 0
    const first = line.tokens[0]!
    const declaring = this.phase === 'declarations' && !this.forms.innermost()
    if (declaring && count < line.tokens.length && T.DECLARATION_WORDS.has(first.tokenType)) {
      this.takeColon(line, first)
      return line.tokens.length
    }
    if (role.kind === 'begin' || line.strays.length > 0) return count
    if (!this.forms.innermost()) this.requireBody(line)
    for (let at = 0; at < count; at += 2) {
      const name = nameOf(line.tokens[at]!)
      this.add({ kind: 'label', name, span: joinSpans(name.span, markSpan(line.tokens[at + 1]!)) })
    }
    return count
  }

  /** `in: a[n]`: a declaration whose word was taken for a label. */
  private takeColon(line: Line, first: Mark): void {
    const span = markSpan(line.tokens[1]!)
    this.notes.correct(
      span,
      `No \`:\` follows \`${first.image}\`; a name with \`:\` is a label.`,
      'Delete `:`.',
      replaceFix('Delete `:`', span, ''),
    )
    this.takeDeclaration({ ...line, tokens: [first, ...line.tokens.slice(2)] }, 0)
  }

  private add(statement: Statement): void {
    const frame = this.forms.innermost()
    if (frame) frame.body.push(statement)
    else if (this.phase === 'body') this.body.push(statement)
  }

  private takeDeclaration(line: Line, from: number): void {
    const misplaced = this.phase !== 'declarations' || this.forms.innermost() !== undefined
    if (misplaced) {
      // `check(x)` among instructions calls a procedure of that name.
      if (isCall(line.tokens, from)) {
        this.takeInstruction(line, from)
        return
      }
      const [first, , third] = line.tokens.slice(from)
      // `let x <- y + z` means the assignment.
      if (first?.tokenType === T.Let && third?.tokenType === T.Arrow) {
        this.takeLet(line, from, first)
        return
      }
      this.refuseMisplaced(line, from)
    }
    const form = this.reader.readDeclaration(line, from)
    const declaration = form && readDeclaration(form, restSpan(line, from), this.notes)
    if (declaration && !this.notes.lost) this.declarations.push(declaration)
    this.notes.lost = false
  }

  private takeLet(line: Line, from: number, first: Mark): void {
    const span = markSpan(first)
    const next = line.tokens[from + 1]!
    this.notes.correct(
      span,
      '`let` declares a tunable, before `begin`; a variable needs no declaration.',
      'Leave `let` out.',
      replaceFix('Leave `let` out', { start: span.start, end: next.startOffset }, ''),
    )
    this.takeInstruction(line, from + 1)
  }

  private refuseMisplaced(line: Line, from: number): void {
    const frame = this.forms.innermost()
    const text = this.notes.read(line)
    const begin = this.begin
    const source = this.notes.text
    const edits =
      begin && begin.end > begin.start
        ? [
            { start: lineStart(begin), end: lineStart(begin), text: `  ${text}\n` },
            { start: lineStart(line), end: nextLine(source, line.end), text: '' },
          ]
        : undefined
    this.notes.correct(
      restSpan(line, from),
      `A declaration stands ${frame && !this.begin ? `inside the \`${frame.kind}\` of line ${frame.span.line}` : 'after `begin`'}: \`${line.tokens[from]!.image}\`.`,
      'Move it above the `begin` line.',
      edits && editsFix('Move it above `begin`', edits),
    )
  }

  private takeInstruction(line: Line, from: number): void {
    const span = restSpan(line, from)
    if (this.phase === 'declarations' && !this.forms.innermost()) {
      if (opensForeignDeclaration(line.tokens.slice(from)) || line.strays.length > 0) {
        this.reader.readInstruction(line, from)
        this.notes.lost = false
        return
      }
      this.requireBody(line)
      if (this.phase === 'declarations') return
    }
    const form = this.reader.readInstruction(line, from)
    const statement = form && readStatement(form, span, this.notes)
    if (statement && !this.notes.lost) this.add(statement)
    this.notes.lost = false
  }

  private takeEnd(line: Line, from: number, until: boolean): void {
    const span = restSpan(line, from)
    const frame = this.forms.innermost()
    const form = until ? this.reader.readInstruction(line, from) : undefined
    if (!until) this.forms.readEnd(line, from)
    const condition = this.forms.condition(form, span)
    this.notes.lost = false
    if (frame) this.closeForm(span, condition)
    else this.closeRoutine(span)
  }

  private closeForm(end: Span, until: WordCondition): void {
    const closed = this.forms.close(end, until)
    if (!closed) return
    const { tree, nested } = closed
    // A procedure that stands where none may is read as if it stood where it should.
    if (tree.kind === 'procedure' && (nested || this.phase === 'declarations')) this.declarations.push(tree)
    else this.add(tree)
  }

  /** Closes the innermost form, or the routine, whose last line is missing and has been reported. */
  private closeMissing(): void {
    const { start, line, column } = this.last ? lineSpan(this.last) : this.start
    const place = this.last?.end ?? start
    const end: Span = { start: place, end: place, line, column }
    if (this.forms.innermost()) this.closeForm(end, blankCondition(end))
    else if (this.phase === 'declarations' || this.phase === 'body') {
      if (this.phase === 'declarations' && !this.beginReported) this.reportEmpty(end)
      this.finish(end)
    }
  }

  private closeRoutine(span: Span): void {
    if (this.phase === 'declarations' && !this.beginReported) {
      const place = lineStart(span)
      this.notes.correct(
        span,
        'A `begin` line is missing: the routine has declarations alone.',
        'Insert `begin` and the instructions above this `end`.',
        editsFix('Insert `begin`', [{ start: place, end: place, text: 'begin\n' }]),
      )
    }
    this.finish(span)
  }

  private reportEmpty(end: Span): void {
    this.notes.correct(
      this.start,
      'The routine has no `begin` line.',
      'Write `begin` below the declarations, then the instructions, then `end`.',
      editsFix('Insert `begin`', [{ start: end.start, end: end.start, text: '\nbegin' }]),
    )
  }
}

/** Whether the tokens from `from` on are a name and one pair of brackets. */
function isCall(tokens: readonly Mark[], from: number): boolean {
  if (tokens[from + 1]?.tokenType !== T.LeftParen) return false
  let open = 0
  for (let at = from + 1; at < tokens.length; at++) {
    const type = tokens[at]!.tokenType
    if (type === T.LeftParen) open++
    else if (type === T.RightParen && --open === 0) return at === tokens.length - 1
  }
  return false
}
