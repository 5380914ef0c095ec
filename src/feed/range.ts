import type { Exact } from '../../grammar'
import type { Binding } from '../machine/run'
import {
  compileExact,
  type ExactValue,
  type FeedDeclaration,
  isProblem,
  namesInExact,
  type Scope,
} from '../routine'
import type { Bounds } from './bounds'

/**
 * The legal words of an input at a point: what its range says, both ends included, fractions taken inwards, or
 * every word where there is none. `length` is absent for a scalar. The problem follows the input's name.
 */
export function boundsOf(
  range: FeedDeclaration['range'],
  binding: Binding,
  length?: number,
): Bounds | { problem: string } {
  const top = (1n << BigInt(binding.point.width)) - 1n
  if (!range || length === 0) return { kind: 'same', low: 0n, high: top }
  const index = range.index?.text
  const lowOf = compileExact(taken('ceil', range.from))
  const highOf = compileExact(taken('floor', range.to))
  const endsAt = (place: number | undefined): { low: bigint; high: bigint } | { problem: string } => {
    const scope = scopeOf(binding, index, place)
    const [low, high] = [lowOf(scope), highOf(scope)]
    const problem = [low, high].find(isProblem)
    if (problem) return { problem: `has a range that cannot be worked out${at(place)}: ${problem.message}` }
    const ends = { low: low as bigint, high: high as bigint }
    const wrong = wrongEnds(ends.low, ends.high, top, binding.point.width)
    return wrong ? { problem: `${wrong}${at(place)}` } : ends
  }
  const varies = index !== undefined && [range.from, range.to].some(end => namesInExact(end).has(index))
  if (length === undefined || !varies) {
    const ends = endsAt(undefined)
    return 'problem' in ends ? ends : { kind: 'same', ...ends }
  }
  const low: bigint[] = []
  const high: bigint[] = []
  for (let place = 0; place < length; place++) {
    const ends = endsAt(place)
    if ('problem' in ends) return ends
    low.push(ends.low)
    high.push(ends.high)
  }
  return { kind: 'each', low, high }
}

function wrongEnds(low: bigint, high: bigint, top: bigint, width: number): string | undefined {
  if (low > high) return `has an empty range, ${low} .. ${high}`
  if (low < 0n) return `has a range from ${low} on, and words start at 0`
  if (high > top) return `has a range up to ${high}, which does not fit in a word of ${width} bits`
  return undefined
}

function at(place: number | undefined): string {
  return place === undefined ? '' : ` at element ${place}`
}

function taken(direction: 'ceil' | 'floor', end: Exact): Exact {
  return { kind: 'call', function: direction, arguments: [end], span: end.span }
}

function scopeOf({ names }: Binding, index: string | undefined, place: number | undefined): Scope {
  return {
    number: (name): ExactValue | undefined =>
      name === index && place !== undefined ? BigInt(place) : names.get(name),
    content: () => undefined,
  }
}
