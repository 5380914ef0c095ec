import { replaceFix } from './edits'
import { type Line, markSpan, restSpan } from './lines'
import type { Notes } from './notes'
import type { LineForm } from './parser'
import type { Phrase } from './phrase'
import type { LineReader } from './reader'
import { joinSpans, type Span } from './span'
import { ELSEWHERE } from './statement'
import * as T from './tokens'
import type { Branch, ProcedureTree, Statement, WordCondition } from './tree'
import { blankCondition, nameOf, readCondition, readWord, WORD_NAMES } from './word'

/** A form whose last line is still to come. */
export type Frame =
  | ({
      readonly kind: 'procedure'
      readonly form?: LineForm & { kind: 'procedure' }
      readonly nested: boolean
    } & Open)
  | ({ readonly kind: 'while'; readonly condition: WordCondition } & Open)
  | ({ readonly kind: 'repeat' } & Open)
  | ({ readonly kind: 'for'; readonly parts?: ForParts } & Open)
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

/** A form that is whole. `nested`: a procedure that stands where none may. */
export interface Closed {
  readonly tree: Statement
  readonly nested: boolean
}

/** The forms that are open at a line, the innermost last. */
export class Forms {
  private readonly frames: Frame[] = []
  private readonly notes: Notes

  constructor(private readonly reader: LineReader) {
    this.notes = reader.notes
  }

  /** The innermost open form. */
  innermost(): Frame | undefined {
    return this.frames[this.frames.length - 1]
  }

  /** Opens the form whose first line this is. A line that means nothing opens its form all the same. */
  open(line: Line, from: number, kind: Frame['kind']): void {
    if (kind === 'procedure') {
      this.openProcedure(line, from)
      return
    }
    const span = restSpan(line, from)
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

  /** The condition of a line, or a blank one where it could not be read. */
  condition(form: LineForm | undefined, span: Span): WordCondition {
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
    const span = restSpan(line, from)
    const outer = this.innermost()
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

  /** Turns to the next branch of the innermost form. */
  turn(line: Line, from: number): void {
    const frame = this.innermost()
    if (frame?.kind !== 'if') return
    const span = restSpan(line, from)
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

  /** `end`, or what other languages write for it. */
  readEnd(line: Line, from: number): void {
    const rest = line.tokens.slice(from)
    const [first] = rest
    if (first?.tokenType === T.End && rest.length === 1 && line.strays.length === 0) return
    const span = restSpan(line, from)
    this.notes.correct(
      span,
      first?.tokenType === T.End
        ? `Found \`${rest[1]?.image ?? this.notes.read(line.strays[0]!.span)}\` after \`end\`, which stands alone on its line.`
        : `\`${this.notes.read(span)}\` is no word of the notation.`,
      'Write `end`.',
      replaceFix('Write `end`', span, 'end'),
    )
  }

  /** Closes the innermost form. `tree` is absent where its first line means nothing; then it is not in the tree. */
  close(end: Span, until: WordCondition): Closed | undefined {
    const frame = this.frames.pop()
    if (!frame) return undefined
    const span = joinSpans(frame.span, end)
    const { body } = frame
    switch (frame.kind) {
      case 'while':
        return { tree: { kind: 'while', condition: frame.condition, body, end, span }, nested: false }
      case 'repeat':
        return { tree: { kind: 'repeat', body, until, end, span }, nested: false }
      case 'for':
        if (!frame.parts) return undefined
        return { tree: { kind: 'for', ...frame.parts, body, end, span }, nested: false }
      case 'if': {
        this.closeBranch(frame)
        const otherwise = frame.otherwise && { otherwise: { body, span: frame.otherwise } }
        return { tree: { kind: 'if', branches: frame.branches, ...otherwise, end, span }, nested: false }
      }
      case 'procedure': {
        if (!frame.form) return undefined
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
        return { tree, nested: frame.nested }
      }
    }
  }
}
