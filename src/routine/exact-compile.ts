import type { Span } from '../../grammar/span'
import type { Comparison, Content, Exact, ExactCondition, ExactOperator } from '../../grammar/tree'
import {
  type Answer,
  absolute,
  add,
  ceil,
  compare,
  divide,
  extreme,
  floor,
  logarithmOf,
  modulo,
  multiply,
  negate,
  popcount,
  power,
  subtract,
} from './exact-number'
import { type ExactProblem, exactProblem, isProblem, placeProblem } from './exact-problem'
import { type Quick, type QuickAnswer, quicken, quickenAnswer, settle } from './exact-quick'
import type { ExactValue } from './exact-real'
import { ExactSum } from './exact-sum'
import { areSame, areSorted, sumWords } from './exact-words'
import type { Words } from './words'

/** What the names in an exact expression stand for. */
export interface Scope {
  /** A size, let, fix, `w`, scalar or variable; `old` asks for its value before the run. Undefined where unknown. */
  number(name: string, old: boolean): ExactValue | undefined
  /** An array's words; `old` asks for those before the run. Undefined where unknown. */
  content(name: string, old: boolean): Words | undefined
}

/** Passes of `sum`, `all` and `any` that one evaluation may make: some seconds' worth. */
const MOST_PASSES = 1 << 26

/** One evaluation of a compiled expression. */
interface Evaluation {
  readonly scope: Scope
  readonly numbers: QuickAnswer[]
  readonly contents: (Words | ExactProblem)[]
  /** Values of the indices that `sum`, `all` and `any` bind, by depth. */
  readonly indices: Quick[]
  passes: number
}

type Step = (evaluation: Evaluation) => QuickAnswer
type Test = (evaluation: Evaluation) => boolean | ExactProblem

/** An expression as closures: worked out once, evaluated in as many scopes as there are. */
export function compileExact(expression: Exact): (scope: Scope) => ExactValue | ExactProblem {
  const step = new Compiler().exact(expression)
  return scope => {
    const answer = step(startEvaluation(scope))
    return isProblem(answer) ? answer : settle(answer)
  }
}

/** A condition as closures. `and` and `or` stop at the first side that decides, so the left one may guard the right. */
export function compileCondition(condition: ExactCondition): (scope: Scope) => boolean | ExactProblem {
  const test = new Compiler().condition(condition)
  return scope => test(startEvaluation(scope))
}

function startEvaluation(scope: Scope): Evaluation {
  return { scope, numbers: [], contents: [], indices: [], passes: 0 }
}

class Compiler {
  private readonly names = new Map<string, number>()
  private readonly arrays = new Map<string, number>()
  private readonly bound: string[] = []

  exact(expression: Exact): Step {
    switch (expression.kind) {
      case 'number':
        return this.literal(expression)
      case 'name':
        return this.name(expression.name.text, false, expression.span)
      case 'old':
        return this.name(expression.name.text, true, expression.span)
      case 'binary':
        return this.binary(expression)
      case 'negate':
        return unary(this.exact(expression.operand), expression.span, negate)
      case 'call':
        return this.call(expression)
      case 'element':
        return this.element(expression)
      case 'total': {
        const content = this.content(expression.array)
        return evaluation => {
          const words = content(evaluation)
          return isProblem(words) ? words : quicken(sumWords(words))
        }
      }
      case 'sum':
        return this.sum(expression)
    }
  }

  condition(condition: ExactCondition): Test {
    switch (condition.kind) {
      case 'compare':
        return this.compare(condition)
      case 'and':
      case 'or': {
        const left = this.condition(condition.left)
        const right = this.condition(condition.right)
        const decided = condition.kind === 'or'
        return evaluation => {
          const first = left(evaluation)
          return first === decided || isProblem(first) ? first : right(evaluation)
        }
      }
      case 'not': {
        const operand = this.condition(condition.operand)
        return evaluation => {
          const answer = operand(evaluation)
          return isProblem(answer) ? answer : !answer
        }
      }
      case 'all':
      case 'any':
        return this.quantified(condition)
      case 'sorted': {
        const content = this.content(condition.array)
        return evaluation => {
          const words = content(evaluation)
          return isProblem(words) ? words : areSorted(words)
        }
      }
      case 'same': {
        const left = this.content(condition.left)
        const right = this.content(condition.right)
        return evaluation => {
          const [first, second] = [left(evaluation), right(evaluation)]
          if (isProblem(first)) return first
          return isProblem(second) ? second : areSame(first, second)
        }
      }
    }
  }

  private literal({ numerator, denominator }: Exact & { kind: 'number' }): Step {
    const value = quickenAnswer(divide(numerator, denominator))
    return () => value
  }

  private name(name: string, old: boolean, span: Span): Step {
    const depth = old ? -1 : this.bound.lastIndexOf(name)
    if (depth >= 0) return ({ indices }) => indices[depth]!
    const place = placeOf(this.names, old ? `old ${name}` : name)
    return ({ numbers, scope }) => {
      const known = numbers[place]
      if (known !== undefined) return known
      const value = scope.number(name, old)
      const answer =
        value === undefined
          ? placeProblem(exactProblem('unknown', `${name} has no value here.`), span)
          : quicken(value)
      numbers[place] = answer
      return answer
    }
  }

  private content({ name, old, span }: Content): (evaluation: Evaluation) => Words | ExactProblem {
    const place = placeOf(this.arrays, old ? `old ${name.text}` : name.text)
    return ({ contents, scope }) => {
      const known = contents[place]
      if (known !== undefined) return known
      const words =
        scope.content(name.text, old) ??
        placeProblem(exactProblem('unknown', `The words of ${name.text} are not known here.`), span)
      contents[place] = words
      return words
    }
  }

  private element({ array, index, span }: Exact & { kind: 'element' }): Step {
    const content = this.content(array)
    const place = this.exact(index)
    const name = array.old ? `old(${array.name.text})` : array.name.text
    return evaluation => {
      const words = content(evaluation)
      if (isProblem(words)) return words
      const at = place(evaluation)
      if (typeof at === 'number' && at >= 0 && at < words.length) return words[at]!
      if (isProblem(at)) return at
      const exact = settle(at)
      if (typeof exact === 'bigint' && exact >= 0n && exact < BigInt(words.length)) return words[Number(exact)]!
      const problem =
        typeof exact === 'bigint'
          ? `The index ${exact} is outside ${name}, which has ${words.length} words.`
          : `The index of ${name} is not a whole number.`
      return placeProblem(exactProblem('undefined', problem), span)
    }
  }

  private binary({ operator, left, right, span }: Exact & { kind: 'binary' }): Step {
    const first = this.exact(left)
    const second = this.exact(right)
    const slow = (x: QuickAnswer, y: QuickAnswer): QuickAnswer => {
      if (isProblem(x)) return x
      if (isProblem(y)) return y
      const answer = OPERATIONS[operator](settle(x), settle(y))
      return isProblem(answer) ? placeProblem(answer, span) : quicken(answer)
    }
    switch (operator) {
      case '+':
        return evaluation => {
          const x = first(evaluation)
          const y = second(evaluation)
          if (typeof x === 'number' && typeof y === 'number') {
            const sum = x + y
            if (Number.isSafeInteger(sum)) return sum
          }
          return slow(x, y)
        }
      case '-':
        return evaluation => {
          const x = first(evaluation)
          const y = second(evaluation)
          if (typeof x === 'number' && typeof y === 'number') {
            const difference = x - y
            if (Number.isSafeInteger(difference)) return difference
          }
          return slow(x, y)
        }
      case '*':
        return evaluation => {
          const x = first(evaluation)
          const y = second(evaluation)
          if (typeof x === 'number' && typeof y === 'number') {
            const product = x * y
            if (Number.isSafeInteger(product)) return product
          }
          return slow(x, y)
        }
      case 'mod':
        return evaluation => {
          const x = first(evaluation)
          const y = second(evaluation)
          if (typeof x === 'number' && typeof y === 'number' && x >= 0 && y > 0) return x % y
          return slow(x, y)
        }
      default:
        return evaluation => slow(first(evaluation), second(evaluation))
    }
  }

  private call({ function: name, arguments: given, span }: Exact & { kind: 'call' }): Step {
    const steps = given.map(argument => this.exact(argument))
    if (name === 'ceil' || name === 'floor') return this.rounded(name, given[0]!, steps[0]!, span)
    if (name !== 'min' && name !== 'max') return unary(steps[0]!, span, FUNCTIONS[name])
    return evaluation => {
      let chosen: ExactValue | undefined
      for (const step of steps) {
        const answer = step(evaluation)
        if (isProblem(answer)) return answer
        const value = settle(answer)
        chosen = chosen === undefined ? value : extreme(chosen, value, name)
      }
      return quicken(chosen!)
    }
  }

  /** `ceil` and `floor`; of lg of a machine number without any detour, since long sums have it in each term. */
  private rounded(name: 'ceil' | 'floor', operand: Exact, step: Step, span: Span): Step {
    const plain = unary(step, span, FUNCTIONS[name])
    if (operand.kind !== 'call' || operand.function !== 'lg') return plain
    const inner = this.exact(operand.arguments[0]!)
    const up = name === 'ceil'
    return evaluation => {
      const x = inner(evaluation)
      if (typeof x !== 'number' || x < 1) return plain(evaluation)
      return up ? (x === 1 ? 0 : floorLg(x - 1) + 1) : floorLg(x)
    }
  }

  private compare({ operator, left, right, span }: ExactCondition & { kind: 'compare' }): Test {
    const first = this.exact(left)
    const second = this.exact(right)
    const meets = ORDERS[operator]
    return evaluation => {
      const x = first(evaluation)
      const y = second(evaluation)
      // Machine numbers here are whole and exact, and JavaScript compares them with bigints exactly.
      if (typeof x !== 'object' && typeof y !== 'object') return meets(x < y ? -1 : x > y ? 1 : 0)
      if (isProblem(x)) return x
      if (isProblem(y)) return y
      const order = compare(settle(x), settle(y))
      return isProblem(order) ? placeProblem(order, span) : meets(order)
    }
  }

  private sum(expression: Exact & { kind: 'sum' }): Step {
    const range = this.range(expression.from, expression.to)
    const { depth, inner } = this.within(expression.index.text, () => this.exact(expression.body))
    return evaluation => {
      const ends = range(evaluation)
      if (isProblem(ends)) return ends
      const sum = new ExactSum()
      const { first, passes } = ends
      for (let pass = 0; pass < passes; pass++) {
        evaluation.indices[depth] = typeof first === 'number' ? first + pass : first + BigInt(pass)
        const term = inner(evaluation)
        if (isProblem(term)) return term
        sum.add(term)
      }
      return quicken(sum.total())
    }
  }

  private quantified(condition: ExactCondition & { kind: 'all' | 'any' }): Test {
    const range = this.range(condition.from, condition.to)
    const { depth, inner } = this.within(condition.index.text, () => this.condition(condition.body))
    const decided = condition.kind === 'any'
    return evaluation => {
      const ends = range(evaluation)
      if (isProblem(ends)) return ends
      const { first, passes } = ends
      for (let pass = 0; pass < passes; pass++) {
        evaluation.indices[depth] = typeof first === 'number' ? first + pass : first + BigInt(pass)
        const answer = inner(evaluation)
        if (answer === decided || isProblem(answer)) return answer
      }
      return !decided
    }
  }

  private within<T>(index: string, compile: () => T): { depth: number; inner: T } {
    const depth = this.bound.length
    this.bound.push(index)
    const inner = compile()
    this.bound.pop()
    return { depth, inner }
  }

  /** Both ends of a range, whole and, unless it is empty, close enough together for its passes to be made. */
  private range(low: Exact, high: Exact) {
    const first = this.exact(low)
    const last = this.exact(high)
    return (evaluation: Evaluation): { first: number | bigint; passes: number } | ExactProblem => {
      const from = wholeOf(first(evaluation), low.span)
      if (isProblem(from)) return from
      const to = wholeOf(last(evaluation), high.span)
      if (isProblem(to)) return to
      if (to < from) return { first: 0, passes: 0 }
      const passes = BigInt(to) - BigInt(from) + 1n
      const all = passes + BigInt(evaluation.passes)
      if (all > BigInt(MOST_PASSES))
        return placeProblem(
          exactProblem('undecided', `It takes ${all} passes or more, past the ${MOST_PASSES} that are made.`),
          high.span,
        )
      evaluation.passes = Number(all)
      return { first: typeof to === 'number' ? from : BigInt(from), passes: Number(passes) }
    }
  }
}

function placeOf(places: Map<string, number>, key: string): number {
  const known = places.get(key)
  if (known !== undefined) return known
  places.set(key, places.size)
  return places.size - 1
}

function wholeOf(answer: QuickAnswer, span: Span): number | bigint | ExactProblem {
  if (typeof answer !== 'object') return typeof answer === 'bigint' ? (quicken(answer) as number | bigint) : answer
  if (isProblem(answer)) return answer
  return placeProblem(exactProblem('undefined', 'The end of a range is a whole number.'), span)
}

/** floor(lg(x)) of a safe whole number x >= 1. */
function floorLg(x: number): number {
  return x < 2 ** 32 ? 31 - Math.clz32(x) : 63 - Math.clz32(Math.floor(x / 2 ** 32))
}

function unary(operand: Step, span: Span, work: (x: ExactValue) => Answer): Step {
  return evaluation => {
    const x = operand(evaluation)
    if (isProblem(x)) return x
    const answer = work(settle(x))
    return isProblem(answer) ? placeProblem(answer, span) : quicken(answer)
  }
}

const OPERATIONS: Record<ExactOperator, (x: ExactValue, y: ExactValue) => Answer> = {
  '+': add,
  '-': subtract,
  '*': multiply,
  '/': divide,
  mod: modulo,
  '^': power,
}

const FUNCTIONS = { lg: logarithmOf, ceil, floor, abs: absolute, popcount }

const ORDERS: Record<Comparison, (order: number) => boolean> = {
  '=': order => order === 0,
  '!=': order => order !== 0,
  '<': order => order < 0,
  '<=': order => order <= 0,
  '>': order => order > 0,
  '>=': order => order >= 0,
}
