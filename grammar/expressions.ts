import { EXACT_LEVELS } from './exact'
import { LEVEL } from './phrase'
import type { Content, Exact, ExactCondition, WordCondition, WordExpression, WordOperator } from './tree'
import { WORD_LEVELS } from './word'

/** Binds tighter than any operator. */
const TIGHTEST = LEVEL.power + 1

// Exact expressions

/**
 * An exact expression as text, with as few brackets as the tree allows. A literal factor stands close to what it
 * multiplies (`7*n + 5`), as formulas are written.
 */
export function printExact(expression: Exact): string {
  switch (expression.kind) {
    case 'number':
      return expression.written ?? printNumber(expression.numerator, expression.denominator)
    case 'name':
      return expression.name.text
    case 'negate':
      return `-${exactOperand(expression.operand, LEVEL.power)}`
    case 'call':
      return `${expression.function}(${expression.arguments.map(printExact).join(', ')})`
    case 'element':
      return `${printContent(expression.array)}[${printExact(expression.index)}]`
    case 'old':
      return `old(${expression.name.text})`
    case 'total':
      return `sum(${printContent(expression.array)})`
    case 'sum':
      return `sum ${printRange(expression.index.text, expression)} : ${printExact(expression.body)}`
    case 'binary': {
      const { operator, left, right } = expression
      if (operator === '^') return `${exactOperand(left, TIGHTEST)}^${exactOperand(right, LEVEL.sign)}`
      const level = EXACT_LEVELS[operator]
      const tight = operator === '*' && left.kind === 'number' && exactLevel(left) === TIGHTEST
      const sign = tight ? '*' : ` ${operator} `
      return exactOperand(left, level) + sign + exactOperand(right, level + 1)
    }
  }
}

/** How tightly an exact expression holds together: a `sum` reaches as far as it can, so it is loosest. */
function exactLevel(expression: Exact): number {
  switch (expression.kind) {
    case 'binary':
      return EXACT_LEVELS[expression.operator]
    case 'negate':
      return LEVEL.sign
    case 'sum':
      return 0
    case 'number':
      return expression.written === undefined && decimals(expression.denominator) === undefined
        ? LEVEL.times
        : TIGHTEST
    default:
      return TIGHTEST
  }
}

function exactOperand(expression: Exact, least: number): string {
  const text = printExact(expression)
  return exactLevel(expression) < least ? `(${text})` : text
}

/** How many decimal places a denominator needs; undefined where no number of them does. */
function decimals(denominator: bigint): number | undefined {
  let rest = denominator
  let twos = 0
  let fives = 0
  for (; rest % 2n === 0n; rest /= 2n) twos++
  for (; rest % 5n === 0n; rest /= 5n) fives++
  return rest === 1n ? Math.max(twos, fives) : undefined
}

function printNumber(numerator: bigint, denominator: bigint): string {
  const places = decimals(denominator)
  if (places === undefined) return `${numerator} / ${denominator}`
  if (places === 0) return String(numerator)
  const digits = String((numerator * 10n ** BigInt(places)) / denominator).padStart(places + 1, '0')
  return `${digits.slice(0, -places)}.${digits.slice(-places)}`
}

function printContent({ name, old }: Content): string {
  return old ? `old(${name.text})` : name.text
}

function printRange(index: string, { from, to }: { readonly from: Exact; readonly to: Exact }): string {
  return `${index} in ${printBounds(from, to)}`
}

/** `F .. T`. */
export function printBounds(from: Exact, to: Exact): string {
  return `${printExact(from)} .. ${printExact(to)}`
}

/** An exact condition as text, with as few brackets as the tree allows. */
export function printCondition(condition: ExactCondition): string {
  switch (condition.kind) {
    case 'compare':
      return `${printExact(condition.left)} ${condition.operator} ${printExact(condition.right)}`
    case 'not':
      return `not ${exactConditionOperand(condition.operand, LEVEL.not)}`
    case 'and':
    case 'or': {
      const level = LEVEL[condition.kind]
      const left = exactConditionOperand(condition.left, level)
      return `${left} ${condition.kind} ${exactConditionOperand(condition.right, level + 1)}`
    }
    case 'all':
    case 'any':
      return `${condition.kind} ${printRange(condition.index.text, condition)} : ${printCondition(condition.body)}`
    case 'sorted':
      return `sorted(${printContent(condition.array)})`
    case 'same':
      return `same(${printContent(condition.left)}, ${printContent(condition.right)})`
  }
}

function exactConditionOperand(condition: ExactCondition, least: number): string {
  const text = printCondition(condition)
  const loosest = condition.kind === 'all' || condition.kind === 'any'
  return loosest || conditionLevel(condition.kind) < least ? `(${text})` : text
}

function conditionLevel(kind: string): number {
  if (kind === 'and' || kind === 'or' || kind === 'not') return LEVEL[kind]
  return kind === 'compare' ? LEVEL.compare : TIGHTEST
}

// Word code

/** A word expression as text, with as few brackets as the tree allows. */
export function printWord(expression: WordExpression): string {
  switch (expression.kind) {
    case 'number':
      return expression.written ?? String(expression.value)
    case 'name':
      return expression.name.text
    case 'negate': {
      const text = wordOperand(expression.operand, LEVEL.sign)
      return text.startsWith('-') ? `-(${text})` : `-${text}`
    }
    case 'complement':
      return `~${wordOperand(expression.operand, LEVEL.sign)}`
    case 'call':
      return `${expression.function}(${printWord(expression.argument)})`
    case 'element':
      return `${expression.base.text}[${printWord(expression.index)}]`
    case 'indirect':
      return `[${printWord(expression.address)}]`
    case 'address':
      return `addr(${expression.array.text})`
    case 'binary': {
      const { operator } = expression
      const level = WORD_LEVELS[operator]
      const left = bitOperand(expression.left, operator) ?? wordOperand(expression.left, level)
      const right = bitOperand(expression.right, operator) ?? wordOperand(expression.right, level + 1)
      return `${left} ${operator} ${right}`
    }
  }
}

/**
 * An operand of a shift or a bitwise operator keeps its brackets where another operator is inside, needed or not:
 * `(x >> 17) | (x << 15)`. Few readers have the order of these in their heads, and no two languages agree on it.
 */
function bitOperand(operand: WordExpression, operator: WordOperator): string | undefined {
  if (operand.kind !== 'binary' || WORD_LEVELS[operator] >= LEVEL.plus || operand.operator === operator)
    return undefined
  return `(${printWord(operand)})`
}

function wordLevel(expression: WordExpression): number {
  if (expression.kind === 'binary') return WORD_LEVELS[expression.operator]
  return expression.kind === 'negate' || expression.kind === 'complement' ? LEVEL.sign : TIGHTEST
}

function wordOperand(expression: WordExpression, least: number): string {
  const text = printWord(expression)
  return wordLevel(expression) < least ? `(${text})` : text
}

/** A condition over words as text, with as few brackets as the tree allows. */
export function printWordCondition(condition: WordCondition): string {
  switch (condition.kind) {
    case 'compare': {
      const [left, right] = [printWord(condition.left), printWord(condition.right)]
      return condition.signed
        ? `signed(${left}) ${condition.operator} signed(${right})`
        : `${left} ${condition.operator} ${right}`
    }
    case 'not':
      return `not ${wordConditionOperand(condition.operand, LEVEL.not)}`
    case 'and':
    case 'or': {
      const level = LEVEL[condition.kind]
      const left = wordConditionOperand(condition.left, level)
      return `${left} ${condition.kind} ${wordConditionOperand(condition.right, level + 1)}`
    }
  }
}

function wordConditionOperand(condition: WordCondition, least: number): string {
  const text = printWordCondition(condition)
  return conditionLevel(condition.kind) < least ? `(${text})` : text
}
