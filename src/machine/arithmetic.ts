import type { Comparison } from '../../grammar/tree'
import type { BinaryFunction, UnaryFunction } from '../routine/block'

/** `left f right` mod 2^w on words; a divisor must not be 0. A shift by w or more gives 0. */
export function applyBinary(name: BinaryFunction, left: bigint, right: bigint, width: number): bigint {
  switch (name) {
    case 'add':
      return BigInt.asUintN(width, left + right)
    case 'subtract':
      return BigInt.asUintN(width, left - right)
    case 'multiply':
      return BigInt.asUintN(width, left * right)
    case 'divide':
      return left / right
    case 'modulo':
      return left % right
    case 'and':
      return left & right
    case 'or':
      return left | right
    case 'xor':
      return left ^ right
    case 'shift-left':
      return right >= BigInt(width) ? 0n : BigInt.asUintN(width, left << right)
    case 'shift-right':
      return right >= BigInt(width) ? 0n : left >> right
  }
}

/** `f operand` mod 2^w. msb and lsb give the place of the highest and lowest set bit, from 0; of 0 both give w. */
export function applyUnary(name: UnaryFunction, operand: bigint, width: number): bigint {
  switch (name) {
    case 'negate':
      return BigInt.asUintN(width, -operand)
    case 'complement':
      return BigInt.asUintN(width, ~operand)
    case 'popcount':
      return BigInt(operand.toString(2).replaceAll('0', '').length)
    case 'msb':
      return operand === 0n ? BigInt(width) : BigInt(operand.toString(2).length - 1)
    case 'lsb':
      return operand === 0n ? BigInt(width) : BigInt((operand & -operand).toString(2).length - 1)
  }
}

/** The two-word product of two words: high * 2^w + low. */
export function multiplyWords(left: bigint, right: bigint, width: number): { high: bigint; low: bigint } {
  const product = left * right
  return { high: product >> BigInt(width), low: BigInt.asUintN(width, product) }
}

/** Whether `left op right`, of words as they are or (signed) in two's complement. */
export function compareWords(operator: Comparison, signed: boolean, left: bigint, right: bigint, width: number) {
  const a = signed ? BigInt.asIntN(width, left) : left
  const b = signed ? BigInt.asIntN(width, right) : right
  switch (operator) {
    case '=':
      return a === b
    case '!=':
      return a !== b
    case '<':
      return a < b
    case '<=':
      return a <= b
    case '>':
      return a > b
    case '>=':
      return a >= b
  }
}
