import type { Content, Exact, ExactCondition, Name } from '../../../grammar/tree'
import type { Declared, Meaning } from './declared'
import { describeMeaning, locateMeaning } from './declared'
import type { Declaring } from './declaring'
import type { Missing } from './missing'
import type { Report } from './report'
import type { VariableScope } from './scope'

/** Where an exact expression stands, which decides what it may read. */
export type ExactPlace =
  | { readonly kind: 'point'; readonly what: string; readonly cause?: string }
  /** `known` holds the names of lets (and fixes) declared above. */
  | { readonly kind: 'let' | 'fix'; readonly name: string; readonly known: ReadonlySet<string> }
  | { readonly kind: 'check' }
  | { readonly kind: 'assert'; readonly scope: VariableScope }

/** Checks what the names in exact expressions stand for. */
export class ExactCheck {
  constructor(
    private readonly report: Report,
    private readonly declared: Declared,
    private readonly declaring: Declaring,
    private readonly missing: Missing,
    /** The routine's own variables. */
    private readonly variables: VariableScope,
  ) {}

  expression(expression: Exact, place: ExactPlace, bound: readonly string[] = []): void {
    switch (expression.kind) {
      case 'number':
        return
      case 'name':
        if (!bound.includes(expression.name.text)) this.name(expression.name, place)
        return
      case 'binary':
        this.expression(expression.left, place, bound)
        this.expression(expression.right, place, bound)
        return
      case 'negate':
        this.expression(expression.operand, place, bound)
        return
      case 'call':
        for (const argument of expression.arguments) this.expression(argument, place, bound)
        return
      case 'element':
        this.content(expression.array, place)
        this.expression(expression.index, place, bound)
        return
      case 'old':
        this.oldScalar(expression.name, place)
        return
      case 'total':
        this.content(expression.array, place)
        return
      case 'sum':
        this.expression(expression.from, place, bound)
        this.expression(expression.to, place, bound)
        this.index(expression.index)
        this.expression(expression.body, place, [...bound, expression.index.text])
    }
  }

  condition(condition: ExactCondition, place: ExactPlace, bound: readonly string[] = []): void {
    switch (condition.kind) {
      case 'compare':
        this.expression(condition.left, place, bound)
        this.expression(condition.right, place, bound)
        return
      case 'and':
      case 'or':
        this.condition(condition.left, place, bound)
        this.condition(condition.right, place, bound)
        return
      case 'not':
        this.condition(condition.operand, place, bound)
        return
      case 'all':
      case 'any':
        this.expression(condition.from, place, bound)
        this.expression(condition.to, place, bound)
        this.index(condition.index)
        this.condition(condition.body, place, [...bound, condition.index.text])
        return
      case 'sorted':
        this.content(condition.array, place)
        return
      case 'same':
        this.content(condition.left, place)
        this.content(condition.right, place)
    }
  }

  /** An index that a sum, `all`, `any`, a feed or a formula binds. */
  index({ text, span }: Name): void {
    const meaning = this.declared.get(text)
    if (!meaning) return
    this.report.error({
      span,
      message: `\`${text}\` is ${locateMeaning(meaning)}, and an index of this name would hide it.`,
      remedy: 'Give the index another name, here and where it is used.',
      cause: `index ${text} ${span.line}`,
    })
  }

  private name(name: Name, place: ExactPlace): void {
    const { text, span } = name
    // In an assert of a procedure the procedure's own variables come first.
    if (place.kind === 'assert' && place.scope.has(text)) {
      place.scope.read.add(text)
      return
    }
    const meaning = this.declared.get(text)
    switch (meaning?.kind) {
      case 'width':
      case 'size':
        return
      case 'let':
      case 'fix':
        this.constant(name, meaning.kind, place)
        return
      case 'array':
        this.report.error({
          span,
          message: `\`${text}\` is ${locateMeaning(meaning)}, and a number is expected here.`,
          remedy: `Write \`${text}[i]\` for one of its words, or \`sum(${text})\`.`,
          cause: `array as number ${text}`,
        })
        return
      case 'procedure':
        this.report.error({
          span,
          message: `\`${text}\` is ${locateMeaning(meaning)}; exact expressions call no procedures.`,
          remedy: 'Call it in word code, and name the variable that takes its result.',
          cause: `procedure as number ${text}`,
        })
        return
      case 'scalar':
        this.scalar(name, meaning, place)
        return
      case undefined:
        this.unknown(name, place)
    }
  }

  private constant({ text, span }: Name, kind: 'let' | 'fix', place: ExactPlace): void {
    if (place.kind !== 'let' && place.kind !== 'fix') return
    if (place.known.has(text)) return
    if (text === place.name) {
      this.report.error({
        span,
        message: `\`${text}\` is declared through itself.`,
        remedy: 'Write its value with numbers, `w`, sizes and what is declared above.',
      })
      return
    }
    if (place.kind === 'let' && kind === 'fix') {
      this.report.error({
        span,
        message: `\`${text}\` is a constant, and a let is there before any \`fix\`.`,
        remedy: `Declare \`${place.name}\` with \`fix\` as well, or \`${text}\` with \`let\`.`,
      })
      return
    }
    this.report.error({
      span,
      message: `\`${text}\` is declared further down.`,
      remedy: `Move its line above the one of \`${place.name}\`.`,
    })
  }

  private scalar(name: Name, meaning: Meaning & { kind: 'scalar' }, place: ExactPlace): void {
    if (place.kind === 'check') return
    const { text, span } = name
    if (place.kind === 'assert') {
      // The scope of the routine's own body would have had it.
      this.missing.word(name, place.scope, 'bound')
      return
    }
    this.report.error({ span, ...dataRemark(`\`${text}\``, describeMeaning(meaning), place) })
  }

  private unknown(name: Name, place: ExactPlace): void {
    const { text, span } = name
    if (place.kind === 'assert') {
      this.missing.word(name, place.scope, 'bound')
      return
    }
    if (!this.variables.has(text)) {
      this.missing.word(name, undefined, 'exact')
      return
    }
    if (place.kind === 'check')
      this.report.error({
        span,
        message: `\`${text}\` is a variable, and a check knows inputs and results alone.`,
        remedy: `Declare it as a result: \`out ${text}\`; or put an \`assert\` where it is at hand.`,
        fix: this.declaring.insert(`out ${text}`),
        cause: `variable in check ${text}`,
      })
    else this.report.error({ span, ...dataRemark(`\`${text}\``, 'a variable', place) })
  }

  private oldScalar(name: Name, place: ExactPlace): void {
    const { text, span } = name
    const meaning = this.declared.get(text)
    if (meaning?.kind === 'array') {
      this.report.error({
        span,
        message: `\`${text}\` is ${locateMeaning(meaning)}, and a number is expected here.`,
        remedy: `Write \`old(${text})[i]\` for one of its words, or \`sum(old(${text}))\`.`,
        cause: `array as number ${text}`,
      })
      return
    }
    if (place.kind !== 'check' && place.kind !== 'assert') {
      this.report.error({ span, ...dataRemark(`\`old(${text})\``, 'data', place) })
      return
    }
    if (meaning?.kind === 'scalar' && meaning.role !== 'out') return
    if (!meaning && !this.variables.has(text)) this.missing.word(name, undefined, 'exact')
    else this.report.error({ span, ...noOld(text) })
  }

  private content({ name, old }: Content, place: ExactPlace): void {
    const { text, span } = name
    const meaning = this.declared.get(text)
    if (!meaning) {
      if (this.variables.has(text) || (place.kind === 'assert' && place.scope.has(text)))
        this.report.error({ span, ...noArray(text, 'a variable') })
      else this.missing.array(name, 'read', undefined)
      return
    }
    if (meaning.kind !== 'array') {
      this.report.error({ span, ...noArray(text, locateMeaning(meaning)) })
      return
    }
    const { role } = meaning
    if (place.kind !== 'check' && place.kind !== 'assert') {
      this.report.error({ span, ...dataRemark(`The content of \`${text}\``, 'data', place) })
      return
    }
    if (old && role !== 'in' && role !== 'inout') {
      this.report.error({ span, ...noOld(text) })
      return
    }
    if (place.kind === 'check' && role === 'work')
      this.report.error({
        span,
        message: `\`${text}\` is working memory, and a check knows inputs and results alone.`,
        remedy: `Declare it as a result: \`out ${text}[...]\`; or put an \`assert\` where it is at hand.`,
        fix: this.declaring.changeRole(text, 'out'),
        cause: `work in check ${text}`,
      })
  }
}

function placeName(place: ExactPlace): string {
  return place.kind === 'point' ? place.what : `a \`${place.kind}\``
}

/** Says that what is known only once a run has its input stands where the point alone is known. */
function dataRemark(what: string, kind: string, place: ExactPlace) {
  const also = place.kind === 'let' ? 'and lets declared above' : 'lets and constants'
  return {
    message: `${what} is ${kind === 'data' ? 'data' : `${kind}, that is, data`}; ${placeName(place)} is worked out before there is any.`,
    remedy: `Use numbers, \`w\`, sizes, ${also}; what holds of data is a \`check\` or an \`assert\`.`,
    cause: `data ${what} ${(place.kind === 'point' && place.cause) || placeName(place)}`,
  }
}

function noOld(name: string) {
  return {
    message: `\`${name}\` is no input, so it has no content before the run.`,
    remedy: `Leave \`old\` out, or declare it with \`inout\`.`,
    cause: `old ${name}`,
  }
}

function noArray(name: string, what: string) {
  return {
    message: `\`${name}\` is ${what}, and an array is expected here.`,
    remedy: 'Name an array that is declared with a length, such as `a` of `in a[n]`.',
    cause: `no array ${name}`,
  }
}
