import { balanceLines, type Item, type Step, withRoles } from './balance'
import { readDeclaration } from './declaration'
import { opensForeignDeclaration, opensForeignRoutine } from './foreign'
import { type Line, lineSpan, type Mark, markSpan, type Reading } from './lines'
import { editsFix, type Notes, replaceFix } from './notes'
import type { LineForm } from './parser'
import type { Phrase } from './phrase'
import { LineReader } from './reader'
import { labelTokens, type Role } from './roles'
import { joinSpans, type Span } from './span'
import { ELSEWHERE, readStatement } from './statement'
import * as T from './tokens'
import type { Branch, Declaration, Name, ProcedureTree, RoutineTree, Statement, WordCondition } from './tree'
import { blankCondition, nameOf, readCondition, readWord, WORD_NAMES } from './word'

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

/** A form whose last line is still to come. */
type Frame =
  | ({
      readonly kind: 'procedure'
      readonly form?: LineForm & { kind: 'procedure' }
      readonly nested: boolean
    } & Open)
  | ({ readonly kind: 'while'; readonly condition: WordCondition } & Open)
  | ({ readonly kind: 'repeat' } & Open)
  | ({ readonly kind: 'for'; readonly form?: LineForm & { kind: 'for' }; readonly parts?: ForParts } & Open)
  | ({
      readonly kind: 'if'
      readonly branches: Branch[]
      condition: WordCondition
      branch: Span
      otherwise?: Span
    } & Open)

interface Open {
  readonly span: Span
  body: Statement[]
}

type ForParts = Pick<Statement & { kind: 'for' }, 'variable' | 'from' | 'to' | 'down'> &
  Partial<Pick<Statement & { kind: 'for' }, 'step'>>

/** Builds the routine that the lines from one `routine` to the next make up. */
class Assembly {
  private readonly notes: Notes
  private phase: 'before' | 'declarations' | 'body' | 'after' = 'before'
  private name: Name = { text: UNNAMED, span: { start: 0, end: 0, line: 1, column: 1 } }
  private start: Span = this.name.span
  private begin: Span | undefined
  private declarations: (Declaration | ProcedureTree)[] = []
  private body: Statement[] = []
  private frames: Frame[] = []
  private readonly steps: readonly Step[]
  private readonly endMissing: boolean
  private at = 0
  /** The line taken last: what is missing goes below it. */
  private last: Line | undefined
  private outside = false

  constructor(
    items: readonly Item[],
    private readonly reader: LineReader,
    private readonly routines: RoutineTree[],
  ) {
    this.notes = reader.notes
    const headed = items[0] !== undefined && isHeader(items[0].role)
    const balance = balanceLines(items, headed, this.notes)
    this.steps = balance.steps
    this.endMissing = balance.endMissing
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
        this.openForm(line, from, role.form as Frame['kind'])
        break
      case 'middle':
        this.takeElse(line, from)
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
    const margin = line.start - (line.column - 1)
    const edits = [{ start: margin, end: margin, text: `routine ${UNNAMED}\n` }]
    const missing = [`\`routine\` line above it`]
    if (!begins) {
      missing.push('`begin` line before the first instruction')
      const first = this.firstInstruction()
      const place = first ? first.start - (first.column - 1) : line.end
      edits.push({ start: place, end: place, text: 'begin\n' })
    }
    if (this.endMissing) {
      const last = this.lastLine() ?? line
      missing.push('`end` line below it')
      edits.push({ start: last.end, end: last.end, text: '\nend' })
    }
    this.notes.correct(
      span,
      `The draft has no ${missing.join(', and no ')}.`,
      `Insert ${edits.map(edit => `\`${edit.text.trim()}\``).join(', ')}.`,
      { label: 'Insert the missing lines', edits: mergeEdits(edits) },
    )
    if (!begins) this.begin = undefined
    this.beginReported = !begins
  }

  private beginReported = false

  /** Whether a `begin` line is still to come, before the routine's end. */
  private expectsBegin(): boolean {
    return this.ahead().some(step => step.kind === 'line' && step.role.kind === 'begin')
  }

  private firstInstruction(): Line | undefined {
    for (const step of this.ahead()) if (step.kind === 'line' && step.role.kind !== 'declaration') return step.line
    return undefined
  }

  private lastLine(): Line | undefined {
    let last: Line | undefined
    for (const step of this.ahead()) if (step.kind === 'line') last = step.line
    return last
  }

  private ahead(): readonly Step[] {
    return this.steps.slice(this.at)
  }

  private takeBegin(line: Line, from: number): void {
    this.reader.readInstruction(line, from)
    this.notes.lost = false
    const span = lineSpan(line)
    const frame = this.frames[this.frames.length - 1]
    if (frame || this.phase !== 'declarations') {
      const margin = line.start - (line.column - 1)
      this.notes.correct(
        span,
        frame
          ? `A ${frame.kind === 'procedure' ? 'procedure' : `\`${frame.kind}\``} has no \`begin\` line: its instructions follow at once.`
          : 'The routine has begun already.',
        'Delete this `begin`.',
        editsFix('Delete this line', [{ start: margin, end: afterLine(this.notes.text, line.end), text: '' }]),
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
    const place = line.start - (line.column - 1)
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
    this.frames = []
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
    const declaring = this.phase === 'declarations' && this.frames.length === 0
    if (declaring && count < line.tokens.length && T.DECLARATION_WORDS.has(first.tokenType)) {
      this.takeColon(line, first)
      return line.tokens.length
    }
    if (role.kind === 'begin' || line.strays.length > 0) return count
    if (this.frames.length === 0) this.requireBody(line)
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
    const frame = this.frames[this.frames.length - 1]
    if (frame) frame.body.push(statement)
    else if (this.phase === 'body') this.body.push(statement)
  }

  private takeDeclaration(line: Line, from: number): void {
    const misplaced = this.phase !== 'declarations' || this.frames.length > 0
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
    const declaration = form && readDeclaration(form, this.spanFrom(line, from), this.notes)
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
    const frame = this.frames[this.frames.length - 1]
    const text = this.notes.read(line)
    const begin = this.begin
    const source = this.notes.text
    const edits =
      begin && begin.end > begin.start
        ? [
            { start: begin.start - (begin.column - 1), end: begin.start - (begin.column - 1), text: `  ${text}\n` },
            { start: line.start - (line.column - 1), end: afterLine(source, line.end), text: '' },
          ]
        : undefined
    this.notes.correct(
      this.spanFrom(line, from),
      `A declaration stands ${frame && !this.begin ? `inside the \`${frame.kind}\` of line ${frame.span.line}` : 'after `begin`'}: \`${line.tokens[from]!.image}\`.`,
      'Move it above the `begin` line.',
      edits && editsFix('Move it above `begin`', edits),
    )
  }

  private takeInstruction(line: Line, from: number): void {
    const span = this.spanFrom(line, from)
    if (this.phase === 'declarations' && this.frames.length === 0) {
      if (opensForeignDeclaration(line.tokens.slice(from)) || line.strays.length > 0) {
        this.reader.readInstruction(line, from)
        this.notes.lost = false
        return
      }
      this.requireBody(line)
      if (this.phase === 'declarations') return
    }
    const form = this.reader.readInstruction(line, from)
    const statement = form && this.readHere(form, span)
    if (statement && !this.notes.lost) this.add(statement)
    this.notes.lost = false
  }

  private readHere(form: LineForm, span: Span): Statement | undefined {
    return readStatement(form, span, this.notes)
  }

  private spanFrom(line: Line, from: number): Span {
    const first = line.tokens[from]
    return first ? { ...markSpan(first), end: line.end } : lineSpan(line)
  }

  // Forms

  private openForm(line: Line, from: number, kind: Frame['kind']): void {
    if (kind === 'procedure') {
      this.openProcedure(line, from)
      return
    }
    if (this.frames.length === 0) this.requireBody(line)
    const span = this.spanFrom(line, from)
    const form = this.reader.readInstruction(line, from)
    const open = { span, body: [] }
    if (kind === 'repeat') this.frames.push({ kind, ...open })
    else if (kind === 'while') this.frames.push({ kind, condition: this.condition(form, span), ...open })
    else if (kind === 'for') {
      const parts = form?.kind === 'for' ? this.forParts(form) : undefined
      this.frames.push({ kind, ...(parts && { parts }), ...open })
    } else this.frames.push({ kind, branches: [], condition: this.condition(form, span), branch: span, ...open })
    this.notes.lost = false
  }

  private condition(form: LineForm | undefined, span: Span): WordCondition {
    const phrase: Phrase | undefined = form && 'condition' in form ? form.condition : undefined
    return phrase ? readCondition(phrase, this.notes) : blankCondition(span)
  }

  private forParts(form: LineForm & { kind: 'for' }): ForParts {
    const { opening, direction } = form
    if (opening.tokenType !== T.From)
      this.notes.correct(
        markSpan(opening),
        `\`${opening.image}\` does not open the range of a loop.`,
        'Write `from`: `for i from E to F`.',
        replaceFix('Write `from`', markSpan(opening), 'from'),
      )
    if (direction.tokenType === T.Range)
      this.notes.correct(
        markSpan(direction),
        'A loop runs `to` or `downto` its last value.',
        'Write `to`.',
        replaceFix('Write `to`', markSpan(direction), ' to '),
      )
    return {
      variable: nameOf(form.variable),
      from: readWord(form.from, this.notes),
      to: readWord(form.to, this.notes),
      down: direction.tokenType === T.Downto,
      ...(form.step && { step: readWord(form.step, this.notes) }),
    }
  }

  private openProcedure(line: Line, from: number): void {
    const span = this.spanFrom(line, from)
    const outer = this.frames[this.frames.length - 1]
    if (outer)
      this.notes.correct(
        span,
        `A procedure stands inside the \`${outer.kind}\` of line ${outer.span.line}.`,
        'Move it to the declarations, before `begin`.',
      )
    const form = this.reader.readInstruction(line, from)
    const good = form?.kind === 'procedure' ? form : undefined
    if (good && (WORD_NAMES.has(good.name.image) || ELSEWHERE.has(good.name.image)))
      this.notes.correct(
        markSpan(good.name),
        `\`${good.name.image}\` is a function of the notation; no procedure can be called so.`,
        'Take another name.',
      )
    this.frames.push({
      kind: 'procedure',
      ...(good && { form: good }),
      nested: outer !== undefined,
      span,
      body: [],
    })
    this.notes.lost = false
  }

  private takeElse(line: Line, from: number): void {
    const frame = this.frames[this.frames.length - 1]
    if (frame?.kind !== 'if') return
    const span = this.spanFrom(line, from)
    const form = this.readElse(line, from)
    this.closeBranch(frame)
    if (frame.otherwise)
      this.notes.correct(
        span,
        `Another \`else\` stands above this one, on line ${frame.otherwise.line}, and takes all that is left.`,
        'Put the last `else` last, or open a new `if`.',
      )
    frame.body = []
    if (form?.kind === 'else' && !form.condition) frame.otherwise = span
    else {
      frame.condition = this.condition(form, span)
      frame.branch = span
      delete frame.otherwise
    }
    this.notes.lost = false
  }

  /** `else`, `else if C`, or what other languages write for them. */
  private readElse(line: Line, from: number): LineForm | undefined {
    const first = line.tokens[from]!
    if (first.tokenType === T.Else) return this.reader.readInstruction(line, from)
    const span = markSpan(first)
    const foreign = first.tokenType === T.Name
    this.notes.correct(
      span,
      foreign ? `\`${first.image}\` is no word of the notation.` : 'Braces hold nothing together here: `}`.',
      foreign ? 'Write `else if`.' : 'Delete the brace.',
      replaceFix(foreign ? 'Write `else if`' : 'Delete the brace', span, foreign ? 'else if' : ''),
    )
    const rest = line.tokens.slice(from + 1)
    const [next] = rest
    if (!next) return undefined
    // Read on as `else if C`.
    const tokens = foreign ? [{ ...first, tokenType: T.If, tokenTypeIdx: T.If.tokenTypeIdx! }, ...rest] : rest
    const form = this.reader.readInstruction({ ...line, tokens }, 0)
    return form?.kind === 'if' ? { kind: 'else', condition: form.condition } : form
  }

  private closeBranch(frame: Frame & { kind: 'if' }): void {
    if (frame.otherwise) return
    frame.branches.push({ condition: frame.condition, body: frame.body, span: frame.branch })
  }

  private takeEnd(line: Line, from: number, until: boolean): void {
    const span = this.spanFrom(line, from)
    const frame = this.frames[this.frames.length - 1]
    const condition = until ? this.condition(this.reader.readInstruction(line, from), span) : blankCondition(span)
    if (!until) this.readEnd(line, from)
    this.notes.lost = false
    if (frame) this.closeFrame(span, condition)
    else this.closeRoutine(span)
  }

  /** `end`, or what other languages write for it. */
  private readEnd(line: Line, from: number): void {
    const rest = line.tokens.slice(from)
    const [first] = rest
    if (first?.tokenType === T.End && rest.length === 1 && line.strays.length === 0) return
    const span = this.spanFrom(line, from)
    this.notes.correct(
      span,
      first?.tokenType === T.End
        ? `Found \`${rest[1]?.image ?? this.notes.read(line.strays[0]!.span)}\` after \`end\`, which stands alone on its line.`
        : `\`${this.notes.read(span)}\` is no word of the notation.`,
      'Write `end`.',
      replaceFix('Write `end`', span, 'end'),
    )
  }

  private closeMissing(): void {
    const { start, line, column } = this.last ? lineSpan(this.last) : this.start
    const place = this.last?.end ?? start
    const end: Span = { start: place, end: place, line, column }
    if (this.frames.length > 0) this.closeFrame(end, blankCondition(end))
    else if (this.phase === 'declarations' || this.phase === 'body') {
      if (this.phase === 'declarations' && !this.beginReported) this.reportEmpty(end)
      this.finish(end)
    }
  }

  private closeRoutine(span: Span): void {
    if (this.phase === 'declarations' && !this.beginReported) {
      const place = span.start - (span.column - 1)
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

  private closeFrame(end: Span, until: WordCondition): void {
    const frame = this.frames.pop()
    if (!frame) return
    const span = joinSpans(frame.span, end)
    const { body } = frame
    switch (frame.kind) {
      case 'while':
        this.add({ kind: 'while', condition: frame.condition, body, end, span })
        break
      case 'repeat':
        this.add({ kind: 'repeat', body, until, end, span })
        break
      case 'for':
        // A loop whose first line means nothing keeps its instructions out of the tree.
        if (frame.parts) this.add({ kind: 'for', ...frame.parts, body, end, span })
        break
      case 'if': {
        this.closeBranch(frame)
        const otherwise = frame.otherwise && { otherwise: { body, span: frame.otherwise } }
        this.add({ kind: 'if', branches: frame.branches, ...otherwise, end, span })
        break
      }
      case 'procedure': {
        if (!frame.form) return
        const { name, parameters, results } = frame.form
        const tree: ProcedureTree = {
          kind: 'procedure',
          name: nameOf(name),
          parameters: parameters.map(nameOf),
          results: results.map(nameOf),
          body,
          end,
          span,
        }
        if (frame.nested || this.phase === 'declarations') this.declarations.push(tree)
        else this.add(tree)
      }
    }
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

/** Edits at one place as one edit, in the order in which they were listed. */
function mergeEdits(edits: readonly { start: number; end: number; text: string }[]) {
  const merged: { start: number; end: number; text: string }[] = []
  for (const edit of edits) {
    const last = merged[merged.length - 1]
    if (last && last.start === edit.start && last.end === edit.end) last.text += edit.text
    else merged.push({ ...edit })
  }
  return merged
}

/** The offset after the line break that follows `end`. */
function afterLine(text: string, end: number): number {
  let at = end
  while (at < text.length && text[at] !== '\n' && text[at] !== '\r') at++
  if (text[at] === '\r') at++
  if (text[at] === '\n') at++
  return at
}
