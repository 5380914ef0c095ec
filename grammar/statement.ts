import { replaceFix } from './edits'
import { readExactCondition } from './exact'
import { foreignRemedy, smallWord } from './foreign'
import { type Mark, markSpan } from './lines'
import type { Notes } from './notes'
import type { LineForm } from './parser'
import type { Phrase } from './phrase'
import type { Span } from './span'
import * as T from './tokens'
import type { Statement, Target, WordExpression, WordOperator } from './tree'
import { nameOf, readCondition, readTarget, readWord, WORD_NAMES } from './word'

/** Reads a line's form as an instruction. Undefined where it is none, or where nothing can be made of it. */
export function readStatement(form: LineForm, span: Span, notes: Notes): Statement | undefined {
  switch (form.kind) {
    case 'halt':
      return { kind: 'halt', span }
    case 'goto':
      return { kind: 'goto', label: nameOf(form.label), span }
    case 'if':
      if (!form.label) return undefined
      return { kind: 'if-goto', condition: readCondition(form.condition, notes), label: nameOf(form.label), span }
    case 'return': {
      const values = form.values.map(value => readWord(value, notes))
      return values.length > 0 ? { kind: 'return', values, span } : { kind: 'return', span }
    }
    case 'assert':
      return { kind: 'assert', condition: readExactCondition(form.condition, notes), span }
    case 'assign':
      return readAssignment(form, span, notes)
    default:
      return undefined
  }
}

type Assignment = LineForm & { kind: 'assign' }

const COMPOUND: Readonly<Record<string, WordOperator>> = {
  '+=': '+',
  '-=': '-',
  '*=': '*',
  '/=': '/',
  '%=': 'mod',
  '&=': '&',
  '|=': '|',
  '^=': 'xor',
  '<<=': '<<',
  '>>=': '>>',
}

function readAssignment(form: Assignment, span: Span, notes: Notes): Statement | undefined {
  const { places, arrow, values } = form
  if (!arrow) return readAlone(places, span, notes)
  const step = arrow.tokenType === T.PlusPlus ? '+' : arrow.tokenType === T.MinusMinus ? '-' : undefined
  if (step) return refuseCompound(form, arrow, step, '1', span, notes)
  const operator = COMPOUND[arrow.image]
  if (operator && values[0]) {
    const { kind } = values[0]
    const text = notes.read(values[0].span)
    const bound = kind === 'binary' && notes.text[values[0].span.start] !== '(' ? `(${text})` : text
    return refuseCompound(form, arrow, operator, bound, span, notes)
  }
  if (arrow.tokenType !== T.Arrow) correctArrow(arrow, notes)

  const targets: Target[] = []
  for (const place of places) {
    const target = readTarget(place, notes)
    if (!target) return undefined
    targets.push(target)
  }
  const [value] = values
  if (!value) return undefined
  if (values.length > 1) {
    notes.refuse(
      span,
      'An instruction sets one variable, a call or a two-word product excepted.',
      'Write one line for each; use a further variable where values change places.',
    )
    return undefined
  }
  if (isProcedureCall(value)) return readProcedureCall(value, targets, span, notes)
  const [first, second] = targets
  if (first && targets.length === 1) return { kind: 'assign', target: first, value: readWord(value, notes), span }
  if (first && second && targets.length === 2 && value.kind === 'binary' && value.mark.tokenType === T.Times) {
    const left = readWord(value.left, notes)
    return { kind: 'product', high: first, low: second, left, right: readWord(value.right, notes), span }
  }
  notes.refuse(
    span,
    `${targets.length} variables stand left of the arrow, and \`${notes.read(value.span)}\` gives one word.`,
    targets.length === 2
      ? 'Write a product, `hi, lo <- y * z`, or a call, `u, v <- f(x)`; else one line for each variable.'
      : 'Write a call, `u, v <- f(x)`; else one line for each variable.',
  )
  return undefined
}

function correctArrow(arrow: Mark, notes: Notes): void {
  notes.correct(
    markSpan(arrow),
    arrow.tokenType === T.Equal
      ? '`=` compares; an assignment has an arrow.'
      : `\`${arrow.image}\` is no arrow of the notation.`,
    'Write `<-`.',
    replaceFix('Write `<-`', markSpan(arrow), '<-'),
  )
}

/** Says that `x += y` and `x++` are written out. */
function refuseCompound(
  form: Assignment,
  arrow: Mark,
  operator: WordOperator,
  right: string,
  span: Span,
  notes: Notes,
): Statement | undefined {
  const [place] = form.places
  if (!place) return undefined
  const left = notes.read(place.span)
  const text = `${left} <- ${left} ${operator} ${right}`
  notes.correct(
    markSpan(arrow),
    `\`${arrow.image}\` is no operation of the notation.`,
    `Write \`${text}\`.`,
    replaceFix(`Write \`${text}\``, span, text),
  )
  const target = readTarget(place, notes)
  if (!target) return undefined
  const [value] = form.values
  const by: WordExpression = value ? readWord(value, notes) : { kind: 'number', value: 1n, span: markSpan(arrow) }
  return { kind: 'assign', target, value: { kind: 'binary', operator, left: target, right: by, span }, span }
}

function isProcedureCall(phrase: Phrase): phrase is Phrase & { kind: 'call' } {
  return phrase.kind === 'call' && !WORD_NAMES.has(phrase.mark.image) && !isFunctionElsewhere(phrase)
}

/** Functions of exact expressions that no procedure may be called after: a draft that uses one means the function. */
export const ELSEWHERE: ReadonlySet<string> = new Set(['lg', 'ceil', 'floor', 'old'])

function isFunctionElsewhere(phrase: Phrase & { kind: 'call' }): boolean {
  return ELSEWHERE.has(phrase.mark.image)
}

function readProcedureCall(
  phrase: Phrase & { kind: 'call' },
  results: readonly Target[],
  span: Span,
  notes: Notes,
): Statement {
  const values = phrase.arguments.map(value => readWord(value, notes))
  return { kind: 'call', results, procedure: nameOf(phrase.mark), arguments: values, span }
}

/** A line without an arrow: a call, or a slip. */
function readAlone(places: readonly Phrase[], span: Span, notes: Notes): Statement | undefined {
  const [only] = places
  if (only && places.length === 1) {
    if (isProcedureCall(only)) return readProcedureCall(only, [], span, notes)
    if (only.kind === 'name') {
      refuseName(only, notes)
      return undefined
    }
  }
  notes.refuse(
    span,
    `\`${notes.read(span)}\` does nothing: no arrow follows.`,
    `Write \`x <- ${notes.read(span)}\`, or delete the line.`,
  )
  return undefined
}

function refuseName(phrase: Phrase & { kind: 'name' }, notes: Notes): void {
  const { span, mark } = phrase
  const name = mark.image
  const small = smallWord(mark)
  const known = small ? ([`Write \`${small}\`.`, small] as const) : foreignRemedy(mark)
  if (known) {
    const [remedy, text] = known
    notes.refuse(
      span,
      small
        ? `\`${name}\` is written with capitals; the words of the notation are small.`
        : `\`${name}\` is no word of the notation.`,
      remedy,
      text ? replaceFix(`Write \`${text}\``, span, text) : undefined,
    )
    return
  }
  notes.refuse(
    span,
    `\`${name}\` alone is no instruction.`,
    `Write \`${name}:\` for a label, \`${name}()\` for a call, or \`${name} <- E\` to set it.`,
    { label: `Make it the label \`${name}:\``, edits: [{ start: span.end, end: span.end, text: ':' }] },
  )
}
