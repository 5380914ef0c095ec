import type { Span } from '../../grammar/span'
import type { ExactCondition, Statement, Target } from '../../grammar/tree'
import type { Operand } from './block'
import { type BlockBuilder, type BlockDraft, type ConstantPool, lineOf } from './block-builder'
import { namesInCondition } from './exact-names'
import type { ConstantNames, ExpressionLowering, Place } from './lower-expression'

type Of<K extends Statement['kind']> = Extract<Statement, { kind: K }>

/** Lowers instructions and structured forms of one procedure, each at the cost that grammar/NOTATION.md states. */
export class StatementLowering {
  private readonly labels = new Map<string, BlockDraft>()

  constructor(
    private readonly builder: BlockBuilder,
    private readonly expressions: ExpressionLowering,
    private readonly pool: ConstantPool,
    private readonly names: ConstantNames,
    private readonly procedureNumbers: ReadonlyMap<string, number>,
    /** Of a procedure: its result variables. Of the routine's own body: undefined. */
    private readonly results: readonly Operand[] | undefined,
  ) {}

  lowerBody(body: readonly Statement[]): void {
    for (const statement of body) {
      this.lower(statement)
      this.builder.releaseScratch(0)
    }
  }

  /** The way out at the `end` line: a procedure returns its result variables, the routine halts. */
  leave(end: Span): void {
    if (this.results) this.leaveProcedure(this.results, end)
    else this.builder.terminate({ kind: 'halt', span: end })
  }

  private lower(statement: Statement): void {
    const line = lineOf(statement)
    switch (statement.kind) {
      case 'assign':
        this.assign(statement)
        break
      case 'product':
        this.product(statement)
        break
      case 'call':
        this.call(statement)
        break
      case 'label':
        this.builder.enter(this.label(statement.name.text, line))
        break
      case 'goto':
        this.builder.cost('jump', line)
        this.builder.terminate({ kind: 'jump', to: this.label(statement.label.text, line).id })
        break
      case 'if-goto': {
        const next = this.builder.draft(line)
        this.expressions.branch(statement.condition, this.label(statement.label.text, line), next)
        this.builder.enter(next)
        break
      }
      case 'while':
        this.whileLoop(statement)
        break
      case 'repeat':
        this.repeatLoop(statement)
        break
      case 'for':
        this.forLoop(statement)
        break
      case 'if':
        this.ifForm(statement)
        break
      case 'halt':
        this.builder.terminate({ kind: 'halt', span: statement.span })
        break
      case 'return': {
        const values = statement.values?.map(value => this.expressions.value(value))
        this.leaveProcedure(values ?? this.results ?? [], statement.span)
        break
      }
      case 'assert':
        this.assert(statement.condition, statement.span)
        break
      case 'procedure':
        break
    }
  }

  private label(name: string, line: number): BlockDraft {
    let draft = this.labels.get(name)
    if (!draft) {
      draft = this.builder.draft(line)
      this.labels.set(name, draft)
    }
    return draft
  }

  private assign({ target, value }: Of<'assign'>): void {
    const place = this.expressions.place(target)
    if (place.kind === 'variable') this.expressions.valueInto(value, place.variable)
    else this.expressions.storeTo(place, this.expressions.value(value))
  }

  private product({ high, low, left, right, span }: Of<'product'>): void {
    const places = [high, low].map(target => this.expressions.place(target))
    const factors = [this.expressions.value(left), this.expressions.value(right)] as const
    const into = this.receivers(places)
    this.builder.cost('multiply', span.line)
    this.builder.emit({ kind: 'product', high: into[0]!, low: into[1]!, left: factors[0], right: factors[1], span })
    this.deliver(places, into, [high, low])
  }

  private call({ results, procedure, arguments: words, span }: Of<'call'>): void {
    const places = results.map(target => this.expressions.place(target))
    const operands = words.map(word => this.expressions.value(word))
    const into = this.receivers(places)
    this.builder.cost('move', span.line, operands.length)
    this.builder.cost('call', span.line)
    const next = this.builder.draft(span.line)
    this.builder.terminate({
      kind: 'call',
      procedure: this.procedureNumbers.get(procedure.text)!,
      arguments: operands,
      results: into,
      next: next.id,
      span,
    })
    this.builder.enter(next)
    this.deliver(places, into, results)
  }

  /** The variables that take several results at once: the targets, or scratch where one of them is in memory. */
  private receivers(places: readonly Place[]): number[] {
    const direct = places.every(place => place.kind === 'variable')
    return places.map(place => (direct && place.kind === 'variable' ? place.variable : this.builder.takeScratch()))
  }

  /** Stores come before variables change, since an index may be one of those variables. */
  private deliver(places: readonly Place[], from: readonly number[], targets: readonly Target[]): void {
    const held = (at: number): Operand => ({ kind: 'variable', variable: from[at]! })
    for (const [at, place] of places.entries())
      if (place.kind !== 'variable') this.expressions.storeTo(place, held(at))
    for (const [at, place] of places.entries()) {
      if (place.kind !== 'variable' || place.variable === from[at]) continue
      this.builder.emit({ kind: 'move', into: place.variable, from: held(at), span: targets[at]!.span })
    }
  }

  private leaveProcedure(values: readonly Operand[], span: Span): void {
    this.builder.cost('move', span.line, values.length)
    this.builder.cost('call', span.line)
    this.builder.terminate({ kind: 'return', values, span })
  }

  private whileLoop({ condition, body, span }: Of<'while'>): void {
    const test = this.builder.draft(span.line)
    const pass = this.builder.draft(span.line)
    const after = this.builder.draft(span.line)
    this.builder.enter(test)
    this.expressions.branch(condition, pass, after)
    this.builder.enter(pass)
    this.lowerBody(body)
    this.builder.cost('jump', span.line)
    this.builder.terminate({ kind: 'jump', to: test.id })
    this.builder.enter(after)
  }

  private repeatLoop({ body, until, span }: Of<'repeat'>): void {
    const pass = this.builder.draft(span.line)
    const after = this.builder.draft(until.span.line)
    this.builder.enter(pass)
    this.lowerBody(body)
    this.expressions.branch(until, after, pass)
    this.builder.enter(after)
  }

  /**
   * One compare a test, one add and one jump a completed pass. Whether a pass is the last is told by the distance
   * left, before the add, so that the loop never runs round the end of the word; that costs nothing.
   */
  private forLoop({ variable, from, to, step, down, body, span }: Of<'for'>): void {
    const { builder } = this
    const line = span.line
    const index = builder.variable(variable.text)
    const indexOperand: Operand = { kind: 'variable', variable: index }
    const start = this.expressions.value(from)
    const limit = this.heldOperand(this.expressions.value(to), 'limit', span)
    const one = this.pool.operand({ kind: 'literal', value: 1n, span })
    const stride = step ? this.heldOperand(this.expressions.value(step), 'step', span) : one
    if (step && !(step.kind === 'number' && step.value > 0n)) {
      builder.emit({ kind: 'check-step', operand: stride, span: step.span })
    }
    builder.emit({ kind: 'move', into: index, from: start, span })
    builder.cost('move', line)
    builder.releaseScratch(0)
    const pass = builder.draft(line)
    const last = builder.draft(line)
    const again = builder.draft(line)
    const after = builder.draft(line)
    builder.cost('compare', line)
    builder.terminate({
      kind: 'branch',
      operator: down ? '>=' : '<=',
      signed: false,
      left: indexOperand,
      right: limit,
      yes: pass.id,
      no: after.id,
      span,
    })
    builder.enter(pass)
    this.lowerBody(body)
    if (stride === one) {
      this.freeBranch('=', indexOperand, limit, last, again, span)
    } else {
      const distance = builder.takeScratch()
      const [left, right] = down ? [indexOperand, limit] : [limit, indexOperand]
      builder.emit({ kind: 'binary', function: 'subtract', into: distance, left, right, span })
      this.freeBranch('<', { kind: 'variable', variable: distance }, stride, last, again, span)
    }
    for (const [ending, next] of [
      [again, pass],
      [last, after],
    ] as const) {
      builder.enter(ending)
      const stepFunction = down ? 'subtract' : 'add'
      builder.emit({ kind: 'binary', function: stepFunction, into: index, left: indexOperand, right: stride, span })
      builder.cost('add', line)
      builder.cost('jump', line)
      builder.cost('compare', line)
      builder.terminate({ kind: 'jump', to: next.id })
    }
    builder.enter(after)
  }

  private freeBranch(
    operator: '=' | '<',
    left: Operand,
    right: Operand,
    yes: BlockDraft,
    no: BlockDraft,
    span: Span,
  ) {
    this.builder.terminate({ kind: 'branch', operator, signed: false, left, right, yes: yes.id, no: no.id, span })
  }

  /** The operand as it is now, whatever the loop's body does to its variable. */
  private heldOperand(operand: Operand, name: string, span: Span): Operand {
    if (operand.kind === 'constant') return operand
    const held = this.builder.heldVariable(`(${name})`)
    this.builder.emit({ kind: 'move', into: held, from: operand, span })
    return { kind: 'variable', variable: held }
  }

  /** A jump leaves each branch that is not last; it stands on the line of the `else` that it leaps over. */
  private ifForm({ branches, otherwise, span }: Of<'if'>): void {
    const { builder } = this
    const after = builder.draft(span.line)
    for (const [at, { condition, body }] of branches.entries()) {
      const follower = branches[at + 1] ?? otherwise
      const taken = builder.draft(lineOf(condition))
      const next = follower ? builder.draft(lineOf(follower)) : after
      this.expressions.branch(condition, taken, next)
      builder.enter(taken)
      this.lowerBody(body)
      if (follower) builder.cost('jump', lineOf(follower))
      builder.terminate({ kind: 'jump', to: after.id })
      builder.enter(next)
    }
    if (otherwise) {
      this.lowerBody(otherwise.body)
      builder.enter(after)
    }
  }

  private assert(condition: ExactCondition, span: Span): void {
    const reads = new Map<string, number>()
    for (const name of namesInCondition(condition)) {
      const known = this.names.constant({ text: name, span }) !== undefined || this.names.array(name) !== undefined
      if (!known) reads.set(name, this.builder.variable(name))
    }
    this.builder.emit({ kind: 'assert', condition, reads, span })
  }
}
