import type { Name, Target, WordCondition, WordExpression, WordFunction, WordOperator } from '../../grammar/tree'
import type { BinaryFunction, Constant, Operand, OperationClass } from './block'
import { type BlockBuilder, type BlockDraft, type ConstantPool, lineOf } from './block-builder'

const BINARY: Record<WordOperator, { function: BinaryFunction; class: OperationClass }> = {
  '+': { function: 'add', class: 'add' },
  '-': { function: 'subtract', class: 'add' },
  '*': { function: 'multiply', class: 'multiply' },
  '/': { function: 'divide', class: 'divide' },
  mod: { function: 'modulo', class: 'divide' },
  '&': { function: 'and', class: 'logic' },
  '|': { function: 'or', class: 'logic' },
  xor: { function: 'xor', class: 'logic' },
  '<<': { function: 'shift-left', class: 'shift' },
  '>>': { function: 'shift-right', class: 'shift' },
}

const UNARY = {
  negate: { function: 'negate', class: 'add' },
  complement: { function: 'complement', class: 'logic' },
} as const

const BITSCAN_CLASS: Record<WordFunction, OperationClass> = { popcount: 'bitscan', msb: 'bitscan', lsb: 'bitscan' }

/** Names that word code may read besides variables: what each stands for. */
export interface ConstantNames {
  constant(name: Name): Constant | undefined
  array(name: string): number | undefined
}

/** A place that a target's word goes to, its address already worked out. */
export type Place =
  | { readonly kind: 'variable'; readonly variable: number }
  | { readonly kind: 'element'; readonly array: number; readonly index: Operand; readonly target: Target }
  | { readonly kind: 'address'; readonly base: Operand; readonly index?: Operand; readonly target: Target }

/** Splits expressions and conditions into unit operations, left to right, and prices each. */
export class ExpressionLowering {
  constructor(
    private readonly builder: BlockBuilder,
    private readonly pool: ConstantPool,
    private readonly names: ConstantNames,
  ) {}

  /** The word of an expression, as an operand; only what must be worked out costs anything. */
  value(expression: WordExpression): Operand {
    const plain = this.plain(expression)
    if (plain) return plain
    const mark = this.builder.scratchMark()
    const emit = this.prepare(expression)
    // The parts are read before the whole is written, so the whole may take the first part's place.
    this.builder.releaseScratch(mark)
    const into = this.builder.takeScratch()
    emit(into)
    return { kind: 'variable', variable: into }
  }

  /** Works an expression out into a variable: no move on top of an operation or a load. */
  valueInto(expression: WordExpression, into: number): void {
    const plain = this.plain(expression)
    if (plain) {
      this.builder.emit({ kind: 'move', into, from: plain, span: expression.span })
      this.builder.cost('move', lineOf(expression))
      return
    }
    const mark = this.builder.scratchMark()
    const emit = this.prepare(expression)
    this.builder.releaseScratch(mark)
    emit(into)
  }

  /** Works out where a target's word will go, before the word itself. */
  place(target: Target): Place {
    if (target.kind === 'name') return { kind: 'variable', variable: this.builder.variable(target.name.text) }
    if (target.kind === 'indirect') return { kind: 'address', base: this.value(target.address), target }
    const array = this.names.array(target.base.text)
    if (array !== undefined) return { kind: 'element', array, index: this.value(target.index), target }
    return { kind: 'address', base: this.base(target.base), index: this.value(target.index), target }
  }

  /** Stores a word at a place in memory. */
  storeTo(place: Exclude<Place, { kind: 'variable' }>, value: Operand): void {
    const { span } = place.target
    this.builder.cost('store', span.line)
    if (place.kind === 'element') {
      this.builder.cost('index', span.line)
      this.builder.emit({ kind: 'store', array: place.array, index: place.index, value, span })
      return
    }
    if (place.index === undefined) {
      this.builder.emit({ kind: 'store-at', base: place.base, value, span })
      return
    }
    this.builder.cost('index', span.line)
    this.builder.emit({ kind: 'store-at', base: place.base, index: place.index, value, span })
  }

  /** Ends the current block with the tests of a condition, short-circuit, one compare a comparison. */
  branch(condition: WordCondition, yes: BlockDraft, no: BlockDraft): void {
    switch (condition.kind) {
      case 'not':
        this.branch(condition.operand, no, yes)
        return
      case 'and':
      case 'or': {
        const second = this.builder.draft(lineOf(condition.right))
        if (condition.kind === 'and') this.branch(condition.left, second, no)
        else this.branch(condition.left, yes, second)
        this.builder.enter(second)
        this.branch(condition.right, yes, no)
        return
      }
      case 'compare': {
        const mark = this.builder.scratchMark()
        const left = this.value(condition.left)
        const right = this.value(condition.right)
        this.builder.releaseScratch(mark)
        this.builder.cost('compare', lineOf(condition))
        const { operator, signed, span } = condition
        this.builder.terminate({ kind: 'branch', operator, signed, left, right, yes: yes.id, no: no.id, span })
      }
    }
  }

  private plain(expression: WordExpression): Operand | undefined {
    switch (expression.kind) {
      case 'number':
        return this.pool.operand({ kind: 'literal', value: expression.value, span: expression.span })
      case 'name':
        return this.base(expression.name)
      case 'address':
        return this.pool.operand({
          kind: 'address',
          array: this.names.array(expression.array.text)!,
          span: expression.span,
        })
      default:
        return undefined
    }
  }

  private base(name: Name): Operand {
    const constant = this.names.constant(name)
    if (constant) return this.pool.operand(constant)
    return { kind: 'variable', variable: this.builder.variable(name.text) }
  }

  /** Works out the parts of an expression and gives what is left to do: the one operation on them. */
  private prepare(expression: WordExpression): (into: number) => void {
    const { builder } = this
    const { span } = expression
    switch (expression.kind) {
      case 'binary': {
        const left = this.value(expression.left)
        const right = this.value(expression.right)
        const meaning = BINARY[expression.operator]
        return into => {
          builder.cost(meaning.class, span.line)
          builder.emit({ kind: 'binary', function: meaning.function, into, left, right, span })
        }
      }
      case 'negate':
      case 'complement': {
        const operand = this.value(expression.operand)
        const meaning = UNARY[expression.kind]
        return into => {
          builder.cost(meaning.class, span.line)
          builder.emit({ kind: 'unary', function: meaning.function, into, operand, span })
        }
      }
      case 'call': {
        const operand = this.value(expression.argument)
        return into => {
          builder.cost(BITSCAN_CLASS[expression.function], span.line)
          builder.emit({ kind: 'unary', function: expression.function, into, operand, span })
        }
      }
      case 'element': {
        const array = this.names.array(expression.base.text)
        const index = this.value(expression.index)
        const base = array === undefined ? this.base(expression.base) : undefined
        return into => {
          builder.cost('load', span.line)
          builder.cost('index', span.line)
          if (base) builder.emit({ kind: 'load-at', into, base, index, span })
          else builder.emit({ kind: 'load', into, array: array!, index, span })
        }
      }
      case 'indirect': {
        const base = this.value(expression.address)
        return into => {
          builder.cost('load', span.line)
          builder.emit({ kind: 'load-at', into, base, span })
        }
      }
      default:
        throw new Error(`an expression of kind ${expression.kind} needs no working out`)
    }
  }
}
