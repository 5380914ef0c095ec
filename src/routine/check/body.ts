import { printWord } from '../../../grammar/expressions'
import type { Span } from '../../../grammar/span'
import type { Name, Statement, Target, WordCondition, WordExpression } from '../../../grammar/tree'
import { checkCall } from './calls'
import { type Declared, describeMeaning, locateMeaning, type Meaning } from './declared'
import type { Declaring } from './declaring'
import type { ExactCheck } from './exact'
import type { Missing } from './missing'
import type { Report } from './report'
import type { VariableScope } from './scope'

/** Checks the word code of the routine's own body or of one procedure: what names stand for, and what may be set. */
export class BodyCheck {
  /** Variables of the `for` loops around, innermost last. */
  private readonly loops: Name[] = []
  /** Set while comparisons and ends of loops are checked: a name that nothing stands for may be a size there. */
  private bounding = false
  readonly called = new Set<string>()

  constructor(
    private readonly scope: VariableScope,
    private readonly report: Report,
    private readonly declared: Declared,
    private readonly declaring: Declaring,
    private readonly missing: Missing,
    private readonly exact: ExactCheck,
  ) {}

  statements(body: readonly Statement[]): void {
    for (const statement of body) this.statement(statement)
  }

  private statement(statement: Statement): void {
    switch (statement.kind) {
      case 'assign':
        this.word(statement.value)
        this.target(statement.target)
        return
      case 'product':
        this.word(statement.left)
        this.word(statement.right)
        this.targets([statement.high, statement.low])
        return
      case 'call':
        for (const argument of statement.arguments) this.word(argument)
        this.targets(statement.results)
        this.called.add(statement.procedure.text)
        checkCall(statement, this.declared, this.report)
        return
      case 'if-goto':
        this.condition(statement.condition)
        return
      case 'while':
        this.condition(statement.condition)
        this.statements(statement.body)
        return
      case 'repeat':
        this.statements(statement.body)
        this.condition(statement.until)
        return
      case 'for':
        this.forLoop(statement)
        return
      case 'if':
        for (const branch of statement.branches) {
          this.condition(branch.condition)
          this.statements(branch.body)
        }
        if (statement.otherwise) this.statements(statement.otherwise.body)
        return
      case 'halt':
        this.halt(statement.span)
        return
      case 'return':
        this.return(statement)
        return
      case 'assert':
        this.exact.condition(statement.condition, { kind: 'assert', scope: this.scope })
        return
      case 'label':
      case 'goto':
      case 'procedure':
        return
    }
  }

  private condition(condition: WordCondition): void {
    if (condition.kind === 'compare') this.bounds([condition.left, condition.right])
    else if (condition.kind === 'not') this.condition(condition.operand)
    else {
      this.condition(condition.left)
      this.condition(condition.right)
    }
  }

  private bounds(words: readonly WordExpression[]): void {
    this.bounding = true
    for (const word of words) this.word(word)
    this.bounding = false
  }

  private word(expression: WordExpression): void {
    switch (expression.kind) {
      case 'number':
        return
      case 'name':
        this.name(expression.name)
        return
      case 'binary':
        this.word(expression.left)
        this.word(expression.right)
        return
      case 'negate':
      case 'complement':
        this.word(expression.operand)
        return
      case 'call':
        this.word(expression.argument)
        return
      case 'element':
        this.base(expression.base, 'load')
        this.word(expression.index)
        return
      case 'indirect':
        this.word(expression.address)
        return
      case 'address':
        this.address(expression.array)
    }
  }

  /** What a name stands for here: variables of a procedure are its own, and all that is declared shows. */
  private meaningOf(name: string): Meaning | 'variable' | undefined {
    const meaning = this.declared.get(name)
    if (meaning?.kind === 'scalar') return this.scope.procedure && !this.scope.has(name) ? undefined : 'variable'
    if (meaning) return meaning
    return this.scope.has(name) ? 'variable' : undefined
  }

  private name(name: Name): void {
    const { text, span } = name
    const meaning = this.meaningOf(text)
    if (meaning === 'variable') this.scope.read.add(text)
    else if (!meaning) this.missing.word(name, this.scope, this.bounding ? 'bound' : 'code')
    else if (meaning.kind === 'array')
      this.report.error({
        span,
        message: `\`${text}\` is ${locateMeaning(meaning)}, and a word is expected here.`,
        remedy: `Write \`${text}[i]\` for one of its words, or \`addr(${text})\` for its address.`,
        fix: {
          label: `Write \`addr(${text})\``,
          edits: [{ start: span.start, end: span.end, text: `addr(${text})` }],
        },
        cause: `array as word ${text}`,
      })
    else if (meaning.kind === 'procedure')
      this.report.error({
        span,
        message: `\`${text}\` is ${locateMeaning(meaning)}, and a word is expected here.`,
        remedy: `Call it on a line of its own: \`x <- ${text}(...)\`.`,
        cause: `procedure as word ${text}`,
      })
  }

  /** The name before an index. */
  private base(name: Name, use: 'load' | 'store'): void {
    const { text, span } = name
    const meaning = this.meaningOf(text)
    if (!meaning) {
      this.missing.array(name, use, this.scope)
      return
    }
    if (meaning === 'variable') {
      this.scope.read.add(text)
      this.warnOfScalarBase(name)
      return
    }
    if (meaning.kind === 'array') {
      if (use === 'store') this.refuseReadOnly(name, meaning)
      return
    }
    this.report.error({
      span,
      message: `\`${text}\` is ${locateMeaning(meaning)}, and only an array or a variable that holds an address has an index.`,
      remedy:
        meaning.kind === 'procedure'
          ? `Call it with round brackets, on a line of its own: \`x <- ${text}(...)\`.`
          : `Name an array; where \`${text}\` is an address, move it first: \`p <- ${text}\`, then \`p[i]\`.`,
      cause: `index of ${text}`,
    })
  }

  /** `in a` without a length, then `a[i]`: legal for an address, and rarely meant. */
  private warnOfScalarBase({ text, span }: Name): void {
    const meaning = this.declared.get(text)
    if (this.scope.procedure || meaning?.kind !== 'scalar' || meaning.role === 'out' || this.scope.set.has(text))
      return
    this.report.warn({
      span,
      message: `\`${text}\` is declared as a single word (line ${meaning.span.line}), so this is the word at the address \`${text}\` plus the index.`,
      remedy: `For an array, give its length: \`${meaning.role} ${text}[n]\`.`,
      fix: this.declaring.lengthen(text, 'n'),
      cause: `scalar base ${text}`,
    })
  }

  private address(name: Name): void {
    const { text, span } = name
    const meaning = this.meaningOf(text)
    if (meaning === undefined) this.missing.array(name, 'read', this.scope)
    else if (meaning === 'variable' || meaning.kind !== 'array')
      this.report.error({
        span,
        message: `\`${text}\` is ${meaning === 'variable' ? 'a variable' : locateMeaning(meaning)}; arrays alone have an address.`,
        remedy: `Name an array; a word has an address only as an element of one.`,
        cause: `address of ${text}`,
      })
  }

  private targets(targets: readonly Target[]): void {
    const known = new Map<string, Target>()
    for (const target of targets) {
      this.target(target)
      const written = printWord(target)
      if (known.has(written))
        this.report.error({
          span: target.span,
          message: `\`${written}\` stands twice left of the arrow.`,
          remedy: 'Give one of the two another name.',
        })
      known.set(written, target)
    }
  }

  private target(target: Target): void {
    switch (target.kind) {
      case 'name':
        this.setVariable(target.name)
        return
      case 'element':
        this.base(target.base, 'store')
        this.word(target.index)
        return
      case 'indirect':
        this.word(target.address)
    }
  }

  private setVariable({ text, span }: Name): void {
    const loop = this.loops.find(name => name.text === text)
    if (loop) {
      this.report.error({
        span,
        message: `\`${text}\` runs through the \`for\` of line ${loop.span.line}, which alone may set it.`,
        remedy: 'Use another variable, or write the loop with `while`.',
        path: [{ span: loop.span, note: 'the loop' }],
        cause: `loop variable ${text} ${loop.span.start}`,
      })
      return
    }
    const meaning = this.declared.get(text)
    if (!meaning) return
    switch (meaning.kind) {
      case 'scalar':
        this.setScalar(text, span, meaning)
        return
      case 'array':
        this.report.error({
          span,
          message: `\`${text}\` is ${locateMeaning(meaning)}, and a word cannot be put in its place.`,
          remedy: `Write \`${text}[i] <- ...\` to store one of its words.`,
          cause: `array set ${text}`,
        })
        return
      case 'procedure':
        this.report.error({
          span,
          message: `\`${text}\` is ${locateMeaning(meaning)}, so it is no variable.`,
          remedy: 'Give the variable another name.',
          cause: `procedure set ${text}`,
        })
        return
      default:
        this.report.error({
          span,
          message: `\`${text}\` is ${locateMeaning(meaning)}, and stays what it is during a run.`,
          remedy: `Copy it to a variable first, and change that: \`x <- ${text}\`.`,
          cause: `set ${text}`,
        })
    }
  }

  private setScalar(text: string, span: Span, meaning: Meaning & { kind: 'scalar' }): void {
    if (this.scope.procedure) {
      if (meaning.role !== 'in' && !this.scope.given.has(text))
        this.report.warn({
          span,
          message: `\`${text}\` is a variable of procedure \`${this.scope.procedure.name.text}\` here, not ${describeMeaning(meaning)} of the routine.`,
          remedy: 'Let the procedure return it, and take it from the call; or give it another name.',
          cause: `hidden result ${this.scope.procedure.name.text} ${text}`,
        })
      return
    }
    if (meaning.role !== 'in') return
    this.report.error({
      span,
      message: `\`${text}\` is an input (line ${meaning.span.line}), which a run does not change.`,
      remedy: `Declare it with \`inout ${text}\`, or copy it to a variable first.`,
      fix: this.declaring.changeRole(text, 'inout'),
      cause: `set ${text}`,
    })
  }

  private refuseReadOnly({ text, span }: Name, meaning: Meaning & { kind: 'array' }): void {
    if (meaning.role !== 'in' && meaning.role !== 'table') return
    this.report.error({
      span,
      message: `\`${text}\` is ${meaning.role === 'in' ? 'an input' : 'a table of constants'} (line ${meaning.span.line}), which a run does not change.`,
      remedy:
        meaning.role === 'in'
          ? `Declare it with \`inout ${text}[...]\`, or store to an array declared with \`out\` or \`work\`.`
          : 'Store to an array declared with `out`, `inout` or `work`.',
      fix: meaning.role === 'in' ? this.declaring.changeRole(text, 'inout') : undefined,
      cause: `store ${text}`,
    })
  }

  private forLoop(statement: Extract<Statement, { kind: 'for' }>): void {
    const { variable, from, to, step, body } = statement
    this.setVariable(variable)
    this.bounds([from, to])
    if (step) this.word(step)
    if (step?.kind === 'number' && step.value === 0n)
      this.report.error({
        span: step.span,
        message: 'A step of 0 gets nowhere.',
        remedy: 'Write a step of 1 or more; `downto` counts down.',
      })
    this.loops.push(variable)
    this.statements(body)
    this.loops.pop()
  }

  private halt(span: Span): void {
    const { procedure } = this.scope
    if (!procedure) return
    this.report.error({
      span,
      message: `\`halt\` stands in the procedure \`${procedure.name.text}\`.`,
      remedy: 'Write `return` to leave the procedure; the routine halts in its own body.',
      fix: { label: 'Write `return`', edits: [{ start: span.start, end: span.end, text: 'return' }] },
    })
  }

  private return({ values, span }: Extract<Statement, { kind: 'return' }>): void {
    for (const value of values ?? []) this.word(value)
    const { procedure } = this.scope
    if (!procedure) {
      this.report.error({
        span,
        message: '`return` stands outside of any procedure.',
        remedy: values
          ? 'Write `halt` to end the run; results are declared with `out` and set before.'
          : 'Write `halt` to end the run.',
        fix: values
          ? undefined
          : { label: 'Write `halt`', edits: [{ start: span.start, end: span.end, text: 'halt' }] },
      })
      return
    }
    const { results, name } = procedure
    if (!values || values.length === results.length) return
    const names = results.map(result => result.text).join(', ')
    this.report.error({
      span,
      message: `\`${name.text}\` returns ${countWords(results.length)}${names && ` (${names})`}, and ${countWords(values.length)} stand${values.length === 1 ? 's' : ''} here.`,
      remedy: names
        ? `Write \`return\` with ${countWords(results.length)}, or alone for \`${names}\` as they stand.`
        : `Write \`return\` alone, or name a result: \`procedure ${name.text}(...) -> u\`.`,
    })
  }
}

export function countWords(count: number): string {
  return count === 0 ? 'no word' : count === 1 ? '1 word' : `${count} words`
}
