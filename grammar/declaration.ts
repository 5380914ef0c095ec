import { replaceFix } from './edits'
import { readExact, readExactCondition } from './exact'
import { type Mark, markSpan } from './lines'
import type { Notes } from './notes'
import type { LineForm } from './parser'
import type { Span } from './span'
import * as T from './tokens'
import type { Declaration } from './tree'
import { nameOf } from './word'

/** Reads a line's form as a declaration. Undefined where it is none. */
export function readDeclaration(form: LineForm, span: Span, notes: Notes): Declaration | undefined {
  switch (form.kind) {
    case 'items': {
      const kind = form.word.image as 'in' | 'out' | 'inout' | 'work'
      const items = form.items.map(({ name, length, span }) => ({
        name: nameOf(name),
        ...(length && { length: readExact(length, notes) }),
        span,
      }))
      return { kind, items, span }
    }
    case 'let':
      readEqual(form.equal, notes)
      return { kind: 'let', name: nameOf(form.name), value: readExact(form.value, notes), span }
    case 'fix':
      readEqual(form.equal, notes)
      return readFix(form, span, notes)
    case 'need':
    case 'check':
      return { kind: form.kind, condition: readExactCondition(form.condition, notes), span }
    case 'feed': {
      const index = form.index && { index: nameOf(form.index) }
      const from = readExact(form.from, notes)
      return { kind: 'feed-range', name: nameOf(form.name), ...index, from, to: readExact(form.to, notes), span }
    }
    case 'distinct':
      return { kind: 'feed-distinct', name: nameOf(form.name), span }
    case 'claim':
      return {
        kind: 'claim',
        measure: form.measure.tokenType === T.Time ? 'time' : 'space',
        operator: readClaimOperator(form.operator, notes),
        bound: readExact(form.bound, notes),
        span,
      }
    default:
      return undefined
  }
}

function readEqual(mark: Mark, notes: Notes): void {
  if (mark.tokenType === T.Equal) return
  notes.correct(
    markSpan(mark),
    `\`${mark.image}\` assigns while the routine runs; a declaration states what holds.`,
    'Write `=`.',
    replaceFix('Write `=`', markSpan(mark), '='),
  )
}

function readClaimOperator(mark: Mark, notes: Notes): '<=' | '=' {
  const span = markSpan(mark)
  if (mark.tokenType === T.LessEqual) return '<='
  if (mark.tokenType === T.Equal) return '='
  const meant = mark.tokenType === T.DoubleEqual ? '=' : '<='
  notes.correct(
    span,
    `A claim is made with \`<=\` or \`=\`, not with \`${mark.image}\`.`,
    `Write \`${meant}\`.`,
    replaceFix(`Write \`${meant}\``, span, meant),
  )
  return meant
}

function readFix(form: LineForm & { kind: 'fix' }, span: Span, notes: Notes): Declaration | undefined {
  const name = nameOf(form.name)
  const second = form.values.find(value => value.kind === 'binary' && value.mark.tokenType === T.Equal)
  if (second) {
    notes.refuse(second.span, 'A `fix` line declares one constant.', 'Write a `fix` line for each.')
    return undefined
  }
  const values = form.values.map(value => readExact(value, notes))
  const [value] = values
  if (!value) return undefined
  if (form.range) {
    if (values.length > 1) refuseValues('A table by formula has one formula.', `fix ${name.text}[i in F .. T] = E`)
    const { index, from, to } = form.range
    return {
      kind: 'formula',
      name,
      index: nameOf(index),
      from: readExact(from, notes),
      to: readExact(to, notes),
      value,
      span,
    }
  }
  if (form.length) return { kind: 'table', name, length: readExact(form.length, notes), values, span }
  if (values.length > 1) {
    const at = name.span.end
    notes.refuse(
      span,
      `\`${name.text}\` is one word, and ${values.length} values stand behind it.`,
      `Write \`${name.text}[${values.length}]\` for a table, or one \`fix\` line for each word.`,
      {
        label: `Write \`${name.text}[${values.length}]\``,
        edits: [{ start: at, end: at, text: `[${values.length}]` }],
      },
    )
  }
  return { kind: 'fix', name, value, span }

  function refuseValues(message: string, form: string): void {
    notes.refuse(span, message, `Write \`${form}\`.`)
  }
}
