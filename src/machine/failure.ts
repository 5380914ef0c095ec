import type { Span } from '../../grammar/span'
import type { Binding, Failure, FailureKind } from './run'

/** What a failure's message needs besides its kind and value. */
export interface FailureDetail {
  /** Of an index: the array's place among the routine's arrays. */
  readonly array?: number
  /** Of an assert: why it could not be worked out, where it could not. */
  readonly reason?: string
}

/** The failure of a run, worded: line, what happened with which value, and the point. Both ways of running use it. */
export function makeFailure(
  binding: Binding,
  kind: FailureKind,
  span: Span,
  value: bigint,
  detail: FailureDetail = {},
): Failure {
  const message = `line ${span.line}: ${whatHappened(binding, kind, value, detail)} (${pointText(binding)})`
  return { kind, span, value, message }
}

/** `n = 16, w = 32`. */
export function pointText({ point }: Pick<Binding, 'point'>): string {
  const sizes = Object.entries(point.sizes).map(([name, size]) => `${name} = ${size}`)
  return [...sizes, `w = ${point.width}`].join(', ')
}

function whatHappened(binding: Binding, kind: FailureKind, value: bigint, detail: FailureDetail): string {
  switch (kind) {
    case 'index': {
      const { name } = binding.program.routine.arrays[detail.array!]!
      const { length } = binding.arrays[detail.array!]!
      return `index ${value} is outside ${name}, which has ${count(length, 'word')}`
    }
    case 'address':
      return value < BigInt(binding.words)
        ? `address ${value} is in an array that is only read; addresses from ${binding.writable} on can be stored to`
        : `address ${value} is outside the memory in use, which has ${count(binding.words, 'word')}`
    case 'divide':
      return `${value} is divided by 0`
    case 'step':
      return 'the loop has a step of 0'
    case 'assert':
      return detail.reason ? `the assertion cannot be worked out: ${detail.reason}` : 'the assertion is false'
    case 'operation-limit':
      return `the run passes its limit of ${value} operations`
    case 'frame-limit':
      return `the calls in flight need more than ${value} words of frames`
  }
}

function count(number: number, noun: string): string {
  return `${number} ${noun}${number === 1 ? '' : 's'}`
}
