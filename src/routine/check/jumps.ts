import type { Span } from '../../../grammar/span'
import type { Name, Statement } from '../../../grammar/tree'
import { nearestName } from '../names'
import type { Declared } from './declared'
import { type Report, replaceWith } from './report'
import type { VariableScope } from './scope'
import { bodiesOf } from './walk'

type Form = Extract<Statement, { kind: 'while' | 'repeat' | 'for' | 'if' }>

/** A body inside a form: the branches of an `if` are apart. */
interface Enclosure {
  readonly form: Form
  readonly body: readonly Statement[]
}

interface Label {
  readonly name: Name
  readonly span: Span
  readonly inside: readonly Enclosure[]
  used: boolean
}

/** Checks labels and jumps of one scope; `others` have labels that a jump here may not go to. */
export class JumpCheck {
  private readonly labels = new Map<string, Label>()
  private readonly jumps: { readonly label: Name; readonly inside: readonly Enclosure[] }[] = []

  constructor(
    private readonly scope: VariableScope,
    private readonly report: Report,
    private readonly declared: Declared,
  ) {
    this.gather(scope.body, [])
  }

  /** Whether some jump goes to a label. */
  isUsed(name: string): boolean {
    return this.labels.get(name)?.used ?? false
  }

  has(name: string): boolean {
    return this.labels.has(name)
  }

  get owner(): string {
    return this.scope.procedure ? `the procedure \`${this.scope.procedure.name.text}\`` : "the routine's own body"
  }

  check(others: readonly JumpCheck[]): void {
    for (const { label, inside } of this.jumps) {
      const target = this.labels.get(label.text)
      if (target) {
        target.used = true
        this.checkEntry(label, inside, target)
      } else this.unknown(label, others)
    }
    for (const label of this.labels.values()) if (!label.used) this.unused(label)
  }

  private gather(body: readonly Statement[], inside: readonly Enclosure[]): void {
    for (const statement of body) {
      if (statement.kind === 'label') this.enter(statement.name, statement.span, inside)
      if (statement.kind === 'goto' || statement.kind === 'if-goto')
        this.jumps.push({ label: statement.label, inside })
      for (const inner of bodiesOf(statement))
        this.gather(inner, [...inside, { form: statement as Form, body: inner }])
    }
  }

  private enter(name: Name, span: Span, inside: readonly Enclosure[]): void {
    const known = this.labels.get(name.text)
    if (!known) {
      this.labels.set(name.text, { name, span, inside, used: false })
      return
    }
    this.report.error({
      span,
      message: `The label \`${name.text}\` stands twice; the first is on line ${known.span.line}.`,
      remedy: 'Give one of the two another name, in the jumps to it too.',
      path: [{ span: known.span, note: 'the first' }],
    })
  }

  /** A jump may leave forms, and may not enter one that it is not in. */
  private checkEntry(label: Name, from: readonly Enclosure[], target: Label): void {
    const entered = target.inside.find((enclosure, depth) => from[depth]?.body !== enclosure.body)
    if (!entered) return
    const { form } = entered
    this.report.error({
      span: label.span,
      message: `This jumps into the \`${form.kind}\` of line ${form.span.line}, where \`${label.text}\` stands (line ${target.span.line}).`,
      remedy: ENTRY_REMEDIES[form.kind],
      path: [
        { span: form.span, note: `the \`${form.kind}\`` },
        { span: target.span, note: 'the label' },
      ],
    })
  }

  private unknown(label: Name, others: readonly JumpCheck[]): void {
    const { text, span } = label
    const other = others.find(each => each !== this && each.has(text))
    const cause = `label ${this.owner} ${text}`
    if (other) {
      const leaves = this.scope.procedure !== undefined
      this.report.error({
        span,
        message: `\`${text}\` stands in ${other.owner}, and a jump stays in ${this.owner}.`,
        remedy: leaves
          ? 'Write `return`, and let the caller test a result to jump on.'
          : `Call the procedure, or repeat the label's instructions here.`,
        cause,
      })
      return
    }
    if (this.report.mayBeLost(text)) return
    if (this.declared.get(text)?.kind === 'procedure') {
      this.report.error({
        span,
        message: `\`${text}\` is a procedure, and a jump goes to a label.`,
        remedy: `Call it: \`${text}()\`.`,
        cause,
      })
      return
    }
    const near = nearestName(text, this.labels.keys())
    this.report.error({
      span,
      message: `No label \`${text}\` stands in ${this.owner}.`,
      remedy: near
        ? `Write \`${near}\` if that is meant.`
        : `Write \`${text}:\` on a line before the instruction to go to.`,
      fix: near ? replaceWith(near, span) : undefined,
      cause,
    })
  }

  private unused({ name, span }: Label): void {
    const { text } = this.report
    const isSpace = (at: number) => text[at] === ' ' || text[at] === '\t'
    let { start, end } = span
    while (isSpace(end)) end++
    const alone = text[end] === '\n' || text[end] === '\r' || end >= text.length
    if (alone) {
      while (isSpace(start - 1)) start--
      if (text.startsWith('\r\n', end)) end++
      if (end < text.length) end++
    }
    this.report.warn({
      span,
      message: `Nothing jumps to the label \`${name.text}\`.`,
      remedy: 'Delete it.',
      fix: { label: `Delete \`${name.text}:\``, edits: [{ start, end, text: '' }] },
    })
  }
}

const ENTRY_REMEDIES: Record<Form['kind'], string> = {
  for: 'Jump to a label above the loop: its variable and its end are set there.',
  while: 'Jump to a label above the loop, or write the loop itself with labels and jumps.',
  repeat: 'Jump to a label above the loop, or write the loop itself with labels and jumps.',
  if: 'Put the label below the `end` of the `if`, or write the `if` itself with labels and jumps.',
}
